package kernel

import (
	"math"
)

// squareLoops iterate z² + c.
type squareLoops struct{}

// steps iterates δ' = (2Z+δ)δ + δc and g' = 2zg + px.
func (squareLoops) steps(l *lane, k *Kernel, limit int) event {
	n, ref := l.span(k, limit)
	s, at := l.seg, l.m-l.seg.first
	dr, di, zr, zi, gr, gi, w := l.dr, l.di, l.zr, l.zi, l.gr, l.gi, l.w
	cr, ci, add, low, bail := l.cr, l.ci, l.add, k.low, k.bail2
	ev, i := evMore, 0
	for i < n {
		Z := &ref[i]
		tr, ti := math.FMA(2, Z.Re, dr), math.FMA(2, Z.Im, di)
		nr := math.FMA(tr, dr, math.FMA(-ti, di, cr))
		ni := math.FMA(tr, di, math.FMA(ti, dr, ci))
		d2 := math.FMA(nr, nr, float64(ni*ni))
		if d2 < low {
			ev = evLow
			break
		}
		sr, si := zr+zr, zi+zi
		w = float64(w * math.FMA(sr, sr, float64(si*si)))
		hr := math.FMA(sr, gr, math.FMA(-si, gi, add))
		gr, gi = hr, math.FMA(sr, gi, float64(si*gr))
		i++
		dr, di = nr, ni
		Z = &ref[i]
		zr, zi = Z.Re+dr, Z.Im+di
		z2 := math.FMA(zr, zr, float64(zi*zi))
		if z2 > bail {
			ev = evEscape
			break
		}
		if z2 < d2 {
			ev = evRebase
			break
		}
		if (at+i)&3 == 0 && s.leapAt(at+i, d2) {
			break
		}
	}
	l.dr, l.di, l.zr, l.zi, l.gr, l.gi, l.w = dr, di, zr, zi, gr, gi, w
	l.m += i
	l.n += i
	return ev
}

// direct iterates z' = z² + c.
func (squareLoops) direct(d *directLane, k *Kernel, limit int) event {
	zr, zi, gr, gi, w := d.zr, d.zi, d.gr, d.gi, d.w
	cr, ci, add, bail := d.cr, d.ci, d.add, k.bail2
	n := min(limit-d.n, block)
	ev, i := evMore, 0
	for i < n {
		sr, si := zr+zr, zi+zi
		w = float64(w * math.FMA(sr, sr, float64(si*si)))
		hr := math.FMA(sr, gr, math.FMA(-si, gi, add))
		gr, gi = hr, math.FMA(sr, gi, float64(si*gr))
		xr := math.FMA(zr, zr, math.FMA(-zi, zi, cr))
		zr, zi = xr, math.FMA(sr, zi, ci)
		i++
		if math.FMA(zr, zr, float64(zi*zi)) > bail {
			ev = evEscape
			break
		}
	}
	d.zr, d.zi, d.gr, d.gi, d.w = zr, zi, gr, gi, w
	d.n += i
	return ev
}

// interior knows the main cardioid, |1 - sqrt(1-4c)| < 1, and the disc of
// period 2, |c+1| < 1/4.
func (squareLoops) interior(re, im float64) bool {
	i2 := float64(im * im)
	if math.FMA(re+1, re+1, i2) < 0.0625 {
		return true
	}
	x := re - 0.25
	q := math.FMA(x, x, i2)
	return float64(q*(q+x)) < float64(0.25*i2)
}
