// Package formula holds the maps z → f(z) + c whose sets are printed, each in
// the forms that the rest of the house needs: at full precision for reference
// orbits, as a perturbed step in extended range, and as its linear part for
// leaps. It knows no pixels, no tables and no files; the double-precision
// inner loops, which are the same formulas unrolled, live in render/kernel.
//
// A new map is one more type here and one inner loop there. Maps that are not
// holomorphic (conjugate or folded ones) will carry a real 2×2 matrix where
// the holomorphic ones carry one complex number.
package formula

import (
	"fmt"

	"leadline/precision"
)

// Map is one polynomial family z → f(z) + c with critical point 0.
type Map interface {
	// Power is the degree of f.
	Power() int
	// Advance sets z = f(z) in fixed point.
	Advance(z *precision.Fixed, s *precision.FixedScratch)
	// Step returns f(Z+d) - f(Z) without cancellation.
	Step(Z, d precision.ExtComplex) precision.ExtComplex
	// Derivative returns f'(z).
	Derivative(z precision.ExtComplex) precision.ExtComplex
	// LinearReach returns the |d| at which the first nonlinear term of Step is
	// as large as the linear one, to first order.
	LinearReach(Z precision.ExtComplex) precision.Ext
	// Value returns f(z) in doubles, and Slope f'(z).
	Value(re, im float64) (float64, float64)
	Slope(re, im float64) (float64, float64)
}

// ForPower returns z^p, the map of the Mandelbrot set (p = 2) and its
// relatives.
func ForPower(p int) (Map, error) {
	switch p {
	case 2:
		return Square{}, nil
	case 3:
		return Cube{}, nil
	}
	return nil, fmt.Errorf("no formula for power %d: 2 and 3 are known", p)
}
