package kernel

import (
	"leadline/precision"
)

// A deep frame's lane leaves extended range when the exponent of δ passes
// deepExit and returns to it when |δ|² falls under deepLow; between the two
// lies a gap of 2^20, and the way back does one iteration in extended range,
// so the lane cannot swing between the regimes without advancing.
const (
	deepExit = -400
	deepLow  = 0x1p-840
)

// enterDeep moves δ and the derivative to extended range.
func (k *Kernel) enterDeep(l *lane) {
	l.deep = true
	l.d = precision.NewExtComplex(l.dr, l.di, 0)
	l.g = precision.NewExtComplex(l.gr, l.gi, 0)
}

// leaveDeep moves δ and the derivative to doubles.
func (k *Kernel) leaveDeep(l *lane) {
	l.deep = false
	l.dr, l.di = l.d.Complex()
	l.gr, l.gi = l.g.Complex()
}

// deepAdvance takes one leap or one step in extended range.
func (k *Kernel) deepAdvance(l *lane, limit int) event {
	ref := k.cfg.Reference
	if !k.deepLeap(l, limit) {
		z := ref.At(l.m)
		v := z.Add(l.d)
		a := k.cfg.Map.Derivative(v)
		l.g = a.Mul(l.g).Add(precision.NewExtComplex(l.unitAdd, 0, k.unit))
		l.d = k.cfg.Map.Step(z, l.d).Add(l.c)
		l.m++
		l.n++
		l.weigh(a)
	}
	z := ref.At(l.m).Add(l.d)
	l.zr, l.zi = z.Complex()
	if l.d.E > deepExit {
		k.leaveDeep(l)
		return k.judge(l, square(l.dr, l.di))
	}
	if square(l.zr, l.zi) > k.bail2 {
		k.leaveDeep(l)
		return evEscape
	}
	if z.Key() < l.d.Key() {
		l.d = z
		return evRebase
	}
	return evMore
}

// deepLeap takes the longest leap that holds, if any.
func (k *Kernel) deepLeap(l *lane, limit int) bool {
	s := l.seg
	at := l.m - s.first
	if at < 0 || len(s.key) == 0 {
		return false
	}
	lv, i, length := s.find(at, l.d.Key(), limit-l.n)
	if lv == nil {
		return false
	}
	p := &lv.Leap[i]
	a, b := p.A(), p.B()
	l.d = a.Mul(l.d).Add(b.Mul(precision.NewExtComplex(l.unitR, l.unitI, 0)))
	l.g = a.Mul(l.g).Add(b.Scale(l.unitAdd))
	l.m += length
	l.n += length
	l.weigh(a)
	return true
}

// weigh multiplies the gate's measure by |a|².
func (l *lane) weigh(a precision.ExtComplex) {
	l.w = float64(l.w * square(a.Re, a.Im))
	l.we += 2 * a.E
	l.normaliseGate()
}
