package cells

import (
	"fmt"
	"image"
)

// Picture is a picture in samples: W×H of them, row by row from the top. A mesh
// makes cells of Mesh.Size samples; a picture that ends within a cell is carried on
// by its last row and column.
type Picture struct {
	W, H int
	Pix  []RGB
}

// NewPicture makes a black picture that fills cols×rows cells of the mesh.
func NewPicture(cols, rows int, m Mesh) Picture {
	w, h := max(cols, 0)*m.Size().X, max(rows, 0)*m.Size().Y
	return Picture{w, h, make([]RGB, w*h)}
}

// Cells is the number of columns and rows that the picture takes in the mesh.
func (p Picture) Cells(m Mesh) image.Point {
	if p.W <= 0 || p.H <= 0 {
		return image.Point{}
	}
	s := m.Size()
	return image.Pt((p.W+s.X-1)/s.X, (p.H+s.Y-1)/s.Y)
}

// Mat is what surrounds a sheet: samples outside it are of one quiet tone,
// whatever the picture has there.
type Mat struct {
	Sheet image.Rectangle // in samples of the picture
	Tone  RGB
	Rune  rune // stands for a cell of mat where there is no colour; 0 is a space
}

// Options are how a picture is drawn. The zero value: no mat, on a dark ground,
// UTF-8, colours not dithered.
type Options struct {
	Mat    *Mat  // nil for none
	Light  bool  // the terminal's ground is light: without colour, ink is dark
	ASCII  bool  // Grid.ASCII
	Dither bool  // at 16 and 256 colours, spread the loss in a fixed pattern
	Range  Range // without colour, what becomes darkest and lightest; zero: Measure
}

// Render draws a picture and writes it: as many lines as Picture.Cells has rows,
// each exactly as many cells wide as it has columns.
func Render(p Picture, m Mesh, d Depth, o Options) []string {
	return Draw(p, m, d, o).Lines()
}

// Draw makes cells of a picture for a terminal of the depth. Plain is drawn without
// colour at any depth, and every mesh is at None: there, blocks of the finer ones
// are dithered. It panics when Pix holds fewer than W×H samples.
func Draw(p Picture, m Mesh, d Depth, o Options) *Grid {
	if p.W > 0 && p.H > 0 && len(p.Pix) < p.W*p.H {
		panic(fmt.Sprintf("cells: a picture of %d×%d with %d samples", p.W, p.H, len(p.Pix)))
	}
	size := p.Cells(m)
	g := NewGrid(size.X, size.Y, d)
	g.ASCII = o.ASCII
	if len(g.cells) == 0 {
		return g
	}
	s := sampler{p: p, size: m.Size(), mat: o.Mat}
	if o.Dither && (d == C16 || d == C256) {
		s.dither = d
	}
	if m == Plain || d == None {
		drawTones(g, &s, m, o)
	} else {
		drawColours(g, &s, m)
	}
	return g
}

func drawColours(g *Grid, s *sampler, m Mesh) {
	t, n := tables(), s.size.X*s.size.Y
	var c samples
	for y := range g.rows {
		row := g.row(y)
		for x := range row {
			s.take(x, y, &c)
			switch {
			case c.same(n):
				row[x] = Cell{Rune: ' ', BG: c[0].Solid()}
			case m == Half:
				row[x] = Cell{Rune: '▀', FG: c[0].Solid(), BG: c[1].Solid()}
			default:
				mask, fg, bg := t.fit(&c, n)
				row[x] = Cell{Rune: m.glyph(mask), FG: fg.Solid(), BG: bg.Solid()}
			}
		}
	}
}

// sampler hands out the samples of a cell.
type sampler struct {
	p      Picture
	size   image.Point
	mat    *Mat
	dither Depth // None for no dithering
}

// take fills c with the samples of the cell in column x and row y.
func (s *sampler) take(x, y int, c *samples) {
	w, h := s.size.X, s.size.Y
	x0, y0 := x*w, y*h
	if x0+w > s.p.W || y0+h > s.p.H || s.mat != nil || s.dither != None {
		s.takeCarefully(x0, y0, c)
		return
	}
	from := s.p.Pix[y0*s.p.W+x0:]
	if w == 1 {
		for j := range h {
			c[j] = from[j*s.p.W]
		}
		return
	}
	for j := range h {
		pair := from[j*s.p.W:][:2]
		c[2*j], c[2*j+1] = pair[0], pair[1]
	}
}

func (s *sampler) takeCarefully(x0, y0 int, c *samples) {
	for j := range s.size.Y {
		for i := range s.size.X {
			c[j*s.size.X+i] = s.one(x0+i, y0+j)
		}
	}
}

// one is the sample at a place, or the nearest there is, or the mat's.
func (s *sampler) one(x, y int) RGB {
	if s.matted(x, y) {
		return s.mat.Tone
	}
	x, y = min(x, s.p.W-1), min(y, s.p.H-1)
	c := s.p.Pix[y*s.p.W+x]
	if s.dither != None {
		return mixtureOf(s.dither).at(c, x, y)
	}
	return c
}

func (s *sampler) matted(x, y int) bool {
	return s.mat != nil && !image.Pt(x, y).In(s.mat.Sheet)
}

// allMat tells whether no sample of the cell is of the sheet.
func (s *sampler) allMat(x, y int) bool {
	if s.mat == nil {
		return false
	}
	at := image.Pt(x*s.size.X, y*s.size.Y)
	return !image.Rectangle{Min: at, Max: at.Add(s.size)}.Overlaps(s.mat.Sheet)
}
