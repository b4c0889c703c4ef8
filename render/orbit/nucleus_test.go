package orbit

import (
	"fmt"
	"math"
	"math/big"
	"testing"

	"leadline/precision"
)

// TestRealPeriod3: the nuclei of period 3 are the roots of c³ + 2c² + c + 1
// (z_3/c = (c²+c)² /c + 1: from the definition). Its one real root, found here by
// Newton's method on the cubic in big floats, is where the package must arrive.
func TestRealPeriod3(t *testing.T) {
	const bits = 264
	f := func(x float64) *big.Float { return new(big.Float).SetPrec(bits).SetFloat64(x) }
	c := f(-1.75)
	for range 10 {
		c2 := new(big.Float).Mul(c, c)
		p := new(big.Float).Mul(c2, c)
		p.Add(p, new(big.Float).Mul(f(2), c2)).Add(p, c).Add(p, f(1))
		d := new(big.Float).Mul(f(3), c2)
		d.Add(d, new(big.Float).Mul(f(4), c)).Add(d, f(1))
		c.Sub(c, p.Quo(p, d))
	}
	w := walkerFor(t, 2, bits)
	got, err := w.newton(fixed(-1.75, 0, bits), 3)
	if err != nil || got == nil {
		t.Fatalf("no nucleus: %v", err)
	}
	if got.Im.Sign() != 0 {
		t.Errorf("the real nucleus has the imaginary part %v", &got.Im)
	}
	diff := new(big.Float).Sub(float(got), c)
	if diff.Sign() != 0 && diff.MantExp(nil) > -254 {
		t.Errorf("%.70g, want %.70g", float(got), c)
	}
	// And from a view, found by its ball.
	r := reference(t, request(t, 2, "-1.754877666", "0.00000000001", "1e-8", 5000))
	if r.Kind != Nucleus || r.Period != 3 {
		t.Fatalf("%s, period %d", r.Kind, r.Period)
	}
	diff.Sub(r.Re.Float(bits), c)
	if diff.Sign() != 0 && diff.MantExp(nil) > -int(r.Bits)+4 {
		t.Errorf("reference starts at %s, want %.40g (off by %.3g)", r.Re, c, diff)
	}
}

// nuclei finds all nuclei of a period by Newton's method from a grid of starts,
// and from a finer row on the real axis, whose nuclei crowd towards -2.
func nuclei(t *testing.T, power, period, grid int) map[string]bool {
	t.Helper()
	const bits = 96
	w := walkerFor(t, power, bits)
	found := map[string]bool{}
	try := func(re, im float64) {
		c, err := w.newton(fixed(re, im, bits), period)
		if err != nil {
			t.Fatal(err)
		}
		if c == nil || lower(w, c, period) {
			return
		}
		a, b := c.Complex()
		// Grid lines of 1e-9 moved off all symmetry axes.
		found[fmt.Sprintf("%d %d", int64(math.Round(a*1e9+0.317)), int64(math.Round(b*1e9+0.271)))] = true
	}
	for y := range grid {
		for x := range grid {
			try(4*(float64(x)+0.37)/float64(grid)-2, 4*(float64(y)+0.61)/float64(grid)-2)
		}
	}
	for x := range 1000 {
		try(-2.0001+float64(x)/500, 0)
	}
	return found
}

// lower reports whether the orbit of 0 under c closes before period.
func lower(w *walker, c *precision.Fixed, period int) bool {
	z := &precision.Fixed{Frac: w.frac}
	for n := 1; n < period; n++ {
		if w.step(z, c); z.Ext().Abs().Cmp(precision.ExtOf(1e-12)) < 0 {
			return true
		}
	}
	return false
}

