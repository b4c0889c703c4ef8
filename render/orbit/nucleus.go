package orbit

import (
	"math/big"

	"leadline/precision"
)

// maxAttempts bounds how many candidate periods are tried by Newton's method
// before the centre itself is taken.
const maxAttempts = 3

// detect follows the centre's critical orbit and watches the ball of the
// view's radius around it: the first index at which the ball's image holds 0
// (to first order, |z_n| < radius·|dz_n/dc|) is the lowest period of a nucleus
// in the view. Newton's method then finds that nucleus. Where none is found
// the centre's own orbit is returned, walked to its end.
func (w *walker) detect(centre *precision.Fixed) (*trace, error) {
	var x, d precision.ExtComplex // z, dz/dc
	one := precision.NewExtComplex(1, 0, 0)
	attempts := 0
	zero := &precision.Fixed{Frac: w.frac}
	return w.walk("orbit", zero, centre, w.q.Limit, func(n int, z *precision.Fixed) (*trace, error) {
		if attempts == maxAttempts {
			return nil, nil
		}
		d = w.q.Map.Derivative(x).Mul(d).Add(one)
		x = z.Ext()
		if x.Key() >= d.MulReal(w.q.Radius).Key() {
			return nil, nil
		}
		attempts++
		c, err := w.newton(centre, n)
		if c == nil {
			return nil, err
		}
		return w.periodic(c, n)
	})
}

// newtonSteps bounds Newton's method; from inside the view it needs three to
// six steps.
const newtonSteps = 24

// newton looks for the nucleus of the given period near the centre, within
// twice the view's radius. It returns nil where the method does not settle.
// The derivative is carried in 53 bits, so each step gains about 50 bits once
// the method has locked on; the point is accurate to 2^-60 of a pixel.
func (w *walker) newton(centre *precision.Fixed, period int) (*precision.Fixed, error) {
	c := new(precision.Fixed).Set(centre)
	one := precision.NewExtComplex(1, 0, 0)
	reach := w.q.Radius.Ldexp(1)
	settled := w.q.Pixel.Ldexp(-30)
	diff := &precision.Fixed{Frac: w.frac}
	for range newtonSteps {
		z := &precision.Fixed{Frac: w.frac}
		var d precision.ExtComplex
		for n := 1; n <= period; n++ {
			if err := w.pause("nucleus", n, period); err != nil {
				return nil, err
			}
			d = w.q.Map.Derivative(z.Ext()).Mul(d).Add(one)
			w.step(z, c)
			if z.Re.BitLen() > int(w.frac)+12 || z.Im.BitLen() > int(w.frac)+12 {
				return nil, nil // escaped: not a basin of this nucleus
			}
		}
		if d.IsZero() {
			return nil, nil
		}
		step := z.Ext().Quo(d)
		c.AddExt(step.Neg())
		if diff.Sub(c, centre).Ext().Abs().Cmp(reach) > 0 {
			return nil, nil
		}
		if step.Abs().Cmp(settled) < 0 {
			return c, nil
		}
	}
	return nil, nil
}

// decimals writes a fixed-point number with all its bits' worth of digits.
func decimals(z *precision.Fixed, frac uint) (re, im precision.Decimal) {
	digits := int(float64(frac)*0.30103) + 2
	return fixedDecimal(&z.Re, frac, digits), fixedDecimal(&z.Im, frac, digits)
}

func fixedDecimal(x *big.Int, frac uint, digits int) precision.Decimal {
	f := new(big.Float).SetPrec(uint(x.BitLen()) + 64).SetInt(x)
	return precision.DecimalOf(f.SetMantExp(f, -int(frac)), digits)
}
