package orbit

import (
	"context"
	"fmt"
	"math/big"

	"leadline/precision"
	"leadline/render/formula"
)

// Target says where to look for a special point of a Mandelbrot set. It
// decides no pixel: what is found is a proposal for a view's centre.
type Target struct {
	Map    formula.Map          // z² or z³
	Julia  bool                 // a Julia set has no such points: ErrJulia
	Near   [2]precision.Decimal // the point to look around
	Radius precision.Ext        // how far around it, above zero; more than 4 counts as 4
	Limit  int                  // iterations to follow, and the longest period, at most
	// Tolerance is how near the decimals must lie to the point. A nucleus is
	// given to 2^-24 of its atom's size in any case; zero asks for no more
	// than that, and for a Misiurewicz point to 2^-64 of the radius squared, good
	// for a view twice as deep.
	Tolerance precision.Ext
	// Progress, if set, is told now and then what runs and how far it is: the
	// stages are "period", "nucleus", "atom" and "Misiurewicz point".
	Progress func(Progress)
}

// What a search may end with, apart from a context's error. Each offers a
// Hint() with the cure.
var (
	ErrNone  error = &findError{"no such point within reach", "look around another point, nearer or farther, or with a higher iteration limit"}
	ErrJulia error = &findError{"Julia sets have no nuclei or Misiurewicz points", "look in the Mandelbrot set that the parameter comes from"}
	ErrDeep  error = &findError{"the point lies deeper than numbers are written", fmt.Sprintf("look with a larger radius: numbers have at most %d digits", precision.MaxDigits)}
	ErrAsked error = &findError{"no such search", "radius, iteration limit and period must be above zero, the power 2 or 3"}
)

type findError struct{ text, hint string }

func (e *findError) Error() string { return e.text }

// Hint says what may help.
func (e *findError) Hint() string { return e.hint }

const (
	searchBits  = 10 // a search places points to 2^-(searchBits+30) of the radius
	settledBits = searchBits + 30
	digitBits   = 24 // decimals lie within 2^-digitBits of an atom's size
	polishBits  = 8  // and the point they stand for is so much nearer still
)

// deepest is the binary exponent of the finest tolerance whose decimals can be
// written; a decimal digit is 3.32 bits.
const deepest = -(precision.MaxDigits - 100) * 332 / 100

// search returns a walker that looks around the target, and its centre.
func (t *Target) search(ctx context.Context) (*walker, *precision.Fixed, error) {
	switch {
	case t.Julia:
		return nil, nil, ErrJulia
	case t.Map == nil || t.Map.Power() < 2 || t.Map.Power() > 3 || t.Radius.Sign() <= 0 || t.Limit <= 0:
		return nil, nil, ErrAsked
	case t.Radius.E < deepest:
		return nil, nil, ErrDeep
	}
	radius := t.Radius
	if four := precision.ExtOf(4); !(radius.Cmp(four) < 0) { // an infinity too
		radius = four
	}
	q := &Request{Map: t.Map, Radius: radius, Pixel: radius.Ldexp(-searchBits), Limit: t.Limit, Progress: t.Progress}
	w := &walker{q: q, ctx: ctx, frac: precision.BitsFor(q.Pixel)}
	return w, precision.NewFixed(t.Near[0], t.Near[1], w.frac), nil
}

// PeriodAt returns the lowest period of a nucleus whose domain the ball about
// the target meets, to first order: the first n with |z_n| < radius·|dz_n/dc|.
// Not ok where the orbit escapes or reaches the limit before. A lower period
// is seldom overlooked, but where the target lies outside the set the answer may
// be in vain: FindNucleus confirms it.
func PeriodAt(ctx context.Context, t Target) (period int, ok bool, err error) {
	w, centre, err := t.search(ctx)
	if err != nil {
		return 0, false, fmt.Errorf("finding a period: %w", err)
	}
	err = w.periods(centre, func(n int) (bool, error) {
		period, ok = n, true
		return true, nil
	})
	if err != nil {
		return 0, false, fmt.Errorf("finding a period: %w", err)
	}
	return period, ok, nil
}

// periods shows the indices at which the ball's image holds 0, in order, until
// found says so or the orbit ends.
func (w *walker) periods(centre *precision.Fixed, found func(n int) (done bool, err error)) error {
	b, z := ball{w: w}, &precision.Fixed{Frac: w.frac}
	for n := 1; n <= w.q.Limit; n++ {
		if err := w.pause("period", n, w.q.Limit); err != nil {
			return err
		}
		w.step(z, centre)
		if escaped(z) {
			return nil
		}
		if !b.holdsZero(z) {
			continue
		}
		if done, err := found(n); done || err != nil {
			return err
		}
	}
	return nil
}

// HalfWay returns the height of a view half way down, by its logarithm, from
// the given height to multiple times the size of an atom: the geometric mean.
func HalfWay(height, size precision.Ext, multiple float64) precision.Ext {
	return height.Mul(size.Abs()).Mul(precision.ExtOf(multiple)).Sqrt()
}

// written returns the decimals of fewest digits within tol of a point.
func written(z *precision.Fixed, tol precision.Ext) (re, im precision.Decimal) {
	decimal := func(x *big.Int) precision.Decimal {
		f := new(big.Float).SetPrec(uint(x.BitLen()) + 64).SetInt(x)
		return precision.DecimalNear(f.SetMantExp(f, -int(z.Frac)), tol)
	}
	return decimal(&z.Re), decimal(&z.Im)
}
