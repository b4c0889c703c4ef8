package orbit

import (
	"context"
	"fmt"
	"sort"

	"leadline/precision"
)

// MisiurewiczPoint is a parameter whose critical orbit z_0 = 0, z_1 = c, …
// falls on a cycle that it is not part of.
type MisiurewiczPoint struct {
	Re, Im    precision.Decimal
	Preperiod int // the least k with z_(k+n) = z_k for some n > 0: 2 for c = -2 and c = i, never less
	Period    int // the least such n
	// Multiplier is the derivative of f^Period along the cycle. The set about
	// the point and the Julia set about its critical value look alike and like
	// themselves when magnified and turned by it (Tan Lei 1990).
	Multiplier precision.ExtComplex
}

// FindMisiurewicz finds a Misiurewicz point near the target. They are dense in
// the boundary, so the one of the lowest Preperiod + Period is meant that the
// ball about the target meets, to first order; of several the nearest. Nothing
// beyond twice the radius is taken. Errors wrap ErrNone, ErrJulia, ErrDeep,
// ErrAsked or the context's.
func FindMisiurewicz(ctx context.Context, t Target) (*MisiurewiczPoint, error) {
	p, err := t.misiurewicz(ctx)
	if err != nil {
		return nil, fmt.Errorf("finding a Misiurewicz point: %w", err)
	}
	return p, nil
}

// pairAttempts bounds how many pairs of indices are tried by Newton's method.
const pairAttempts = 16

func (t *Target) misiurewicz(ctx context.Context) (p *MisiurewiczPoint, err error) {
	w, centre, err := t.search(ctx)
	if err != nil {
		return nil, err
	}
	tol := t.Tolerance
	if tol.Sign() <= 0 {
		tol = w.q.Radius.Mul(w.q.Radius).Ldexp(-64)
	}
	if tol.E < deepest {
		return nil, ErrDeep
	}
	attempts := 0
	err = w.pairs(centre, func(k, period int) (bool, error) {
		attempts++
		p, err = w.misiurewiczAt(centre, pair{k: k, p: period}, tol)
		return p != nil || attempts == pairAttempts, err
	})
	if err == nil && p == nil {
		err = ErrNone
	}
	return p, err
}

// misiurewiczAt finds the point of exactly that preperiod and period from the
// centre, nil where there is none.
func (w *walker) misiurewiczAt(centre *precision.Fixed, r pair, tol precision.Ext) (*MisiurewiczPoint, error) {
	c, err := w.settle(centre, w.preperiodic(r))
	if c == nil {
		return nil, err
	}
	fine := tol.Ldexp(-polishBits)
	c, err = w.polish(c, w.q.Radius.Ldexp(-settledBits), fine, func(c *precision.Fixed) (*precision.Fixed, bool, error) {
		return w.joined(c, r)
	})
	if c == nil {
		return nil, err
	}
	multiplier, exact, err := w.cycle(c, r, fine)
	if !exact {
		return nil, err
	}
	m := &MisiurewiczPoint{Preperiod: r.k, Period: r.p, Multiplier: multiplier}
	m.Re, m.Im = written(c, tol)
	return m, nil
}

// near is an earlier index whose point a later one may meet.
type near struct {
	j        int
	distance precision.Ext
}

// sortNear orders by distance, then by index.
func sortNear(ns []near) {
	sort.Slice(ns, func(a, b int) bool {
		if d := ns[a].distance.Cmp(ns[b].distance); d != 0 {
			return d < 0
		}
		return ns[a].j < ns[b].j
	})
}
