package cells

import (
	"image"
	"image/color"
	"strings"
	"testing"
	"unicode"

	"github.com/charmbracelet/x/ansi"
	"github.com/charmbracelet/x/vt"
)

// TestEmulatorAgrees writes pictures with overlays to a terminal emulator that is
// not ours (charmbracelet/x/vt) and compares its screen with the grid.
func TestEmulatorAgrees(t *testing.T) {
	const cols, rows = 64, 20
	for _, m := range Meshes() {
		for _, d := range depths() {
			g := Draw(scene(m, cols, rows), m, d, Options{})
			g.Box(image.Rect(3, 2, 30, 12), Style{FG: Against, BG: Under})
			g.Text(5, 4, "été à 東京 e\u0301", Style{FG: RGB{9, 9, 9}.Solid(), BG: RGB{240, 230, 200}.Solid(), Attr: Bold})
			screen := vt.NewEmulator(cols, rows)
			if _, err := screen.WriteString(strings.Join(g.Lines(), "\r\n")); err != nil {
				t.Fatal(err)
			}
			for y := range rows {
				for x := range cols {
					compareCell(t, g, x, y, screen)
				}
			}
		}
	}
}

func compareCell(t *testing.T, g *Grid, x, y int, screen *vt.Emulator) {
	t.Helper()
	c, want, have := g.At(x, y), expect(g, g.At(x, y)), screen.CellAt(x, y)
	if c.Rune == Tail {
		return // the emulator keeps nothing there
	}
	if have.Content != want.text {
		t.Fatalf("%s, column %d of row %d: %q, want %q", g.depth, x, y, have.Content, want.text)
	}
	checkColour(t, have.Style.Bg, c.BG, want.pen.bg)
	if want.text != " " {
		checkColour(t, have.Style.Fg, c.FG, want.pen.fg)
	}
}

func checkColour(t *testing.T, have color.Color, p Paint, code uint32) {
	t.Helper()
	ok := false
	switch v := have.(type) {
	case nil:
		ok = code == 0
	case ansi.BasicColor:
		ok = code == pen16|uint32(v)
	case ansi.IndexedColor:
		ok = code == pen256|uint32(v)
	default:
		c, solid := p.RGB()
		ok = solid && code == p.code && RGBOf(have) == c
	}
	if !ok {
		t.Fatalf("the emulator has the colour %T %v, want %v as %#x", have, have, p, code)
	}
}

// TestWidthsByOtherRules: every character of Unicode is as wide as charmbracelet/x/ansi
// says by wcwidth's rules, and by those of grapheme clusters never wider (there,
// spacing marks join the letter before them). Characters newer than Go's own tables
// and spacing marks, on which the two rules differ, are only kept from being wider.
func TestWidthsByOtherRules(t *testing.T) {
	known := []*unicode.RangeTable{unicode.L, unicode.N, unicode.P, unicode.S, unicode.Z, unicode.Mn, unicode.Me, unicode.Cc, unicode.Cf, unicode.Co}
	for r := rune(' '); r <= 0x1FFFF; r++ {
		if unicode.Is(unicode.Cs, r) {
			continue
		}
		g := NewGrid(5, 1, None)
		g.Text(0, 0, "a"+string(r)+"b", Style{})
		line := g.Lines()[0]
		wc, clusters := ansi.StringWidthWc(line), ansi.StringWidth(line)
		if wc > 5 || clusters > 5 || unicode.In(r, known...) && wc != 5 {
			t.Errorf("%U: %q is %d cells wide by wcwidth, %d by clusters, want 5", r, line, wc, clusters)
		}
	}
}
