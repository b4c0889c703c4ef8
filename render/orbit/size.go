package orbit

import (
	"math"

	"leadline/precision"
)

// Shape says what a component of the Mandelbrot set looks like.
type Shape string

// The shapes; the zero value is where it is not known (powers above 2).
const (
	Cardioid Shape = "cardioid" // of a small copy of the set (primitive)
	Disc     Shape = "disc"     // attached to a larger component (satellite)
)

// atom is what the critical orbit of a nucleus c tells of its component. With
// f^p(z) = F(z^d, c), where F(w, c) starts as w + c and is then iterated:
type atom struct {
	period int                  // at which the orbit first closes
	w      precision.ExtComplex // Λ = dF/dw, the product of f'(z_1) … f'(z_(p-1))
	c      precision.ExtComplex // dF/dc = dz_p/dc
	cc, cw precision.ExtComplex // second derivatives, for power 2 only
}

// atom follows the critical orbit of a nucleus, known within off, for period
// iterations or until it closes before.
func (w *walker) atom(c *precision.Fixed, period int, off precision.Ext) (*atom, bool, error) {
	a := &atom{period: period, w: one}
	var before precision.ExtComplex // z_(n-1)
	second := w.q.Map.Power() == 2
	ok, err := w.critical("atom", c, period, func(n int, z *precision.Fixed, d precision.ExtComplex) {
		if n > a.period {
			return
		}
		if n > 1 {
			a.advance(w.q.Map.Derivative(before), second)
		}
		a.c = d
		before = z.Ext()
		if n < period && period%n == 0 && before.Key() <= d.MulReal(off).Key() {
			a.period = n
		}
	})
	return a, ok && !a.c.IsZero() && !a.w.IsZero(), err
}

// advance takes all derivatives but the first by c through one iteration with
// f'(z) = slope. For power 2 f” is 2.
func (a *atom) advance(slope precision.ExtComplex, second bool) {
	if second {
		a.cc = a.cc.Mul(slope).Add(a.c.Mul(a.c).Ldexp(1))
		a.cw = a.cw.Mul(slope).Add(a.c.Mul(a.w).Ldexp(1))
	}
	a.w = a.w.Mul(slope)
}

// size is the component's size and direction to first order. About the nucleus
// c0, f^p(z) = Λz^d + Λβ(c - c0) and more, with Λβ = dz_p/dc, β the sum of the
// reciprocals of the partial products of f'. In u = Λ^(1/(d-1))·z that is
// u^d + (c - c0)/s, s = 1/(β·Λ^(d/(d-1))): the family itself, shrunk by s and
// turned (renormalisation: Douady and Hubbard 1985). So s is to this component
// what 1 is to that of period 1, whose width along its axis is 1 for power 2;
// a disc is about as wide as s. For power 3 the sign is free, since the set
// looks the same from both sides.
func (a *atom) size(power int) precision.ExtComplex {
	root := a.w
	if power == 3 {
		root = squareRoot(a.w)
	}
	return one.Quo(a.c.Mul(root))
}

// shape tells cardioids from discs by the second-order term ε of the multiplier
// map μ/2 = x + (1-ε)x² + …, x = dF/dw·dF/dc·(c - c0): 0 for an ideal cardioid,
// 1 for an ideal disc (Dolotin and Morozov 2008).
func (a *atom) shape(power int) Shape {
	if power != 2 {
		return ""
	}
	ab := a.c.Mul(a.w)
	epsilon := a.cc.Quo(a.c.Mul(ab).Ldexp(1)).Add(a.cw.Quo(a.w.Mul(ab))).Neg()
	if epsilon.Abs().Cmp(epsilon.Sub(one).Abs()) < 0 {
		return Cardioid
	}
	return Disc
}

// squareRoot returns the root of z with Re >= 0.
func squareRoot(z precision.ExtComplex) precision.ExtComplex {
	if z.IsZero() {
		return z
	}
	if z.E&1 != 0 {
		z = precision.ExtComplex{Re: z.Re / 2, Im: z.Im / 2, E: z.E + 1}
	}
	r := math.Sqrt(math.FMA(z.Re, z.Re, float64(z.Im*z.Im)))
	s := math.Sqrt((r + math.Abs(z.Re)) / 2)
	re, im := s, z.Im/(2*s)
	if z.Re < 0 {
		re, im = math.Abs(im), math.Copysign(s, z.Im)
	}
	return precision.NewExtComplex(re, im, z.E/2)
}
