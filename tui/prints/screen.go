package prints

import (
	"os"
	"runtime"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/tui/kit"
)

// name is the word on the tab.
const name = "Queue"

// pane is what is shown beside or in place of the list.
type pane uint8

const (
	paneList pane = iota // on a small screen the list alone
	panePrint
	paneCrew
)

// Screen is the Queue screen. The zero value is of no use; see New.
type Screen struct {
	desk  *kit.Desk
	q     Queue // nil where the queue could not be opened
	host  string
	pid   int
	slots int // that work here takes

	open    bool // this screen is the one shown
	beating int  // generation of the ticks
	now     time.Time
	look    lookout
	sight   sight // the queue as last seen
	todo    []action

	chosen int64 // number of the chosen print; 0: none
	at     int   // its place in the list
	top    int   // first line of the list shown
	follow bool  // the list must show the chosen print
	below  int   // first line shown of a print's facts, or of the workers
	pane   pane
	drawn  layout // what View drew last
	cached thumbnail

	editor   kit.Editor
	question *question
	hand     *hand // the work here; nil where there is none
	reveal   func(dir string) error
}

var _ kit.Screen = (*Screen)(nil)

// New is the Queue screen over a desk.
func New(d *kit.Desk) *Screen {
	s := &Screen{desk: d, pid: os.Getpid(), slots: max(1, runtime.GOMAXPROCS(0)-1), reveal: revealFolder, follow: true}
	s.host, _ = os.Hostname() // workers of this process are not marked where it is unknown
	if d.Queue != nil {
		s.q = d.Queue
	}
	return s
}

// Name is the word on the tab.
func (s *Screen) Name() string { return name }

// Typing says that a path is being entered.
func (s *Screen) Typing() bool { return s.editor.Open() }

// Update takes a message.
func (s *Screen) Update(msg tea.Msg) tea.Cmd {
	switch msg := msg.(type) {
	case kit.Opened:
		return s.opened(string(msg) == name)
	case tea.KeyMsg:
		return s.key(msg)
	case tea.MouseMsg:
		return s.mouse(tea.MouseEvent(msg))
	case tick:
		return s.tick(msg)
	case sight:
		return s.see(msg)
	case acted:
		return s.acted(msg)
	case taken:
		return s.taken(msg)
	case Added:
		return s.added(msg)
	case ended:
		return s.ended(msg)
	}
	return nil
}

// opened begins to look at the queue more or less often.
func (s *Screen) opened(here bool) tea.Cmd {
	s.open = here
	if !here {
		s.question = nil
		s.editor.Close()
	}
	if s.q == nil {
		return nil
	}
	s.beating++
	return tea.Batch(s.beat(), s.glance())
}
