package exact

import (
	"context"
	"errors"
	"math"
	"math/big"
	"testing"

	"leadline/precision"
)

func decimal(t *testing.T, s string) precision.Decimal {
	t.Helper()
	d, err := precision.ParseDecimal(s)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// iterate follows one point at 400 bits, in pixels of 1/64.
func iterate(t *testing.T, s Set, re, im string, limit int, bailout float64) Result {
	t.Helper()
	p := Point{Re: decimal(t, re).Float(400), Im: decimal(t, im).Float(400), Pixel: precision.ExtOf(1.0 / 64)}
	r, err := Iterate(context.Background(), s, p, limit, bailout, 400)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// TestIntegerOrbits: orbits of whole numbers, whose terms and derivatives
// anyone can write down. c = 1 runs 1, 2, 5, 26, 677, 458330 (OEIS A003095) with
// dz/dc = 1, 3, 13, 131, 6813, 9224803; c = 2 runs 2, 6, 38, 1446 with
// 1, 5, 61, 4637; under z³ + 1: 1, 2, 9, 730, 389017001 with dz/dc = 1, 4, 49,
// 11908, 3·730²·11908 + 1 (both by hand from d' = p·z^(p-1)·d + 1).
func TestIntegerOrbits(t *testing.T) {
	for _, v := range []struct {
		power   int
		c       string
		bailout float64
		n       int
		z, d    float64
	}{
		{2, "1", 1000, 6, 458330, 9224803},
		{2, "1", 676, 5, 677, 6813},
		{2, "1", 677, 6, 458330, 9224803}, // on the circle is not outside
		{2, "1", 4, 3, 5, 13},
		{2, "2", 1000, 4, 1446, 4637},
		{2, "-3", 4, 2, 6, -5}, // -3, 6: d = 2·(-3)+1
		{2, "2000", 1000, 1, 2000, 1},
		{3, "1", 1000, 5, 389017001, 3*730*730*11908 + 1},
		{3, "1", 100, 4, 730, 11908},
	} {
		r := iterate(t, Set{Power: v.power}, v.c, "0", 100, v.bailout)
		want := expect(v.n, v.power, v.z, v.d, v.bailout)
		hold(t, v.c, r, want)
	}
}

// expect applies the definitions to a known last term and derivative.
func expect(n, power int, z, d, bailout float64) Result {
	ln := math.Log(math.Abs(z))
	return Result{Escaped: true, N: n,
		Smooth:   float64(n) + 1 - math.Log(ln/math.Log(bailout))/math.Log(float64(power)),
		Distance: 64 * math.Abs(z) * ln / math.Abs(d)}
}

func hold(t *testing.T, name string, got, want Result) {
	t.Helper()
	if got.Escaped != want.Escaped || got.N != want.N {
		t.Errorf("%s: %+v, want %+v", name, got, want)
		return
	}
	if math.Abs(got.Smooth-want.Smooth) > 1e-14*math.Max(1, math.Abs(want.Smooth)) {
		t.Errorf("%s: smooth count %v, want %v", name, got.Smooth, want.Smooth)
	}
	if want.Escaped && math.Abs(got.Distance/want.Distance-1) > 1e-13 {
		t.Errorf("%s: distance %v, want %v", name, got.Distance, want.Distance)
	}
}

// TestBounded: -2, i, -1, 0 and 1/4 belong to the set (their orbits repeat or,
// for 1/4, grow towards 1/2: from the definition), and stay to the limit.
func TestBounded(t *testing.T) {
	for _, c := range [][2]string{{"-2", "0"}, {"0", "1"}, {"-1", "0"}, {"0", "0"}, {"0.25", "0"}} {
		if r := iterate(t, Set{Power: 2}, c[0], c[1], 5000, 1000); r.Escaped {
			t.Errorf("%s + %si: %+v", c[0], c[1], r)
		}
	}
}

// TestLimitAndStart: n = limit still escapes, n = limit + 1 does not; a Julia
// set counts from z_0, a Mandelbrot set from z_1 = c.
func TestLimitAndStart(t *testing.T) {
	for limit, escaped := range map[int]bool{5: false, 6: true, 7: true} {
		if r := iterate(t, Set{Power: 2}, "1", "0", limit, 1000); r.Escaped != escaped {
			t.Errorf("limit %d: %+v", limit, r)
		}
	}
	julia := Set{Power: 2, Julia: true, Parameter: [2]precision.Decimal{decimal(t, "1"), decimal(t, "0")}}
	// 0, 1, 2, 5, … with dz/dz_0 = 0 all along; and from 1: 1, 2, 5, 26, 677, 458330
	if r := iterate(t, julia, "0", "0", 50, 1000); r.N != 6 || !math.IsInf(r.Distance, 1) {
		t.Errorf("from 0: %+v", r)
	}
	hold(t, "from 1", iterate(t, julia, "1", "0", 50, 1000), expect(5, 2, 458330, 2*1*2*2*2*5*2*26*2*677, 1000))
	if r := iterate(t, julia, "600", "801", 50, 1000); r.N != 0 || !r.Escaped {
		t.Errorf("started outside: %+v", r)
	}
}

// TestClosedForms: Julia sets of c = 0 and c = -2 (Milnor, Dynamics in One
// Complex Variable). z^(p^n) gives the smooth count 1 - log_p(ln|z|/ln B) and
// the distance |z| ln|z|; with z = w + 1/w, c = -2 has w in z's place and the
// distance ln|w|·|w - 1/w|, both up to 1/B² of the potential.
func TestClosedForms(t *testing.T) {
	zero := [2]precision.Decimal{}
	for _, p := range []int{2, 3} {
		for _, z := range []string{"1.5", "1.01", "1.000000001", "-7"} {
			x, _ := decimal(t, z).Float(64).Float64()
			ln := math.Log(math.Abs(x))
			if z == "1.000000001" {
				ln = math.Log1p(1e-9)
			}
			r := iterate(t, Set{Power: p, Julia: true, Parameter: zero}, z, "0", 200, 1e6)
			want := 1 - math.Log(ln/math.Log(1e6))/math.Log(float64(p))
			n := int(math.Ceil(want)) - 1
			hold(t, z, r, Result{true, n, want, 64 * math.Abs(x) * ln})
		}
	}
	two := [2]precision.Decimal{decimal(t, "-2"), zero[1]}
	for _, w := range []float64{1.25, 2, 1.0078125} { // w + 1/w
		z := new(big.Float).SetPrec(300).SetFloat64(w)
		z.Add(z, new(big.Float).SetPrec(300).Quo(big.NewFloat(1), z))
		p := Point{Re: z, Im: new(big.Float).SetPrec(300), Pixel: precision.ExtOf(1.0 / 64)}
		r, err := Iterate(context.Background(), Set{Power: 2, Julia: true, Parameter: two}, p, 200, 1e6, 300)
		if err != nil {
			t.Fatal(err)
		}
		want, d := 1-math.Log2(math.Log(w)/math.Log(1e6)), 64*math.Log(w)*(w-1/w)
		if math.Abs(r.Smooth-want) > 2e-13 || math.Abs(r.Distance/d-1) > 3e-12 || r.N != int(math.Ceil(want))-1 {
			t.Errorf("w = %v: %+v, want %v and %v", w, r, want, d)
		}
	}
}

// TestComplex: multiplication of both parts, by an orbit of Gaussian integers:
// c = 1+i runs 1+i, 1+3i, -7+7i, 1-97i, -9407-193i, and under z³ 1+i, -1+3i,
// 27-17i (both by hand).
func TestComplex(t *testing.T) {
	r := iterate(t, Set{Power: 2}, "1", "1", 50, 1000)
	want := 6 - math.Log2(math.Log(math.Hypot(9407, 193))/math.Log(1000))
	if r.N != 5 || math.Abs(r.Smooth-want) > 1e-14 {
		t.Errorf("%+v, want 5 and %v", r, want)
	}
	r = iterate(t, Set{Power: 3}, "1", "1", 50, 30)
	want = 4 - math.Log(math.Log(math.Hypot(27, 17))/math.Log(30))/math.Log(3)
	if r.N != 3 || math.Abs(r.Smooth-want) > 1e-14 {
		t.Errorf("z³: %+v, want 3 and %v", r, want)
	}
}

// TestCancel: a cancelled context ends an endless sample.
func TestCancel(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	p := Point{Re: big.NewFloat(-1), Im: new(big.Float), Pixel: precision.ExtOf(1)}
	if _, err := Iterate(ctx, Set{Power: 2}, p, math.MaxInt, 1000, 64); !errors.Is(err, context.Canceled) {
		t.Errorf("error %v", err)
	}
}
