package kernel

import (
	"math"

	"leadline/precision"
)

// Inside by the theorem of Fatou: if c has an attracting cycle, the critical
// orbit is bounded. A small derivative along the orbit alone is no proof (a
// point slipping past a cusp reaches |dz_n/dz_1| = 110/n²), so it only opens a
// gate; behind the gate Newton's method looks for the cycle, whose length the
// critical orbit's nearest return to 0 proposes, and its multiplier decides.
//
// The gate's measure starts anew at every return that is twice as near as all
// before. Counted from z_1 it would be of no use at depth: in a copy of the set
// of size s the first return alone has |dz_n/dz_1| of about 1/√s, which the
// cycle must first wear down, at a period for every factor of its multiplier.

// nearer is how much smaller a squared modulus's key is at half the modulus.
const nearer = 2 << 40

// noteReturn looks at a return to the critical point: at one twice as near as
// all before, the gate's measure starts anew.
func (k *Kernel) noteReturn(l *lane) {
	if l.probing || k.cfg.Julia {
		return
	}
	key := precision.KeyOf(square(l.dr, l.di))
	if l.deep {
		key = l.d.Key()
	}
	if key = max(key, math.MinInt64+nearer); key < l.nearKey-nearer || l.nearN == 0 {
		l.nearKey, l.nearN = key, l.n
		l.w, l.we, l.gate = 1, 0, firstGate
	}
}

// gated reports whether the sample, having just returned to the start of the
// critical orbit, is proved to lie inside. Only whole multiples of the proposed
// length count: in between, the derivative holds the small factor of the
// return without the large ones that follow it.
func (k *Kernel) gated(l *lane) bool {
	if l.probing || l.nearN == 0 || l.m != k.cfg.Reference.Rebase || (l.we == 0 && l.w > 0x1p-6) {
		return false
	}
	if (l.n-l.nearN)%l.nearN != 0 {
		return false
	}
	l.normaliseGate()
	if l.we > l.gate || l.gate < lastGate {
		return false
	}
	l.gate = l.we - gateStep
	return k.attracted(l)
}

// The cycle search: Newton steps at most, the relative size of the last one,
// and how far below 1 the multiplier's square must stay.
const (
	cycleSteps   = 20
	cycleSettled = -30
	cycleMargin  = 0x1p-20
)

// attracted looks for an attracting cycle of length l.nearN near the lane's z,
// which is its δ here.
func (k *Kernel) attracted(l *lane) bool {
	w, one := l.d, precision.NewExtComplex(1, 0, 0)
	if !l.deep {
		w = precision.NewExtComplex(l.dr, l.di, 0)
	}
	span := w.Abs().Ldexp(3)
	for range cycleSteps {
		t := k.probe(l, w)
		if k.run(&t, l.nearN) != Undecided {
			return false
		}
		z, g := k.value(&t)
		multiplier := g.Ldexp(-w.E)
		gap := one.Sub(multiplier)
		if gap.IsZero() {
			return false
		}
		step := z.Sub(w).Quo(gap)
		w = w.Add(step)
		if w.Abs().Cmp(span) > 0 {
			return false
		}
		if step.IsZero() || step.Abs().Cmp(w.Abs().Ldexp(cycleSettled)) < 0 {
			re, im := multiplier.Complex()
			return square(re, im) < 1-cycleMargin
		}
	}
	return false
}

// probe starts a lane at z = w with l's parameter, its derivative by w scaled
// to w's size so that it stays in the range in which w does.
func (k *Kernel) probe(l *lane, w precision.ExtComplex) lane {
	t := lane{
		w: 1, probing: true, seg: &k.segs[len(k.segs)-1], m: k.cfg.Reference.Rebase,
		c: l.c, cr: l.cr, ci: l.ci, unitR: l.unitR, unitI: l.unitI,
		deep: true, d: w, g: precision.NewExtComplex(1, 0, w.E), gate: math.MinInt64,
	}
	t.zr, t.zi = w.Complex()
	if !k.deep || w.E > deepExit {
		k.leaveDeep(&t)
	}
	return t
}

// value returns a lane's z and derivative in extended range.
func (k *Kernel) value(l *lane) (z, g precision.ExtComplex) {
	d := l.d
	g = l.g
	if !l.deep {
		d = precision.NewExtComplex(l.dr, l.di, 0)
		g = precision.NewExtComplex(l.gr, l.gi, 0)
	}
	return k.cfg.Reference.At(l.m).Add(d), g
}
