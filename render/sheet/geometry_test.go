package sheet

import (
	"errors"
	"image"
	"math"
	"testing"
)

// build makes a geometry or fails the test.
func build(t *testing.T, w, h, bleed, safe string, ppi int) Geometry {
	t.Helper()
	g, err := New(MustLength(w), MustLength(h), MustLength(bleed), MustLength(safe), ppi)
	if err != nil {
		t.Fatal(err)
	}
	return g
}

// Sizes in millimetres by ISO 216; pixel counts as print shops list them for
// 300, 150 and 72 ppi (common practice; A4 at 72 is the familiar 595 x 842
// of PostScript points). US Letter and Tabloid by ANSI/ASME Y14.1.
func TestPaperSizes(t *testing.T) {
	cases := []struct {
		name, w, h string
		ppi, x, y  int
	}{
		{"A0", "841mm", "1189mm", 300, 9933, 14043},
		{"A1", "594mm", "841mm", 300, 7016, 9933},
		{"A2", "420mm", "594mm", 300, 4961, 7016},
		{"A3", "297mm", "420mm", 300, 3508, 4961},
		{"A4", "210mm", "297mm", 300, 2480, 3508},
		{"A5", "148mm", "210mm", 300, 1748, 2480},
		{"A6", "105mm", "148mm", 300, 1240, 1748},
		{"B1", "707mm", "1000mm", 300, 8350, 11811},
		{"A4", "21cm", "29.7cm", 300, 2480, 3508},
		{"A4", "210mm", "297mm", 150, 1240, 1754},
		{"A4", "210mm", "297mm", 72, 595, 842},
		{"A4", "210mm", "297mm", 600, 4961, 7016},
		{"Letter", "8.5in", "11in", 300, 2550, 3300},
		{"Tabloid", "11in", "17in", 300, 3300, 5100},
		{"1.2 m", "1200mm", "800mm", 300, 14173, 9449},
	}
	for _, c := range cases {
		g := build(t, c.w, c.h, "0mm", "0mm", c.ppi)
		if g.TrimW != c.x || g.TrimH != c.y {
			t.Errorf("%s at %d ppi: %d x %d, want %d x %d", c.name, c.ppi, g.TrimW, g.TrimH, c.x, c.y)
		}
	}
}

// The pHYs values usual for these resolutions (PNG 3rd ed. §11.3.4.3 gives
// the unit; rounding to the nearest is common practice).
func TestPixelsPerMetre(t *testing.T) {
	for ppi, want := range map[int]uint32{72: 2835, 150: 5906, 200: 7874, 240: 9449, 300: 11811,
		360: 14173, 600: 23622} {
		if g := build(t, "100mm", "100mm", "0mm", "0mm", ppi); g.PixelsPerMetre != want {
			t.Errorf("%d ppi: %d, want %d", ppi, g.PixelsPerMetre, want)
		}
	}
	for ppi := 1; ppi <= MaxPPI; ppi++ {
		if got, want := pixelsPerMetre(ppi, 1), math.Round(float64(ppi)/0.0254); float64(got) != want {
			t.Fatalf("%d ppi: %d, want %g", ppi, got, want)
		}
	}
	if got := pixelsPerMetre(1, MaxScale); got != 1 {
		t.Errorf("the coarsest lattice has %d pixels a metre, want the least, 1", got)
	}
}

// Acuity of one minute of arc: ppi = 25.4/(d tan 1'), the usual table.
func TestAcuity(t *testing.T) {
	for mm, want := range map[float64]float64{200: 437, 300: 291, 500: 175, 750: 116, 1000: 87,
		1500: 58, 2000: 44, 3000: 29, 5000: 17} {
		if got := math.Round(AcuityPPI(mm)); got != want {
			t.Errorf("at %g mm: %g ppi, want %g", mm, got, want)
		}
		exact := 25.4 / (mm * math.Tan(math.Pi/180/60))
		if got := AcuityPPI(mm); math.Abs(got/exact-1) > 1e-9 {
			t.Errorf("at %g mm: %v ppi, want %v", mm, got, exact)
		}
	}
}

func TestRectangles(t *testing.T) {
	g := build(t, "600mm", "400mm", "3mm", "5mm", 300)
	if want := image.Rect(0, 0, 7087, 4724); g.Trim() != want {
		t.Errorf("trim %v, want %v", g.Trim(), want)
	}
	if want := image.Rect(-35, -35, 7122, 4759); g.Full() != want {
		t.Errorf("full %v, want %v", g.Full(), want)
	}
	if want := image.Rect(59, 59, 7028, 4665); g.Safe() != want {
		t.Errorf("safe %v, want %v", g.Safe(), want)
	}
	if small := build(t, "64px", "64px", "0mm", DefaultSafe, 300); !small.Safe().Empty() {
		t.Errorf("margins that meet leave %v", small.Safe())
	}
}

func TestScaled(t *testing.T) {
	g := build(t, "210mm", "297mm", "3mm", "5mm", 300)
	if g.Scaled(1) != g {
		t.Error("scale 1/1 changed the sheet")
	}
	s := g.Scaled(8)
	if s.TrimW != 310 || s.TrimH != 439 || s.Bleed != 5 || s.Margin != 8 {
		t.Errorf("A4 at 1/8 is %+v", s)
	}
	if s.Scale != 8 || s.PixelsPerMetre != 1476 { // 37.5 / 0.0254 = 1476.4
		t.Errorf("A4 at 1/8 has scale %d and %d pixels a metre", s.Scale, s.PixelsPerMetre)
	}
	if twice := g.Scaled(2).Scaled(4); twice != s {
		t.Errorf("1/2 of 1/4 is %+v, 1/8 is %+v", twice, s)
	}
	for k := 1; k <= 300; k++ {
		s, full := g.Scaled(k).Full(), g.Full()
		whole := image.Rect(s.Min.X*k, s.Min.Y*k, s.Max.X*k, s.Max.Y*k)
		if !full.In(whole) {
			t.Fatalf("1/%d covers %v, less than %v", k, whole, full)
		}
	}
	defer func() {
		if recover() == nil {
			t.Error("scale 1/0 was taken")
		}
	}()
	g.Scaled(0)
}

func TestSizeLimits(t *testing.T) {
	cases := []struct {
		w, h, bleed string
		ppi         int
		ok          bool
	}{
		{"400000px", "50000px", "0mm", 300, true}, // exactly 20 gigapixels
		{"400000px", "50001px", "0mm", 300, false},
		{"400001px", "1px", "0mm", 300, false},
		{"399998px", "1px", "1px", 300, true},
		{"399998px", "1px", "2px", 300, false},
		{"9999999in", "9999999in", "9999999in", 4800, false},
		{"0mm", "5mm", "3mm", 300, false},
		{"0.4px", "5mm", "0mm", 300, false},
		{"0.5px", "5mm", "0mm", 300, true},
		{"5mm", "5mm", "0mm", 0, false},
		{"5mm", "5mm", "0mm", -300, false},
		{"500mm", "500mm", "0mm", 4800, true},
		{"5mm", "5mm", "0mm", 4801, false},
	}
	for _, c := range cases {
		_, err := New(MustLength(c.w), MustLength(c.h), MustLength(c.bleed), Length{}, c.ppi)
		var se *SizeError
		if c.ok != (err == nil) || !c.ok && (!errors.As(err, &se) || se.Hint() == "") {
			t.Errorf("%s x %s bleed %s at %d ppi: %v", c.w, c.h, c.bleed, c.ppi, err)
		}
	}
}
