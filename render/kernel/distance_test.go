package kernel

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"
)

// koebe returns what a field's distance estimate d and its potential G allow
// the true distance to be. For the outside of a connected set
//
//	sinh G / (2·e^G·|∇G|) <= distance <= 2·sinh G/|∇G|
//
// (Milnor, Dynamics in One Complex Variable, from Koebe's quarter theorem),
// and d = G/|∇G|, so near the set d/2 and 2d are the bounds. first is 1 for a
// Julia set, whose orbits start at z_0, and 2 for the Mandelbrot set, whose
// z_1 is c.
func (s *scene) koebe(f Field, first float64) (least, most float64) {
	g := math.Log(s.bailout) * math.Pow(float64(s.power), first-f.Smooth)
	d := f.Distance * s.pixel.Float64()
	return d * -math.Expm1(-2*g) / (4 * g), 2 * d * math.Sinh(g) / g
}

// TestKoebeJulia: the filled Julia sets of c = 0 (the unit disc, for every
// power) and c = -2 (the segment [-2, 2]) have distances that anyone can
// measure.
func TestKoebeJulia(t *testing.T) {
	disc := func(z complex128) float64 { return cmplx.Abs(z) - 1 }
	line := func(z complex128) float64 {
		return math.Hypot(imag(z), math.Max(math.Abs(real(z))-2, 0))
	}
	for _, v := range []struct {
		power int
		param string
		of    func(complex128) float64
	}{{2, "0", disc}, {3, "0", disc}, {2, "-2", line}} {
		s := &scene{height: "20", rows: 1 << 14, width: 1 << 14, power: v.power, limit: 4000,
			julia: true, paramRe: v.param}
		s.build(t)
		r := rand.New(rand.NewPCG(1, 1))
		for range 4000 {
			z := complex(2.2*r.NormFloat64(), math.Pow(10, 1-6*r.Float64()))
			if v.power == 3 || v.param == "0" {
				z = cmplx.Rect(1+imag(z), real(z))
			}
			holdKoebe(t, s, z, 1, v.of(z), v.of(z))
		}
	}
}

// holdKoebe checks a point whose distance lies in low … high.
func holdKoebe(t *testing.T, s *scene, z complex128, first, low, high float64) {
	t.Helper()
	f := s.kernel.Sample(s.lattice(z))
	if f.State != Escaped {
		t.Errorf("c = %s, %v at distance %v … %v: %v", s.paramRe, z, low, high, f.State)
		return
	}
	const rounding = 1e-6 // G is taken from the smooth count, good to 1/bailout²
	least, most := s.koebe(f, first)
	if least > high*(1+rounding) || most < low*(1-rounding) {
		t.Errorf("c = %s, %v lies at a distance of %v … %v, estimated to be %v … %v", s.paramRe, z, low, high, least, most)
	}
}

// TestKoebeMandelbrot: left of the tip -2 the distance is known, the set lying
// in the disc |c| <= 2 and holding -2 (from the definition). Elsewhere the
// distance is at most that to what is known to belong to the set (the main
// cardioid, the disc of period 2, the segment [-2, 1/4]) and at least |c| - 2.
func TestKoebeMandelbrot(t *testing.T) {
	s := whole(t, 50000)
	r := rand.New(rand.NewPCG(2, 2))
	for range 2000 {
		off := math.Pow(10, 1-9*r.Float64())
		holdKoebe(t, s, complex(-2-off, 0), 2, off, off)
		right := math.Pow(10, 1-6*r.Float64())
		c := complex(0.25+right, 0)
		holdKoebe(t, s, c, 2, math.Max(0, real(c)-2), toKnown(c))
		above := complex(3*r.Float64()-2, 0.6+1.5*r.Float64())
		if toKnown(above) > 0.05 && s.kernel.Sample(s.lattice(above)).State == Escaped {
			holdKoebe(t, s, above, 2, math.Max(0, cmplx.Abs(above)-2), toKnown(above))
		}
	}
}

// toKnown is the distance from an outside c to the known part of the set.
func toKnown(c complex128) float64 {
	best := cmplx.Abs(c+1) - 0.25
	best = math.Min(best, math.Hypot(imag(c), math.Max(-2-real(c), math.Max(real(c)-0.25, 0))))
	for i := range 2000 {
		w := cmplx.Rect(1, 2*math.Pi*float64(i)/2000)
		best = math.Min(best, cmplx.Abs(c-(w/2-w*w/4)))
	}
	return best
}

