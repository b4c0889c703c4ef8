package inking

import (
	"image"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"leadline/tui/kit"
)

// Screen is the Ink screen.
type Screen struct {
	desk *kit.Desk
	room image.Point // cells of the screen
	dir  string      // the folder of the ramp files

	at     place // the list's line under the cursor
	hand   place // the colour in hand: a stop, the inside or the edge
	mixing bool  // the arrows are the mixer's
	slider int
	mix    mix
	free   bool // a closed ramp's ends may come apart

	ask    kit.Editor
	locker *locker // nil: shut
	opened int     // how often the locker was opened
	named  []entry // what the locker held last
	run    run
	drag   place // what the mouse holds; kind nothing: none

	cache cache
}

var _ kit.Screen = (*Screen)(nil)

// New is the Ink screen over a desk.
func New(d *kit.Desk) kit.Screen { return newScreen(d) }

func newScreen(d *kit.Desk) *Screen {
	return &Screen{desk: d, dir: ".", at: place{kind: theRamp}, hand: place{kind: aStop}}
}

// Name is the word on the tab.
func (s *Screen) Name() string { return "Ink" }

// Typing says that keys belong to a question or to the locker.
func (s *Screen) Typing() bool { return s.ask.Open() || s.locker != nil }

// Update takes a message.
func (s *Screen) Update(msg tea.Msg) tea.Cmd {
	switch msg := msg.(type) {
	case tea.WindowSizeMsg:
		s.room = image.Pt(msg.Width, msg.Height)
	case kit.Changed:
		s.settle()
	case kit.Opened:
		s.run, s.drag = run{}, place{}
		s.settle()
	case found:
		s.stock(msg)
	case saved:
		return s.wrote(msg)
	case tea.KeyMsg:
		return s.key(msg)
	case tea.MouseMsg:
		return s.mouse(msg)
	}
	return nil
}

// key obeys the key map. Any key but another step of the same slider ends a run
// of small changes.
func (s *Screen) key(k tea.KeyMsg) tea.Cmd {
	if s.ask.Open() {
		return s.ask.Update(k)
	}
	if k.Paste {
		s.shut()
		return s.askColour(string(k.Runes))
	}
	s.run.goes = false
	cmd := s.obey(k)
	if !s.run.goes {
		s.run = run{}
	}
	s.settle()
	return cmd
}

func (s *Screen) obey(k tea.KeyMsg) tea.Cmd {
	for _, a := range s.actions() {
		if key.Matches(k, a.key) {
			return a.do()
		}
	}
	return nil
}

// settle brings the cursor and the colour in hand back to what there is, after
// the frame has become another one.
func (s *Screen) settle() {
	n := len(s.now().ramp.Stops)
	for _, p := range []*place{&s.at, &s.hand} {
		if p.kind == aStop {
			p.stop = min(max(p.stop, 0), n-1)
		}
	}
	if s.hand.kind == edgeColour && s.desk.Frame.Ink.Edge == nil {
		s.hand = place{kind: aStop}
	}
	if !s.now().ramp.Cyclic() {
		s.free = false
	}
	rows := s.rows()
	if indexOf(rows, s.at) < 0 {
		s.at = rows[0].place
		for _, near := range []place{{kind: laid}, {kind: scale}, {kind: edgeWidth}} {
			if indexOf(rows, near) >= 0 {
				s.at = near
				break
			}
		}
	}
}
