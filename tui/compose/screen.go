package compose

import (
	"image"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"leadline/tui/kit"
)

// Screen is the Compose screen.
type Screen struct {
	desk   *kit.Desk
	room   image.Point // cells of the screen
	lay    layout
	plumb  plumb
	drag   drag
	guides bool // bleed, safe area and rule are shown
	menu   *menu
	ask    kit.Editor
	search *search
	atom   *atom // last nucleus found
	under  reading
	shown  drawn // what View drew last
}

var _ kit.Screen = (*Screen)(nil)

// New is the Compose screen over a desk.
func New(d *kit.Desk) *Screen { return &Screen{desk: d} }

// Name is the word on the tab.
func (s *Screen) Name() string { return "Compose" }

// Typing says that keys belong to a question or a menu.
func (s *Screen) Typing() bool { return s.ask.Open() || s.menu != nil }

// Update takes a message.
func (s *Screen) Update(msg tea.Msg) tea.Cmd {
	switch msg := msg.(type) {
	case tea.WindowSizeMsg:
		s.room = image.Pt(msg.Width, msg.Height)
		s.relay()
	case kit.Changed:
		s.relay()
		s.under.text = ""
	case kit.Opened:
		s.relay()
	case tea.KeyMsg:
		return s.key(msg)
	case tea.MouseMsg:
		return s.mouse(msg)
	case found:
		return s.arrive(msg)
	case searchTick:
		return s.searching(msg)
	case readTick:
		return s.read(msg)
	case periodRead:
		s.under.take(msg)
	}
	return nil
}

// relay lays the screen out anew and tells the desk how many samples the trim
// has on it.
func (s *Screen) relay() {
	g, err := s.desk.Frame.Sheet.Geometry()
	if err != nil || s.room.X < 1 || s.room.Y < 1 {
		return
	}
	s.lay = lay(s.room, s.desk.Mesh, float64(g.TrimW)/float64(g.TrimH))
	s.desk.View = s.lay.size
}

// key obeys the key map.
func (s *Screen) key(k tea.KeyMsg) tea.Cmd {
	if s.ask.Open() {
		return s.ask.Update(k)
	}
	if s.menu != nil {
		return s.choose(k)
	}
	if k.Paste {
		return s.askPlace(string(k.Runes))
	}
	for _, a := range s.actions() {
		if key.Matches(k, a.key) {
			return a.do()
		}
	}
	return nil
}
