package formula

import (
	"math"

	"leadline/precision"
)

// Cube is z³.
type Cube struct{}

// Power returns 3.
func (Cube) Power() int { return 3 }

// Advance sets z = z³.
func (Cube) Advance(z *precision.Fixed, s *precision.FixedScratch) {
	var sq precision.Fixed
	sq.Sqr(z, s)
	z.Mul(z, &sq, s)
}

// Step returns (Z+d)³ - Z³ = (3Z(Z+d) + d²)d.
func (Cube) Step(Z, d precision.ExtComplex) precision.ExtComplex {
	return Z.Mul(Z.Add(d)).Scale(3).Add(d.Mul(d)).Mul(d)
}

// Derivative returns 3z².
func (Cube) Derivative(z precision.ExtComplex) precision.ExtComplex { return z.Mul(z).Scale(3) }

// LinearReach returns |Z|, where 3Zd² is as large as 3Z²d.
func (Cube) LinearReach(Z precision.ExtComplex) precision.Ext { return Z.Abs() }

// Value returns z³.
func (Cube) Value(re, im float64) (float64, float64) {
	sr, si := Square{}.Value(re, im)
	return math.FMA(sr, re, -float64(si*im)), math.FMA(sr, im, float64(si*re))
}

// Slope returns 3z².
func (Cube) Slope(re, im float64) (float64, float64) {
	sr, si := Square{}.Value(re, im)
	return 3 * sr, 3 * si
}
