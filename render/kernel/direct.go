package kernel

import "math"

// directLane is a sample of the direct regime.
type directLane struct {
	zr, zi, gr, gi, w float64
	cr, ci, add       float64
	n                 int
}

// direct iterates a sample, re + i·im pixels from the centre, without a
// reference.
func (k *Kernel) direct(re, im float64) Field {
	c := &k.cfg
	pr, pi := math.FMA(re, k.pixel, c.Centre[0]), math.FMA(im, k.pixel, c.Centre[1])
	d := directLane{zr: pr, zi: pi, gr: k.pixel, w: 1}
	if c.Julia {
		d.cr, d.ci = c.Parameter[0], c.Parameter[1]
	} else {
		d.cr, d.ci, d.add, d.n = pr, pi, k.pixel, 1
		if k.loops.interior(pr, pi) {
			return Field{State: Inside}
		}
	}
	switch k.runDirect(&d) {
	case Escaped:
		return k.escaped(d.n, d.zr, d.zi, d.gr, d.gi)
	case Inside:
		return Field{State: Inside}
	}
	return Field{State: Undecided}
}

// runDirect iterates to a decision.
func (k *Kernel) runDirect(d *directLane) State {
	if square(d.zr, d.zi) > k.bail2 {
		return Escaped
	}
	gate := 0x1p-6
	for tries := 0; d.n < k.cfg.Limit; {
		if k.loops.direct(d, k, k.cfg.Limit) == evEscape {
			return Escaped
		}
		if len(k.traps) > 0 && k.trapped(d.zr, d.zi) {
			return Inside
		}
		if k.cfg.Julia {
			continue
		}
		if d.w < gate && tries < directTries {
			if attractedDirect(k.cfg.Map, d.zr, d.zi, d.cr, d.ci, d.n) {
				return Inside
			}
			gate = float64(d.w * 0x1p-8)
			tries++
		}
		if d.w > 0x1p400 {
			d.w = 0x1p400 // only small values matter; keep it finite
		}
	}
	return Undecided
}

// directTries bounds how often the gate may open in vain.
const directTries = 6
