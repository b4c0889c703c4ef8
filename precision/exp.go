package precision

import "math"

// Exponentials by table (Tang 1989): with k the integer nearest to 128·x/ln 2,
//
//	exp x = 2^(k/128) · exp r,  r = x - k·ln 2/128,  |r| <= ln 2/256.
//
// k = 128·e + j takes 2^(j/128) from a table in two doubles and leaves 2^e to the
// exponent. exp r - 1 is its Taylor series to r^6 with an error below 2^-61, which
// is some 0.01 of the result's last place.

const roundShift = 0x1.8p52 // adding it rounds to an integer, ties to even

// expParts returns exp(h+l) = (s+t)·2^e with 1 <= s < 2 and |t| < 2^-7, for |h| <=
// 800 and |l| <= 2^-40.
func expParts(h, l float64) (s, t float64, e int64) {
	n := float64(h*inv128Ln2) + roundShift - roundShift
	r := math.FMA(-n, ln2By128Hi, h) + math.FMA(-n, ln2By128Lo, l)
	s, t = expSmall(int64(n)&127, r)
	return s, t, int64(n) >> 7
}

// expSmall returns 2^(j/128)·exp r as s + t, for |r| <= 0.003.
func expSmall(j int64, r float64) (s, t float64) {
	p := math.FMA(r, 1.0/720, 1.0/120)
	p = math.FMA(r, p, 1.0/24)
	p = math.FMA(r, p, 1.0/6)
	p = math.FMA(r, p, 1.0/2)
	p = math.FMA(float64(r*r), p, r)
	c := &expTable[j]
	return c.hi, math.FMA(c.hi, p, c.lo)
}

// scaleSum returns (s+t)·2^e rounded once, for 1 <= s < 2 and |t| < 2^-7.
func scaleSum(s, t float64, e int64) float64 {
	switch {
	case e > 1023:
		return (s + t) * 0x1p1023 * pow2(min(e-1023, 1023))
	case e >= -1021, e == -1022 && s+t >= 1:
		return (s + t) * pow2(e)
	case e < -1080:
		return 0
	}
	// The result is subnormal, with the last bit at 2^-1074. Adding the power of two
	// whose last bit is at 2^(-1074-e) rounds s + t < 2 to that place.
	c := pow2(-1022 - e)
	w, d := fastTwoSum(c, s)
	w += d + t
	return (w - c) * 0x1p-1021 * pow2(e+1021)
}

// Exp returns e^x, within 0.51 ulp, subnormal results included. Exp(±0) is 1,
// Exp(-Inf) is +0.
func Exp(x float64) float64 {
	switch {
	case x > 710:
		return math.Inf(1)
	case x < -746:
		return 0
	case x != x:
		return math.NaN()
	}
	return scaleSum(expParts(x, 0))
}

// Exp2 returns 2^x, within 0.51 ulp, subnormal results included; it is exact where
// x is an integer. Exp2(-Inf) is +0.
func Exp2(x float64) float64 {
	switch {
	case x > 1025:
		return math.Inf(1)
	case x < -1080:
		return 0
	case x != x:
		return math.NaN()
	}
	n := float64(x*128) + roundShift - roundShift
	r := float64((x - float64(n*0x1p-7)) * ln2)
	s, t := expSmall(int64(n)&127, r)
	return scaleSum(s, t, int64(n)>>7)
}
