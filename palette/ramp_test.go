package palette

import (
	"encoding/json"
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"
)

// Data RPN 14 of Fritsch and Carlson (1980), Table 1, and the interpolant as
// SciPy 1.10.1's PchipInterpolator has it (gonum 0.17 FritschButland agrees).
func TestMonotoneOnRPN14(t *testing.T) {
	x := []float64{7.99, 8.09, 8.19, 8.7, 9.2, 10, 12, 15, 20}
	y := []float64{0, 2.76429e-5, 4.37498e-2, 0.169183, 0.469428, 0.943740, 0.998636, 0.999919, 0.999994}
	slopes := []float64{0, 0.00055250868186807465, 0.33587683460835005, 0.34944916768596718,
		0.59695823892678712, 0.060321845522970478, 0.00090039538276927094, 3.1424683630444953e-05, 0}
	d := monotoneSlopes(x, y, false)
	near(t, "slopes", d, slopes, 1e-13)
	for _, c := range [][2]float64{
		{8.04, 6.915091476648847e-06}, {8.14, 0.017697167375919493}, {8.3, 0.07496322315646736},
		{8.5, 0.1166325769392755}, {8.9, 0.2713755846049045}, {9.5, 0.6852179451108994}, {9.8, 0.8852284763384209},
		{11, 0.9860433625350502}, {13, 0.9993618220922759}, {14, 0.99977249170715}, {18, 0.9999826838481427},
	} {
		if got := hermite(x, y, d, interval(x, c[0]), c[0]); math.Abs(got-c[1]) > 1e-14 {
			t.Errorf("at %v: %.17g, SciPy has %.17g", c[0], got, c[1])
		}
	}
	for i := range x {
		if got := hermite(x, y, d, interval(x, x[i]), x[i]); got != y[i] {
			t.Errorf("misses point %d by %g", i, got-y[i])
		}
	}
}

// The property the method is named for: monotone data, monotone curve; and
// between any two points, never outside their values.
func TestMonotoneProperty(t *testing.T) {
	r := rand.New(rand.NewPCG(19, 20))
	for trial := range 400 {
		n := 2 + r.IntN(8)
		x, y := make([]float64, n), make([]float64, n)
		for i := range x {
			x[i], y[i] = r.Float64(), r.NormFloat64()
		}
		slices.Sort(x)
		rising := trial%2 == 0
		if rising {
			slices.Sort(y)
		}
		d := monotoneSlopes(x, y, false)
		last := math.Inf(-1)
		for k := range 2001 {
			at := x[0] + (x[n-1]-x[0])*float64(k)/2000
			i := interval(x, at)
			v := hermite(x, y, d, i, at)
			if low, high := min(y[i], y[i+1]), max(y[i], y[i+1]); v < low-1e-13 || v > high+1e-13 {
				t.Fatalf("trial %d: %v at %v leaves %v…%v", trial, v, at, low, high)
			}
			if rising && v < last-1e-13 {
				t.Fatalf("trial %d: falls at %v", trial, at)
			}
			last = v
		}
	}
}

func ramp(smooth bool, stops ...Stop) Ramp { return Ramp{Stops: stops, Smooth: smooth} }

func TestRampMeetsItsStops(t *testing.T) {
	for _, named := range Ramps() {
		for _, smooth := range []bool{false, true} {
			r := named.Ramp
			r.Smooth = smooth
			for i, s := range r.Stops {
				if got := r.At(s.At); !got.Equal(s.Colour) {
					t.Errorf("%s: stop %d gives %v", named.Name, i, got)
				}
			}
		}
	}
}

// Two stops: both interpolations are the straight line in OKLab.
func TestRampOfTwo(t *testing.T) {
	a, b := MustColour("#0b1d2a"), MustColour("#f5efe0")
	for _, smooth := range []bool{false, true} {
		r := ramp(smooth, Stop{0, a}, Stop{1, b})
		for k := range 101 {
			s := float64(k) / 100
			got := r.At(s).lab
			for i := range got {
				want := a.lab[i]*(1-s) + b.lab[i]*s
				near(t, "ramp", got[i:i+1], []float64{want}, 1e-15)
			}
		}
	}
}

