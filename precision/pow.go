package precision

import "math"

// Pow returns x^y, within 0.53 ulp, subnormal results included; results that are
// representable come out exactly. Special cases are those of IEEE 754-2019 (9.2.1)
// and C's Annex F:
//
//	Pow(x, ±0) = Pow(1, y) = 1, for NaN too; Pow(-1, ±Inf) = 1
//	Pow(x, y) = NaN for finite x < 0 and finite y that is not an integer
//	zero and infinite bases keep their sign for odd integers y
//
// It is exp(y·ln x) with the logarithm and the product in two doubles.
func Pow(x, y float64) float64 {
	if x == 1 || y == 0 {
		return 1
	}
	if x != x || y != y {
		return math.NaN()
	}
	if math.IsInf(y, 0) {
		return powInfinite(x, y)
	}
	odd, whole := parity(y)
	sign := 1.0
	if odd && math.Signbit(x) {
		sign = -1
	}
	switch {
	case x == 0 || math.IsInf(x, 0):
		if (x == 0) == (y < 0) {
			return math.Copysign(math.Inf(1), sign)
		}
		return math.Copysign(0, sign)
	case x < 0 && !whole:
		return math.NaN()
	}
	return sign * powFinite(math.Abs(x), y)
}

// powFinite returns x^y for finite x > 0 and finite y.
func powFinite(x, y float64) float64 {
	h, l := logAny(x)
	p := float64(y * h)
	switch {
	case p > 750:
		return math.Inf(1)
	case p < -750:
		return 0
	}
	return scaleSum(expParts(p, math.FMA(y, h, -p)+float64(y*l)))
}

// powInfinite returns x^y for infinite y and x that is neither NaN nor 1.
func powInfinite(x, y float64) float64 {
	a := math.Abs(x)
	switch {
	case a == 1:
		return 1
	case (a > 1) == (y > 0):
		return math.Inf(1)
	}
	return 0
}

// parity reports whether finite y is a whole number, and whether it is odd.
func parity(y float64) (odd, whole bool) {
	y = math.Abs(y)
	switch {
	case y >= 0x1p53:
		return false, true
	case y != math.Floor(y):
		return false, false
	}
	return int64(y)&1 == 1, true
}

// Cbrt returns the cube root of x, within 0.501 ulp; zeros, infinities and NaN
// return themselves.
//
// A third of the bits of x, taken as an integer, with a constant that evens
// out the error, start within 3.2 % of the root. Two
// steps of Halley's method, t(t³+2a)/(2t³+a), cube the relative error each; the
// last step is Newton's with the residual a - t³ in two doubles.
func Cbrt(x float64) float64 {
	b := math.Float64bits(x)
	sign, b := b&(1<<63), b&^(1<<63)
	if b == 0 || b >= expMask {
		return x
	}
	a, scale := math.Float64frombits(b), 1.0
	if b < 1<<52 {
		a, scale = a*0x1p54, 0x1p-18
	}
	t := cbrtRoot(a) * scale
	return math.Float64frombits(math.Float64bits(t) | sign)
}

// cbrtRoot is Cbrt for normal a > 0.
func cbrtRoot(a float64) float64 {
	// Scaled to 1/4 <= m < 2, where no cube overflows or loses bits.
	e := int64(math.Float64bits(a)>>52) - 1023
	q := (e+1025)/3 - 341 // floor((e+2)/3)
	m := math.Float64frombits(uint64(int64(math.Float64bits(a)) - 3*q<<52))
	t := math.Float64frombits(math.Float64bits(m)/3 + 0x2a9f_7800_0000_0000)
	for range 2 {
		c := float64(float64(t*t) * t)
		t = t * math.FMA(2, m, c) / math.FMA(2, c, m)
	}
	s, sl := twoProd(t, t)
	c, cl := twoProd(s, t)
	rest := (m - c) - math.FMA(sl, t, cl)
	return (t + rest/float64(3*s)) * pow2(q)
}
