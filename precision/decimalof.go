package precision

import (
	"math/big"
	"strconv"
	"strings"
)

// DecimalOf returns x rounded to the given count of significant digits (1 to
// MaxDigits; counts outside are taken to the nearer end), ties to even, without
// trailing zeros. An x that is infinite, or whose leading power of ten is beyond
// MaxExponent, is a programmer's mistake and panics.
func DecimalOf(x *big.Float, digits int) Decimal {
	if x.Sign() == 0 {
		return Decimal{}
	}
	digits = min(max(digits, 1), MaxDigits)
	full := pow5(digits)
	full.Lsh(full, uint(digits)) // 10^digits
	places := digits - 1 - leadBelow(x)
	n := scaledInt(x, places)
	for n.CmpAbs(full) >= 0 { // the estimate was one too small, or rounding carried
		places--
		n = scaledInt(x, places)
	}
	return newDecimal(n, -places)
}

// DecimalNear returns the decimal of fewest digits that lies within tol of x, and
// of those the one nearest to x. A tol of zero or less asks for x itself, exactly,
// up to MaxDigits digits. It panics as DecimalOf does.
//
// Half a unit of the last of p places is within tol from some p on. A number of p
// places is one of p+1 places too, so the nearest ones only come nearer as p
// grows, and the first p that fails ends the search downwards.
func DecimalNear(x *big.Float, tol Ext) Decimal {
	if x.Sign() == 0 {
		return Decimal{}
	}
	if tol.Sign() <= 0 {
		return DecimalOf(x, MaxDigits)
	}
	t := tol.Big(53)
	if new(big.Float).Abs(x).Cmp(t) <= 0 {
		return Decimal{}
	}
	best := newDecimal(scaledInt(x, -leadBelow(t)), leadBelow(t))
	for {
		exp := best.exp + 1
		n := scaledInt(x, -exp)
		if !within(n, exp, x, t) {
			return best
		}
		best = newDecimal(n, exp)
	}
}

// within reports |n·10^exp - x| <= t, exactly.
func within(n *big.Int, exp int, x, t *big.Float) bool {
	twos := max(0, lastBit(x), lastBit(t))
	left := new(big.Int).Set(n)
	if exp > 0 {
		left.Mul(left, pow5(exp))
		left.Lsh(left, uint(exp))
	}
	left.Lsh(left, uint(twos))
	tens := max(0, -exp)
	left.Sub(left, times(x, twos, tens))
	return left.CmpAbs(times(t, twos, tens)) <= 0
}

// lastBit returns n such that 2^-n is the weight of x's last set bit.
func lastBit(x *big.Float) int { return int(x.MinPrec()) - x.MantExp(nil) }

// times returns x·2^twos·10^tens, which must be an integer.
func times(x *big.Float, twos, tens int) *big.Int {
	n, e := mantissa(x)
	n.Lsh(n, uint(e+twos+tens))
	return n.Mul(n, pow5(tens))
}

// mantissa returns n and e with x = n·2^e and n odd (or zero).
func mantissa(x *big.Float) (n *big.Int, e int) {
	m := new(big.Float)
	e = x.MantExp(m)
	bits := int(x.MinPrec())
	n, _ = m.SetMantExp(m, bits).Int(nil)
	return n, e - bits
}

// scaledInt returns x·10^places rounded to an integer, ties to even.
func scaledInt(x *big.Float, places int) *big.Int {
	n, e := mantissa(x)
	den := big.NewInt(1)
	if places >= 0 {
		n.Mul(n, pow5(places))
	} else {
		den = pow5(-places)
	}
	if e += places; e >= 0 {
		n.Lsh(n, uint(e))
	} else {
		den.Lsh(den, uint(-e))
	}
	return quoEven(n, den)
}

// leadBelow returns the power of ten of x's leading digit, or one less. It refuses
// numbers far beyond MaxExponent before they cause work.
func leadBelow(x *big.Float) int {
	const log2Limit = 70000 // MaxExponent is 2^66439 or so
	e := x.MantExp(nil) - 1 // 2^e <= |x|
	if x.IsInf() || e > log2Limit || e < -log2Limit {
		panic("precision: number beyond the range of Decimal")
	}
	const num, den = 3010299956639, 10000000000000 // log10(2)
	q := e * num / den
	if e < 0 {
		q--
	}
	return q
}

// newDecimal returns n·10^exp, written in the way a person would.
func newDecimal(n *big.Int, exp int) Decimal {
	s := n.String()
	digits, neg := strings.CutPrefix(s, "-")
	kept := strings.TrimRight(digits, "0")
	if kept == "" {
		return Decimal{}
	}
	exp += len(digits) - len(kept)
	if lead := exp + len(kept) - 1; lead > MaxExponent || lead < -MaxExponent {
		panic("precision: number beyond the range of Decimal")
	}
	d := Decimal{digits: kept, exp: exp, neg: neg}
	d.text = d.written()
	return d
}

// written spells d plainly while that takes few extra zeros, else with an exponent.
func (d Decimal) written() string {
	const zeros = 6
	sign := ""
	if d.neg {
		sign = "-"
	}
	point := len(d.digits) + d.exp // digits before the point
	switch {
	case d.exp >= 0 && d.exp <= zeros:
		return sign + d.digits + strings.Repeat("0", d.exp)
	case d.exp < 0 && point > 0:
		return sign + d.digits[:point] + "." + d.digits[point:]
	case d.exp < 0 && point > -zeros:
		return sign + "0." + strings.Repeat("0", -point) + d.digits
	}
	mant := d.digits[:1]
	if len(d.digits) > 1 {
		mant += "." + d.digits[1:]
	}
	return sign + mant + "e" + strconv.Itoa(point-1)
}
