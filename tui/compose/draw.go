package compose

import (
	"fmt"
	"image"
	"math"
	"strings"

	"leadline/render/frame"
	"leadline/tui/cells"
	"leadline/tui/engine"
	"leadline/tui/kit"
)

// View draws the screen.
func (s *Screen) View(width, height int) string {
	if s.room != image.Pt(width, height) {
		s.room = image.Pt(width, height)
		s.relay()
	}
	return kit.Beside(s.soundingLine(s.lay.lead, height), strings.Join(s.picture(), "\n"))
}

// picture is the view's lines; they are drawn anew only where something in them
// has changed.
func (s *Screen) picture() []string {
	d := s.desk
	state := drawnOf{s.lay, s.plumb, s.guides, d.Depth, d.Style.Dark, d.Frame, d.Picture}
	if state == s.shown.of && s.shown.lines != nil {
		return s.shown.lines
	}
	g := cells.Draw(s.samples(), s.lay.mesh, d.Depth, cells.Options{Light: !d.Style.Dark, ASCII: d.ASCII,
		Dither: d.Depth == cells.C16, // where most of a picture would else be grey
		Mat:    &cells.Mat{Sheet: image.Rectangle{Min: s.lay.at, Max: s.lay.at.Add(s.lay.size)}, Tone: d.Style.MatTone}})
	if s.guides {
		s.drawGuides(g)
	}
	s.drawPlumb(g)
	s.shown = drawn{state, g.Lines()}
	return s.shown.lines
}

// drawn is what View drew last, and of what.
type drawn struct {
	of    drawnOf
	lines []string
}

// drawnOf is all that the view's lines depend on.
type drawnOf struct {
	lay     layout
	plumb   plumb
	guides  bool
	depth   cells.Depth
	dark    bool
	frame   *frame.Frame
	picture *engine.Picture
}

// samples is the preview in the middle of the view.
func (s *Screen) samples() cells.Picture {
	l, d := s.lay, s.desk
	out := cells.Picture{W: l.grid.X, H: l.grid.Y, Pix: make([]cells.RGB, l.grid.X*l.grid.Y)}
	for i := range out.Pix {
		out.Pix[i] = d.Style.MatTone
	}
	p := d.Picture
	if p == nil || p.Err != nil {
		return out
	}
	k, err := engine.NewInker(d.Frame, p)
	if err != nil {
		return out // the frame's own rules keep this from happening
	}
	k.Mat = d.Style.MatTone
	colours := k.Colours(p)
	for y := range l.size.Y {
		row := out.Pix[(y+l.at.Y)*l.grid.X+l.at.X:][:l.size.X]
		from := y * p.Size.Y / l.size.Y * p.Size.X
		for x := range row {
			row[x] = colours[from+x*p.Size.X/l.size.X]
		}
	}
	return out
}

// drawPlumb draws the cross and the box that hangs from it.
func (s *Screen) drawPlumb(g *cells.Grid) {
	if !s.plumb.on {
		return
	}
	st := cells.Style{FG: s.desk.Style.LeadTone.Solid(), BG: cells.Under, Attr: cells.Bold}
	x, y := s.lay.cell(s.plumb.u, s.plumb.v)
	x, y = x-s.lay.area.Min.X, y-s.lay.area.Min.Y
	if s.plumb.box {
		bx, by := s.lay.cell(s.plumb.bu, s.plumb.bv)
		bx, by = bx-s.lay.area.Min.X, by-s.lay.area.Min.Y
		g.Box(image.Rect(min(x, bx), min(y, by), max(x, bx)+1, max(y, by)+1), st)
	}
	mark := '┼'
	if g.ASCII {
		mark = '+'
	}
	g.Set(x, y, cells.Cell{Rune: mark, FG: cells.Against, BG: cells.Under, Attr: cells.Bold})
}

// drawGuides draws the bleed, the safe area and a rule in millimetres.
func (s *Screen) drawGuides(g *cells.Grid) {
	size, err := s.desk.Frame.Sheet.Geometry()
	if err != nil {
		return
	}
	st := cells.Style{FG: cells.Against, BG: cells.Under}
	box := func(by float64) image.Rectangle {
		x1, y1 := s.lay.cell(-by/float64(size.TrimW), -by/float64(size.TrimH))
		x2, y2 := s.lay.cell(1+by/float64(size.TrimW), 1+by/float64(size.TrimH))
		return image.Rect(x1, y1, x2+1, y2+1).Sub(s.lay.area.Min)
	}
	if size.Bleed > 0 {
		g.Corners(box(float64(size.Bleed)), cells.Style{FG: s.desk.Style.LeadTone.Solid(), BG: cells.Under})
	}
	if size.Margin > 0 {
		g.Corners(box(-float64(size.Margin)), st)
	}
	s.drawRule(g, float64(size.TrimW)/float64(size.PPI)*25.4, st)
}

// drawRule draws a length of paper, a round number of millimetres about a
// quarter of the trim's width, at the view's lower left.
func (s *Screen) drawRule(g *cells.Grid, trim float64, st cells.Style) {
	mm := math.Pow(10, math.Floor(math.Log10(trim/4)))
	for _, k := range []float64{5, 2} {
		if k*mm <= trim/4 {
			mm *= k
			break
		}
	}
	x1, y := s.lay.cell(0.02, 0.97)
	x2, _ := s.lay.cell(0.02+mm/trim, 0.97)
	x1, x2, y = x1-s.lay.area.Min.X, x2-s.lay.area.Min.X, y-s.lay.area.Min.Y
	end, bar := '├', '┤'
	if g.ASCII {
		end, bar = '|', '|'
	}
	g.Rule(x1, y, x2-x1+1, st)
	g.Set(x1, y, cells.Cell{Rune: end, FG: st.FG, BG: st.BG})
	g.Set(x2, y, cells.Cell{Rune: bar, FG: st.FG, BG: st.BG})
	g.Text(x2+2, y, fmt.Sprintf("%g mm", mm), st)
}
