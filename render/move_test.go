package render

import (
	"math"
	"testing"

	"leadline/precision"
	"leadline/render/frame"
)

// TestMove keeps the point under the pointer where it is, at every depth.
func TestMove(t *testing.T) {
	for _, name := range []string{"gull-archipelago", "undertow", "samphire-star"} {
		doc, err := frame.Load("../testdata/frames/" + name + ".frame.json")
		if err != nil {
			t.Fatal(err)
		}
		f := doc.Frame
		for _, m := range []struct{ x, y, zoom, turn float64 }{{100, 200, 1.5, 0}, {-40, 900, 0.25, 30}, {0, 0, 1e6, -75.25}, {300, 100, 1, 360}} {
			move, err := About(f, m.x, m.y, m.zoom, m.turn)
			if err != nil {
				t.Fatal(err)
			}
			g, err := Moved(f, move)
			if err != nil {
				t.Fatal(err)
			}
			at, err := Point(f, m.x, m.y)
			if err != nil {
				t.Fatal(err)
			}
			x, y, err := Place(g, at)
			if err != nil {
				t.Fatal(err)
			}
			// Point is good to 2^-24 px of its own frame, the centre to 2^-24 heights.
			size, err := g.Sheet.Geometry()
			if err != nil {
				t.Fatal(err)
			}
			if slack := (float64(size.TrimH) + m.zoom) * 0x1p-23; math.Abs(x-m.x) > slack || math.Abs(y-m.y) > slack {
				t.Errorf("%s: %+v: the point is at %v, %v", name, m, x, y)
			}
			want, have := f.View.Height.Ext().Quo(precision.ExtOf(m.zoom)), g.View.Height.Ext()
			if d := have.Quo(want).Float64(); math.Abs(d-1) > 1e-6 {
				t.Errorf("%s: %+v: the height is off by %v", name, m, d)
			}
			if n := len(g.View.Centre.Re.String()); n > int(precision.Depth(g.View.Height))+22 {
				t.Errorf("%s: %+v: a centre of %d digits", name, m, n)
			}
		}
	}
}

// TestPlaceInverts has Place and Point agree, and the plane's directions be
// those the format states.
func TestPlaceInverts(t *testing.T) {
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},"view":{"centre":{"re":"0","im":"0"},"height":"2","turn":"90deg"},
		"iteration":{"limit":100},"sheet":{"width":"300px","height":"200px"}}`))
	if err != nil {
		t.Fatal(err)
	}
	x, y, err := Place(f, frame.Point{Re: decimal(t, "1"), Im: decimal(t, "0.5")})
	// Turned a quarter counter-clockwise, the real axis points up and the imaginary one left.
	if err != nil || math.Abs(x-100) > 1e-9 || math.Abs(y-0) > 1e-9 {
		t.Errorf("%v, %v, %v", x, y, err)
	}
	for _, at := range [][2]float64{{0, 0}, {17.25, -3}, {299, 199}} {
		p, err := Point(f, at[0], at[1])
		if err != nil {
			t.Fatal(err)
		}
		if x, y, err := Place(f, p); err != nil || math.Abs(x-at[0]) > 1e-6 || math.Abs(y-at[1]) > 1e-6 {
			t.Errorf("%v came back as %v, %v, %v", at, x, y, err)
		}
	}
}

func decimal(t *testing.T, s string) precision.Decimal {
	t.Helper()
	d, err := precision.ParseDecimal(s)
	if err != nil {
		t.Fatal(err)
	}
	return d
}
