package ink

import (
	"math"
	"testing"

	"leadline/palette"
	"leadline/render/frame"
	"leadline/render/kernel"
)

// shaderOf makes a shader of a grey ramp from black to white (or of one that
// closes on itself) over the given drive.
func shaderOf(t *testing.T, d frame.ResolvedDrive, edge float64, cyclic bool) *Shader {
	t.Helper()
	black, white := palette.MustColour("#000000"), palette.MustColour("#ffffff")
	r := &frame.Resolved{Space: palette.SRGB, Inside: palette.MustColour("#ff0000"), Drive: d,
		Edge: frame.ResolvedEdge{Width: edge, Colour: palette.MustColour("#00ff00")}}
	r.Ramp.Stops = []palette.Stop{{At: 0, Colour: black}, {At: 1, Colour: white}}
	if cyclic {
		r.Ramp.Stops = []palette.Stop{{At: 0, Colour: black}, {At: 0.5, Colour: white}, {At: 1, Colour: black}}
	}
	b, outside, err := Freeze(r)
	if err != nil || outside != 0 {
		t.Fatal(outside, err)
	}
	return New(b, r.Drive, r.Edge, r.Space)
}

// TestPlace checks the drive's arithmetic against values worked out by hand.
func TestPlace(t *testing.T) {
	e := math.E
	for _, c := range []struct {
		name   string
		drive  frame.ResolvedDrive
		cyclic bool
		smooth float64
		want   float64
	}{
		{"linear period", frame.ResolvedDrive{Scale: frame.Linear, Exponent: 1, Period: 40}, true, 50, 0.25},
		{"offset", frame.ResolvedDrive{Scale: frame.Linear, Exponent: 1, Period: 40, Offset: 0.5}, true, 50, 0.75},
		{"to and fro", frame.ResolvedDrive{Scale: frame.Linear, Exponent: 1, Period: 40}, false, 50, 0.75},
		{"to and fro, first leg", frame.ResolvedDrive{Scale: frame.Linear, Exponent: 1, Period: 40}, false, 90, 0.25},
		{"log", frame.ResolvedDrive{Scale: frame.Log, Exponent: 1, Base: 10, Period: 4}, true, 9 + e, 0.25},
		{"log below base", frame.ResolvedDrive{Scale: frame.Log, Exponent: 1, Base: 10, Period: 4}, true, 3, 0},
		{"power", frame.ResolvedDrive{Scale: frame.Power, Exponent: 0.5, Period: 8}, true, 16, 0.5},
		{"fitted", frame.ResolvedDrive{Scale: frame.Linear, Exponent: 1, Fitted: &frame.Fitted{Base: 100, Low: 10, High: 30}}, false, 115, 0.25},
		{"fitted, held below", frame.ResolvedDrive{Scale: frame.Linear, Exponent: 1, Fitted: &frame.Fitted{Base: 100, Low: 10, High: 30}}, false, 101, 0},
		{"fitted, held above", frame.ResolvedDrive{Scale: frame.Linear, Exponent: 1, Fitted: &frame.Fitted{Base: 100, Low: 10, High: 30}}, false, 200, 1},
	} {
		if got := shaderOf(t, c.drive, 0, c.cyclic).Place(c.smooth); math.Abs(got-c.want) > 1e-12 {
			t.Errorf("%s: place of %v is %v, want %v", c.name, c.smooth, got, c.want)
		}
	}
}

// TestToAndFroHasNoSeam walks a ramp whose ends differ over its period.
func TestToAndFroHasNoSeam(t *testing.T) {
	s := shaderOf(t, frame.ResolvedDrive{Scale: frame.Linear, Exponent: 1, Period: 10}, 0, false)
	last := s.Place(0)
	for i := 1; i < 4000; i++ {
		p := s.Place(float64(i) * 0.01)
		if math.Abs(p-last) > 0.00101 {
			t.Fatalf("a jump from %v to %v at %v", last, p, float64(i)*0.01)
		}
		last = p
	}
}

// TestEdgeLine: the line covers what lies within half its width, softly over
// one pixel of the picture at hand, whatever its scale.
func TestEdgeLine(t *testing.T) {
	s := shaderOf(t, frame.ResolvedDrive{Scale: frame.Linear, Exponent: 1, Period: 1e6}, 8, true)
	green := palette.SRGB.Decode(65535)
	for _, c := range []struct{ distance, unit, cover float64 }{
		{0, 1, 1}, {3.4, 1, 1}, {4, 1, 0.5}, {4.25, 1, 0.25}, {4.6, 1, 0},
		{4, 8, 0.5}, {0, 8, 1}, {6, 8, 0.25},
	} {
		l := s.Shade(kernel.Field{Smooth: 0, Distance: c.distance}, c.unit)
		if math.Abs(l[1]-c.cover*green) > 1e-12 {
			t.Errorf("distance %v at 1/%v: line covers %v, want %v", c.distance, c.unit, l[1]/green, c.cover)
		}
	}
	for _, state := range []kernel.State{kernel.Inside, kernel.Undecided} {
		if l := s.Shade(kernel.Field{State: state}, 1); l[0] != 1 || l[1] != 0 || l[2] != 0 {
			t.Errorf("%v is shaded %v, not as inside", state, l)
		}
	}
}

// TestFit checks percentiles by nearest rank on 1…200.
func TestFit(t *testing.T) {
	counts := make([]float64, 200)
	for i := range counts {
		counts[i] = float64((i*77)%200) + 1001.5
	}
	d := frame.ResolvedDrive{Scale: frame.Linear, Exponent: 1, Fit: frame.Fit{Low: 1, High: 99}}
	if f := Fit(d, nil, counts); f != (frame.Fitted{Base: 0, Low: 1002.5, High: 1198.5}) {
		t.Errorf("linear fit %+v", f)
	}
	d.Scale = frame.Log
	f := Fit(d, nil, counts)
	if f.Base != 1001 || math.Abs(f.Low-math.Log(2.5)) > 1e-15 || math.Abs(f.High-math.Log(198.5)) > 1e-14 {
		t.Errorf("log fit %+v", f)
	}
	base := 900.0
	if f := Fit(d, &base, counts); f.Base != 900 {
		t.Errorf("a given base became %v", f.Base)
	}
	for _, c := range [][]float64{nil, {5, 5, 5}} {
		if f := Fit(d, nil, c); !(f.High > f.Low) {
			t.Errorf("fit of %v is empty: %+v", c, f)
		}
	}
}

func BenchmarkShade(b *testing.B) {
	r := &frame.Resolved{Space: palette.SRGB, Ramp: palette.DefaultRamp(), Inside: palette.DefaultInside(),
		Drive: frame.ResolvedDrive{Scale: frame.Log, Exponent: 1, Fitted: &frame.Fitted{Base: 100, Low: 0.1, High: 6}},
		Edge:  frame.ResolvedEdge{Width: 2}}
	k, _, err := Freeze(r)
	if err != nil {
		b.Fatal(err)
	}
	s := New(k, r.Drive, r.Edge, r.Space)
	for i := 0; b.Loop(); i++ {
		s.Shade(kernel.Field{Smooth: 100 + float64(i&1023), Distance: 0.7}, 1)
	}
}
