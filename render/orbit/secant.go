package orbit

import (
	"math/big"

	"leadline/precision"
)

// valuer is a function of the parameter at the full precision of its argument;
// not ok where the orbit escapes.
type valuer func(c *precision.Fixed) (value *precision.Fixed, ok bool, err error)

// secantSteps bounds the secant method. From 40 bits it gains a factor of 1.6 in
// bits a step: ten steps are some 3,500 bits.
const secantSteps = 40

// polish takes a simple root c of f, known within off, to within tol by the
// secant method. It returns nil where the method does not close in.
//
// Newton's method with a derivative of 53 bits gains 50 bits a step whatever
// it cost; here the slope comes from two values at full precision, and is as
// good as the points are near. Each value is computed with no more bits than
// it can use: twice those by which its point is nearer than the search's
// radius.
func (w *walker) polish(c *precision.Fixed, off, tol precision.Ext, f valuer) (*precision.Fixed, error) {
	final := max(precision.BitsFor(tol), c.Frac)
	bits := func(off precision.Ext) uint {
		return min(final, uint(max(int64(c.Frac), w.q.Radius.E-2*off.E+precision.Guard)))
	}
	a := scaled(c, bits(off))
	a.AddExt(precision.ExtComplexOf(off, precision.Ext{}))
	fa, ok, err := f(a)
	if !ok {
		return nil, err
	}
	next, last := c, off.Ldexp(1)
	for range secantSteps {
		b := scaled(next, bits(off))
		fb, ok, err := f(b)
		if !ok {
			return nil, err
		}
		a, fa = scaled(a, b.Frac), scaled(fa, b.Frac)
		step := secant(a, fa, b, fb)
		size := step.Ext().Abs()
		if unit := (precision.Ext{M: 0.5, E: 2 - int64(b.Frac)}); size.Cmp(unit) < 0 {
			if b.Frac == final {
				return b, nil // a zero to the last bit
			}
			next, last, off = b, unit.Ldexp(12), unit.Ldexp(12) // rounding, so far
			continue
		}
		if size.Cmp(last) > 0 {
			return nil, nil
		}
		// Steps are errors to first order, and their ratio only falls.
		off = size.Mul(size.Quo(last))
		next, last = new(precision.Fixed).Set(b), size
		next.Sub(b, step)
		if off.Cmp(tol) < 0 && b.Frac == final {
			return next, nil
		}
		a, fa = b, fb
	}
	return nil, nil
}

// scaled returns z with another number of fractional bits.
func scaled(z *precision.Fixed, frac uint) *precision.Fixed {
	s := &precision.Fixed{Frac: frac}
	if frac >= z.Frac {
		s.Re.Lsh(&z.Re, frac-z.Frac)
		s.Im.Lsh(&z.Im, frac-z.Frac)
		return s
	}
	s.Re.Rsh(&z.Re, z.Frac-frac)
	s.Im.Rsh(&z.Im, z.Frac-frac)
	return s
}

// secant returns fb·(b-a)/(fb-fa), zero where the values are equal.
func secant(a, fa, b, fb *precision.Fixed) *precision.Fixed {
	step := &precision.Fixed{Frac: b.Frac}
	dx, df := new(precision.Fixed), new(precision.Fixed)
	dx.Sub(b, a)
	df.Sub(fb, fa)
	var norm, x big.Int
	norm.Add(norm.Mul(&df.Re, &df.Re), x.Mul(&df.Im, &df.Im))
	if norm.Sign() == 0 {
		return step
	}
	df.Im.Neg(&df.Im)
	re, im := product(&fb.Re, &fb.Im, &dx.Re, &dx.Im)
	re, im = product(re, im, &df.Re, &df.Im)
	step.Re.Quo(re, &norm)
	step.Im.Quo(im, &norm)
	return step
}

// product multiplies two complex integers.
func product(ar, ai, br, bi *big.Int) (re, im *big.Int) {
	var x big.Int
	re, im = new(big.Int).Mul(ar, br), new(big.Int).Mul(ar, bi)
	re.Sub(re, x.Mul(ai, bi))
	im.Add(im, x.Mul(ai, br))
	return re, im
}