func TestRampClamps(t *testing.T) {
	r := DefaultRamp()
	first, last := r.Stops[0].Colour, r.Stops[len(r.Stops)-1].Colour
	for _, x := range []float64{-1, math.Inf(-1), math.NaN(), math.Copysign(0, -1)} {
		if !r.At(x).Equal(first) {
			t.Errorf("at %v: %v", x, r.At(x))
		}
	}
	for _, x := range []float64{2, math.Inf(1)} {
		if !r.At(x).Equal(last) {
			t.Errorf("at %v: %v", x, r.At(x))
		}
	}
}

// A smooth cyclic ramp has no corner at the seam: the slopes just inside both
// ends agree.
func TestCyclicSeam(t *testing.T) {
	a, b, c := MustColour("#102030"), MustColour("#a06040"), MustColour("#305020")
	r := ramp(true, Stop{0, a}, Stop{0.3, b}, Stop{0.8, c}, Stop{1, a})
	if !r.Cyclic() || ramp(true, Stop{0, a}, Stop{1, b}).Cyclic() {
		t.Fatal("Cyclic is wrong")
	}
	curve := r.Curve()
	moving := false
	for k := range 3 {
		s := curve.slope[k]
		if s[0] != s[len(s)-1] {
			t.Errorf("component %d: slopes %v and %v", k, s[0], s[len(s)-1])
		}
		moving = moving || s[0] != 0
	}
	if !moving {
		t.Error("every slope is flat: the test shows nothing")
	}
}

func TestRampValidate(t *testing.T) {
	ink := MustColour("black")
	many := make([]Stop, MaxStops+1)
	for i := range many {
		many[i] = Stop{float64(i) / MaxStops, ink}
	}
	for _, c := range []struct {
		stops []Stop
		stop  int
		text  string
	}{
		{nil, -1, "0 stops"},
		{[]Stop{{0, ink}}, -1, "1 stops"},
		{many, -1, "257 stops"},
		{[]Stop{{0.1, ink}, {1, ink}}, 0, "stop 1: at 0.1"},
		{[]Stop{{0, ink}, {0.9, ink}}, 1, "stop 2: at 0.9"},
		{[]Stop{{0, ink}, {0.5, ink}, {0.5, ink}, {1, ink}}, 2, "stop 3: at 0.5"},
		{[]Stop{{0, ink}, {0.6, ink}, {0.5, ink}, {1, ink}}, 2, "stop 3: at 0.5"},
		{[]Stop{{0, ink}, {math.NaN(), ink}, {1, ink}}, 1, "stop 2: at NaN"},
		{[]Stop{{0, ink}, {1.5, ink}}, 1, "stop 2: at 1.5"},
	} {
		err := Ramp{Stops: c.stops}.Validate()
		var bad *RampError
		if !errors.As(err, &bad) || bad.Stop != c.stop || !strings.Contains(err.Error(), c.text) || bad.Hint() == "" {
			t.Errorf("%d stops: %v, want stop %d and %q", len(c.stops), err, c.stop, c.text)
		}
	}
	if err := (Ramp{Stops: many[:MaxStops]}).Validate(); err == nil {
		t.Error("a last stop before 1 is accepted")
	}
}

func TestRampJSON(t *testing.T) {
	const doc = `{"stops":[{"at":0,"colour":"#0b1d2a"},{"at":1,"colour":"oklch(95% 0.02 90)"}],"smooth":true}`
	var r Ramp
	if err := json.Unmarshal([]byte(doc), &r); err != nil {
		t.Fatal(err)
	}
	if out, err := json.Marshal(r); err != nil || string(out) != doc {
		t.Errorf("written back as %s, %v", out, err)
	}
	if err := json.Unmarshal([]byte(strings.Replace(doc, "#0b1d2a", "#0b1d2", 1)), &r); err == nil {
		t.Error("a broken colour is accepted")
	}
}
