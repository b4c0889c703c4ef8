package precision

import "math"

// Atan2 returns the angle of the point (x, y) in radians, from -π to π, within 0.51
// ulp, subnormal results included. Signed zeros and infinities count as in C's
// Annex F: Atan2(±0, x) is ±0 for x = +0 or above and ±π for x = -0 or below, and
// infinite coordinates give multiples of π/4.
//
// The smaller coordinate over the larger is a tangent q in [0, 1]. With c the
// multiple of 1/64 nearest to q,
//
//	atan q = atan c + atan t,  t = (q - c)/(1 + q·c),  |t| <= 1/128,
//
// atan c and multiples of π/2 come from tables in two doubles, t is in two doubles,
// and atan t is its Taylor series to t^11.
func Atan2(y, x float64) float64 {
	if x != x || y != y {
		return math.NaN()
	}
	ax, ay := math.Abs(x), math.Abs(y)
	var hi, lo float64 // the angle in the first quadrant
	switch {
	case ay == 0:
	case ay > ax:
		hi, lo = atanQuotient(ax, ay)
		hi, lo = from(halfPiHi, halfPiLo, hi, lo)
	default:
		hi, lo = atanQuotient(ay, ax)
	}
	if math.Signbit(x) {
		hi, lo = from(2*halfPiHi, 2*halfPiLo, hi, lo)
	}
	return math.Copysign(hi+lo, y)
}

// from returns (h + l) - (hi + lo), for h + l well above the other.
func from(h, l, hi, lo float64) (float64, float64) {
	s, e := fastTwoSum(h, -hi)
	return s, e + (l - lo)
}

// atanQuotient returns atan(s/b) as hi + lo, for 0 <= s <= b, b > 0.
func atanQuotient(s, b float64) (hi, lo float64) {
	if math.IsInf(b, 1) {
		if math.IsInf(s, 1) {
			return 0.5 * halfPiHi, 0.5 * halfPiLo
		}
		return 0, 0
	}
	// Beyond 2^-30 the division's own rounding is all that shows, and it is right
	// where the quotient is subnormal.
	if s < b*0x1p-30 {
		return s / b, 0
	}
	return atanReduced(scalePair(s, b))
}

// scalePair multiplies both by one power of two so that products neither overflow
// nor lose bits.
func scalePair(s, b float64) (float64, float64) {
	switch {
	case b >= 0x1p500:
		return s * 0x1p-600, b * 0x1p-600
	case b <= 0x1p-500:
		return s * 0x1p600, b * 0x1p600
	}
	return s, b
}

// atanReduced is atanQuotient for 2^-30 <= s/b <= 1 and moderate exponents.
func atanReduced(s, b float64) (hi, lo float64) {
	i := int(float64(s/b*64) + 0.5)
	c := float64(i) * 0x1p-6

	p, pl := twoProd(c, b)
	n, nl := twoSum(s, -p) // exact together with -pl
	nl -= pl
	p, pl = twoProd(c, s)
	d, dl := fastTwoSum(b, p)
	dl += pl
	t := n / d
	tl := (math.FMA(-t, d, n) + (nl - float64(t*dl))) / d

	z := float64(t * t)
	q := math.FMA(z, -1.0/11, 1.0/9)
	q = math.FMA(z, q, -1.0/7)
	q = math.FMA(z, q, 1.0/5)
	q = math.FMA(z, q, -1.0/3)
	a := &atanTable[i]
	h, l := twoSum(a.hi, t)
	return h, l + (a.lo + math.FMA(float64(z*t), q, tl))
}
