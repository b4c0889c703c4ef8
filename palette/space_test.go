package palette

import (
	"encoding/json"
	"errors"
	"math"
	"math/rand/v2"
	"testing"
)

func near(t *testing.T, what string, got, want []float64, tol float64) {
	t.Helper()
	for i := range want {
		if !(math.Abs(got[i]-want[i]) <= tol) {
			t.Errorf("%s: component %d is %.10g, want %.10g (±%g)", what, i, got[i], want[i], tol)
		}
	}
}

// The matrices IEC 61966-2-1:1999 §5.2 and §5.3 print, to four decimals; the
// standard inverted the rounded one, hence the wider bound there.
func TestMatricesOfIEC61966(t *testing.T) {
	to := [3][3]float64{{0.4124, 0.3576, 0.1805}, {0.2126, 0.7152, 0.0722}, {0.0193, 0.1192, 0.9505}}
	from := [3][3]float64{{3.2406, -1.5372, -0.4986}, {-0.9689, 1.8758, 0.0415}, {0.0557, -0.2040, 1.0570}}
	m := SRGB.matrices()
	for i := range 3 {
		near(t, "to XYZ", m.toXYZ[i][:], to[i][:], 0.00006)
		near(t, "from XYZ", m.fromXYZ[i][:], from[i][:], 0.0005)
	}
}

// The adaptation from D65 to D50 as css-color-4 prints it in its sample code
// (conversions.js), to nine decimals.
func TestBradfordOfCSSColor4(t *testing.T) {
	want := [3][3]float64{
		{1.0479297925449969, 0.022946870601609652, -0.05019226628920524},
		{0.02962780877005599, 0.9904344267538799, -0.017073799063418826},
		{-0.009243040646204504, 0.015055191490298152, 0.7518742814281371},
	}
	for i := range 3 {
		near(t, "Bradford", labD50().toD50[i][:], want[i][:], 1e-9)
	}
}

// White of every space is D65 in XYZ, by definition of its matrix.
func TestWhiteIsWhite(t *testing.T) {
	d65 := roundAll(whiteD65.exactXYZ())
	for _, s := range Spaces() {
		xyz := s.ToXYZ([3]float64{1, 1, 1})
		near(t, s.String(), xyz[:], d65[:], 1e-15)
	}
}

func TestSpacesInvert(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for range 2000 {
		v := [3]float64{r.Float64()*3 - 1, r.Float64()*3 - 1, r.Float64()*3 - 1}
		for _, s := range Spaces() {
			back := s.FromXYZ(s.ToXYZ(v))
			near(t, s.String(), back[:], v[:], 1e-14)
		}
	}
}

// Display P3 green in sRGB, from the workings published with css-color-4.
func TestDisplayP3GreenInSRGB(t *testing.T) {
	linear := FromLinear(DisplayP3, [3]float64{0, 1, 0}).Linear(SRGB)
	got := make([]float64, 3)
	for i, v := range linear {
		got[i] = curveSRGB.encode(v)
	}
	near(t, "encoded", got, []float64{-0.5116, 1.0183, -0.3107}, 0.00005)
}

func TestSpaceText(t *testing.T) {
	var got struct{ S Space }
	for _, s := range Spaces() {
		doc, err := json.Marshal(struct{ S Space }{s})
		if err != nil {
			t.Fatal(err)
		}
		if err := json.Unmarshal(doc, &got); err != nil || got.S != s {
			t.Errorf("%s reads back as %v, %v", doc, got.S, err)
		}
	}
	_, err := ParseSpace("cmyk")
	var wrong *SpaceError
	if !errors.As(err, &wrong) || wrong.Name != "cmyk" || wrong.Hint() == "" {
		t.Errorf("cmyk: %v", err)
	}
	if s, err := ParseSpace("Display-P3"); err != nil || s != DisplayP3 {
		t.Errorf("names are not read without regard to case: %v, %v", s, err)
	}
}
