package cells

import "image"

// Tail is the Rune of the second cell of a wide character.
const Tail rune = -1

// Cell is one place of the screen. The zero value is a blank in the terminal's own
// colours.
type Cell struct {
	Rune   rune  // 0 counts as a space
	FG, BG Paint // of the letter and of the ground
	Attr   Attr  // of the letter
	marks  marks // combining marks on the letter
}

// Grid is a rectangle of cells to draw on. The zero value has no cells.
type Grid struct {
	// ASCII draws lines and text in ASCII alone; block characters stay.
	ASCII bool

	cols, rows int
	depth      Depth
	cells      []Cell
}

// NewGrid makes a grid of blanks.
func NewGrid(cols, rows int, d Depth) *Grid {
	cols, rows = max(cols, 0), max(rows, 0)
	return &Grid{cols: cols, rows: rows, depth: d, cells: make([]Cell, cols*rows)}
}

// Size is the number of columns and rows.
func (g *Grid) Size() image.Point { return image.Pt(g.cols, g.rows) }

// Clone makes a copy to draw on, so that a picture need be fitted only once.
func (g *Grid) Clone() *Grid {
	c := *g
	c.cells = append([]Cell(nil), g.cells...)
	return &c
}

func (g *Grid) row(y int) []Cell { return g.cells[y*g.cols : (y+1)*g.cols] }

func (g *Grid) inside(x, y int) bool { return x >= 0 && x < g.cols && y >= 0 && y < g.rows }

// At is the cell in column x of row y; the zero Cell outside the grid.
func (g *Grid) At(x, y int) Cell {
	if !g.inside(x, y) {
		return Cell{}
	}
	return g.cells[y*g.cols+x]
}

// Set puts a cell; outside the grid it does nothing. Under and Against are settled
// by what lies there. A wide character takes the next cell as well, and becomes a
// blank where there is none; so does any that would not fill a cell. What is left of
// a wide character that loses a half is a blank.
func (g *Grid) Set(x, y int, c Cell) {
	if !g.inside(x, y) {
		return
	}
	width := runeWidth(c.Rune)
	if width < 1 || x+width > g.cols {
		c.Rune, c.marks, width = ' ', marks{}, 1
	}
	row := g.row(y)
	c.FG, c.BG = settle(c, row[x])
	unpair(row, x, x+width)
	row[x] = c
	if width == 2 {
		row[x+1] = Cell{Rune: Tail, FG: c.FG, BG: c.BG, Attr: c.Attr}
	}
}

// unpair blanks the other half of wide characters that lie across the ends of
// from..to.
func unpair(row []Cell, from, to int) {
	blank := func(i int) { row[i].Rune, row[i].marks = ' ', marks{} }
	if from > 0 && row[from].Rune == Tail {
		blank(from - 1)
	}
	if to < len(row) && row[to].Rune == Tail {
		blank(to)
	}
}

// settle gives the colours of a cell that is put over another.
func settle(c, below Cell) (fg, bg Paint) {
	fg, bg = c.FG, c.BG
	if bg == Under {
		bg = below.mean()
	}
	switch fg {
	case Under:
		fg = below.mean()
	case Against:
		fg = Own
		if ground, ok := bg.RGB(); ok {
			fg = standout(ground).Solid()
		}
	}
	return fg, bg
}

// mean is the colour of a cell seen from afar: of a block character the mean by
// area in OKLab, of any other its ground. It is Own where a colour is not known.
func (c Cell) mean() Paint {
	on, parts := coverage(c.Rune)
	fg, inked := c.FG.RGB()
	bg, grounded := c.BG.RGB()
	switch {
	case on == 0:
		return c.BG
	case on == parts:
		return c.FG
	case !inked || !grounded:
		return Own
	}
	t := tables()
	share := float32(on) / float32(parts)
	return t.rgb(t.lab(fg).times(share).plus(t.lab(bg).times(1 - share))).Solid()
}

// Under is the colour that the paint Under would take at a place; ok is false
// where that is the terminal's own.
func (g *Grid) Under(x, y int) (c RGB, ok bool) { return g.At(x, y).mean().RGB() }
