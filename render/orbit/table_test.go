package orbit

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"leadline/precision"
)

// TestLeapsAgainstSteps is the promise of a table: a leap whose radius holds
// |δ| differs from the steps it stands for by little. Steps are taken in
// extended range with the full formula. A single iteration leaves out less
// than Epsilon of its linear part; along a leap those shares add up, each
// carried on by the same derivative as the rest, so a leap of L iterations is
// off by at most L·Epsilon of |A||δ| + |B||δc|, which leaves room for the few
// roundings of 2^-53 an iteration.
func TestLeapsAgainstSteps(t *testing.T) {
	for _, v := range []struct {
		power          int
		re, im, height string
		limit          int
	}{
		{2, "0.16882176686495031358749720031246248319322770", "0.59288678369462364175396986240150261573225680", "5.0e-31", 40000},
		{3, "0.2549138751881531557308864078632925821775710818000681562019770646759804025",
			"0.9486946047371013521710161205989600354077138701554553708528573187164578890", "2.0e-60", 30000},
		{2, "0", "1." + zeros(600) + "1", "1e-604", 3000},
		{2, "-1." + nines(330) + "8", "0", "1e-334", 3000},
	} {
		q := request(t, v.power, v.re, v.im, v.height, v.limit)
		r := reference(t, q)
		far := q.Radius.Add(r.Offset.Abs())
		table := r.Tables(far, q.Pixel.E, 1000)[0]
		if len(table.Levels) < 3 {
			t.Errorf("%s: only %d levels", v.re, len(table.Levels))
			continue
		}
		rnd := rand.New(rand.NewPCG(60, 60))
		worst, held := 0.0, 0
		for level := range table.Levels {
			for range 200 {
				off, ok := holdLeap(t, r, q, table, level, far, rnd)
				if ok {
					held++
					worst = math.Max(worst, off)
				}
			}
		}
		if held < 200 {
			t.Errorf("%s: only %d leaps held anywhere", v.re, held)
		}
		t.Logf("%.12s… power %d: %d leaps of up to %d iterations, off by at most %.2f of L·2^-48", v.re, v.power,
			held, 1<<(ShortestLeap+len(table.Levels)-1), worst)
	}
}

// holdLeap tries one leap of a level. The error is returned as a share of what
// is allowed.
func holdLeap(t *testing.T, r *Reference, q Request, table *Table, level int, far precision.Ext, rnd *rand.Rand) (float64, bool) {
	t.Helper()
	v := &table.Levels[level]
	k, length := rnd.IntN(len(v.Key)), 1<<(ShortestLeap+level)
	if v.Key[k] == math.MinInt64 {
		return 0, false
	}
	radius := rootOfKey(v.Key[k])
	turn := func(size precision.Ext) precision.ExtComplex {
		s, c := math.Sincos(2 * math.Pi * rnd.Float64())
		return precision.NewExtComplex(c*size.M, s*size.M, size.E)
	}
	delta := turn(radius.Mul(precision.ExtOf(math.Pow(2, -20*rnd.Float64()*rnd.Float64()))))
	if delta.Key() >= v.Key[k] {
		delta = delta.Scale(0.999)
	}
	dc := turn(far.Mul(precision.ExtOf(rnd.Float64())))
	l := &v.Leap[k]
	a, b := l.A().Mul(delta), l.B().Mul(dc.Ldexp(-q.Pixel.E))
	leapt := a.Add(b)
	m := table.First + k*length
	for i := range length {
		delta = q.Map.Step(r.At(m+i), delta).Add(dc)
	}
	size := a.Abs().Add(b.Abs()).Mul(precision.ExtOf(float64(length) * Epsilon))
	off := leapt.Sub(delta).Abs().Quo(size).Float64()
	if off > 1 {
		t.Errorf("a leap of %d at %d is off by %.2f of what is allowed: %v, by steps %v", length, m, off, leapt, delta)
	}
	return off, true
}

// rootOfKey is the modulus that a key stands for, to 40 bits.
func rootOfKey(key int64) precision.Ext {
	e := key >> 41 // half the exponent field
	rest := key - e<<41
	return precision.ExtOf(math.Sqrt(math.Float64frombits(uint64(rest+1023<<40) << 12))).Ldexp(e).Ldexp(-511).Mul(precision.ExtOf(math.Sqrt(0.5)))
}

func zeros(n int) string { return fmt.Sprintf("%0*d", n, 0) }

// TestKeys: rootOfKey undoes precision's keys.
func TestKeys(t *testing.T) {
	for _, x := range []precision.Ext{{M: 0.75, E: 0}, {M: 0.6, E: -1500}, {M: 0.51, E: 77}, {M: 0.99, E: -3001}} {
		got := rootOfKey(precision.KeyOfSquare(x))
		if d := got.Sub(x).Abs(); d.Cmp(x.Ldexp(-38)) > 0 {
			t.Errorf("%v comes back as %v", x, got)
		}
	}
}

// TestLevels: leaps never reach past the segment, radii never grow with the
// level, and no leap passes where the reference is about to escape.
func TestLevels(t *testing.T) {
	q := request(t, 2, "-0.7478", "0.1052", "1e-18", 40000)
	q.Radius = precision.ExtOf(1e-18)
	r := reference(t, q)
	for _, bailout := range []float64{4, 1000} {
		table := r.Tables(q.Radius, q.Pixel.E, bailout)[0]
		s := r.Segments[0]
		stop := math.Min(flat, bailout/2)
		for i, v := range table.Levels {
			length := 1 << (ShortestLeap + i)
			if len(v.Key) != len(v.Leap) || table.First+len(v.Key)*length > s.End+1 {
				t.Errorf("level %d: %d leaps of %d in %d points", i, len(v.Key), length, s.End)
			}
			for k, key := range v.Key {
				if i > 0 {
					below := table.Levels[i-1].Key
					if key > below[2*k] {
						t.Errorf("level %d, leap %d: holds farther than the shorter leap", i, k)
					}
				}
				if key == math.MinInt64 {
					continue
				}
				for m := table.First + k*length; m < table.First+(k+1)*length; m++ {
					if p := r.Points[m]; cabs(p.Re, p.Im) > stop {
						t.Fatalf("bailout %g, level %d: a leap holds over |z_%d| = %g", bailout, i, m, cabs(p.Re, p.Im))
					}
				}
			}
		}
	}
}

// TestTablesAlike: tables do not depend on how many cores made them.
func TestTablesAlike(t *testing.T) {
	q := request(t, 2, "0.16882176686495031358749720031246248319322770", "0.59288678369462364175396986240150261573225680", "5.0e-29", 40000)
	q.Radius = precision.Ext{}
	r := reference(t, q)
	if len(r.Points) < 5000 {
		t.Fatalf("only %d points: no work to share", len(r.Points))
	}
	a, b := r.Tables(q.Pixel.Ldexp(8), q.Pixel.E, 1000), alone(func() []*Table { return r.Tables(q.Pixel.Ldexp(8), q.Pixel.E, 1000) })
	if len(a[0].Levels) != len(b[0].Levels) {
		t.Fatalf("%d and %d levels", len(a[0].Levels), len(b[0].Levels))
	}
	for i := range a[0].Levels {
		for k, key := range a[0].Levels[i].Key {
			if key != b[0].Levels[i].Key[k] || a[0].Levels[i].Leap[k] != b[0].Levels[i].Leap[k] {
				t.Fatalf("level %d, leap %d differ", i, k)
			}
		}
	}
}
