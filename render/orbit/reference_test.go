package orbit

import (
	"context"
	"errors"
	"fmt"
	"math"
	"testing"
	"time"

	"leadline/precision"
)

// TestAgainstBigFloat iterates the reference's starting point in big floats at
// twice the bits. Each point must be the nearest doubles, but for a unit in the
// last place where rounding in fixed point tips it: the reference has 64 bits
// more than the pixels need, and its error grows no faster than a pixel does.
func TestAgainstBigFloat(t *testing.T) {
	for _, v := range []struct {
		power          int
		re, im, height string
		limit          int
	}{
		{2, "-0.74", "0.11", "1e-12", 3000},
		{2, "-1.99999999999999999999999999999999912", "0", "1e-36", 800},
		{2, "0.16882176686495031358749720031246248319322770", "0.59288678369462364175396986240150261573225680", "5.0e-31", 3000},
		{2, "0", "1.0000000000000000000000000000000000000000000000000000000000001", "1e-62", 2000},
		{3, "0.2549138751881531557308864078632925821775710818000681562019770646759804025",
			"0.9486946047371013521710161205989600354077138701554553708528573187164578890", "2.0e-60", 3000},
	} {
		q := request(t, v.power, v.re, v.im, v.height, v.limit)
		r := reference(t, q)
		c := numberOf(r.Re, r.Im, 2*r.Bits)
		z := number{c.re, c.im}
		if r.Points[0] != (Z{}) {
			t.Errorf("%s: z_0 = %v", v.re, r.Points[0])
		}
		for n := 1; n < len(r.Points); n++ {
			if r.Period > 0 && n > r.Period-1 {
				break // from there on it goes round
			}
			re, im := z.doubles()
			size := math.Max(cabs(re, im), 1e-6)
			if d := cabs(re-r.Points[n].Re, im-r.Points[n].Im); d > size*0x1p-52 {
				t.Fatalf("%s: z_%d = %v, want (%v, %v)", v.re, n, r.Points[n], re, im)
			}
			z = z.next(v.power, c)
		}
		t.Logf("%s …: %s, %d points, %d bits", v.re[:min(12, len(v.re))], r.Kind, len(r.Points), r.Bits)
	}
}

// TestEscape: a reference that escapes ends with its first point outside.
func TestEscape(t *testing.T) {
	r := reference(t, request(t, 2, "-0.7478", "0.2", "1e-12", 3000))
	last := len(r.Points) - 1
	if cabs(r.Points[last].Re, r.Points[last].Im) <= 1000 || cabs(r.Points[last-1].Re, r.Points[last-1].Im) > 1000 {
		t.Errorf("ends with %v, %v", r.Points[last-1], r.Points[last])
	}
	if s := r.Segments[0]; s.End != last || s.Wrap != -1 || r.Period != 0 || r.Kind != Centre {
		t.Errorf("%+v, period %d, %s", s, r.Period, r.Kind)
	}
	// Nothing escapes, nothing closes: the limit ends it, and never less.
	q := request(t, 2, "-1.9", "0", "1e-25", 777)
	q.Radius = precision.Ext{}
	if r := reference(t, q); len(r.Points) != 778 {
		t.Errorf("%d points for a limit of 777", len(r.Points))
	}
}

// TestClosing: orbits that close exactly: c = i falls on a cycle of period 2,
// -2 on a fixed point, 0 stays (the Julia set's orbit of z = 0 with c = 0), -1
// has period 2 from the start (from the definition, by hand). Brent's method
// (1980) finds the cycle within a few turns; it is repeated for the leaps.
func TestClosing(t *testing.T) {
	for _, v := range []struct {
		re, im string
		period int
		cycle  []Z // in order, from anywhere
	}{
		{"0", "1", 2, []Z{{-1, 1}, {0, -1}}},
		{"-2", "0", 1, []Z{{2, 0}}},
	} {
		for _, height := range []string{"1e-20", "1e-500"} {
			r := reference(t, request(t, 2, v.re, v.im, height, 100000))
			s := r.Segments[0]
			if r.Period != v.period || r.Kind != Centre || s.Wrap < 0 || (s.End-s.Wrap)%v.period != 0 || s.End < closedAtLeast || s.End > closedAtLeast+v.period {
				t.Errorf("%s + %si: period %d, %+v, %s", v.re, v.im, r.Period, s, r.Kind)
				continue
			}
			for i := s.Wrap; i+v.period <= s.End; i++ {
				if r.Points[i] != r.Points[i+v.period] {
					t.Fatalf("%s + %si: %v to %v", v.re, v.im, r.Points[i], r.Points[i+v.period])
				}
			}
			in := false
			for _, z := range v.cycle {
				in = in || z == r.Points[s.Wrap]
			}
			if !in {
				t.Errorf("%s + %si wraps at %v", v.re, v.im, r.Points[s.Wrap])
			}
		}
	}
	q := request(t, 2, "0", "0", "1e-20", 1000)
	q.Radius = precision.Ext{}
	if r := reference(t, q); r.Period != 1 || r.Segments[0].Wrap < 0 {
		t.Errorf("0: %+v", r.Segments)
	}
	if r := reference(t, request(t, 2, "-1", "0", "1e-20", 1000)); r.Period != 2 || r.Segments[0].Wrap != 0 || r.Segments[0].End < wrapAtLeast {
		t.Errorf("-1: period %d, %+v", r.Period, r.Segments)
	}
}