// TestKoebeEmpty: no point of the set lies nearer than half the estimate. All
// around many points outside the discs that the theorem calls empty are
// searched, at scales of every regime.
func TestKoebeEmpty(t *testing.T) {
	rounds := 200
	if testing.Short() {
		rounds = 40
	}
	for _, v := range []scene{
		{name: "whole", re: "-0.6", height: "2.6", limit: 3000},
		{name: "seahorses", re: "-0.7478", im: "0.1052", height: "3e-3", limit: 6000},
		{name: "cubic", height: "2.6", power: 3, limit: 3000},
		tinySet(t), deepSet(t),
	} {
		s := (&v).build(t)
		r := rand.New(rand.NewPCG(3, 3))
		empty := 0
		for _, p := range s.spread(rounds, 6) {
			f := s.kernel.Sample(p[0], p[1])
			if f.State != Escaped || f.Distance > 100 {
				continue
			}
			empty++
			g := math.Log(s.bailout) * math.Pow(float64(s.power), 2-f.Smooth)
			radius := f.Distance * 0.999 / 2
			if g > 1e-6 {
				radius = f.Distance * 0.999 * -math.Expm1(-2*g) / (4 * g)
			}
			for range 20 {
				o := cmplx.Rect(radius*math.Sqrt(r.Float64()), 2*math.Pi*r.Float64())
				if q := s.kernel.Sample(p[0]+real(o), p[1]+imag(o)); q.State == Inside {
					t.Errorf("%s: %v has a distance of %.3f px or more, but %.3f px away is a point of the set", s.name, p, radius, cmplx.Abs(o))
				}
			}
		}
		if empty < rounds/4 {
			t.Errorf("%s: only %d of %d points outside", s.name, empty, rounds)
		}
	}
}

// TestGradient takes the smooth count's slope by finite differences. While n
// stays the same, ln ln|z_n| has the gradient |z_n'|/(|z_n| ln|z_n|), so
// |∇μ| = 1/(ln p · d) exactly. A central difference over h = d/1000 is off by
// h²/6 times the third derivatives: by Koebe's distortion theorem, the
// potential being univalent in a disc of radius d/2, less than 1e-4 of the
// slope.
func TestGradient(t *testing.T) {
	samples := 200
	if testing.Short() {
		samples = 40
	}
	for _, v := range []scene{
		{name: "whole", re: "-0.6", height: "2.6", limit: 3000},
		{name: "cubic", re: "0.2", im: "0.9", height: "0.6", power: 3, limit: 3000},
		{name: "julia", re: "0.3", height: "0.2", julia: true, paramRe: "-0.8", paramIm: "0.156", limit: 3000},
		{name: "near i", im: "1", height: "1e-200", limit: 5000},
		{name: "tip", re: "-2", height: "1e-12", limit: 5000},
		tinySet(t), deepSet(t),
	} {
		s := (&v).build(t)
		var worst float64
		held := 0
		for _, p := range s.spread(samples, 7) {
			f := s.kernel.Sample(p[0], p[1])
			if f.State != Escaped || f.Distance < 1e-3 || f.Distance > 1e4 {
				continue // no room for differences in doubles
			}
			h := f.Distance / 1000
			e, w := s.kernel.Sample(p[0]+h, p[1]), s.kernel.Sample(p[0]-h, p[1])
			n, o := s.kernel.Sample(p[0], p[1]+h), s.kernel.Sample(p[0], p[1]-h)
			if e.N != f.N || w.N != f.N || n.N != f.N || o.N != f.N {
				continue // a step of n, where μ jumps by 4e-7
			}
			held++
			slope := math.Hypot(e.Smooth-w.Smooth, n.Smooth-o.Smooth) / (2 * h)
			off := math.Abs(slope*s.lnPower()*f.Distance - 1)
			worst = math.Max(worst, off)
			if off > 1e-4 {
				t.Errorf("%s %v: slope %v, but distance %v", s.name, p, slope, f.Distance)
			}
		}
		if held < samples/3 {
			t.Errorf("%s: only %d of %d points could be held", s.name, held, samples)
		}
		t.Logf("%-10s %-6s %d points, slope within %.1e", s.name, s.regime(), held, worst)
	}
}
