package orbit

import (
	"math/big"

	"leadline/precision"
)

// maxAttempts bounds how many candidate periods are tried by Newton's method
// before the centre itself is taken.
const maxAttempts = 3

// detect follows the centre's critical orbit and watches the ball of the
// view's radius around it. Where its image holds 0 Newton's method looks for
// the nucleus of that period. Where none is found the centre's own orbit is
// returned, walked to its end.
func (w *walker) detect(centre *precision.Fixed) (*trace, error) {
	b := ball{w: w}
	attempts := 0
	zero := &precision.Fixed{Frac: w.frac}
	return w.walk("orbit", zero, centre, w.q.Limit, func(n int, z *precision.Fixed) (*trace, error) {
		if attempts == maxAttempts || !b.holdsZero(z) {
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

// ball is the image of a ball of parameters about a centre, to first order: at
// index n the disc about z_n of radius·|dz_n/dc|. The first index at which it
// holds 0 is the lowest period of a nucleus in the ball.
type ball struct {
	w *walker
	x precision.ExtComplex // z_n
	d precision.ExtComplex // dz_n/dc
}

// holdsZero takes the ball on to z, the next point of the centre's critical
// orbit, and reports whether it holds 0 there.
func (b *ball) holdsZero(z *precision.Fixed) bool {
	b.d = b.w.q.Map.Derivative(b.x).Mul(b.d).Add(one)
	b.x = z.Ext()
	return b.x.Key() < b.d.MulReal(b.w.q.Radius).Key()
}

// one is the number 1.
var one = precision.NewExtComplex(1, 0, 0)

// critical iterates the critical orbit of c up to the given index with its
// derivative dz_n/dc, which is carried in 53 bits, and shows both to visit from
// index 1 on. It ends early, and says so, where the orbit has escaped.
func (w *walker) critical(stage string, c *precision.Fixed, upto int, visit visitor) (stayed bool, err error) {
	z := &precision.Fixed{Frac: c.Frac}
	var d precision.ExtComplex
	for n := 1; n <= upto; n++ {
		if err := w.pause(stage, n, upto); err != nil {
			return false, err
		}
		d = w.q.Map.Derivative(z.Ext()).Mul(d).Add(one)
		w.step(z, c)
		if escaped(z) {
			return false, nil
		}
		visit(n, z, d)
	}
	return true, nil
}

// visitor looks at a point of an orbit, which is its own only during the call.
type visitor func(n int, z *precision.Fixed, d precision.ExtComplex)

// escaped reports whether a part of z is beyond some 4096.
func escaped(z *precision.Fixed) bool {
	return z.Re.BitLen() > int(z.Frac)+12 || z.Im.BitLen() > int(z.Frac)+12
}

// newton looks for the nucleus of the given period near the centre.
func (w *walker) newton(centre *precision.Fixed, period int) (*precision.Fixed, error) {
	return w.settle(centre, func(c *precision.Fixed) (step precision.ExtComplex, ok bool, err error) {
		var last, slope precision.ExtComplex
		ok, err = w.critical("nucleus", c, period, func(n int, z *precision.Fixed, d precision.ExtComplex) {
			if n == period {
				last, slope = z.Ext(), d
			}
		})
		if !ok || slope.IsZero() {
			return step, false, err // escaped: not a basin of this nucleus
		}
		return last.Quo(slope), true, nil
	})
}

// newtonSteps bounds Newton's method; from inside the view it needs three to
// six steps.
const newtonSteps = 24

// stepper is Newton's step f/f' at c for some function f of the parameter; not
// ok where there is none.
type stepper func(c *precision.Fixed) (step precision.ExtComplex, ok bool, err error)

// settle runs Newton's method from the centre, within twice the view's radius.
// It returns nil where the method does not settle. Steps have 53 bits, so each
// gains about 50 bits once the method has locked on; the point is accurate to
// 2^-60 of a pixel.
func (w *walker) settle(centre *precision.Fixed, f stepper) (*precision.Fixed, error) {
	c := new(precision.Fixed).Set(centre)
	reach := w.q.Radius.Ldexp(1)
	settled := w.q.Pixel.Ldexp(-30)
	diff := &precision.Fixed{Frac: w.frac}
	for range newtonSteps {
		if err := w.ctx.Err(); err != nil {
			return nil, err
		}
		step, ok, err := f(c)
		if !ok || step.Abs().Cmp(reach.Ldexp(2)) > 0 {
			return nil, err
		}
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
