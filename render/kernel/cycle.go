package kernel

import (
	"math"

	"leadline/render/formula"
)

// longestCycle bounds the cycles looked for in the direct regime.
const longestCycle = 1 << 14

// attractedDirect looks for an attracting cycle of z → f(z) + c near z, of a
// length up to most: the nearest return of z to itself proposes the length,
// Newton's method and the multiplier decide.
func attractedDirect(f formula.Map, zr, zi, cr, ci float64, most int) bool {
	length := nearestReturn(f, zr, zi, cr, ci, min(most, longestCycle))
	for range cycleSteps {
		er, ei, mr, mi := around(f, zr, zi, cr, ci, length)
		// w' = w + (f(w) - w)/(1 - multiplier)
		br, bi := er-zr, ei-zi
		dr, di := 1-mr, -mi
		q := square(dr, di)
		if !(q > 0) {
			return false
		}
		sr := math.FMA(br, dr, float64(bi*di)) / q
		si := math.FMA(bi, dr, -float64(br*di)) / q
		zr, zi = zr+sr, zi+si
		if square(zr, zi) > 16 {
			return false
		}
		if square(sr, si) < 0x1p-80 {
			return square(mr, mi) < 1-cycleMargin
		}
	}
	return false
}

// nearestReturn is the n in 1…most at which the orbit of z comes closest to z;
// it stops as soon as it has come back to the last digits.
func nearestReturn(f formula.Map, zr, zi, cr, ci float64, most int) int {
	best, at := math.Inf(1), 1
	xr, xi := zr, zi
	for n := 1; n <= most; n++ {
		xr, xi = f.Value(xr, xi)
		xr, xi = xr+cr, xi+ci
		if q := square(xr-zr, xi-zi); q < best {
			best, at = q, n
			if q < 0x1p-90 {
				break
			}
		}
	}
	return at
}

// around follows z for n iterations and returns the end and dz_n/dz_0.
func around(f formula.Map, zr, zi, cr, ci float64, n int) (xr, xi, mr, mi float64) {
	xr, xi, mr = zr, zi, 1
	for range n {
		ar, ai := f.Slope(xr, xi)
		mr, mi = math.FMA(ar, mr, -float64(ai*mi)), math.FMA(ar, mi, float64(ai*mr))
		xr, xi = f.Value(xr, xi)
		xr, xi = xr+cr, xi+ci
	}
	return xr, xi, mr, mi
}
