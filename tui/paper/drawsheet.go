package paper

import (
	"fmt"
	"image"
	"math"

	"leadline/render/frame"
	"leadline/render/sheet"
	"leadline/tui/cells"
	"leadline/tui/engine"
)

// drawnOf is all that the drawn sheet depends on.
type drawnOf struct {
	width, height int
	frame         *frame.Frame
	picture       *engine.Picture
	mesh          cells.Mesh
	depth         cells.Depth
	dark          bool
	u, v          float64 // of the window
	marked        bool
}

// drawn is what was drawn last, and of what.
type drawn struct {
	of   drawnOf
	text string
}

// drawSheet draws the sheet to scale: trim with the preview in it, bleed and
// safe area, the sides' lengths and a rule. It is drawn anew only where
// something in it has changed.
func (s *Screen) drawSheet(width, height int) string {
	d := s.desk
	of := drawnOf{width, height, d.Frame, d.Picture, d.Mesh, d.Depth, d.Style.Dark, s.win.u, s.win.v, s.win.used}
	if of != s.shown.of || s.shown.text == "" {
		s.shown = drawn{of, pad(s.sheetGrid(width, height).Lines(), width, height)}
	}
	return s.shown.text
}

// plate is where a sheet lies in a grid of samples.
type plate struct {
	grid, trim, full image.Rectangle // samples
	per              image.Point     // samples a cell
	scale            float64         // samples a pixel of the sheet, across
	down             float64         // and down
}

// cell is the cell of a share of the trim.
func (p plate) cell(u, v float64) (x, y int) {
	x = int(math.Floor((float64(p.trim.Min.X) + u*float64(p.trim.Dx())) / float64(p.per.X)))
	y = int(math.Floor((float64(p.trim.Min.Y) + v*float64(p.trim.Dy())) / float64(p.per.Y)))
	return x, y
}

// cells is a rectangle of samples in cells, with every cell it touches.
func (p plate) cells(r image.Rectangle) image.Rectangle {
	return image.Rect(r.Min.X/p.per.X, r.Min.Y/p.per.Y, (r.Max.X+p.per.X-1)/p.per.X, (r.Max.Y+p.per.Y-1)/p.per.Y)
}

// cellAspect is a cell's height over its width, as nearly every terminal has it.
const cellAspect = 2

// around is how many cells stay free around a sheet.
type around struct{ left, top, right, bottom int }

// lie fits a sheet into cols x rows cells.
func lie(g sheet.Geometry, mesh cells.Mesh, cols, rows int, room around) plate {
	p := plate{per: mesh.Size()}
	p.grid = image.Rect(0, 0, cols*p.per.X, rows*p.per.Y)
	from := image.Pt(room.left*p.per.X, room.top*p.per.Y)
	free := image.Pt(max(1, cols-room.left-room.right)*p.per.X, max(1, rows-room.top-room.bottom)*p.per.Y)
	shape := float64(p.per.Y) / float64(p.per.X) / cellAspect // a sample's width over its height
	full := g.Full()
	p.down = min(float64(free.Y)/float64(full.Dy()), float64(free.X)*shape/float64(full.Dx()))
	p.scale = p.down / shape
	side := func(pixels int, scale float64, least int) int {
		return max(least, int(math.Round(float64(pixels)*scale)))
	}
	w, h := side(g.TrimW, p.scale, 1), side(g.TrimH, p.down, 1)
	bx, by := side(g.Bleed, p.scale, 0), side(g.Bleed, p.down, 0)
	// Rounding must not push the sheet out of its room.
	w, h = max(1, min(w, free.X-2*bx)), max(1, min(h, free.Y-2*by))
	at := from.Add(image.Pt(bx+max(0, free.X-w-2*bx)/2, by))
	p.trim = image.Rectangle{at, at.Add(image.Pt(w, h))}
	p.full = image.Rect(at.X-bx, at.Y-by, at.X+w+bx, at.Y+h+by)
	return p
}

// sheetGrid draws the sheet with everything about it.
func (s *Screen) sheetGrid(cols, rows int) *cells.Grid {
	g := s.resolve().Sheet
	w, h := s.trimMM()
	side := fmt.Sprintf("%.4g mm", h)
	p := lie(g, s.desk.Mesh, cols, rows, around{len(side) + 3, 2, 2, 2})
	grid := cells.Draw(s.sheetPicture(p), s.desk.Mesh, s.desk.Depth, cells.Options{Light: !s.desk.Style.Dark, ASCII: s.desk.ASCII, Dither: s.desk.Depth == cells.C16})
	s.cleared(grid, p)
	faint := cells.Style{FG: s.desk.Style.FaintTone.Solid()}
	trim := p.cells(p.trim)
	s.measure(grid, trim, p.cells(p.full), fmt.Sprintf("%.4g mm", w), side, faint)
	if g.Bleed > 0 {
		grid.Corners(p.cells(p.full).Inset(-1), cells.Style{FG: s.desk.Style.LeadTone.Solid()})
	}
	s.drawSafe(grid, p, g)
	s.drawRule(grid, p, g, min(rows, p.cells(p.full).Max.Y+2)-1, faint)
	if s.win.used {
		x, y := p.cell(s.win.u, s.win.v)
		grid.Set(x, y, cells.Cell{Rune: s.rune('┼', '+'), FG: s.desk.Style.LeadTone.Solid(), BG: cells.Under, Attr: cells.Bold})
	}
	return grid
}

