package kernel

import "math"

// cubeLoops iterate z³ + c.
type cubeLoops struct{}

// steps iterates δ' = (3Zz + δ²)δ + δc and g' = 3z²g + px.
func (cubeLoops) steps(l *lane, k *Kernel, limit int) event {
	n, ref := l.span(k, limit)
	s, at := l.seg, l.m-l.seg.first
	dr, di, zr, zi, gr, gi, w := l.dr, l.di, l.zr, l.zi, l.gr, l.gi, l.w
	cr, ci, add, low, bail := l.cr, l.ci, l.add, k.low, k.bail2
	ev, i := evMore, 0
	for i < n {
		Z := &ref[i]
		ur, ui := math.FMA(Z.Re, zr, -float64(Z.Im*zi)), math.FMA(Z.Re, zi, float64(Z.Im*zr))
		qr, qi := math.FMA(dr, dr, -float64(di*di)), 2*float64(dr*di)
		vr, vi := math.FMA(3, ur, qr), math.FMA(3, ui, qi)
		nr := math.FMA(vr, dr, math.FMA(-vi, di, cr))
		ni := math.FMA(vr, di, math.FMA(vi, dr, ci))
		d2 := math.FMA(nr, nr, float64(ni*ni))
		if d2 < low {
			ev = evLow
			break
		}
		sr, si := cubeSlope(zr, zi)
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

// cubeSlope is 3z².
func cubeSlope(re, im float64) (float64, float64) {
	return 3 * math.FMA(re, re, -float64(im*im)), 6 * float64(re*im)
}

// direct iterates z' = z³ + c.
func (cubeLoops) direct(d *directLane, k *Kernel, limit int) event {
	zr, zi, gr, gi, w := d.zr, d.zi, d.gr, d.gi, d.w
	n := min(limit-d.n, block)
	ev, i := evMore, 0
	for i < n {
		sr, si := cubeSlope(zr, zi)
		w = float64(w * math.FMA(sr, sr, float64(si*si)))
		hr := math.FMA(sr, gr, math.FMA(-si, gi, d.add))
		gr, gi = hr, math.FMA(sr, gi, float64(si*gr))
		qr, qi := math.FMA(zr, zr, -float64(zi*zi)), 2*float64(zr*zi)
		xr := math.FMA(qr, zr, math.FMA(-qi, zi, d.cr))
		zr, zi = xr, math.FMA(qr, zi, math.FMA(qi, zr, d.ci))
		i++
		if math.FMA(zr, zr, float64(zi*zi)) > k.bail2 {
			ev = evEscape
			break
		}
	}
	d.zr, d.zi, d.gr, d.gi, d.w = zr, zi, gr, gi, w
	d.n += i
	return ev
}

// interior knows no component of the cubic set by formula.
func (cubeLoops) interior(re, im float64) bool { return false }
