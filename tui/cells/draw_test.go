package cells

import (
	"image"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"
)

func TestRenderIsDeterministic(t *testing.T) {
	for _, m := range Meshes() {
		for _, d := range depths() {
			p := scene(m, 40, 12)
			a, b := Render(p, m, d, Options{Dither: true}), Render(p, m, d, Options{Dither: true})
			if !slices.Equal(a, b) {
				t.Errorf("%s at %s: two renderings differ", m, d)
			}
		}
	}
}

// TestCellsDependOnTheirOwnSamples: a change of some samples leaves every other cell
// as it was. Where there is no colour the range is given, as Options says.
func TestCellsDependOnTheirOwnSamples(t *testing.T) {
	o := Options{Range: Range{20, 220}}
	for _, m := range Meshes() {
		for _, d := range depths() {
			before := Draw(scene(m, 40, 12), m, d, o)
			p := scene(m, 40, 12)
			at := image.Pt(17, 5)
			for j := range m.Size().Y {
				for i := range m.Size().X {
					p.Pix[(at.Y*m.Size().Y+j)*p.W+at.X*m.Size().X+i] = RGB{255, uint8(90 * i), uint8(90 * j)}
				}
			}
			after := Draw(p, m, d, o)
			for y := range 12 {
				for x := range 40 {
					if same := before.At(x, y) == after.At(x, y); !same && image.Pt(x, y) != at {
						t.Fatalf("%s at %s: the cell at %d, %d changed too", m, d, x, y)
					}
				}
			}
		}
	}
}

// TestHalfIsExact: every sample of the coarsest mesh of blocks is shown as it is.
func TestHalfIsExact(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 12))
	p := NewPicture(30, 7, Half)
	for i := range p.Pix {
		p.Pix[i] = randomRGB(rng)
	}
	p.Pix[0] = p.Pix[p.W] // one cell of one colour
	img := paintGrid(Draw(p, Half, TrueColour, Options{}), 1, 2, false)
	for y := range p.H {
		for x := range p.W {
			c := img.RGBAAt(x, y)
			if got, want := (RGB{c.R, c.G, c.B}), p.Pix[y*p.W+x]; got != want {
				t.Fatalf("sample %d, %d is %v, want %v", x, y, got, want)
			}
		}
	}
}

func TestMat(t *testing.T) {
	tone := RGB{70, 74, 80}
	for _, m := range Meshes() {
		p := NewPicture(6, 4, m)
		for i := range p.Pix {
			p.Pix[i] = RGB{250, 250, 250}
		}
		s := m.Size()
		sheet := image.Rect(s.X, s.Y, 5*s.X, 3*s.Y)
		for _, d := range []Depth{TrueColour, None} {
			g := Draw(p, m, d, Options{Mat: &Mat{Sheet: sheet, Tone: tone, Rune: '/'}, Range: Range{0, 255}})
			want := Cell{Rune: ' ', BG: tone.Solid()}
			if d == None || m == Plain {
				want = Cell{Rune: '/'}
			}
			for y := range 4 {
				for x := range 6 {
					isMat := !image.Pt(x*s.X, y*s.Y).In(sheet)
					if got := g.At(x, y); (got == want) != isMat {
						t.Errorf("%s at %s: cell %d, %d is %+v, mat %v", m, d, x, y, got, isMat)
					}
				}
			}
		}
	}
}

// TestMatWithinACell: the edge of the sheet falls between samples, not cells.
func TestMatWithinACell(t *testing.T) {
	p := Picture{4, 4, slices.Repeat([]RGB{{200, 200, 200}}, 16)}
	mat := &Mat{Sheet: image.Rect(1, 0, 4, 4), Tone: RGB{10, 10, 10}}
	got := Draw(p, Quadrant, TrueColour, Options{Mat: mat}).At(0, 0)
	want := Cell{Rune: '▌', FG: mat.Tone.Solid(), BG: RGB{200, 200, 200}.Solid()}
	if got != want {
		t.Errorf("got %+v, want %+v", got, want)
	}
}

// TestCarriedOn: a picture that ends within a cell is drawn as if its last row and
// column went on.
func TestCarriedOn(t *testing.T) {
	for _, m := range Meshes() {
		full := NewPicture(2, 2, m)
		cut := Picture{full.W - m.Size().X + 1, full.H - m.Size().Y + 1, nil}
		for y := range full.H {
			for x := range full.W {
				cx, cy := min(x, cut.W-1), min(y, cut.H-1)
				full.Pix[y*full.W+x] = RGB{uint8(60 * cx), uint8(40 * cy), 9}
				if x == cx && y == cy {
					cut.Pix = append(cut.Pix, full.Pix[y*full.W+x])
				}
			}
		}
		o := Options{Range: Range{0, 255}}
		if a, b := Render(full, m, TrueColour, o), Render(cut, m, TrueColour, o); !slices.Equal(a, b) {
			t.Errorf("%s: %q, want %q", m, b, a)
		}
	}
}

func TestShortPicturePanics(t *testing.T) {
	defer func() {
		if s, _ := recover().(string); !strings.Contains(s, "3×2") {
			t.Errorf("panic says %q", s)
		}
	}()
	Render(Picture{3, 2, make([]RGB, 5)}, Half, TrueColour, Options{})
}

func FuzzRender(f *testing.F) {
	f.Add(0, 0, uint8(0), uint8(0), []byte(nil), false)
	f.Add(1, 1, uint8(1), uint8(3), []byte{1, 2, 3}, true)
	f.Add(5, 7, uint8(2), uint8(2), []byte("soundings"), false)
	f.Add(-4, 9, uint8(3), uint8(1), []byte{255}, true)
	f.Fuzz(func(t *testing.T, w, h int, mesh, depth uint8, data []byte, odd bool) {
		p := Picture{w % 24, h % 24, nil}
		m, d := Mesh(mesh%uint8(meshCount)), Depth(depth%uint8(depthCount))
		for i := range max(p.W, 0) * max(p.H, 0) {
			var c [3]uint8
			for k := range c {
				if len(data) > 0 {
					c[k] = data[(3*i+k)%len(data)]
				}
			}
			p.Pix = append(p.Pix, RGB{c[0], c[1], c[2]})
		}
		o := Options{Dither: odd, Light: odd, ASCII: odd}
		if odd {
			o.Mat = &Mat{Sheet: image.Rect(1, 1, w%19, h%19), Tone: RGB{1, 2, 3}}
		}
		g := Draw(p, m, d, o)
		if g.Size() != p.Cells(m) {
			t.Fatalf("grid of %v for %v", g.Size(), p.Cells(m))
		}
		for y, line := range g.Lines() {
			compareLine(t, g, y, line)
		}
	})
}
