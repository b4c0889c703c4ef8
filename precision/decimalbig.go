package precision

import "math/big"

// pow5 returns 5^n.
func pow5(n int) *big.Int { return new(big.Int).Exp(big.NewInt(5), big.NewInt(int64(n)), nil) }

// integer returns the signed integer of d's digits.
func (d Decimal) integer() *big.Int {
	n := new(big.Int)
	if d.digits != "" {
		n.SetString(d.digits, 10)
	}
	if d.neg {
		n.Neg(n)
	}
	return n
}

// Float returns the number nearest to d with the given precision in bits, ties
// to even, rounded once. Zero bits is a programmer's mistake and panics.
//
// With d = N·10^e and e < 0, the quotient N·2^s/5^-e is taken to two bits more
// than asked for; a last bit that says whether a remainder was left decides ties,
// so that the one rounding of SetInt rounds d itself.
func (d Decimal) Float(bits uint) *big.Float {
	if bits == 0 {
		panic("precision: Decimal.Float at zero bits")
	}
	z := new(big.Float).SetPrec(bits)
	n := d.integer()
	if d.exp >= 0 {
		z.SetInt(n.Mul(n, pow5(d.exp)))
		return z.SetMantExp(z, d.exp)
	}
	den := pow5(-d.exp)
	s := max(0, int(bits)+3-n.BitLen()+den.BitLen())
	q, r := n.QuoRem(n.Lsh(n, uint(s)), den, new(big.Int))
	sticky := r.Sign()
	q.Lsh(q, 1)
	if sticky != 0 {
		q.Add(q, big.NewInt(int64(sticky)))
	}
	z.SetInt(q)
	return z.SetMantExp(z, d.exp-s-1)
}

// Fixed returns d·2^frac rounded to an integer, ties to even: d in fixed point
// with frac bits after the point.
func (d Decimal) Fixed(frac uint) *big.Int {
	n := d.integer()
	if d.exp >= 0 {
		n.Mul(n, pow5(d.exp))
		return n.Lsh(n, uint(d.exp)+frac)
	}
	den, shift := pow5(-d.exp), int(frac)+d.exp
	if shift >= 0 {
		n.Lsh(n, uint(shift))
	} else {
		den.Lsh(den, uint(-shift))
	}
	return quoEven(n, den)
}

// quoEven sets n to n/den rounded to nearest, ties to even, for positive den.
func quoEven(n, den *big.Int) *big.Int {
	q, r := n.QuoRem(n, den, new(big.Int))
	sign := int64(r.Sign())
	switch c := r.Lsh(r.Abs(r), 1).Cmp(den); {
	case c > 0, c == 0 && q.Bit(0) == 1:
		q.Add(q, big.NewInt(sign))
	}
	return q
}

// Ext returns d rounded once to the 53 bits of an Ext.
func (d Decimal) Ext() Ext { return ExtOfBig(d.Float(53)) }
