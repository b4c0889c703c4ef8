package kernel

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"testing"

	"leadline/render/formula"
)

// whole is the view of the whole Mandelbrot set, 4096 pixels to the unit.
func whole(t testing.TB, limit int) *scene {
	s := scene{name: "whole", re: "-0.75", height: "4", width: 1 << 14, rows: 1 << 14, limit: limit}
	return s.build(t)
}

// lattice returns the lattice coordinates of c in an unturned direct view.
func (s *scene) lattice(c complex128) (x, y float64) {
	re, _ := s.centre.re.Float64()
	im, _ := s.centre.im.Float64()
	px := s.pixel.Float64()
	return (real(c)-re)/px + float64(s.width)/2, float64(s.rows)/2 - (imag(c)-im)/px
}

// TestComponents holds the two components of the Mandelbrot set that have a
// formula against it: the boundary of the main cardioid is c = w/2 - w²/4 and
// that of the disc of period 2 c = -1 + w/4, |w| = 1 (Douady and Hubbard 1982;
// Milnor, Dynamics in One Complex Variable: fixed points have multiplier w
// where c = w/2 - w²/4, the 2-cycle 4(c+1)). Points inside by 1e-9 in w must
// be Inside, however near the boundary. Points outside by that much must not.
func TestComponents(t *testing.T) {
	s := whole(t, 300)
	maps := map[string]func(w complex128) complex128{
		"cardioid": func(w complex128) complex128 { return w/2 - w*w/4 },
		"disc":     func(w complex128) complex128 { return -1 + w/4 },
	}
	for name, of := range maps {
		r := rand.New(rand.NewPCG(7, 7))
		for range 4000 {
			off := math.Pow(10, -9*r.Float64())
			angle := 2 * math.Pi * r.Float64()
			in := of(cmplx.Rect(1-off, angle))
			if f := s.kernel.Sample(s.lattice(in)); f.State != Inside {
				t.Errorf("%s: %v lies %.1e inside, but is %v", name, in, off, f.State)
			}
			if out := of(cmplx.Rect(1+off, angle)); inEither(out) {
				continue // outside one, inside the other
			} else if f := s.kernel.loops.interior(real(out), imag(out)); f {
				t.Errorf("%s: %v lies %.1e outside, but is Inside", name, out, off)
			}
		}
	}
}

// inEither knows the two components by the multipliers of their cycles.
func inEither(c complex128) bool {
	return cmplx.Abs(1-cmplx.Sqrt(1-4*c)) < 1 || cmplx.Abs(4*(c+1)) < 1
}

// TestComponentsByCycle asks the cycle search for what the formulas know:
// without them the same points are found, by Fatou's theorem alone. What is
// left undecided lies close to the boundary, where orbits settle slowly; all
// but a few points up to 0.02 inside in w must be found.
func TestComponentsByCycle(t *testing.T) {
	r := rand.New(rand.NewPCG(8, 8))
	s := whole(t, 20000)
	found, asked := 0, 0
	for range 400 {
		w := cmplx.Rect(math.Sqrt(r.Float64()), 2*math.Pi*r.Float64())
		c := w/2 - w*w/4
		if asked%3 == 0 {
			c = -1 + w/4
		}
		d := directLane{zr: real(c), zi: imag(c), cr: real(c), ci: imag(c), add: 1, gr: 1, w: 1, n: 1}
		asked++
		switch s.kernel.runDirect(&d) {
		case Inside:
			found++
		case Escaped:
			t.Errorf("%v lies inside, but escapes", c)
		default:
			if cmplx.Abs(w) < 0.98 {
				t.Errorf("%v, multiplier %.4f, is not found", c, cmplx.Abs(w))
			}
		}
	}
	t.Logf("%d of %d points found by their cycle", found, asked)
}

