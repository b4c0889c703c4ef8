package paper

import (
	"fmt"
	"strings"
	"testing"

	"github.com/charmbracelet/lipgloss"
	"github.com/charmbracelet/x/ansi"
	"github.com/muesli/termenv"

	"leadline/tui/cells"
	"leadline/tui/kit"
)

// TestSizes draws everything at every size of a terminal, in every depth.
func TestSizes(t *testing.T) {
	for _, depth := range []cells.Depth{cells.None, cells.C16, cells.TrueColour} {
		r := newRig(t, document)
		r.desk.Depth = depth
		if depth != cells.None {
			r.desk.Mesh = cells.Quadrant
			renderer := lipgloss.NewRenderer(nil)
			renderer.SetColorProfile(termenv.TrueColor)
			r.desk.Style = kit.NewStyle(renderer, true)
		}
		r.draw(r.picture(nil))
		for _, size := range [][2]int{{80, 24}, {200, 60}, {40, 10}, {40, 7}, {80, 21}, {240, 70}, {72, 14}, {100, 45}, {140, 14}, {40, 60}, {240, 7}, {71, 27}} {
			r.room.X, r.room.Y = size[0], size[1]
			for _, shape := range []string{"A2 landscape", "3000x150mm", "A2 portrait", "150x3000mm", "300x300mm"} {
				r.write(atSize, shape)
				r.view()
			}
			for cursor := range len(fields) + len(r.s.findings()) {
				r.s.cursor = cursor
				if v := r.view(); !strings.Contains(v, "▸") {
					t.Errorf("%v: the cursor on line %d is out of sight", size, cursor)
				}
			}
			r.keys("c")
			r.view()
			r.keys("esc")
		}
	}
}

// TestGolden compares whole screens, without colour.
func TestGolden(t *testing.T) {
	for _, c := range []struct {
		name          string
		width, height int
		ascii         bool
		keys          []string
	}{
		{"form", 80, 21, false, nil},
		{"terminal", 80, 24, false, []string{"down", "right"}},
		{"narrow", 40, 10, false, nil},
		{"wide", 200, 60, false, nil},
		{"ascii", 80, 21, true, []string{"f"}},
		{"chooser", 80, 21, false, []string{"c", "left", "left"}},
		{"portrait", 100, 30, false, []string{"t"}},
	} {
		r := newRig(t, strings.Replace(document, `"format":`, `"title":"Low water","format":`, 1))
		r.desk.ASCII = c.ascii
		r.s.sample = 3e-6
		r.resize(c.width, c.height)
		r.draw(r.picture(nil))
		r.keys(c.keys...)
		golden(t, c.name+".txt", trimmed(ansi.Strip(r.view()))+"status: "+r.s.Status()+"\n")
	}
}

// trimmed is a screen without the spaces at the ends of its lines.
func trimmed(v string) string {
	var b strings.Builder
	for _, l := range strings.Split(v, "\n") {
		fmt.Fprintln(&b, strings.TrimRight(l, " "))
	}
	return b.String()
}

// TestScale: the trim is drawn as its sides are, a cell being twice as high as
// wide, in every mesh.
func TestScale(t *testing.T) {
	r := newRig(t, document)
	for _, m := range cells.Meshes() {
		for _, size := range [][2]int{{100, 50}, {40, 60}} {
			p := lie(r.s.resolve().Sheet, m, size[0], size[1], around{})
			per := m.Size()
			w, h := float64(p.trim.Dx())/float64(per.X), 2*float64(p.trim.Dy())/float64(per.Y)
			// 600 x 400 mm, within a sample.
			if off := w/1.5 - h; off < -2 || off > 2 {
				t.Errorf("%s: %g x %g", m, w, h)
			}
			if !p.trim.In(p.grid) {
				t.Errorf("%s: %v reaches out of %v", m, p.trim, p.grid)
			}
		}
	}
}

// TestRule: a rule is 1, 2 or 5 times a power of ten and fits.
func TestRule(t *testing.T) {
	for most, want := range map[float64]float64{0.99: 0.5, 1: 1, 4.9: 2, 5: 5, 199: 100, 230: 200} {
		if got := roundLength(most); got != want {
			t.Errorf("up to %g: %g, want %g", most, got, want)
		}
	}
}