// cleared gives the cells around the sheet back to the terminal.
func (s *Screen) cleared(g *cells.Grid, p plate) {
	size, sheet := g.Size(), p.cells(p.full)
	for y := range size.Y {
		for x := range size.X {
			if !image.Pt(x, y).In(sheet) {
				g.Set(x, y, cells.Cell{})
			}
		}
	}
}

// measure draws the lengths of the sides beside them, as on a plan.
func (s *Screen) measure(g *cells.Grid, trim, full image.Rectangle, across, down string, st cells.Style) {
	y := full.Min.Y - 2
	g.Rule(trim.Min.X, y, trim.Dx(), st)
	g.Set(trim.Min.X, y, cells.Cell{Rune: s.rune('├', '|'), FG: st.FG})
	g.Set(trim.Max.X-1, y, cells.Cell{Rune: s.rune('┤', '|'), FG: st.FG})
	text := " " + across + " "
	g.Text(trim.Min.X+(trim.Dx()-len(text))/2, y, text, st)
	x := full.Min.X - 2
	g.Plumb(x, trim.Min.Y, trim.Dy(), st)
	g.Set(x, trim.Min.Y, cells.Cell{Rune: s.rune('┬', '-'), FG: st.FG})
	g.Set(x, trim.Max.Y-1, cells.Cell{Rune: s.rune('┴', '-'), FG: st.FG})
	g.Text(x-len(down)-1, trim.Min.Y+trim.Dy()/2, down, st)
}

// drawSafe marks the safe area's corners on the picture.
func (s *Screen) drawSafe(grid *cells.Grid, p plate, g sheet.Geometry) {
	safe := g.Safe()
	if safe.Empty() || g.Margin == 0 {
		return
	}
	u, v := float64(g.Margin)/float64(g.TrimW), float64(g.Margin)/float64(g.TrimH)
	x1, y1 := p.cell(u, v)
	x2, y2 := p.cell(1-u, 1-v)
	grid.Corners(image.Rect(x1, y1, x2+1, y2+1).Intersect(p.cells(p.trim)), cells.Style{FG: cells.Against, BG: cells.Under})
}

// drawRule draws a round length of paper below the sheet, and says what the
// corners are.
func (s *Screen) drawRule(grid *cells.Grid, p plate, g sheet.Geometry, y int, st cells.Style) {
	trim := p.cells(p.trim)
	perMM := float64(g.PPI) / 25.4 * p.scale / float64(p.per.X) // cells
	length := roundLength(float64(trim.Dx()) / perMM / 3)
	n := max(2, int(math.Round(length*perMM))+1)
	x := p.cells(p.full).Min.X
	grid.Rule(x, y, n, st)
	grid.Set(x, y, cells.Cell{Rune: s.rune('├', '|'), FG: st.FG})
	grid.Set(x+n-1, y, cells.Cell{Rune: s.rune('┤', '|'), FG: st.FG})
	x = grid.Text(x+n+1, y, fmt.Sprintf("%g mm", length), st)
	for _, c := range []struct {
		margin int
		what   string
		length sheet.Length
		st     cells.Style
	}{{g.Bleed, "bleed", bleedOf(s), cells.Style{FG: s.desk.Style.LeadTone.Solid()}}, {g.Margin, "safe", safeOf(s), st}} {
		text := fmt.Sprintf("%c %s %s", s.rune('┌', '+'), c.what, spaced(c.length))
		if c.margin > 0 && x+2+cells.TextWidth(text) <= grid.Size().X {
			x = grid.Text(x+2, y, text, c.st)
		}
	}
}

// roundLength is the largest 1, 2 or 5 times a power of ten up to most.
func roundLength(most float64) float64 {
	power := math.Pow(10, math.Floor(math.Log10(most)))
	for _, k := range []float64{5, 2} {
		if k*power <= most {
			return k * power
		}
	}
	return power
}

// rune is the first character, or the second where the terminal shows ASCII
// alone.
func (s *Screen) rune(r, ascii rune) rune {
	if s.desk.ASCII {
		return ascii
	}
	return r
}
