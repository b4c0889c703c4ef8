package formula

import (
	"math"

	"leadline/precision"
)

// Square is z².
type Square struct{}

// Power returns 2.
func (Square) Power() int { return 2 }

// Advance sets z = z².
func (Square) Advance(z *precision.Fixed, s *precision.FixedScratch) { z.Sqr(z, s) }

// Step returns (Z+d)² - Z² = (2Z + d)d.
func (Square) Step(Z, d precision.ExtComplex) precision.ExtComplex {
	return Z.Ldexp(1).Add(d).Mul(d)
}

// Derivative returns 2z.
func (Square) Derivative(z precision.ExtComplex) precision.ExtComplex { return z.Ldexp(1) }

// LinearReach returns |2Z|, where d² is as large as 2Zd.
func (Square) LinearReach(Z precision.ExtComplex) precision.Ext { return Z.Abs().Ldexp(1) }

// Value returns z².
func (Square) Value(re, im float64) (float64, float64) {
	return math.FMA(re, re, -float64(im*im)), 2 * float64(re*im)
}

// Slope returns 2z.
func (Square) Slope(re, im float64) (float64, float64) { return 2 * re, 2 * im }
