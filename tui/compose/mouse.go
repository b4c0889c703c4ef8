package compose

import (
	"math"

	tea "github.com/charmbracelet/bubbletea"
)

// drag is a mouse button held down.
type drag struct {
	button tea.MouseButton // none: no drag
	u, v   float64         // where it began
	x, y   int             // the pointer's cell
	moved  bool
}

// mouse obeys the mouse; whatever it does a key does too.
func (s *Screen) mouse(e tea.MouseMsg) tea.Cmd {
	if s.Typing() {
		return nil
	}
	u, v, in := s.lay.share(e.X, e.Y)
	switch {
	case e.Button == tea.MouseButtonWheelUp && in:
		x, y := s.lattice(u, v)
		return s.about(x, y, zoomStep, 0)
	case e.Button == tea.MouseButtonWheelDown && in:
		x, y := s.lattice(u, v)
		return s.about(x, y, 1/zoomStep, 0)
	case e.Action == tea.MouseActionPress && in && (e.Button == tea.MouseButtonLeft || e.Button == tea.MouseButtonRight):
		s.drag = drag{button: e.Button, u: u, v: v, x: e.X, y: e.Y}
	case e.Action == tea.MouseActionMotion && s.drag.button != tea.MouseButtonNone:
		return s.dragged(e, u, v)
	case e.Action == tea.MouseActionRelease:
		return s.dropped(clamp(u), clamp(v))
	}
	return nil
}

// dragged draws the box, or moves the view with the pointer.
func (s *Screen) dragged(e tea.MouseMsg, u, v float64) tea.Cmd {
	s.drag.moved = s.drag.moved || e.X != s.drag.x || e.Y != s.drag.y
	s.drag.x, s.drag.y = e.X, e.Y
	if s.drag.button == tea.MouseButtonLeft {
		s.plumb = plumb{on: true, u: clamp(u), v: clamp(v), box: s.drag.moved, bu: s.drag.u, bv: s.drag.v}
		return nil
	}
	i := math.Round((s.drag.u - u) * float64(s.lay.size.X))
	j := math.Round((s.drag.v - v) * float64(s.lay.size.Y))
	s.drag.u, s.drag.v = u, v
	if i == 0 && j == 0 {
		return nil
	}
	return s.shift(i/float64(s.lay.size.X), j/float64(s.lay.size.Y))
}

// dropped ends a drag: a box is zoomed into, a click sets the plumb.
func (s *Screen) dropped(u, v float64) tea.Cmd {
	d := s.drag
	s.drag = drag{}
	if d.button != tea.MouseButtonLeft {
		return nil
	}
	if d.moved {
		s.plumb = plumb{}
		return s.into(d.u, d.v, u, v)
	}
	s.plumb = plumb{on: true, u: u, v: v}
	return s.pointed()
}
