package kernel

import (
	"math"

	"leadline/render/formula"
)

// trap is a disc around a point of an attracting cycle that the map carries
// into itself: an orbit that enters never leaves, so its start lies inside the
// filled Julia set.
type trap struct{ re, im, r2 float64 }

// Limits of the trap search: the critical orbit is followed so far, cycles up
// to this length get traps, and discs smaller than this are not worth having.
const (
	trapSearch  = 1 << 17
	longestTrap = 64
	smallest    = 0x1p-24
)

// findTraps returns discs around the attracting cycle of the map with
// parameter c, none if there is none or it is too long. By the theorem of
// Fatou the critical orbit leads to it.
func findTraps(f formula.Map, c [2]float64, bailout float64) []trap {
	zr, zi := 0.0, 0.0
	for range trapSearch {
		zr, zi = f.Value(zr, zi)
		zr, zi = zr+c[0], zi+c[1]
		if square(zr, zi) > float64(bailout*bailout) {
			return nil
		}
	}
	n := nearestReturn(f, zr, zi, c[0], c[1], longestTrap)
	er, ei, mr, mi := around(f, zr, zi, c[0], c[1], n)
	if square(er-zr, ei-zi) > 0x1p-80 || square(mr, mi) > 1-cycleMargin {
		return nil
	}
	for r := 0.5; r > smallest; r *= 0.75 {
		if traps := discs(f, zr, zi, c, n, r); traps != nil {
			return traps
		}
	}
	return nil
}

// discs follows a disc of radius r around the cycle, bounding each image's
// radius by |f'|r + … with every term of the expansion taken in modulus, and
// returns nil unless the last image lies well within the first disc.
func discs(f formula.Map, zr, zi float64, c [2]float64, n int, r float64) []trap {
	traps := make([]trap, n)
	radius := r
	for i := range n {
		traps[i] = trap{zr, zi, float64(float64(radius*radius) * 0.998)}
		m := math.Sqrt(square(zr, zi))
		// |f(z+h) - f(z)| <= f(|z|+r) - f(|z|) for f = z^p
		hi, _ := f.Value(m+radius, 0)
		lo, _ := f.Value(m, 0)
		radius = hi - lo
		zr, zi = f.Value(zr, zi)
		zr, zi = zr+c[0], zi+c[1]
	}
	if radius > float64(0.99*r) {
		return nil
	}
	return traps
}

// trapped reports whether z lies in one of the frame's traps.
func (k *Kernel) trapped(re, im float64) bool {
	for i := range k.traps {
		t := &k.traps[i]
		if square(re-t.re, im-t.im) < t.r2 {
			return true
		}
	}
	return false
}
