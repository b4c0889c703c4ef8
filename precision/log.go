package precision

import "math"

// Logarithms by table (Tang 1990): with x = 2^k·m, 0.705 <= m < 1.41, and c the
// entry of the table nearest to m,
//
//	ln x = k·ln 2 + ln c + ln(1+r),  r = m/c - 1,  |r| <= 2^-8.
//
// The table holds 1/c rounded and the logarithm of that very number, so that r,
// taken by FMA, is exact in two doubles. ln(1+r) is its Taylor series to r^9, the
// terms r and r²/2 in double-double: truncation and rounding stay under
// 2^-68·|ln x|. One interval of the table lies around 1, where c is 1 and ln c is
// 0, so that this holds near x = 1 too.

const logOffset = 0x3fe6900000000000 // bits of 0.705…: where m starts

// logParts returns ln x as hi + lo with a relative error below 2^-67 and hi equal
// to the nearest double of the sum. bits are those of a positive normal number f,
// and x = f·2^k.
func logParts(bits uint64, k int64) (hi, lo float64) {
	t := bits - logOffset
	k += int64(t) >> 52
	m := math.Float64frombits(bits - t&(0xfff<<52))
	c := &logTable[t>>45&127]

	p, pl := twoProd(m, c.inv)
	r, rl := fastTwoSum(p-1, pl)
	q, ql := twoProd(r, r)
	ql = math.FMA(2*r, rl, ql)
	u, ul := fastTwoSum(r, -float64(0.5*q))
	ul += math.FMA(-0.5, ql, rl)

	s := math.FMA(r, 1.0/9, -1.0/8)
	s = math.FMA(r, s, 1.0/7)
	s = math.FMA(r, s, -1.0/6)
	s = math.FMA(r, s, 1.0/5)
	s = math.FMA(r, s, -1.0/4)
	s = math.FMA(r, s, 1.0/3)
	ul = math.FMA(float64(q*r), s, ul)

	n := float64(k)
	th := math.FMA(n, ln2Hi, c.hi) // exact: both terms are multiples of 2^-42
	tl := math.FMA(n, ln2Lo, c.lo)
	hi, lo = twoSum(th, u)
	return fastTwoSum(hi, lo+(tl+ul))
}

// logRare returns the logarithm of numbers that are not positive, normal and
// finite, for any base above one; ok is false where x is subnormal and positive.
func logRare(x float64) (y float64, ok bool) {
	switch {
	case x != x:
		return math.NaN(), true
	case math.IsInf(x, 1):
		return x, true
	case x == 0:
		return math.Inf(-1), true
	case x < 0:
		return math.NaN(), true
	}
	return 0, false
}

// isNormal reports whether bits are those of a positive normal finite number.
func isNormal(bits uint64) bool { return bits-1<<52 < 0x7fe<<52 }

// logAny is logParts for positive finite x, subnormal ones included.
func logAny(x float64) (hi, lo float64) {
	if b := math.Float64bits(x); isNormal(b) {
		return logParts(b, 0)
	}
	return logParts(math.Float64bits(x*0x1p52), -52)
}

// Log returns the natural logarithm of x, within 0.502 ulp. Log(±0) is -Inf,
// Log(+Inf) is +Inf, and negative numbers give NaN.
func Log(x float64) float64 {
	b := math.Float64bits(x)
	if isNormal(b) {
		hi, _ := logParts(b, 0)
		return hi
	}
	if y, ok := logRare(x); ok {
		return y
	}
	hi, _ := logAny(x)
	return hi
}

// Log2 returns the logarithm of x to the base 2, within 0.502 ulp; it is exact for
// powers of two. Special cases are those of Log.
func Log2(x float64) float64 {
	if !isNormal(math.Float64bits(x)) {
		if y, ok := logRare(x); ok {
			return y
		}
	}
	hi, lo := logAny(x)
	p, pl := twoProd(hi, invLn2Hi)
	return p + (pl + math.FMA(hi, invLn2Lo, float64(lo*invLn2Hi)))
}
