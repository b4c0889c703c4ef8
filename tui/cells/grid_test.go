package cells

import (
	"image"
	"strings"
	"testing"
)

func plainLines(g *Grid) string { return strings.Join(g.Lines(), "\n") }

func TestSetKeepsWideCharactersWhole(t *testing.T) {
	for _, c := range []struct {
		name string
		do   func(g *Grid)
		want string
	}{
		{"over the first half", func(g *Grid) { g.Set(1, 0, Cell{Rune: 'x'}) }, ".x .."},
		{"over the second half", func(g *Grid) { g.Set(2, 0, Cell{Rune: 'x'}) }, ". x.."},
		{"wide over the first half", func(g *Grid) { g.Set(0, 0, Cell{Rune: '京'}) }, "京 .."},
		{"wide over the second half", func(g *Grid) { g.Set(2, 0, Cell{Rune: '京'}) }, ". 京."},
		{"wide over itself", func(g *Grid) { g.Set(1, 0, Cell{Rune: '京'}) }, ".京.."},
		{"wide in the last column", func(g *Grid) { g.Set(4, 0, Cell{Rune: '京'}) }, ".東. "},
		{"control character", func(g *Grid) { g.Set(0, 0, Cell{Rune: '\x1b'}) }, " 東.."},
		{"mark alone", func(g *Grid) { g.Set(0, 0, Cell{Rune: '\u0301'}) }, " 東.."},
		{"tail alone", func(g *Grid) { g.Set(3, 0, Cell{Rune: Tail}) }, ".東 ."},
		{"outside", func(g *Grid) {
			for _, p := range []image.Point{{-1, 0}, {5, 0}, {0, -1}, {0, 1}} {
				g.Set(p.X, p.Y, Cell{Rune: 'x'})
			}
		}, ".東.."},
	} {
		g := NewGrid(5, 1, None)
		g.Text(0, 0, ".東..", Style{})
		c.do(g)
		if got := plainLines(g); got != c.want {
			t.Errorf("%s: %q, want %q", c.name, got, c.want)
		}
	}
}

func TestAtOutsideIsBlank(t *testing.T) {
	g := NewGrid(1, 1, None)
	g.Set(0, 0, Cell{Rune: 'x'})
	if g.At(1, 0) != (Cell{}) || g.At(0, -1) != (Cell{}) || g.At(0, 0).Rune != 'x' {
		t.Error("At does not tell inside from outside")
	}
}

func TestCloneIsApart(t *testing.T) {
	g := NewGrid(2, 1, None)
	c := g.Clone()
	c.Text(0, 0, "ab", Style{})
	if plainLines(g) != "  " || plainLines(c) != "ab" {
		t.Errorf("grid %q, clone %q", plainLines(g), plainLines(c))
	}
}

func TestBoxes(t *testing.T) {
	for _, c := range []struct {
		name  string
		ascii bool
		do    func(g *Grid)
		want  string
	}{
		{"box", false, func(g *Grid) { g.Box(image.Rect(1, 0, 5, 3), Style{}) }, ".┌──┐.\n.│..│.\n.└──┘."},
		{"box in ASCII", true, func(g *Grid) { g.Box(image.Rect(1, 0, 5, 3), Style{}) }, ".+--+.\n.|..|.\n.+--+."},
		{"two by two", false, func(g *Grid) { g.Box(image.Rect(1, 0, 3, 2), Style{}) }, ".┌┐...\n.└┘...\n......"},
		{"one high", false, func(g *Grid) { g.Box(image.Rect(1, 1, 5, 2), Style{}) }, "......\n.────.\n......"},
		{"one wide", false, func(g *Grid) { g.Box(image.Rect(1, 0, 2, 3), Style{}) }, ".│....\n.│....\n.│...."},
		{"empty", false, func(g *Grid) { g.Box(image.Rect(2, 2, 2, 3), Style{}) }, "......\n......\n......"},
		{"partly outside", false, func(g *Grid) { g.Box(image.Rect(-3, -1, 3, 2), Style{}) }, "..│...\n──┘...\n......"},
		{"corners", false, func(g *Grid) { g.Corners(image.Rect(0, 0, 6, 3), Style{}) }, "┌....┐\n......\n└....┘"},
		{"no corners", false, func(g *Grid) { g.Corners(image.Rect(0, 0, 6, 1), Style{}) }, "......\n......\n......"},
		{"rule cut", false, func(g *Grid) { g.Rule(4, 1, 9, Style{}) }, "......\n....──\n......"},
		{"no rule", false, func(g *Grid) { g.Rule(4, 1, -2, Style{}) }, "......\n......\n......"},
		{"plumb", false, func(g *Grid) { g.Plumb(0, 1, 2, Style{}) }, "......\n│.....\n│....."},
	} {
		g := NewGrid(6, 3, None)
		g.ASCII = c.ascii
		g.Fill(image.Rect(-5, -5, 50, 50), Cell{Rune: '.'})
		c.do(g)
		if got := plainLines(g); got != c.want {
			t.Errorf("%s:\n%s\nwant\n%s", c.name, got, c.want)
		}
	}
}

// TestUnder: a letter over a block stands on the mean of the block by area; over a
// letter it stands on that letter's ground.
func TestUnder(t *testing.T) {
	black, white := RGB{}, RGB{255, 255, 255}
	for _, c := range []struct {
		below Cell
		want  Paint
	}{
		{Cell{Rune: ' ', BG: white.Solid()}, white.Solid()},
		{Cell{Rune: '█', FG: white.Solid(), BG: black.Solid()}, white.Solid()},
		// Half in OKLab between black and white is oklab(0.5 0 0) = #636363 (CSS Color 4).
		{Cell{Rune: '▀', FG: white.Solid(), BG: black.Solid()}, RGB{0x63, 0x63, 0x63}.Solid()},
		{Cell{Rune: 'W', FG: white.Solid(), BG: black.Solid()}, black.Solid()},
		{Cell{Rune: '▀', FG: white.Solid()}, Own},
		{Cell{}, Own},
	} {
		g := NewGrid(1, 1, TrueColour)
		g.Set(0, 0, c.below)
		if got, ok := g.Under(0, 0); ok != (c.want != Own) || ok && got.Solid() != c.want {
			t.Errorf("%v: Under gives %v, %v", c.below, got, ok)
		}
		g.Text(0, 0, "x", Style{FG: Against, BG: Under})
		if got := g.At(0, 0); got.BG != c.want {
			t.Errorf("%v: ground %v, want %v", c.below, got.BG, c.want)
		}
	}
}

// TestAgainst: of black and white the better has at least 4.58:1 on any ground (the
// square root of 21, WCAG 2.2), so labels on a picture are always legible.
func TestAgainst(t *testing.T) {
	for r := 0; r < 256; r += 15 {
		for gr := 0; gr < 256; gr += 15 {
			for b := 0; b < 256; b += 15 {
				ground := RGB{uint8(r), uint8(gr), uint8(b)}
				g := NewGrid(1, 1, TrueColour)
				g.Set(0, 0, Cell{Rune: 'x', FG: Against, BG: ground.Solid()})
				letter, ok := g.At(0, 0).FG.RGB()
				if !ok || Contrast(letter, ground) < 4.58 {
					t.Fatalf("on %v the letter is %v, contrast %.2f", ground, letter, Contrast(letter, ground))
				}
			}
		}
	}
	g := NewGrid(1, 1, TrueColour)
	g.Set(0, 0, Cell{Rune: 'x', FG: Against})
	if g.At(0, 0).FG != Own {
		t.Error("against the terminal's own ground the letter is not the terminal's own")
	}
}
