package prints

import (
	"image"
	"math"
	"strconv"
	"strings"

	"github.com/charmbracelet/lipgloss"

	"leadline/jobs"
	"leadline/tui/cells"
	"leadline/tui/kit"
)

// Least size of a picture, in cells.
const leastThumb = 5

// look is what a drawn thumbnail depends on.
type look struct {
	id    int64
	mark  string
	size  image.Point
	mesh  cells.Mesh
	depth cells.Depth
	dark  bool
}

// thumbnail is the last picture drawn.
type thumbnail struct {
	of    look
	lines []string
}

// thumb draws a print as far as it is done into at most cols × rows cells; no
// lines where that is too little. Cells are taken to be twice as high as wide.
func (s *Screen) thumb(p *jobs.Print, cols, rows int) []string {
	d := s.desk
	framed := d.Depth < cells.C256 || d.Mesh == cells.Plain // no tone for paper
	edge := 0
	if framed {
		edge = 2
	}
	size := fit(cols-edge, rows-edge, p.Width, p.Height)
	if size.Y < leastThumb-edge || size.X < leastThumb {
		return nil
	}
	l := look{id: p.ID, size: size, mesh: d.Mesh, depth: d.Depth, dark: d.Style.Dark}
	img := s.sight.picture.img
	if s.sight.picture.id == p.ID {
		l.mark = s.sight.picture.mark
	} else {
		img = nil
	}
	if s.cached.of != l {
		pic := sampled(img, size.X*d.Mesh.Size().X, size.Y*d.Mesh.Size().Y, blankTone(d.Style, d.Depth))
		lines := cells.Render(pic, d.Mesh, d.Depth, cells.Options{Light: !d.Style.Dark, Dither: true})
		if framed {
			lines = neatline(d.Style, lines, size.X)
		}
		s.cached = thumbnail{l, lines}
	}
	return append([]string{}, s.cached.lines...)
}

// fit is the largest size in cells that a picture of w × h has within cols × rows.
func fit(cols, rows, w, h int) image.Point {
	if cols < 1 || rows < 1 || w < 1 || h < 1 {
		return image.Point{}
	}
	wide := 2 * float64(w) / float64(h) // cells across for each one down
	y := min(float64(rows), float64(cols)/wide)
	return image.Pt(min(cols, max(1, int(math.Round(y*wide)))), max(1, int(math.Round(y))))
}

// blankTone is the tone of what is not rendered yet: paper that the print will
// lie on.
func blankTone(s kit.Style, d cells.Depth) cells.RGB {
	if d < cells.C256 {
		if s.Dark {
			return cells.RGB{}
		}
		return cells.RGB{R: 255, G: 255, B: 255}
	}
	return rgbOf(s.Bar.GetBackground())
}

// rgbOf reads a style's colour, #rrggbb; black where it is none.
func rgbOf(c lipgloss.TerminalColor) cells.RGB {
	var hex string
	switch c := c.(type) {
	case lipgloss.Color:
		hex = string(c)
	case lipgloss.CompleteColor:
		hex = c.TrueColor
	}
	n, err := strconv.ParseUint(strings.TrimPrefix(hex, "#"), 16, 32)
	if err != nil {
		return cells.RGB{}
	}
	return cells.RGB{R: uint8(n >> 16), G: uint8(n >> 8), B: uint8(n)}
}

// sampled makes w × h samples of a thumbnail. A sample is the mean light of what
// it has of finished tiles, where that is half of it or more.
func sampled(img *image.NRGBA, w, h int, blank cells.RGB) cells.Picture {
	p := cells.Picture{W: w, H: h, Pix: make([]cells.RGB, w*h)}
	for y := range h {
		for x := range w {
			p.Pix[y*w+x] = blank
			if img != nil {
				p.Pix[y*w+x] = sample(img, part(img.Rect.Dx(), x, w), part(img.Rect.Dy(), y, h), blank)
			}
		}
	}
	return p
}

// part is where sample i of n begins and ends in a length, at least a pixel.
func part(length, i, n int) [2]int {
	from := i * length / n
	return [2]int{from, max(from+1, (i+1)*length/n)}
}

// sample is the mean over a rectangle. Squares stand for light here: what is
// shown this small needs no more.
func sample(img *image.NRGBA, xs, ys [2]int, blank cells.RGB) cells.RGB {
	var sum [3]int
	done, all := 0, 0
	for y := ys[0]; y < ys[1]; y++ {
		for x := xs[0]; x < xs[1]; x++ {
			all++
			at := img.PixOffset(x, y)
			if img.Pix[at+3] == 0 {
				continue
			}
			done++
			for i := range sum {
				v := int(img.Pix[at+i])
				sum[i] += v * v
			}
		}
	}
	if 2*done < all {
		return blank
	}
	root := func(v int) uint8 { return uint8(math.Sqrt(float64(v)/float64(done)) + 0.5) }
	return cells.RGB{R: root(sum[0]), G: root(sum[1]), B: root(sum[2])}
}

// neatline draws the edge of the sheet around a picture.
func neatline(s kit.Style, lines []string, width int) []string {
	bar := strings.Repeat("─", width)
	side := s.Faint.Render("│")
	out := []string{s.Faint.Render("┌" + bar + "┐")}
	for _, l := range lines {
		out = append(out, side+l+side)
	}
	return append(out, s.Faint.Render("└"+bar+"┘"))
}
