package compose

import (
	"fmt"
	"math"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render"
	"leadline/tui/kit"
)

// plumb is the cross that marks a spot: u, v are shares of the trim.
type plumb struct {
	on   bool
	u, v float64
	// A box may hang from it: its other corner.
	box    bool
	bu, bv float64
}

// spot is the lattice point that zooming and finding go by: the plumb's, or the
// trim's middle.
func (s *Screen) spot() (x, y float64) {
	if s.plumb.on {
		return s.lattice(s.plumb.u, s.plumb.v)
	}
	return s.lattice(0.5, 0.5)
}

// lattice turns shares of the trim into a point of the lattice.
func (s *Screen) lattice(u, v float64) (x, y float64) {
	g, err := s.desk.Frame.Sheet.Geometry()
	if err != nil {
		return 0, 0
	}
	return u * float64(g.TrimW), v * float64(g.TrimH)
}

// move puts a moved frame on the desk.
func (s *Screen) move(what string, m render.Move) tea.Cmd {
	f, err := render.Moved(s.desk.Frame, m)
	if err == nil {
		err = s.desk.Put(what, f)
	}
	return kit.Fail(err)
}

// shift moves the view by a part of the trim.
func (s *Screen) shift(du, dv float64) tea.Cmd {
	x, y := s.lattice(0.5+du, 0.5+dv)
	return s.move("moved", render.Move{X: x, Y: y, Zoom: 1})
}

// arrow moves the view, or the plumb where it is shown, by whole samples.
func (s *Screen) arrow(du, dv float64) tea.Cmd {
	i := math.Round(du * float64(s.lay.size.X))
	j := math.Round(dv * float64(s.lay.size.Y))
	return s.nudge(int(i), int(j))
}

// nudge moves by samples.
func (s *Screen) nudge(i, j int) tea.Cmd {
	du, dv := float64(i)/float64(s.lay.size.X), float64(j)/float64(s.lay.size.Y)
	if !s.plumb.on {
		return s.shift(du, dv)
	}
	s.plumb.u, s.plumb.v = clamp(s.plumb.u+du), clamp(s.plumb.v+dv)
	return s.pointed()
}

func clamp(v float64) float64 { return min(max(v, 0), 1) }

// zoom magnifies about the spot, which stays where it is.
func (s *Screen) zoom(by float64) tea.Cmd {
	x, y := s.spot()
	return s.about(x, y, by, 0)
}

func (s *Screen) turn(degrees float64) tea.Cmd {
	x, y := s.lattice(0.5, 0.5)
	return s.about(x, y, 1, degrees)
}

// about magnifies and turns about a point of the lattice.
func (s *Screen) about(x, y, by, degrees float64) tea.Cmd {
	m, err := render.About(s.desk.Frame, x, y, by, degrees)
	if err != nil {
		return kit.Fail(err)
	}
	what := "zoomed"
	if degrees != 0 {
		what = "turned"
	}
	return s.move(what, m)
}

// back says what a step undid or did again.
func (s *Screen) back(what string) tea.Cmd {
	if what == "" {
		return kit.Tell("there is no step that way")
	}
	back, forward := s.desk.Steps()
	return kit.Tell(fmt.Sprintf("step: %s (%d back, %d forward)", what, back, forward))
}

// togglePlumb shows or hides the cross.
func (s *Screen) togglePlumb() tea.Cmd {
	if s.plumb.on {
		s.plumb = plumb{}
		return nil
	}
	s.plumb = plumb{on: true, u: 0.5, v: 0.5}
	return s.pointed()
}

// corner hangs a box from the plumb.
func (s *Screen) corner() tea.Cmd {
	if !s.plumb.on {
		return kit.Tell("x shows the plumb, whose spot becomes the box's corner")
	}
	s.plumb.box, s.plumb.bu, s.plumb.bv = true, s.plumb.u, s.plumb.v
	return kit.Tell("the arrows move the other corner, enter zooms in, esc drops the box")
}

// enterBox zooms into the box.
func (s *Screen) enterBox() tea.Cmd {
	if !s.plumb.box {
		return kit.Tell("space sets a corner of a box, at the plumb")
	}
	p := s.plumb
	s.plumb = plumb{}
	return s.into(p.bu, p.bv, p.u, p.v)
}

// leastBox is the least side of a box, as a share of the trim's.
const leastBox = 1.0 / 1000

// into shows the box between two corners: whole, whatever its shape.
func (s *Screen) into(u1, v1, u2, v2 float64) tea.Cmd {
	side := max(math.Abs(u2-u1), math.Abs(v2-v1))
	if side < leastBox {
		return nil
	}
	x, y := s.lattice((u1+u2)/2, (v1+v2)/2)
	return s.move("zoomed into a box", render.Move{X: x, Y: y, Zoom: 1 / side})
}

// escape drops what is open, the last first.
func (s *Screen) escape() tea.Cmd {
	switch {
	case s.search != nil:
		s.search.stop()
	case s.plumb.box:
		s.plumb.box = false
	default:
		s.plumb = plumb{}
	}
	return nil
}