// TestJulia: a Julia set's reference is the centre's orbit followed by the
// critical one.
func TestJulia(t *testing.T) {
	q := request(t, 2, "0.3", "0.2", "1e-12", 500)
	q.Julia = true
	q.Parameter = [2]precision.Decimal{decimal(t, "-0.8"), decimal(t, "0.156")}
	r := reference(t, q)
	if len(r.Segments) != 2 {
		t.Fatalf("%d segments", len(r.Segments))
	}
	a, b := r.Segments[0], r.Segments[1]
	if a.Start != 0 || b.Start != a.End+1 || b.End != len(r.Points)-1 || r.Rebase != b.Start {
		t.Errorf("%+v of %d points, rebase at %d", r.Segments, len(r.Points), r.Rebase)
	}
	if r.Points[0] != (Z{0.3, 0.2}) || r.Points[r.Rebase] != (Z{}) || r.Points[r.Rebase+1] != (Z{-0.8, 0.156}) {
		t.Errorf("starts: %v, %v, %v", r.Points[0], r.Points[r.Rebase], r.Points[r.Rebase+1])
	}
	c := numberOf(q.Parameter[0], q.Parameter[1], 600)
	z := numberOf(q.Centre[0], q.Centre[1], 600)
	for n := 0; n <= min(a.End, 60); n++ {
		re, im := z.doubles()
		if d := cabs(re-r.Points[n].Re, im-r.Points[n].Im); d > 0x1p-50*math.Max(1, cabs(re, im)) {
			t.Fatalf("z_%d = %v, want (%v, %v)", n, r.Points[n], re, im)
		}
		z = z.next(2, c)
	}
	if r.Length != len(r.Points) || r.Kind != Centre {
		t.Errorf("length %d of %d points, %s", r.Length, len(r.Points), r.Kind)
	}
}

// TestTiny: near -1, whose orbit is 0, -1, 0, …, the point z_2 = c² + c of
// c = -1 + 10^-400 is -10^-400 + 10^-800, far below the doubles; At must know it.
func TestTiny(t *testing.T) {
	re := "-0." + nines(400)
	q := request(t, 2, re, "0", "1e-420", 40)
	q.Radius = precision.Ext{}
	r := reference(t, q)
	if r.Points[2].Re != 0 {
		t.Fatalf("z_2 = %v in doubles", r.Points[2])
	}
	want := decimal(t, "-1e-400").Ext()
	z := r.At(2)
	if got := (precision.Ext{M: z.Re, E: z.E}); got.Sub(want).Abs().Cmp(want.Abs().Ldexp(-50)) > 0 || z.Im != 0 {
		t.Errorf("z_2 = %v, want %v", z, want)
	}
	if z := r.At(1); z.Re != -0.5 || z.E != 1 {
		t.Errorf("z_1 = %v", z)
	}
}

func nines(n int) string {
	b := make([]byte, n)
	for i := range b {
		b[i] = '9'
	}
	return string(b)
}

// TestCancel: a reference that would take minutes gives way at once.
func TestCancel(t *testing.T) {
	q := request(t, 2, "-1.9", "0", "1e-3000", 100_000_000)
	q.Radius = precision.Ext{}
	ctx, cancel := context.WithTimeout(context.Background(), 30*time.Millisecond)
	defer cancel()
	start := time.Now()
	_, err := New(ctx, q)
	if !errors.Is(err, context.DeadlineExceeded) {
		t.Errorf("error %v", err)
	}
	if d := time.Since(start); d > 3*time.Second {
		t.Errorf("gave way after %v", d)
	}
	// So does the search for a nucleus, whose single Newton steps are long.
	ctx, stop := context.WithCancel(context.Background())
	q = request(t, 2, "0.16882176686495031358749720031246248319322770", "0.59288678369462364175396986240150261573225680", "5.0e-31", 100000)
	q.Progress = func(p Progress) {
		if p.Stage == "nucleus" {
			stop()
		}
	}
	if _, err := New(ctx, q); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled in the nucleus: %v", err)
	}
	stop()
}

// TestProgress: signs of life come in order and name their stage.
func TestProgress(t *testing.T) {
	q := request(t, 2, "-1.9", "0", "1e-25", 5000)
	q.Radius = precision.Ext{}
	last, calls := 0, 0
	q.Progress = func(p Progress) {
		calls++
		if p.Stage != "orbit" || p.Done <= last || p.Done > p.Of || p.Of != 5000 {
			t.Errorf("%+v after %d", p, last)
		}
		last = p.Done
	}
	reference(t, q)
	if calls < 5000/checkEvery {
		t.Errorf("only %d signs of life in 5000 iterations", calls)
	}
}

// BenchmarkReference is an iteration of the reference at several precisions.
func BenchmarkReference(b *testing.B) {
	for _, bits := range []uint{128, 512, 1100, 3400, 10000, 33000} {
		for _, power := range []int{2, 3} {
			b.Run(fmt.Sprintf("power %d, %d bits", power, bits), func(b *testing.B) {
				w := walkerFor(b, power, bits)
				c := precision.NewFixed(decimal(b, "-0.4123456789123456789"), decimal(b, "0.3123456789123456789"), bits)
				z := new(precision.Fixed).Set(c)
				for b.Loop() {
					w.step(z, c)
				}
			})
		}
	}
}
