package precision

import (
	"fmt"
	"math"
	"math/big"

	"github.com/ALTree/bigfloat"
)

// Logarithms, exponentials and powers in arbitrary precision, for planning: depth,
// bits, scale factors. The work is done by bigfloat, which loses a few bits of
// those asked for and slows down with large exponents; hence guardBits, and a
// reduction of every argument to exponents near zero first. Results are within a
// relative error of 2^(1-bits).

const guardBits = 64

// maxBigExp bounds the exponent of results, in bits: some 10^±19,000,000.
const maxBigExp = 1 << 26

// BigLog returns ln x to the given precision in bits. It returns -Inf for zero and
// panics for negative x.
func BigLog(x *big.Float, bits uint) *big.Float { return round(lnOf(x, bits+guardBits), bits) }

// BigLog2 returns log2 x, as BigLog does.
func BigLog2(x *big.Float, bits uint) *big.Float { return logTo(2, x, bits) }

// BigLog10 returns log10 x, as BigLog does.
func BigLog10(x *big.Float, bits uint) *big.Float { return logTo(10, x, bits) }

// logTo returns the logarithm of x to a whole base.
func logTo(base int64, x *big.Float, bits uint) *big.Float {
	work := bits + guardBits
	n := lnOf(x, work)
	if n.IsInf() {
		return round(n, bits)
	}
	return round(n.Quo(n, lnOf(new(big.Float).SetInt64(base), work)), bits)
}

// lnOf returns ln x for x >= 0 with the given working precision.
//
// With x = m·2^e, m near 1, it is e·ln 2 + ln m. Where e is zero the result may be
// small, and ln m must then be right to a relative error: 1 - m can have as many
// leading zeros as m has bits, which are added to the work.
func lnOf(x *big.Float, work uint) *big.Float {
	switch {
	case x.Sign() < 0:
		panic("precision: logarithm of a negative number")
	case x.Sign() == 0 || x.IsInf():
		return new(big.Float).SetPrec(work).SetInf(x.Sign() == 0)
	}
	m := new(big.Float)
	e := x.MantExp(m)
	if near, _ := m.Float64(); near < math.Sqrt2/2 { // to 0.707 … 1.414
		m.SetMantExp(m, 1)
		e--
	}
	work += lostBits(m)
	wide := new(big.Float).SetPrec(max(work, m.MinPrec())).Set(m)
	ln := bigfloat.Log(wide)
	if e == 0 {
		return ln
	}
	t := bigfloat.Log(new(big.Float).SetPrec(work).SetInt64(2))
	t.Mul(t, new(big.Float).SetInt64(int64(e)))
	return t.Add(t, ln)
}

// lostBits returns how many leading bits m and 1 have in common.
func lostBits(m *big.Float) uint {
	d := new(big.Float).SetPrec(m.MinPrec()+2).Sub(m, big.NewFloat(1))
	if d.Sign() == 0 {
		return 0
	}
	return uint(max(0, -d.MantExp(nil)))
}

// RangeError reports a result too large or too small for BigExp or BigPow.
type RangeError struct{ Op string }

// Error names the operation.
func (e *RangeError) Error() string {
	return fmt.Sprintf("%s: result beyond 2^±%d", e.Op, maxBigExp)
}

// BigExp returns e^x to the given precision in bits, or a *RangeError where the
// result lies beyond 2^±67108864.
func BigExp(x *big.Float, bits uint) (*big.Float, error) {
	if x.IsInf() || x.MantExp(nil) > 26 {
		return nil, &RangeError{"exp"}
	}
	return expOf(x, bits), nil
}

// expOf returns e^x for |x| < 2^27 or so: 2^k·e^r with x = k·ln 2 + r.
func expOf(x *big.Float, bits uint) *big.Float {
	work := bits + guardBits + uint(max(0, x.MantExp(nil)))
	ln2 := bigfloat.Log(new(big.Float).SetPrec(work).SetInt64(2))
	r := new(big.Float).SetPrec(work)
	k, _ := r.Quo(x, ln2).Int64()
	r.Mul(ln2, new(big.Float).SetInt64(k))
	r.Sub(x, r)
	if r.MantExp(nil) < -int(work) { // e^r is 1 + r to all bits; spares a logarithm as long as r is small
		r.Add(r, big.NewFloat(1))
	} else {
		r = bigfloat.Exp(r)
	}
	z := round(r, bits)
	return z.SetMantExp(z, int(k))
}

// BigPow returns x^y for x > 0 to the given precision in bits, or a *RangeError
// where the result lies beyond 2^±67108864. Other x panic.
func BigPow(x, y *big.Float, bits uint) (*big.Float, error) {
	if x.Sign() <= 0 || x.IsInf() || y.IsInf() {
		panic("precision: BigPow needs a positive base and finite numbers")
	}
	ln := lnOf(x, bits+guardBits+32)
	p := new(big.Float).SetPrec(bits+guardBits+32).Mul(ln, y)
	if p.IsInf() || p.MantExp(nil) > 26 {
		return nil, &RangeError{"pow"}
	}
	return expOf(p, bits), nil
}

// round returns x at the given precision.
func round(x *big.Float, bits uint) *big.Float { return new(big.Float).SetPrec(bits).Set(x) }
