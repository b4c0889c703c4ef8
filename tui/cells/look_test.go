package cells

import (
	"fmt"
	"image"
	"image/color"
	"image/png"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// paintGrid draws a grid as an ideal terminal would: blocks as exact rectangles in
// the colours the depth shows, any other character as a bar. Cells are cw×ch pixels.
func paintGrid(g *Grid, cw, ch int, light bool) *image.RGBA {
	size := g.Size()
	img := image.NewRGBA(image.Rect(0, 0, size.X*cw, size.Y*ch))
	for y := range size.Y {
		for x := range size.X {
			paintCell(img, image.Rect(x*cw, y*ch, (x+1)*cw, (y+1)*ch), g, g.At(x, y), light)
		}
	}
	return img
}

func paintCell(img *image.RGBA, r image.Rectangle, g *Grid, c Cell, light bool) {
	ink, ground := RGB{229, 229, 229}, RGB{}
	if light {
		ink, ground = ground, RGB{255, 255, 255}
	}
	fg, bg := shownPaint(c.FG, g.depth, ink), shownPaint(c.BG, g.depth, ground)
	for y := r.Min.Y; y < r.Max.Y; y++ {
		for x := r.Min.X; x < r.Max.X; x++ {
			s := bg
			if inked(c.Rune, float64(x-r.Min.X)/float64(r.Dx()), float64(y-r.Min.Y)/float64(r.Dy())) {
				s = fg
			}
			img.SetRGBA(x, y, color.RGBA{s.R, s.G, s.B, 255})
		}
	}
}

func shownPaint(p Paint, d Depth, otherwise RGB) RGB {
	c, ok := p.RGB()
	if !ok || d == None {
		return otherwise
	}
	shown, _ := quantise(c, d)
	return shown
}

// quantise gives the colour that a terminal of the depth shows for c, and its
// number where it has one.
func quantise(c RGB, d Depth) (shown RGB, number uint8) {
	switch d {
	case C256:
		number = nearest256().at(c)
	case C16:
		number = nearest16().at(c)
	default:
		return c, 0
	}
	return indexed256[number], number
}

// inked tells whether a character has ink at a place of its cell, u and v 0…1.
func inked(r rune, u, v float64) bool {
	for mask := range 64 {
		if m := uint8(mask); r == sextant(m) {
			return m>>(int(v*3)*2+int(u*2))&1 == 1
		}
		if m := uint8(mask); mask < 16 && r == Quadrant.glyph(m) {
			return m>>(int(v*2)*2+int(u*2))&1 == 1
		}
	}
	return r != ' ' && math.Abs(v-0.5) < 0.1
}

// TestLook renders the scene in every mesh and depth and compares what would be
// seen with the scene itself. With LEADLINE_LOOK=folder the pictures are kept, to
// be judged by eye.
func TestLook(t *testing.T) {
	const cols, rows, cw, ch = 80, 24, 6, 12
	truth := scene(Half, cols*cw, rows*ch/2)
	// What was measured, and a little more.
	worst := map[Depth][]float64{
		TrueColour: {Half: 0.072, Quadrant: 0.058, Sextant: 0.052},
		C256:       {Half: 0.092, Quadrant: 0.079, Sextant: 0.073},
		C16:        {Half: 0.163, Quadrant: 0.157, Sextant: 0.152},
	}
	for _, d := range []Depth{TrueColour, C256, C16, None} {
		before := math.Inf(1)
		for _, m := range []Mesh{Half, Quadrant, Sextant} {
			name := fmt.Sprintf("%s-%s", m, strings.ReplaceAll(d.String(), " ", "-"))
			dithered := Draw(scene(m, cols, rows), m, d, Options{Dither: true})
			keep(t, name+"-dithered", paintGrid(dithered, cw, ch, false))
			img := paintGrid(Draw(scene(m, cols, rows), m, d, Options{}), cw, ch, false)
			keep(t, name, img)
			e := farError(img, truth)
			t.Logf("%s: mean OKLab error %.4f", name, e)
			if e >= before {
				t.Errorf("%s: error %.4f, the coarser mesh has %.4f", name, e, before)
			}
			if d != None && e > worst[d][m] {
				t.Errorf("%s: error %.4f, want at most %.4f", name, e, worst[d][m])
			}
			before = e
		}
	}
}

// farError is the mean distance in OKLab between an image and the scene.
func farError(img *image.RGBA, truth Picture) float64 {
	sum := 0.0
	tab := tables()
	for y := range truth.H {
		for x := range truth.W {
			c := img.RGBAAt(x, y)
			d := tab.lab(RGB{c.R, c.G, c.B}).distance(tab.lab(truth.Pix[y*truth.W+x]))
			sum += math.Sqrt(float64(d))
		}
	}
	return sum / float64(truth.W*truth.H)
}

func keep(t *testing.T, name string, img image.Image) {
	t.Helper()
	dir := os.Getenv("LEADLINE_LOOK")
	if dir == "" {
		return
	}
	f, err := os.Create(filepath.Join(dir, name+".png"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if err := png.Encode(f, img); err != nil {
		t.Fatal(err)
	}
}