// TestNucleiCount: the numbers of nuclei of period n of z² + c are 1, 1, 3, 6,
// 15, 27, 63 (OEIS A000740), their sum over the divisors of n being the degree
// 2^(n-1) of z_n in c. For z³ + c the degree is 3^(n-1), so 1, 2, 8, 24.
func TestNucleiCount(t *testing.T) {
	want := map[int][]int{2: {1, 1, 3, 6, 15, 27, 63}, 3: {1, 2, 8, 24}}
	for power, counts := range want {
		if testing.Short() {
			counts = counts[:4]
		}
		for i, n := range counts {
			if got := len(nuclei(t, power, i+1, 24+8*i)); got != n {
				t.Errorf("z^%d + c: %d nuclei of period %d, want %d", power, got, i+1, n)
			}
		}
	}
}

// TestFeigenbaum follows the real nuclei of periods 1, 2, 4, … Their gaps
// shrink by Feigenbaum's δ = 4.669201609102990671853… (Feigenbaum 1978; OEIS
// A006890), and the distances of 0 to the nearest other point of the cycle by
// -α, α = 2.502907875095892822… (OEIS A006891).
func TestFeigenbaum(t *testing.T) {
	const bits, delta, alpha = 256, 4.669201609102990671853, 2.502907875095892822
	w := walkerFor(t, 2, bits)
	nearest := []float64{0, -1}
	gap := []float64{0, -1}
	prev := fixed(-1, 0, bits)
	last := 11
	if testing.Short() {
		last = 8
	}
	for n := 2; n <= last; n++ {
		start := new(precision.Fixed).Set(prev)
		ratio := 4.0
		if n > 2 {
			ratio = delta
		}
		start.AddExt(precision.NewExtComplex(gap[n-1]/ratio, 0, 0))
		got, err := w.newton(start, 1<<n)
		if err != nil || got == nil {
			t.Fatalf("period %d: no nucleus (%v)", 1<<n, err)
		}
		if lower(w, got, 1<<n) {
			t.Fatalf("period %d: of lower period", 1<<n)
		}
		g, _ := new(big.Float).Sub(float(got), float(prev)).Float64()
		gap = append(gap, g)
		z := &precision.Fixed{Frac: bits}
		for range 1 << (n - 1) {
			w.step(z, got)
		}
		near, _ := z.Complex()
		nearest = append(nearest, near)
		x, _ := got.Complex()
		prev = got
		t.Logf("period %4d at %.15f: δ ≈ %.9f, α ≈ %.9f", 1<<n, x, gap[n-1]/gap[n], -nearest[n-1]/nearest[n])
	}
	// δ_n approaches δ by a constant factor at every doubling, so Aitken's
	// extrapolation (1926) from three gains several digits.
	most := 2e-8
	if testing.Short() {
		most = 1e-5
	}
	ratio := func(v []float64, n int) float64 { return v[n-1] / v[n] }
	limit := func(v []float64) float64 {
		x, y, z := ratio(v, last-2), ratio(v, last-1), ratio(v, last)
		return z - (z-y)*(z-y)/((z-y)-(y-x))
	}
	t.Logf("extrapolated: δ ≈ %.10f, α ≈ %.10f", limit(gap), -limit(nearest))
	if got := limit(gap); math.Abs(got-delta) > most {
		t.Errorf("δ ≈ %.10f from periods up to %d, want %.10f within %.0e", got, 1<<last, delta, most)
	}
	if got := -limit(nearest); math.Abs(got-alpha) > most {
		t.Errorf("α ≈ %.10f from periods up to %d, want %.10f within %.0e", got, 1<<last, alpha, most)
	}
}

