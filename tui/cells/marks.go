package cells

import "image"

// stroke are the characters of lines: across, down, and the four corners.
type stroke struct{ across, down, topLeft, topRight, bottomLeft, bottomRight rune }

func (g *Grid) stroke() stroke {
	if g.ASCII {
		return stroke{'-', '|', '+', '+', '+', '+'}
	}
	return stroke{'─', '│', '┌', '┐', '└', '┘'}
}

// Fill puts one cell everywhere in r.
func (g *Grid) Fill(r image.Rectangle, c Cell) {
	r = r.Intersect(image.Rectangle{Max: g.Size()})
	for y := r.Min.Y; y < r.Max.Y; y++ {
		for x := r.Min.X; x < r.Max.X; x++ {
			g.Set(x, y, c)
		}
	}
}

// Rule draws a line of n cells to the right from (x, y).
func (g *Grid) Rule(x, y, n int, st Style) {
	g.Fill(image.Rect(x, y, x+max(n, 0), y+1), st.cell(g.stroke().across))
}

// Plumb draws a line of n cells downwards from (x, y).
func (g *Grid) Plumb(x, y, n int, st Style) {
	g.Fill(image.Rect(x, y, x+1, y+max(n, 0)), st.cell(g.stroke().down))
}

// Box draws a line around r, on its outermost cells. A rectangle one cell wide or
// high is a line, and an empty one is nothing.
func (g *Grid) Box(r image.Rectangle, st Style) {
	w, h := r.Dx(), r.Dy()
	switch {
	case r.Empty():
		return
	case h == 1:
		g.Rule(r.Min.X, r.Min.Y, w, st)
		return
	case w == 1:
		g.Plumb(r.Min.X, r.Min.Y, h, st)
		return
	}
	g.Rule(r.Min.X+1, r.Min.Y, w-2, st)
	g.Rule(r.Min.X+1, r.Max.Y-1, w-2, st)
	g.Plumb(r.Min.X, r.Min.Y+1, h-2, st)
	g.Plumb(r.Max.X-1, r.Min.Y+1, h-2, st)
	g.Corners(r, st)
}

// Corners marks the four corner cells of r; of a rectangle less than two cells wide
// or high, nothing.
func (g *Grid) Corners(r image.Rectangle, st Style) {
	if r.Dx() < 2 || r.Dy() < 2 {
		return
	}
	s := g.stroke()
	right, bottom := r.Max.X-1, r.Max.Y-1
	g.Set(r.Min.X, r.Min.Y, st.cell(s.topLeft))
	g.Set(right, r.Min.Y, st.cell(s.topRight))
	g.Set(r.Min.X, bottom, st.cell(s.bottomLeft))
	g.Set(right, bottom, st.cell(s.bottomRight))
}

func (st Style) cell(r rune) Cell {
	return Cell{Rune: r, FG: st.FG, BG: st.BG, Attr: st.Attr}
}
