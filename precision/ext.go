package precision

import (
	"fmt"
	"math"
	"math/big"
)

// Ext is a real number of double precision and practically unlimited range: the
// value M·2^E. In normal form 0.5 <= |M| < 1, or both fields are zero; every
// function and method here returns normal form and expects it. The zero value is
// the number 0, and there is one zero only, without a sign. An infinity or a NaN
// lives in M with E = 0 and travels on as in IEEE 754.
//
// Mul, Quo, Add, Sub and Sqrt round once, to nearest even, exactly as binary64
// would with an unbounded exponent. E must stay within ±2^62, which nothing
// reaches in fewer than forty squarings of the deepest view.
type Ext struct {
	M float64
	E int64
}

const (
	expMask  = 0x7ff << 52
	halfBits = 0x3fe << 52 // exponent field of numbers in [0.5, 1)
)

// normal returns m·2^e in normal form.
func normal(m float64, e int64) Ext {
	b := math.Float64bits(m)
	if f := b >> 52 & 0x7ff; f-1 < 0x7fe {
		return Ext{math.Float64frombits(b&^uint64(expMask) | halfBits), e + int64(f) - 1022}
	}
	return normalRare(m, e)
}

// normalRare is normal for zeros, subnormals, infinities and NaN.
func normalRare(m float64, e int64) Ext {
	if m == 0 {
		return Ext{}
	}
	f, n := math.Frexp(m)
	if math.IsInf(f, 0) || f != f {
		return Ext{M: f}
	}
	return Ext{f, e + int64(n)}
}

// ExtOf returns x, exactly.
func ExtOf(x float64) Ext { return normal(x, 0) }

// ExtOfBig returns x rounded to 53 bits, to nearest even.
func ExtOfBig(x *big.Float) Ext {
	var m big.Float
	e := x.MantExp(&m)
	f, _ := m.Float64()
	return normal(f, int64(e))
}

// finite reports whether a is neither an infinity nor a NaN.
func (a Ext) finite() bool { return math.Float64bits(a.M)&expMask != expMask }

// Mul returns a·b.
func (a Ext) Mul(b Ext) Ext { return normal(a.M*b.M, a.E+b.E) }

// Quo returns a/b; a non-zero number over zero is +Inf or -Inf by the sign of a, 0/0 is NaN.
func (a Ext) Quo(b Ext) Ext { return normal(a.M/b.M, a.E-b.E) }

// alignLimit is the distance in exponents from which the smaller term of a sum
// lies below a quarter of the unit in the last place of the larger.
const alignLimit = 64

// Add returns a + b.
func (a Ext) Add(b Ext) Ext {
	d := a.E - b.E
	if d < 0 {
		a, b, d = b, a, -d
	}
	switch {
	case a.M == 0 || b.M == 0, d > alignLimit:
		return addFar(a, b)
	}
	scale := math.Float64frombits(uint64(1023-d) << 52) // 2^-d; the product is exact
	return normal(a.M+float64(b.M*scale), a.E)
}

// addFar adds where one term leaves the other as it is (a has the larger exponent).
func addFar(a, b Ext) Ext {
	if !a.finite() || !b.finite() {
		return normal(a.M+b.M, 0)
	}
	if a.M == 0 {
		return b
	}
	return a
}

// Sub returns a - b.
func (a Ext) Sub(b Ext) Ext { return a.Add(b.Neg()) }

// Neg returns -a.
func (a Ext) Neg() Ext {
	if a.M == 0 {
		return Ext{}
	}
	return Ext{-a.M, a.E}
}

// Abs returns |a|.
func (a Ext) Abs() Ext { return Ext{math.Abs(a.M), a.E} }

// Sqrt returns the square root of a, NaN for negative a.
func (a Ext) Sqrt() Ext {
	if a.E&1 != 0 {
		return normal(math.Sqrt(0.5*a.M), (a.E+1)>>1)
	}
	return normal(math.Sqrt(a.M), a.E>>1)
}

// Ldexp returns a·2^n, exactly.
func (a Ext) Ldexp(n int64) Ext {
	if a.M == 0 || !a.finite() {
		return a
	}
	return Ext{a.M, a.E + n}
}

// Sign returns -1, 0 or +1; a NaN has the sign 0.
func (a Ext) Sign() int {
	switch {
	case a.M > 0:
		return 1
	case a.M < 0:
		return -1
	}
	return 0
}

// Cmp returns -1, 0 or +1 as a is less than, equal to or greater than b. A NaN
// compares as 0 with everything.
func (a Ext) Cmp(b Ext) int {
	sa, sb := a.Sign(), b.Sign()
	switch {
	case sa != sb || sa == 0 || !a.finite() || !b.finite():
		return ExtOf(cmpKey(a) - cmpKey(b)).Sign()
	case a.E != b.E:
		if (a.E < b.E) == (sa > 0) {
			return -1
		}
		return 1
	case a.M < b.M:
		return -1
	case a.M > b.M:
		return 1
	}
	return 0
}

// cmpKey orders numbers of different sign, and finite ones against infinities.
func cmpKey(a Ext) float64 {
	if math.IsInf(a.M, 0) {
		return math.Copysign(2, a.M)
	}
	return a.M
}

// Float64 returns the nearest float64 to a, rounded once even where it is
// subnormal: an infinity beyond the range of float64, a signed zero below it.
func (a Ext) Float64() float64 {
	return math.Ldexp(a.M, int(min(max(a.E, -5000), 5000)))
}

// Big returns a at the given precision in bits; 53 bits and more hold it exactly.
// A NaN panics. Exponents beyond those of big.Float give its infinity or zero.
func (a Ext) Big(bits uint) *big.Float {
	z := new(big.Float).SetPrec(bits).SetFloat64(a.M)
	return z.SetMantExp(z, int(min(max(a.E, math.MinInt32), math.MaxInt32)))
}

// Log2 returns log2(a) within 1 ulp: -Inf for zero, NaN for negative a.
func (a Ext) Log2() float64 {
	if a.E > -1000 && a.E < 1000 {
		return Log2(a.Float64())
	}
	return float64(a.E) + Log2(a.M)
}

// String returns a as a mantissa and a power of two, for debugging.
func (a Ext) String() string { return fmt.Sprintf("%gp%+d", a.M, a.E) }
