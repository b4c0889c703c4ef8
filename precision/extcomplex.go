package precision

import "math"

// ExtComplex is a complex number of extended range, (Re + i·Im)·2^E: two
// float64 significands that share one exponent. In normal form the larger of
// |Re| and |Im| lies in [0.5, 1); zero is the zero value. Sums and products are
// good to a few units of 2^-53 of the modulus of the result (of the larger
// operand where a sum cancels).
type ExtComplex struct {
	Re, Im float64
	E      int64
}

// shiftLimit is the exponent difference beyond which the smaller term of a sum
// is left out: it is below 2^-110 of the larger.
const shiftLimit = 110

// NewExtComplex returns (re + i·im)·2^e in normal form.
func NewExtComplex(re, im float64, e int64) ExtComplex {
	m := math.Abs(re)
	if a := math.Abs(im); a > m {
		m = a
	}
	b := int64(math.Float64bits(m)>>52) - 1022
	if b > 1000 || b < -1000 {
		if m == 0 {
			return ExtComplex{}
		}
		_, k := math.Frexp(m)
		return ExtComplex{math.Ldexp(re, -k), math.Ldexp(im, -k), e + int64(k)}
	}
	s := math.Float64frombits(uint64(1023-b) << 52)
	return ExtComplex{re * s, im * s, e + b}
}

// ExtComplexOf joins two extended reals.
func ExtComplexOf(re, im Ext) ExtComplex {
	switch {
	case re.M == 0:
		return NewExtComplex(0, im.M, im.E)
	case im.M == 0:
		return NewExtComplex(re.M, 0, re.E)
	case re.E >= im.E:
		return NewExtComplex(re.M, scale(im.M, im.E-re.E), re.E)
	}
	return NewExtComplex(scale(re.M, re.E-im.E), im.M, im.E)
}

// scale returns x·2^d for d <= 0, zero when that falls below every double.
func scale(x float64, d int64) float64 {
	if d < -1000 {
		if d < -2200 {
			return 0
		}
		return math.Ldexp(x, int(d))
	}
	return x * math.Float64frombits(uint64(1023+d)<<52)
}

// IsZero reports whether z is exactly zero.
func (z ExtComplex) IsZero() bool { return z.Re == 0 && z.Im == 0 }

// Mul returns z·x.
func (z ExtComplex) Mul(x ExtComplex) ExtComplex {
	re := math.FMA(z.Re, x.Re, -float64(z.Im*x.Im))
	im := math.FMA(z.Re, x.Im, float64(z.Im*x.Re))
	return NewExtComplex(re, im, z.E+x.E)
}

// MulReal returns z·x.
func (z ExtComplex) MulReal(x Ext) ExtComplex {
	return NewExtComplex(z.Re*x.M, z.Im*x.M, z.E+x.E)
}

// Quo returns z/x; x must not be zero.
func (z ExtComplex) Quo(x ExtComplex) ExtComplex {
	d := math.FMA(x.Re, x.Re, float64(x.Im*x.Im))
	re := math.FMA(z.Re, x.Re, float64(z.Im*x.Im)) / d
	im := math.FMA(z.Im, x.Re, -float64(z.Re*x.Im)) / d
	return NewExtComplex(re, im, z.E-x.E)
}

// Add returns z+x.
func (z ExtComplex) Add(x ExtComplex) ExtComplex {
	if z.IsZero() {
		return x
	}
	if x.IsZero() {
		return z
	}
	d := z.E - x.E
	switch {
	case d > shiftLimit:
		return z
	case d < -shiftLimit:
		return x
	case d >= 0:
		s := math.Float64frombits(uint64(1023-d) << 52)
		return NewExtComplex(math.FMA(x.Re, s, z.Re), math.FMA(x.Im, s, z.Im), z.E)
	}
	s := math.Float64frombits(uint64(1023+d) << 52)
	return NewExtComplex(math.FMA(z.Re, s, x.Re), math.FMA(z.Im, s, x.Im), x.E)
}

// Neg returns -z.
func (z ExtComplex) Neg() ExtComplex { return ExtComplex{-z.Re, -z.Im, z.E} }

// Sub returns z-x.
func (z ExtComplex) Sub(x ExtComplex) ExtComplex { return z.Add(x.Neg()) }

// Scale returns z·k for a small real factor k.
func (z ExtComplex) Scale(k float64) ExtComplex {
	return NewExtComplex(z.Re*k, z.Im*k, z.E)
}

// Ldexp returns z·2^n.
func (z ExtComplex) Ldexp(n int64) ExtComplex {
	if z.IsZero() {
		return z
	}
	z.E += n
	return z
}

// Abs returns |z|.
func (z ExtComplex) Abs() Ext {
	s := math.FMA(z.Re, z.Re, float64(z.Im*z.Im))
	return ExtOf(math.Sqrt(s)).Ldexp(z.E)
}

// Key maps |z|² to an integer that grows with it, so that two moduli are
// compared in one integer comparison whatever their range: the exponent above
// bit 40, the leading 40 bits of the significand below. KeyOf gives the same
// scale for a double.
func (z ExtComplex) Key() int64 {
	if z.IsZero() {
		return math.MinInt64
	}
	return KeyOf(math.FMA(z.Re, z.Re, float64(z.Im*z.Im))) + 2*z.E<<40
}

// KeyOf is Key for a squared modulus held in a non-negative double.
func KeyOf(square float64) int64 { return int64(math.Float64bits(square) >> 12) }

// KeyOfSquare is Key for a modulus held as an extended real; a value that is
// not positive gets the smallest key, below that of every number but zero.
func KeyOfSquare(r Ext) int64 {
	if r.M <= 0 {
		return math.MinInt64
	}
	return KeyOf(float64(r.M*r.M)) + 2*r.E<<40
}

// Complex returns z as two doubles, zero or infinite where z is out of range.
func (z ExtComplex) Complex() (re, im float64) {
	switch {
	case z.E > 1023:
		return beyond(z.Re), beyond(z.Im)
	case z.E >= -1000:
		s := math.Float64frombits(uint64(1023+z.E) << 52)
		return z.Re * s, z.Im * s
	}
	return scale(z.Re, z.E), scale(z.Im, z.E)
}

// beyond is x times a power of two past every double: an infinity, or x where
// that is zero.
func beyond(x float64) float64 {
	if x == 0 {
		return x
	}
	return x * math.Inf(1)
}
