package kernel

import (
	"math"
	"testing"
)

// views are places at several depths, each with what makes it hard.
func views(t testing.TB) []scene {
	aside := tipSet(t, 280, 0.3) // the centre's own orbit passes 0 at 1e-160
	aside.name, aside.limit = "tip, aside", 30000
	return []scene{
		{name: "seahorses", re: "-0.7478", im: "0.1052", height: "3e-5", limit: 6000},
		small(t, "nucleus-1e-13"),
		{name: "tip", re: "-2", height: "1e-40", limit: 3000},
		small(t, "embedded-1e-60"), small(t, "cubic-1e-60"), small(t, "julia-cycle-1e-60"),
		small(t, "misiurewicz-1e-150"), small(t, "range-edge-1e-305"),
		deepSet(t), aside, small(t, "embedded-1e-500"),
		{name: "near i", im: "1", height: "1e-700", limit: 6000},
	}
}

// holdTogether compares two kernels of one view, sample by sample.
func holdTogether(t *testing.T, a, b *scene, samples int) {
	t.Helper()
	robust, worst := 0, 0.0
	for _, p := range a.spread(samples, 12) {
		f, g := a.kernel.Sample(p[0], p[1]), b.kernel.Sample(p[0], p[1])
		if f.State != Escaped || g.State != Escaped {
			if f.State == Escaped || g.State == Escaped {
				t.Errorf("%s %v: %v and %v", a.name, p, f.State, g.State)
			}
			continue // both bounded; one may be proved where the other is not
		}
		if a.robust(f.N, f.Smooth, f.Distance) {
			robust++
			if f.N != g.N {
				t.Errorf("%s %v: n = %d and %d", a.name, p, f.N, g.N)
			}
		}
		off := math.Abs(f.Smooth-g.Smooth) / a.allowed(f.Smooth, f.Distance)
		worst = math.Max(worst, off)
		if off > 1 {
			t.Errorf("%s %v: smooth counts %v and %v, distance %v", a.name, p, f.Smooth, g.Smooth, f.Distance)
		}
		if d := math.Abs(f.Distance/g.Distance - 1); d > allowedShare(f.Distance) {
			t.Errorf("%s %v: distances %v and %v", a.name, p, f.Distance, g.Distance)
		}
	}
	if robust < samples/3 {
		t.Errorf("%s: only %d of %d samples say anything", a.name, robust, samples)
	}
	t.Logf("%-20s %-6s %d robust samples, smooth counts within %.3f of what is allowed", a.name, a.regime(), robust, worst)
}

// TestLeaps: with leaps and without, samples come out the same. (Common
// practice, no source; without leaps the method is Martin's of 2013.)
func TestLeaps(t *testing.T) {
	samples := 60
	if testing.Short() {
		samples = 8
	}
	leaping := 0
	for _, v := range views(t) {
		w := v
		w.noTables = true
		a := v.build(t)
		if longest(a) >= 16 {
			leaping++
		}
		holdTogether(t, a, w.build(t), samples)
	}
	if leaping < 7 {
		t.Errorf("only %d views have leaps to speak of", leaping)
	}
}

// longest is the longest leap of a scene's tables.
func longest(s *scene) int {
	n := 0
	for _, g := range s.kernel.segs {
		if len(g.levels) > 0 {
			n = max(n, 4<<(len(g.levels)-1))
		}
	}
	return n
}

// TestReference: measured against a nucleus or against the centre's own orbit,
// samples come out the same.
func TestReference(t *testing.T) {
	nuclei := 0
	for _, v := range views(t) {
		if v.julia {
			continue
		}
		w := v
		w.centreOnly = true
		a, b := v.build(t), w.build(t)
		if a.ref == nil || a.ref.Kind == b.ref.Kind {
			continue
		}
		nuclei++
		holdTogether(t, a, b, 60)
	}
	if nuclei < 5 {
		t.Errorf("only %d views have a nucleus", nuclei)
	}
}

// TestRegimes: at one place the three regimes must continue each other. Views
// of one point at spacings on both sides of each limit (2^-20 from direct to
// double, 2^-340 from double to deep) show the same samples, scaled by two.
func TestRegimes(t *testing.T) {
	for _, v := range [][2]string{{"3.2e-5", "3.0e-5"}, {"7.16e-102", "7.13e-102"}} {
		a := (&scene{name: "near i " + v[0], im: "1", height: v[0], limit: 5000}).build(t)
		b := (&scene{name: "near i " + v[1], im: "1", height: v[1], limit: 5000}).build(t)
		if a.regime() == b.regime() {
			t.Fatalf("both %s: %v and %v", a.regime(), a.pixel, b.pixel)
		}
		ratio := a.pixel.Quo(b.pixel).Float64()
		for _, p := range a.spread(100, 13) {
			f := a.kernel.Sample(p[0], p[1])
			g := b.kernel.Sample(24+(p[0]-24)*ratio, 16+(p[1]-16)*ratio)
			if f.State != Escaped || g.State != Escaped {
				t.Fatalf("%v: %v and %v", p, f.State, g.State)
			}
			// The direct regime rounds the position itself, to 2^-53 of 1.
			bound := a.allowed(f.Smooth, f.Distance)
			if a.regime() == "direct" {
				bound += 0x1p-52 / a.pixel.Float64() / (math.Ln2 * f.Distance)
			}
			if math.Abs(f.Smooth-g.Smooth) > bound {
				t.Errorf("%s %v: %v and %v", a.name, p, f.Smooth, g.Smooth)
			}
		}
	}
}

// TestTurn: turning the view by a quarter gives the samples of the turned
// lattice points; the sign is that of a picture turned counter-clockwise on
// the paper. On paper, up shows what lay to the right.
func TestTurn(t *testing.T) {
	a := scene{re: "-0.7478", im: "0.1052", height: "3e-5", limit: 6000, width: 32, rows: 32}
	b := a
	b.cos, b.sin = 0, 1
	a.build(t)
	b.build(t)
	for _, p := range a.spread(50, 14) {
		x, y := p[0]-16, 16-p[1]
		// counter-clockwise by 90°: (x, y) → (-y, x)
		f, g := a.kernel.Sample(p[0], p[1]), b.kernel.Sample(16-y, 16-x)
		if f != g {
			t.Errorf("%v: %v and, turned, %v", p, f, g)
		}
	}
}
