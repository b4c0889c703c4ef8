package kernel

import (
	"math"

	"leadline/precision"
	"leadline/render/orbit"
)

// lane is one sample on its way: z = Z_m + δ is its n-th iterate.
type lane struct {
	dr, di float64 // δ
	zr, zi float64 // z
	gr, gi float64 // derivative of z by the sample's position in pixels
	w      float64 // |dz_n/dz_k|² from the nearest return z_k on, scaled by 2^we: the gate's measure
	we     int64
	cr, ci float64 // δc, zero where it is below the range of doubles
	add    float64 // what every step adds to the derivative
	m, n   int
	seg    *segment

	deep bool // δ and g are held in d and g
	d, g precision.ExtComplex
	c    precision.ExtComplex // δc

	unitR, unitI float64 // δc in units of 2^unit, as leaps take it
	unitAdd      float64

	gate    int64 // the next gate: exponent of |dz_n/dz_k|²
	nearKey int64 // the nearest return to 0: its key,
	nearN   int   // and its index k
	probing bool  // inside check under way: no gate
}

// The gate opens when |dz_n/dz_k| falls below 2^-3, and each time it led to
// nothing closes further, gateTries times at most.
const (
	firstGate = -6
	gateStep  = 8
	lastGate  = firstGate - 6*gateStep
)

// start puts a sample, re + i·im pixels from the reference point, at its first
// index: z_1 = c for a Mandelbrot set, z_0 for a Julia set.
func (k *Kernel) start(re, im float64) lane {
	l := lane{w: 1, gate: firstGate, nearKey: math.MaxInt64, seg: &k.segs[0]}
	d := precision.NewExtComplex(float64(re*k.spacing), float64(im*k.spacing), k.unit)
	px := precision.NewExtComplex(k.spacing, 0, k.unit)
	if !k.cfg.Julia {
		l.m, l.n = 1, 1
		l.c = d
		l.cr, l.ci = d.Complex()
		l.unitR, l.unitI = float64(re*k.spacing), float64(im*k.spacing)
		l.add, l.unitAdd = k.pixel, k.spacing
	}
	l.d, l.g, l.deep = d, px, true
	z := k.cfg.Reference.Points[l.m]
	dr, di := d.Complex()
	l.zr, l.zi = z.Re+dr, z.Im+di
	if !k.deep || d.E > deepExit {
		k.leaveDeep(&l)
	}
	return l
}

// run iterates until the sample escapes, is proved inside, or limit is reached.
func (k *Kernel) run(l *lane, limit int) State {
	if math.FMA(l.zr, l.zr, float64(l.zi*l.zi)) > k.bail2 {
		return Escaped
	}
	for l.n < limit {
		if l.m == l.seg.End {
			k.wrap(l)
			if k.gated(l) {
				return Inside
			}
		}
		var ev event
		if l.deep {
			ev = k.deepAdvance(l, limit)
		} else {
			ev = k.leap(l, limit)
			if ev == evNone {
				ev = k.loops.steps(l, k, limit)
			}
		}
		switch ev {
		case evEscape:
			return Escaped
		case evRebase:
			k.rebase(l)
			if k.gated(l) {
				return Inside
			}
		case evLow:
			k.enterDeep(l)
		}
		if l.w > 0x1p400 || l.w < 0x1p-400 {
			l.normaliseGate()
		}
		if len(k.traps) > 0 && k.trapped(l.zr, l.zi) {
			return Inside
		}
	}
	return Undecided
}

// event says why an inner loop stopped.
type event uint8

const (
	evNone   event = iota // nothing was done
	evMore                // some iterations were done
	evEscape              // |z| > bailout
	evRebase              // |z| < |δ|
	evLow                 // the next step would leave the range of doubles
)

// wrap handles the end of a segment: a closed orbit goes round, an open one
// hands over to the critical orbit.
func (k *Kernel) wrap(l *lane) {
	if w := l.seg.Wrap; w >= 0 {
		l.m = w
		if w == k.cfg.Reference.Rebase {
			k.noteReturn(l)
		}
		return
	}
	if l.deep {
		l.d = k.cfg.Reference.At(l.m).Add(l.d)
	}
	k.rebase(l)
}

