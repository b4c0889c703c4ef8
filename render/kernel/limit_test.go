package kernel

import (
	"math"
	"testing"
)

// TestLimit: the limit is the last index looked at. A sample whose first index
// outside is n escapes with limit n and is undecided with limit n-1, whether it
// gets there by steps or by leaps. (The project's own convention.)
func TestLimit(t *testing.T) {
	for _, v := range append(views(t), scene{name: "whole", re: "-0.6", height: "2.6", limit: 3000}) {
		s := v.build(t)
		held := 0
		for _, p := range s.spread(20, 30) {
			f := s.kernel.Sample(p[0], p[1])
			if f.State != Escaped || f.N < 2 {
				continue
			}
			held++
			k := *s.kernel
			k.cfg.Limit = f.N
			if g := k.Sample(p[0], p[1]); g != f && !s.sameButRounding(f, g) {
				t.Errorf("%s %v: %v, with its own n as limit %v", s.name, p, f, g)
			}
			k.cfg.Limit = f.N - 1
			if g := k.Sample(p[0], p[1]); g.State == Escaped {
				t.Errorf("%s %v: %v, and with a limit below n still %v", s.name, p, f, g)
			}
		}
		if held < 5 {
			t.Errorf("%s: only %d samples", s.name, held)
		}
	}
}

// sameButRounding: the limit forbids leaps beyond it, so the last iterations
// may be taken by other steps.
func (s *scene) sameButRounding(f, g Field) bool {
	return g.State == Escaped && f.N == g.N && math.Abs(f.Smooth-g.Smooth) <= s.allowed(f.Smooth, f.Distance)
}

// TestLimitIsReached: what stays bounded is followed to the limit, and not one
// iteration further, however large.
func TestLimitIsReached(t *testing.T) {
	limits := []int{1, 2, 3, 64, 65, 1000, 999983}
	for _, v := range []scene{
		{name: "tip", re: "-2", height: "1e-60", noTables: true}, // never escapes at the centre
		small(t, "tip-1e-2000"),
		{name: "near i", im: "1", height: "1e-400"},
	} {
		for _, limit := range limits {
			w := v
			w.limit = limit
			s := w.build(t)
			l := s.kernel.start(0, 0)
			if got := s.kernel.run(&l, limit); got == Escaped || got == Undecided && l.n != limit {
				t.Errorf("%s: %v at %d, limit %d", s.name, got, l.n, limit)
			}
		}
	}
	s := whole(t, 0)
	for _, limit := range limits {
		s.kernel.cfg.Limit = limit
		d := directLane{zr: -2, cr: -2, add: 1, gr: 1, w: 1, n: 1}
		if got := s.kernel.runDirect(&d); got != Undecided || d.n != limit {
			t.Errorf("-2: %v at %d, limit %d", got, d.n, limit)
		}
	}
}

// TestBailout: counts, smooth counts and distances for radii other than the
// usual one, against direct iteration.
func TestBailout(t *testing.T) {
	for _, bailout := range []float64{4, 32, 1e6} {
		for _, v := range []scene{
			{name: "whole", re: "-0.6", height: "2.6", limit: 2000},
			{name: "julia", height: "3", julia: true, paramRe: "-0.8", paramIm: "0.156", limit: 2000},
			{name: "cubic", height: "2.6", power: 3, limit: 1000},
			{name: "near i", im: "1", height: "1e-25", limit: 3000},
			small(t, "embedded-1e-60"), small(t, "cubic-1e-60"), small(t, "range-edge-1e-305"),
		} {
			v.bailout = bailout
			s := v.build(t)
			var n tally
			samples := 40
			if s.limit > 20000 {
				samples = 4
			}
			for _, p := range s.spread(samples, 31) {
				s.compare(t, &n, p[0], p[1], s.kernel.Sample(p[0], p[1]), s.exact(t, p[0], p[1]))
			}
			if n.robust < samples/3 {
				t.Errorf("%s: only %d robust samples", s.name, n.robust)
			}
			if n.worst == 0 && s.regime() != "direct" {
				t.Errorf("%s, bailout %g: no difference at all is not to be believed", s.name, bailout)
			}
		}
	}
}

// TestStart: a sample that starts outside has n = 1 in a Mandelbrot set, whose
// z_1 is c, and n = 0 in a Julia set; one on the circle |z| = bailout has not
// left it.
func TestStart(t *testing.T) {
	m := (&scene{re: "0", height: "8192", width: 4096, rows: 4096, limit: 50}).build(t)
	j := (&scene{height: "8192", width: 4096, rows: 4096, limit: 50, julia: true, paramRe: "0.1"}).build(t)
	for _, v := range []struct {
		c       complex128
		n, atM1 int
	}{{1002, 0, 1}, {complex(-600, 802), 0, 1}, {1000, 1, 2}, {complex(600, 800), 1, 2}, {998, 1, 2}} {
		x, y := m.lattice(v.c)
		if f := m.kernel.Sample(x, y); f.State != Escaped || f.N != v.atM1 {
			t.Errorf("Mandelbrot set, %v: %v", v.c, f)
		}
		if f := j.kernel.Sample(x, y); f.State != Escaped || f.N != v.n {
			t.Errorf("Julia set, %v: %v", v.c, f)
		}
	}
}