// TestNucleusIsClosed: a nucleus's orbit returns to 0, and the reference wraps
// there, having gone round often enough to be worth its while.
func TestNucleusIsClosed(t *testing.T) {
	for _, v := range []struct {
		power, period  int
		re, im, height string
	}{
		{2, 3, "-0.1225611668766536", "0.7448617666197442", "1e-9"},
		{2, 5, "-0.5043401754462", "0.5627657614529", "1e-11"},
		{2, 3, "-1.75487766624669", "0", "1e-13"},
		{2, 717, "0.16882176686495031358749720031246248319322770", "0.59288678369462364175396986240150261573225680", "5.0e-31"},
		{3, 2, "0.00000000001", "1", "1e-9"},
		{3, 1113, "0.2549138751881531557308864078632925821775710818000681562019770646759804025",
			"0.9486946047371013521710161205989600354077138701554553708528573187164578890", "2.0e-60"},
	} {
		r := reference(t, request(t, v.power, v.re, v.im, v.height, 100000))
		if r.Kind != Nucleus || r.Period != v.period {
			t.Errorf("%s: %s of period %d, want %d", v.re, r.Kind, r.Period, v.period)
			continue
		}
		s := r.Segments[0]
		if len(r.Segments) != 1 || s.Start != 0 || s.Wrap != 0 || s.End%v.period != 0 || s.End < 256 || s.End != len(r.Points)-1 {
			t.Errorf("%s: segment %+v of %d points", v.re, s, len(r.Points))
		}
		if r.Points[s.End] != (Z{}) || r.Points[0] != (Z{}) {
			t.Errorf("%s: from %v to %v", v.re, r.Points[0], r.Points[s.End])
		}
		for i := v.period; i <= s.End; i++ {
			if r.Points[i] != r.Points[i-v.period] {
				t.Fatalf("%s: point %d is not point %d", v.re, i, i-v.period)
			}
		}
		if got, want := len(r.Points), s.End+1; got != want || r.Length != want {
			t.Errorf("%s: %d points, length %d, want %d", v.re, got, r.Length, want)
		}
		holdNucleus(t, r, v.power)
	}
}

// holdNucleus checks the starting point as written, at twice the precision: it
// must return to 0 within a millionth of a pixel, as far as that moves z_p.
func holdNucleus(t *testing.T, r *Reference, power int) {
	t.Helper()
	bits := 2*r.Bits + 64
	c := numberOf(r.Re, r.Im, bits)
	z, d := c, precision.NewExtComplex(1, 0, 0)
	for range r.Period - 1 {
		x := precision.ExtComplexOf(precision.ExtOfBig(z.re), precision.ExtOfBig(z.im))
		d = r.Map.Derivative(x).Mul(d).Add(precision.NewExtComplex(1, 0, 0))
		z = z.next(power, c)
	}
	x := precision.ExtComplexOf(precision.ExtOfBig(z.re), precision.ExtOfBig(z.im))
	if x.IsZero() {
		return
	}
	pixel := precision.Ext{M: 1, E: int64(precision.Guard) - int64(r.Bits)} // or more
	if off := x.Quo(d).Abs(); off.Cmp(pixel.Ldexp(-20)) > 0 {
		t.Errorf("%s misses its nucleus by %v, pixels are %v", r.Re, off, pixel)
	}
}

// TestOffset: the reference point plus the offset is the centre.
func TestOffset(t *testing.T) {
	q := request(t, 2, "-1.75487766623", "0.00000000003", "1e-9", 5000)
	r := reference(t, q)
	if r.Kind != Nucleus {
		t.Fatal(r.Kind)
	}
	bits := uint(200)
	re := new(big.Float).Sub(q.Centre[0].Float(bits), r.Re.Float(bits))
	im := new(big.Float).Sub(q.Centre[1].Float(bits), r.Im.Float(bits))
	want := precision.ExtComplexOf(precision.ExtOfBig(re), precision.ExtOfBig(im))
	if d := r.Offset.Sub(want).Abs(); d.Cmp(q.Pixel.Ldexp(-40)) > 0 {
		t.Errorf("offset %v, want %v", r.Offset, want)
	}
	if d := r.Offset.Abs(); d.Cmp(q.Radius.Ldexp(1)) > 0 {
		t.Errorf("the nucleus lies %v from the centre", d)
	}
}
