package paper

import (
	"context"
	"encoding/binary"
	"image"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/palette"
	"leadline/render"
	"leadline/tui/cells"
)

// tiny is a sheet that the window's pixels are quickly computed for.
const tiny = `{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},
	"iteration":{"limit":200},"sampling":{"least":1,"most":4},"sheet":{"width":"200px","height":"150px","bleed":"10px","ppi":100}}`

// expected renders a rectangle as a print does and brings it to 8 bits.
func expected(t *testing.T, r *rig, rect image.Rectangle) []cells.RGB {
	t.Helper()
	p, err := render.NewPlan(context.Background(), r.desk.Frame, render.Options{})
	if err != nil {
		t.Fatal(err)
	}
	c := render.NewCanvas(rect)
	if _, err := p.Tile(context.Background(), c, rect, 1); err != nil {
		t.Fatal(err)
	}
	out := make([]cells.RGB, rect.Dx()*rect.Dy())
	for i := range out {
		var code [3]uint16
		for j := range code {
			code[j] = binary.BigEndian.Uint16(c.Pix[6*i+2*j:])
		}
		if p.Space != palette.SRGB {
			code, _ = palette.FromCodes(p.Space, code).BakeOne(palette.SRGB)
		}
		at := func(v uint16) uint8 { return uint8((int(v) + 128) / 257) } // 65535 = 255·257
		out[i] = cells.RGB{R: at(code[0]), G: at(code[1]), B: at(code[2])}
	}
	return out
}

// colour gives the terminal colours, and the window square samples.
func (r *rig) colour() { r.desk.Depth, r.desk.Mesh = cells.TrueColour, cells.Quadrant }

// TestWindow holds what the window shows to Plan.Tile, pixel by pixel, at the
// middle, after moves, at the sheet's corner and in another space.
func TestWindow(t *testing.T) {
	for _, c := range []struct {
		name string
		doc  string
		keys []string
		at   image.Rectangle
	}{
		{"middle", tiny, []string{"w"}, image.Rect(60, 54, 140, 96)},
		{"moved", tiny, []string{"w", "right", "down"}, image.Rect(100, 75, 180, 117)},
		{"moved a little", tiny, []string{"w", "shift+right", "shift+down"}, image.Rect(65, 57, 145, 99)},
		{"as far as it goes", tiny, []string{"w", "left", "left", "left", "up", "up", "up", "up", "up"}, image.Rect(-10, -10, 70, 32)},
		{"display-p3", strings.Replace(tiny, `"ppi":100`, `"ppi":100,"space":"display-p3"`, 1), []string{"w"}, image.Rect(60, 54, 140, 96)},
	} {
		r := newRig(t, c.doc)
		r.colour()
		r.keys(c.keys...)
		if got := r.s.win.rect(r.s); got != c.at {
			t.Errorf("%s: the window is at %v, want %v", c.name, got, c.at)
			continue
		}
		if done, all := r.s.win.progress(r.s); done != all || all == 0 {
			t.Errorf("%s: %d of %d pieces", c.name, done, all)
		}
		got, want := r.s.win.picture(r.s), expected(t, r, c.at)
		if got.W != 80 || got.H != 42 {
			t.Fatalf("%s: %d x %d samples", c.name, got.W, got.H)
		}
		for i := range want {
			if got.Pix[i] != want[i] {
				t.Errorf("%s: pixel %d is %v, want %v", c.name, i, got.Pix[i], want[i])
				break
			}
		}
		r.view()
	}
}

// TestWindowShows: every pixel has half a cell with its own colour.
func TestWindowShows(t *testing.T) {
	r := newRig(t, tiny)
	r.colour()
	r.keys("w", "m")
	w := &r.s.win
	g := cells.Draw(w.picture(r.s), w.mesh(r.s), r.desk.Depth, cells.Options{})
	want := expected(t, r, w.rect(r.s))
	for i, c := range want {
		x, y := i%80, i/80
		cell := g.At(x, y/2)
		paint := cell.FG
		if y%2 == 1 || cell.Rune == ' ' {
			paint = cell.BG
		}
		if shown, ok := paint.RGB(); !ok || shown != c {
			t.Fatalf("sample %d, %d is shown as %v, is %v", x, y, shown, c)
		}
	}
}

// TestSmallSheet: around a sheet smaller than the window is mat.
func TestSmallSheet(t *testing.T) {
	r := newRig(t, tiny)
	r.colour()
	r.resize(240, 100)
	r.keys("w", "right", "down")
	if got, want := r.s.win.rect(r.s), image.Rect(-20, -25, 220, 175); got != want {
		t.Fatalf("the window is at %v, want %v", got, want)
	}
	pic, full := r.s.win.picture(r.s), r.s.resolve().Sheet.Full()
	want := expected(t, r, full)
	for y := range pic.H {
		for x := range pic.W {
			at, c := image.Pt(x-20, y-25), r.desk.Style.MatTone
			if at.In(full) {
				c = want[(at.Y-full.Min.Y)*full.Dx()+at.X-full.Min.X]
			}
			if pic.Pix[y*pic.W+x] != c {
				t.Fatalf("%v is %v, want %v", at, pic.Pix[y*pic.W+x], c)
			}
		}
	}
	r.view()
}

// TestWindowFrame: another frame is computed anew, and a late piece of the old
// one is not shown.
func TestWindowFrame(t *testing.T) {
	r := newRig(t, tiny)
	r.colour()
	r.keys("w")
	old := r.desk.Frame
	r.keys("esc", "t", "w")
	if r.desk.Frame == old || r.s.win.frame != r.desk.Frame {
		t.Fatal("the window shows another frame")
	}
	before := r.s.win.patches[image.Pt(2, 2)]
	r.send(tiled{frame: old, at: image.Pt(2, 2), pix: make([]cells.RGB, patchSide*patchSide)})
	if &r.s.win.patches[image.Pt(2, 2)][0] != &before[0] {
		t.Error("a late piece was taken")
	}
	got, want := r.s.win.picture(r.s), expected(t, r, r.s.win.rect(r.s))
	if got.Pix[0] != want[0] || got.Pix[len(want)-1] != want[len(want)-1] {
		t.Error("the pixels are another frame's")
	}
}

// TestWindowKeys: Esc leaves and stops the work, and the status says where the
// window is in millimetres: 25.4 mm are 100 pixels.
func TestWindowKeys(t *testing.T) {
	r := newRig(t, tiny)
	r.keys("w", "right")
	if got := r.s.Status(); !strings.Contains(got, "1:1 at 35.6, 19.1 mm") {
		t.Errorf("%q", got)
	}
	r.keys("c")
	if r.s.win.u != 0.5 {
		t.Errorf("c went to %v", r.s.win.u)
	}
	// The pixel at 110, 68 becomes the middle of 80 x 21.
	r.send(tea.MouseMsg{X: 50, Y: 3, Button: tea.MouseButtonLeft, Action: tea.MouseActionPress})
	if got, want := r.s.win.rect(r.s).Min, image.Pt(70, 58); got != want {
		t.Errorf("a click went to %v, want %v", got, want)
	}
	r.keys("esc")
	if r.s.win.open || r.s.win.ctx.Err() == nil {
		t.Error("esc did not leave")
	}
	if r.s.View(80, 21) == "" || !r.s.win.used {
		t.Error("the spot is not marked")
	}
}