// rebase takes z itself as the difference to the critical orbit's start, 0.
func (k *Kernel) rebase(l *lane) {
	l.m = k.cfg.Reference.Rebase
	l.seg = &k.segs[len(k.segs)-1]
	if !l.deep { // else z is in d already
		l.dr, l.di = l.zr, l.zi
		if math.FMA(l.dr, l.dr, float64(l.di*l.di)) < k.low {
			k.enterDeep(l)
		}
	}
	k.noteReturn(l)
}

// normaliseGate moves w's exponent into we.
func (l *lane) normaliseGate() {
	if l.w == 0 || math.IsInf(l.w, 0) {
		l.w, l.we = 1, 1<<40 // out of range: the gate stays shut
		return
	}
	f, e := math.Frexp(l.w)
	l.w, l.we = f, l.we+int64(e)
}

// leap takes the longest leap that holds at the lane's place, if any.
func (k *Kernel) leap(l *lane, limit int) event {
	s := l.seg
	at := l.m - s.first
	if at < 0 || at&(1<<orbit.ShortestLeap-1) != 0 || len(s.key) == 0 {
		return evNone
	}
	key := precision.KeyOf(math.FMA(l.dr, l.dr, float64(l.di*l.di)))
	lv, i, length := s.find(at, key, limit-l.n)
	if lv == nil {
		return evNone
	}
	p := &lv.Leap[i]
	if p.Ae != 0 || p.Be > 0 {
		k.enterDeep(l)
		return k.deepAdvance(l, limit)
	}
	nr := math.FMA(p.Ar, l.dr, -float64(p.Ai*l.di))
	ni := math.FMA(p.Ar, l.di, float64(p.Ai*l.dr))
	gr := math.FMA(p.Ar, l.gr, -float64(p.Ai*l.gi))
	gi := math.FMA(p.Ar, l.gi, float64(p.Ai*l.gr))
	if p.Be == 0 { // else B·δc is below 2^-100 of anything kept in doubles
		nr = math.FMA(p.Br, l.unitR, math.FMA(-p.Bi, l.unitI, nr))
		ni = math.FMA(p.Br, l.unitI, math.FMA(p.Bi, l.unitR, ni))
		gr = math.FMA(p.Br, l.unitAdd, gr)
		gi = math.FMA(p.Bi, l.unitAdd, gi)
	}
	d2 := math.FMA(nr, nr, float64(ni*ni))
	if d2 < k.low {
		return evLow
	}
	l.dr, l.di, l.gr, l.gi = nr, ni, gr, gi
	l.m += length
	l.n += length
	l.w = float64(l.w * math.FMA(p.Ar, p.Ar, float64(p.Ai*p.Ai)))
	z := k.cfg.Reference.Points[l.m]
	l.zr, l.zi = z.Re+nr, z.Im+ni
	return k.judge(l, d2)
}

// judge compares z with the bailout and with δ.
func (k *Kernel) judge(l *lane, d2 float64) event {
	z2 := math.FMA(l.zr, l.zr, float64(l.zi*l.zi))
	switch {
	case z2 > k.bail2:
		return evEscape
	case z2 < d2:
		return evRebase
	}
	return evMore
}

// find returns the longest leap from offset at whose radius exceeds key and
// whose length does not exceed most. Radii never grow with the level.
func (s *segment) find(at int, key int64, most int) (lv *orbit.Level, i, length int) {
	for j := range s.levels {
		size := 1 << (orbit.ShortestLeap + j)
		if at&(size-1) != 0 || size > most {
			break
		}
		v := &s.levels[j]
		q := at >> (orbit.ShortestLeap + j)
		if q >= len(v.Key) || key >= v.Key[q] {
			break
		}
		lv, i, length = v, q, size
	}
	return lv, i, length
}
