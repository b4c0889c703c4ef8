package precision

import (
	"math"
	"math/bits"
)

// Sine and cosine. With k the integer nearest to x·2/π the argument is reduced to
// r = x - k·π/2, |r| <= π/4, in two doubles, and k modulo 4 selects the function
// and its sign.
//
// Up to 2^20 the reduction subtracts k·π/2 in three parts (Cody and Waite 1980),
// which errs by less than 2^-98. Beyond that, and where this leaves |r| < 2^-30, it
// multiplies by as many bits of 2/π as matter (Payne and Hanek 1983) in integers.
//
// On the reduced interval both functions are their Taylor series, cut where the
// rest is below 2^-62 of the result.

// sinSeries returns sin(r+l) for |r| <= π/4 and |l| <= ulp(r).
func sinSeries(r, l float64) float64 {
	if r == 0 {
		return r // keeps the sign of a zero
	}
	z := float64(r * r)
	p := math.FMA(z, 1.0/355687428096000, -1.0/1307674368000)
	p = math.FMA(z, p, 1.0/6227020800)
	p = math.FMA(z, p, -1.0/39916800)
	p = math.FMA(z, p, 1.0/362880)
	p = math.FMA(z, p, -1.0/5040)
	p = math.FMA(z, p, 1.0/120)
	p = math.FMA(z, p, -1.0/6)
	l = math.FMA(-0.5*z, l, l)
	return r + math.FMA(float64(z*r), p, l)
}

// cosSeries returns cos(r+l) for |r| <= π/4 and |l| <= ulp(r).
func cosSeries(r, l float64) float64 {
	z, zl := twoProd(r, r)
	p := math.FMA(z, 1.0/20922789888000, -1.0/87178291200)
	p = math.FMA(z, p, 1.0/479001600)
	p = math.FMA(z, p, -1.0/3628800)
	p = math.FMA(z, p, 1.0/40320)
	p = math.FMA(z, p, -1.0/720)
	p = math.FMA(z, p, 1.0/24)
	w, wl := fastTwoSum(1, -float64(0.5*z))
	wl -= math.FMA(r, l, 0.5*zl)
	return w + math.FMA(float64(z*z), p, wl)
}

// reduce returns r, l and k modulo 4 for finite x.
func reduce(x float64) (r, l float64, k uint64) {
	a := math.Abs(x)
	if a <= 0x1.921fb54442d18p-1 { // π/4
		return x, 0, 0
	}
	if a < 0x1p20 {
		n := float64(x*twoByPi) + roundShift - roundShift
		r = math.FMA(-n, halfPi1, x)
		r, l = twoSum(r, -float64(n*halfPi2))
		r, l = fastTwoSum(r, math.FMA(-n, halfPi3, l))
		if math.Abs(r) >= 0x1p-30 {
			return r, l, uint64(int64(n)) & 3
		}
	}
	r, l, k = reduceBig(a)
	if x < 0 {
		return -r, -l, -k & 3
	}
	return r, l, k
}

// reduceBig is reduce for finite a > 2^-10, of any size.
//
// With a = m·2^e, the bits of 2/π of weight 2^(2-e) and more give multiples of
// four; the 192 bits after them, times m and modulo 2^192, are a·2/π modulo 4 with
// 190 bits after the point and an error below 2^-137. No double lies nearer to a
// multiple of π/2 than 2^-62 of a quadrant or so.
func reduceBig(a float64) (r, l float64, k uint64) {
	b := math.Float64bits(a)
	m := b&(1<<52-1) | 1<<52
	from := int(b>>52) - 1075 - 2 + 64 // the table begins with 64 zeros before the point
	w2, w1, w0 := twoByPiBits(from), twoByPiBits(from+64), twoByPiBits(from+128)

	c1, p0 := bits.Mul64(m, w0)
	c2, p1 := bits.Mul64(m, w1)
	p1, carry := bits.Add64(p1, c1, 0)
	p2 := m*w2 + c2 + carry

	k = p2 >> 62
	p2, p1, p0 = p2<<2|p1>>62, p1<<2|p0>>62, p0<<2
	sign := 1.0
	if p2>>63 != 0 { // nearer to the next quadrant: take 1 - fraction, negative
		k = (k + 1) & 3
		sign = -1
		p0, carry = bits.Sub64(0, p0, 0)
		p1, carry = bits.Sub64(0, p1, carry)
		p2, _ = bits.Sub64(0, p2, carry)
	}
	r, l = fraction(p2, p1, p0)
	r, l = sign*r, sign*l
	h, hl := twoProd(r, halfPiHi)
	hl += math.FMA(r, halfPiLo, float64(l*halfPiHi))
	r, l = fastTwoSum(h, hl)
	return r, l, k
}

// fraction returns the fraction of 192 bits p2,p1,p0 in two doubles, which hold its
// leading 106 bits. p2 is not zero: see reduceBig.
func fraction(p2, p1, p0 uint64) (hi, lo float64) {
	n := bits.LeadingZeros64(p2)
	p2, p1 = p2<<n|p1>>(64-n), p1<<n|p0>>(64-n)
	shift := int64(n)
	hi = float64(int64(p2>>11)) * pow2(-53-shift)
	lo = float64(int64(p2&0x7ff<<42|p1>>22)) * pow2(-106-shift)
	return hi, lo
}

// twoByPiBits returns 64 bits of the table from the given one.
func twoByPiBits(from int) uint64 {
	i, n := from>>6, uint(from&63)
	return twoByPiTable[i]<<n | twoByPiTable[i+1]>>(64-n)
}

// SinCos returns the sine and the cosine of x, which is in radians: the same two
// results as Sin and Cos.
func SinCos(x float64) (sin, cos float64) {
	if math.IsInf(x, 0) || x != x {
		return math.NaN(), math.NaN()
	}
	r, l, k := reduce(x)
	s, c := sinSeries(r, l), cosSeries(r, l)
	switch k {
	case 1:
		return c, -s
	case 2:
		return -s, -c
	case 3:
		return -c, s
	}
	return s, c
}

// Sin returns the sine of x radians, within 0.7 ulp for every finite x. Sin(±0) is
// ±0, and infinities give NaN.
func Sin(x float64) float64 {
	if math.IsInf(x, 0) || x != x {
		return math.NaN()
	}
	r, l, k := reduce(x)
	return quadrant(r, l, k)
}

// Cos returns the cosine of x radians, within 0.7 ulp for every finite x.
// Infinities give NaN.
func Cos(x float64) float64 {
	if math.IsInf(x, 0) || x != x {
		return math.NaN()
	}
	r, l, k := reduce(x)
	return quadrant(r, l, (k+1)&3)
}

// quadrant returns sin(r + l + k·π/2).
func quadrant(r, l float64, k uint64) float64 {
	y := 0.0
	if k&1 == 0 {
		y = sinSeries(r, l)
	} else {
		y = cosSeries(r, l)
	}
	if k&2 != 0 {
		return -y
	}
	return y
}
