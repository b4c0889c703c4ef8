package orbit

import (
	"context"
	"fmt"
	"math"

	"leadline/precision"
)

// NucleusPoint is the centre of a hyperbolic component: a parameter whose
// critical orbit returns to 0.
type NucleusPoint struct {
	Re, Im precision.Decimal    // within 2^-24 of |Size|, or of the tolerance if less
	Period int                  // the least n > 0 with z_n = 0
	Size   precision.ExtComplex // of the component, to first order: the length and direction that stand for 1 at c = 0
	Shape  Shape                // power 2 only
}

// FindNucleus finds a nucleus near the target. With period 0 it is the one of
// the lowest period that the ball meets and Newton's method confirms; else
// the one of exactly that period that Newton's method reaches from the target, or
// if there is none the nearest that it reaches from a ring around it. Nothing beyond twice the radius
// is taken. Errors wrap ErrNone, ErrJulia, ErrDeep, ErrAsked or the context's.
func FindNucleus(ctx context.Context, t Target, period int) (*NucleusPoint, error) {
	p, err := t.nucleus(ctx, period)
	switch {
	case err != nil && period > 0:
		return nil, fmt.Errorf("finding a nucleus of period %d: %w", period, err)
	case err != nil:
		return nil, fmt.Errorf("finding a nucleus: %w", err)
	}
	return p, nil
}

func (t *Target) nucleus(ctx context.Context, period int) (*NucleusPoint, error) {
	w, centre, err := t.search(ctx)
	if err != nil {
		return nil, err
	}
	if period < 0 {
		return nil, ErrAsked
	}
	var p *NucleusPoint
	if period == 0 {
		p, err = w.lowest(centre, t.Tolerance)
	} else if period <= t.Limit {
		p, err = w.ofPeriod(centre, period, true, t.Tolerance)
	}
	if err == nil && p == nil {
		err = ErrNone
	}
	return p, err
}

// lowest tries the periods of the ball in order. To first order it may name
// some in vain, above all where the centre is about to escape; no start from a
// ring was ever seen to find what Newton's method missed from the centre then.
func (w *walker) lowest(centre *precision.Fixed, tolerance precision.Ext) (p *NucleusPoint, err error) {
	attempts := 0
	err = w.periods(centre, func(n int) (bool, error) {
		attempts++
		p, err = w.ofPeriod(centre, n, false, tolerance)
		return p != nil || attempts == maxAttempts, err
	})
	return p, err
}

// ofPeriod finds a nucleus of exactly that period from the centre or, if asked,
// from the ring; nil where neither leads to one.
func (w *walker) ofPeriod(centre *precision.Fixed, period int, ring bool, tolerance precision.Ext) (*NucleusPoint, error) {
	step := w.gleason(period)
	c, err := w.settle(centre, step)
	if c != nil && err == nil {
		if p, err := w.nucleusAt(c, period, tolerance); p != nil || err != nil {
			return p, err
		}
	}
	if err != nil || !ring {
		return nil, err
	}
	if c, err = w.fromRing(centre, step); c == nil {
		return nil, err
	}
	return w.nucleusAt(c, period, tolerance)
}

// ringStarts is how many points around the centre Newton's method starts from,
// at half the radius.
const ringStarts = 6

// fromRing returns the nearest point to the centre that Newton's method reaches
// from the ring, nil where it reaches none.
func (w *walker) fromRing(centre *precision.Fixed, f stepper) (best *precision.Fixed, err error) {
	var least precision.Ext
	diff := new(precision.Fixed)
	for k := range ringStarts {
		start := new(precision.Fixed).Set(centre)
		turn := unitVector(float64(k) / ringStarts)
		start.AddExt(turn.MulReal(w.q.Radius.Ldexp(-1)))
		c, err := w.settle(start, f)
		if err != nil {
			return nil, err
		}
		if c == nil {
			continue
		}
		d := diff.Sub(c, centre).Ext().Abs()
		if d.Cmp(w.q.Radius.Ldexp(1)) <= 0 && (best == nil || d.Cmp(least) < 0) {
			best, least = c, d
		}
	}
	return best, nil
}

// unitVector is e^(2πi(t + 0.03)); the shift keeps starts off the real axis.
func unitVector(t float64) precision.ExtComplex {
	s, c := precision.SinCos(2 * math.Pi * (t + 0.03))
	return precision.NewExtComplex(c, s, 0)
}

// atomRounds bounds how often an atom's size may turn out smaller than the bits
// of its nucleus allow for.
const atomRounds = 6

// nucleusAt brings a nucleus, found to the search's precision, to the precision
// that its own size asks for: the size is estimated, the point polished, the
// size estimated again. It returns nil where the point is none of exactly that
// period.
func (w *walker) nucleusAt(c *precision.Fixed, period int, tolerance precision.Ext) (*NucleusPoint, error) {
	off, power := w.q.Radius.Ldexp(-settledBits), w.q.Map.Power()
	for range atomRounds {
		a, ok, err := w.atom(c, period, off)
		if !ok {
			return nil, err
		}
		size := a.size(power)
		tol := size.Abs().Ldexp(-digitBits)
		if tolerance.Sign() > 0 && tolerance.Cmp(tol) < 0 {
			tol = tolerance
		}
		if tol.E < deepest {
			return nil, ErrDeep
		}
		fine := tol.Ldexp(-polishBits)
		if off.Cmp(fine) <= 0 {
			if a.period != period {
				return nil, nil
			}
			p := &NucleusPoint{Period: period, Size: size, Shape: a.shape(power)}
			p.Re, p.Im = written(c, tol)
			return p, nil
		}
		c, err = w.polish(c, off, fine, func(c *precision.Fixed) (*precision.Fixed, bool, error) {
			return w.value("nucleus", c, period)
		})
		if c == nil {
			return nil, err
		}
		off = fine
	}
	return nil, nil
}

// value returns z_n of the critical orbit of c.
func (w *walker) value(stage string, c *precision.Fixed, n int) (*precision.Fixed, bool, error) {
	value := new(precision.Fixed)
	ok, err := w.critical(stage, c, n, func(k int, z *precision.Fixed, _ precision.ExtComplex) {
		if k == n {
			value.Set(z)
		}
	})
	return value, ok, err
}