// cubicFixed is the component of period 1 of z³ + c: a fixed point z has the
// multiplier 3z² = w, so c = z - z³ with z = √(w/3) (from the definition).
func TestCubicComponent(t *testing.T) {
	s := scene{name: "cubic", height: "4", width: 4096, rows: 4096, power: 3, limit: 5000}
	s.build(t)
	r := rand.New(rand.NewPCG(9, 9))
	for range 300 {
		w := cmplx.Rect(0.97*math.Sqrt(r.Float64()), 2*math.Pi*r.Float64())
		z := cmplx.Sqrt(w / 3)
		c := z - z*z*z
		if r.IntN(2) == 0 {
			c = -c // the set is symmetric
		}
		if f := s.kernel.Sample(s.lattice(c)); f.State != Inside {
			t.Errorf("%v has a fixed point of multiplier %.3f, but is %v", c, cmplx.Abs(w), f.State)
		}
	}
}

// TestArea counts pixels. The area of the Mandelbrot set is 1.5065918849 ±
// 2.8e-9 (Förstemann 2012, by pixel counting on a far finer grid).
//
// The count takes two points at random places of every cell of the upper half
// (stratified sampling with two draws a stratum; Cochran, Sampling Techniques),
// so its error comes only from cells that the boundary crosses, and is
// estimated without bias from how often the two draws of a cell differ: the
// mean of two draws has the variance (a-b)²/4. Samples undecided at the limit
// are counted both ways and bracket the area. Bracket and four standard errors
// together stay below 0.05 % of the area, so an error of 0.1 % cannot pass.
func TestArea(t *testing.T) {
	cells, limit, most := 1400, 50000, 0.0005
	if testing.Short() {
		cells, limit, most = 400, 4000, 0.004
	}
	const reference, width, tall = 1.5065918849, 2.6, 1.2 // -2.05 … 0.55, upper half
	rows := int(float64(cells)*tall/width + 0.5)
	side := width / float64(cells)
	s := whole(t, limit)
	r := rand.New(rand.NewPCG(11, 11))
	draw := func(x, y int) State {
		c := complex(-2.05+side*(float64(x)+r.Float64()), side*(float64(y)+r.Float64()))
		return s.kernel.Sample(s.lattice(c)).State
	}
	var inside, undecided, differ int
	for y := range rows {
		for x := range cells {
			a, b := draw(x, y), draw(x, y)
			for _, v := range []State{a, b} {
				switch v {
				case Inside:
					inside++
				case Undecided:
					undecided++
				}
			}
			if (a == Escaped) != (b == Escaped) || a == Undecided || b == Undecided {
				differ++
			}
		}
	}
	cell := 2 * side * side // both halves
	low, high := cell*float64(inside)/2, cell*float64(inside+undecided)/2
	sigma := cell * math.Sqrt(float64(differ)) / 2
	t.Logf("%d points: area %.6f … %.6f, standard error %.6f; %.6f is known", 2*cells*rows, low, high, sigma, reference)
	if low-4*sigma > reference || high+4*sigma < reference {
		t.Errorf("the area %v does not lie in %v … %v", reference, low-4*sigma, high+4*sigma)
	}
	if spread := (high-low)/2 + 4*sigma; spread > most*reference {
		t.Errorf("the bracket is ±%v wide: an error of %v of the area could pass", spread, most)
	}
}

// TestInteriorFormula is the formula itself on random points of the plane,
// against the multipliers computed with complex square roots.
func TestInteriorFormula(t *testing.T) {
	r := rand.New(rand.NewPCG(10, 10))
	in := 0
	for range 200000 {
		c := complex(3*r.Float64()-2.2, 2.4*r.Float64()-1.2)
		m, n := cmplx.Abs(1-cmplx.Sqrt(1-4*c)), cmplx.Abs(4*(c+1))
		if math.Abs(m-1) < 1e-12 || math.Abs(n-1) < 1e-12 {
			continue // too near to call in doubles
		}
		want := m < 1 || n < 1
		if want {
			in++
		}
		if got := (squareLoops{}).interior(real(c), imag(c)); got != want {
			t.Errorf("%v: %v, multipliers %v and %v", c, got, m, n)
		}
	}
	if in < 20000 {
		t.Errorf("only %d points inside", in)
	}
	if (loopsFor(formula.Cube{})).interior(0, 0) {
		t.Error("the cubic set has no formula, yet one answered")
	}
}
