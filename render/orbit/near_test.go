package orbit

import (
	"context"
	"math/big"
	"testing"

	"leadline/precision"
	"leadline/render/formula"
)

// nearReference is the reference of a view of the Mandelbrot set.
func nearReference(t *testing.T, re, im, pixel string, limit int) *Reference {
	t.Helper()
	px := dec(t, pixel).Ext()
	r, err := New(context.Background(), Request{Map: formula.Square{}, Centre: [2]precision.Decimal{dec(t, re), dec(t, im)},
		Pixel: px, Radius: px.Ldexp(6), Limit: limit, Bailout: 1000})
	if err != nil {
		t.Fatal(err)
	}
	return r
}

func dec(t *testing.T, s string) precision.Decimal {
	t.Helper()
	d, err := precision.ParseDecimal(s)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// TestFrom takes the offset to the last digit, by big.Rat.
func TestFrom(t *testing.T) {
	r := nearReference(t, "-1.5", "0.25", "1e-30", 100)
	const re, im = "-1.50000000000000000000000000000000000000625", "0.24999999999999999999999999999999999999999999999"
	q := r.From([2]precision.Decimal{dec(t, re), dec(t, im)}, 400)
	for _, c := range []struct {
		part  float64
		of, x string
	}{{q.Offset.Re, r.Re.String(), re}, {q.Offset.Im, r.Im.String(), im}} {
		a, _ := new(big.Rat).SetString(c.x)
		b, _ := new(big.Rat).SetString(c.of)
		want, _ := a.Sub(a, b).Float64()
		got := precision.ExtOf(c.part).Ldexp(q.Offset.E).Float64()
		// Both parts share an exponent, so the smaller one is good to 2^-53 of
		// the larger.
		if d := got - want; d > 0x1p-52*7e-39 || d < -0x1p-52*7e-39 {
			t.Errorf("offset %g, not %g", got, want)
		}
	}
	if &q.Points[0] != &r.Points[0] || q.Bits != r.Bits || r.Offset == q.Offset {
		t.Error("the orbit is not shared, or the offset is")
	}
}

// TestLasts tells orbits that end by themselves from one cut off.
func TestLasts(t *testing.T) {
	for _, c := range []struct {
		what, re, im string
		limit        int
		lasts        bool
	}{
		{"period 3, closed", "-1.7548776662466927600495088963585286918946", "0", 100, true},
		{"escaping", "0.3", "0.6", 5000, true},
		{"on the set's edge at the foot of the cardioid's cusp", "0.25", "0", 300, false},
	} {
		r := nearReference(t, c.re, c.im, "1e-30", c.limit)
		if got := r.Lasts(1e8, 1000); got != c.lasts {
			t.Errorf("%s: %v", c.what, got)
		}
		if !r.Lasts(c.limit, 1000) {
			t.Errorf("%s: not even as long as its own limit", c.what)
		}
	}
}
