package paper

import (
	"image"
	"math/big"
	"runtime"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"leadline/render/frame"
	"leadline/render/sheet"
	"leadline/tui/kit"
)

// DefaultDistance is from where a print is looked at if nobody says otherwise:
// an arm's length (common practice, no source).
const DefaultDistance = "60cm"

// Screen is the Sheet screen.
type Screen struct {
	desk     *kit.Desk
	room     image.Point // cells of the screen
	cursor   int         // a field, and behind the fields a finding
	ask      kit.Editor
	choosing *chooser // nil: the chooser of sizes is shut
	win      window
	distance sheet.Length
	of       resolved // of the desk's frame
	outside  outside  // the ramp's entries outside the sheet's space
	sample   float64  // seconds that a sample takes, by the clock; 0: not known yet
	seen     seen     // of the desk's picture
	shown    drawn
	cores    int // that compute
}

var _ kit.Screen = (*Screen)(nil)

// New is the Sheet screen over a desk.
func New(d *kit.Desk) *Screen {
	s := &Screen{desk: d, distance: sheet.MustLength(DefaultDistance), cores: runtime.GOMAXPROCS(0)}
	s.win.u, s.win.v = 0.5, 0.5
	return s
}

// Name is the word on the tab.
func (s *Screen) Name() string { return "Sheet" }

// Distance is from where the print will be looked at.
func (s *Screen) Distance() sheet.Length { return s.distance }

// SetDistance puts a kept viewing distance back. One that is no length of paper,
// or none, is not taken.
func (s *Screen) SetDistance(l sheet.Length) {
	if checkDistance(l) == nil {
		s.distance = l
	}
}

// Typing says that keys belong to a question or to the chooser.
func (s *Screen) Typing() bool { return s.ask.Open() || s.choosing != nil }

// Update takes a message.
func (s *Screen) Update(msg tea.Msg) tea.Cmd {
	switch msg := msg.(type) {
	case tea.WindowSizeMsg:
		s.room = image.Pt(msg.Width, msg.Height)
		return s.win.refresh(s)
	case kit.Changed:
		s.clampCursor()
		return tea.Batch(s.countOutside(), s.win.refresh(s))
	case kit.Opened:
		if string(msg) != s.Name() {
			s.win.rest()
			return nil
		}
		return tea.Batch(s.countOutside(), s.win.refresh(s))
	case kit.Drawn:
		if t := s.desk.Engine.PerSample(); t > 0 {
			s.sample = t.Seconds()
		}
		s.clampCursor()
		return s.win.refresh(s)
	case counted:
		s.outside.take(msg)
		s.clampCursor()
	case planned, tiled, waited:
		return s.win.take(s, msg)
	case tea.KeyMsg:
		return s.key(msg)
	case tea.MouseMsg:
		return s.mouse(msg)
	}
	return nil
}

// key obeys the key map.
func (s *Screen) key(k tea.KeyMsg) tea.Cmd {
	switch {
	case s.ask.Open():
		return s.ask.Update(k)
	case s.choosing != nil:
		return s.choosing.key(s, k)
	case k.Paste:
		return s.paste(string(k.Runes))
	}
	list := s.actions()
	if s.win.open {
		list = s.windowActions()
	}
	for _, a := range list {
		if key.Matches(k, a.key) {
			return a.do()
		}
	}
	return nil
}

// resolved is a frame with its defaults, and the frame it was made of.
type resolved struct {
	frame *frame.Frame
	r     *frame.Resolved
}

// resolve is the desk's frame with every default in its place. The desk holds
// valid frames only, so there always is one.
func (s *Screen) resolve() *frame.Resolved {
	if s.of.frame != s.desk.Frame {
		r, err := s.desk.Frame.Resolve()
		if err != nil {
			panic("paper: the desk's frame is not valid: " + err.Error())
		}
		s.of = resolved{s.desk.Frame, r}
	}
	return s.of.r
}

// change puts a change on the desk. What was frozen for another space, or
// fitted to another view, goes.
func (s *Screen) change(what string, edit func(*frame.Frame)) tea.Cmd {
	return kit.Fail(s.desk.Change(what, s.whole(edit)))
}

// try says what the frame's rules have against a change.
func (s *Screen) try(edit func(*frame.Frame)) error {
	g := s.desk.Frame.Clone()
	if err := s.whole(edit)(g); err != nil {
		return err
	}
	return g.Validate()
}

// whole is an edit with what follows from it.
func (s *Screen) whole(edit func(*frame.Frame)) func(*frame.Frame) error {
	return func(f *frame.Frame) error {
		was := f.Sheet
		edit(f)
		if f.Ink.Baked != nil && f.Sheet.Space != was.Space {
			f.Ink.Baked = nil
		}
		if !sameShape(was, f.Sheet) {
			f.Ink.Drive.Fitted = nil
		}
		return nil
	}
}

// sameShape compares the trims' aspects, as they are given.
func sameShape(a, b frame.Sheet) bool {
	aspect := func(s frame.Sheet) *big.Rat {
		ppi := s.PPI
		if ppi < 1 {
			ppi = frame.DefaultPPI
		}
		w, h := s.Width.RatMM(ppi), s.Height.RatMM(ppi)
		if h.Sign() == 0 {
			return h // such a sheet is refused afterwards
		}
		return w.Quo(w, h)
	}
	return aspect(a).Cmp(aspect(b)) == 0
}

// clampCursor keeps the cursor on a line that is there.
func (s *Screen) clampCursor() {
	s.cursor = max(0, min(s.cursor, len(fields)+len(s.findings())-1))
}
