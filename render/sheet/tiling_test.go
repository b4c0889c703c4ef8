package sheet

import (
	"image"
	"testing"
)

// TestTiles covers every rectangle exactly once, in rows from the top.
func TestTiles(t *testing.T) {
	const most = 11_000_000
	for _, c := range []struct {
		r    image.Rectangle
		side int
	}{
		{image.Rect(0, 0, 48, 32), 16}, {image.Rect(-3, -3, 51, 35), 16}, {image.Rect(5, 7, 6, 8), 512},
		{image.Rect(0, 0, 1000, 700), 512}, {image.Rect(0, 0, 100, 3), 64}, {image.Rect(-9, 4, 100000, 300), 512},
		{image.Rect(0, 0, 12_000_000, 2), 64},
	} {
		cut := Tiles(c.r, c.side, most)
		area, at := 0, c.r.Min
		for i := range cut.Count() {
			r := cut.At(i)
			if r.Min != at || r.Empty() || !r.In(c.r) || r.Dx()*r.Dy() > c.side*c.side {
				t.Fatalf("%v by %d: tile %d is %v, expected at %v", c.r, c.side, i, r, at)
			}
			line := cut.Line(i / cut.Columns())
			if !r.In(line) || line.Dx() != c.r.Dx() || line.Dy() != r.Dy() {
				t.Fatalf("%v by %d: tile %d, %v, lies in line %v", c.r, c.side, i, r, line)
			}
			if line.Dy() > 1 && line.Dx()*line.Dy() > most {
				t.Fatalf("%v by %d: a row of tiles has %d pixels", c.r, c.side, line.Dx()*line.Dy())
			}
			area += r.Dx() * r.Dy()
			if at.X = r.Max.X; at.X == c.r.Max.X {
				at = image.Pt(c.r.Min.X, r.Max.Y)
			}
		}
		if area != c.r.Dx()*c.r.Dy() || at.Y != c.r.Max.Y {
			t.Errorf("%v by %d: %d pixels of %d", c.r, c.side, area, c.r.Dx()*c.r.Dy())
		}
	}
}
