package precision

import "math/big"

// Arbitrary-precision references for the tests: plain series in big.Float and
// big.Int, independent of the code under test.

func bigOf(x float64, bits uint) *big.Float { return new(big.Float).SetPrec(bits).SetFloat64(x) }

func bigNear(x *big.Float) float64 { f, _ := x.Float64(); return f }

func bigMul(a, b *big.Float) *big.Float { return new(big.Float).SetPrec(a.Prec()).Mul(a, b) }
func bigQuo(a, b *big.Float) *big.Float { return new(big.Float).SetPrec(a.Prec()).Quo(a, b) }
func bigAdd(a, b *big.Float) *big.Float { return new(big.Float).SetPrec(a.Prec()).Add(a, b) }
func bigNeg(a *big.Float) *big.Float    { return new(big.Float).Neg(a) }

func bigSub(a *big.Float, x float64) *big.Float {
	return new(big.Float).SetPrec(a.Prec()).Sub(a, bigOf(x, 53))
}

// bigPi returns π by Machin's formula, 16 atan(1/5) - 4 atan(1/239).
func bigPi(bits uint) *big.Float {
	frac := bits + 64
	x := new(big.Int).Mul(big.NewInt(16), arcCot(5, frac))
	x.Sub(x, new(big.Int).Mul(big.NewInt(4), arcCot(239, frac)))
	z := new(big.Float).SetPrec(bits).SetInt(x)
	return z.SetMantExp(z, -int(frac))
}

// arcCot returns atan(1/n)·2^frac, within some units.
func arcCot(n int64, frac uint) *big.Int {
	power := new(big.Int).Lsh(big.NewInt(1), frac)
	power.Quo(power, big.NewInt(n))
	sum, sq, term := new(big.Int), big.NewInt(n*n), new(big.Int)
	for k := int64(1); power.Sign() != 0; k += 2 {
		term.Quo(power, big.NewInt(k))
		if k&2 == 0 {
			sum.Add(sum, term)
		} else {
			sum.Sub(sum, term)
		}
		power.Quo(power, sq)
	}
	return sum
}

// bigAtan returns atan x by halving, atan x = 2 atan(x/(1+√(1+x²))), and Taylor's series.
func bigAtan(x *big.Float) *big.Float {
	bits := x.Prec()
	one := bigOf(1, bits)
	const halvings = 8
	for range halvings {
		r := bigAdd(one, bigMul(x, x))
		x = bigQuo(x, bigAdd(one, r.Sqrt(r)))
	}
	sum, power, sq := bigOf(0, bits), new(big.Float).Copy(x), bigNeg(bigMul(x, x))
	for k := 1.0; ; k += 2 {
		term := bigQuo(power, bigOf(k, bits))
		if term.Sign() == 0 || sum.Sign() != 0 && term.MantExp(nil) < sum.MantExp(nil)-int(bits)-8 {
			return sum.SetMantExp(sum, halvings)
		}
		sum = bigAdd(sum, term)
		power = bigMul(power, sq)
	}
}

// bigSinCos returns sin x and cos x for any x, reducing by π at enough bits and
// summing Taylor's series.
func bigSinCos(x *big.Float) (sin, cos *big.Float) {
	bits := x.Prec()
	wide := bits + uint(max(0, x.MantExp(nil))) + 80
	half := bigQuo(bigPi(wide), bigOf(2, wide))
	q := bigQuo(new(big.Float).SetPrec(wide).Set(x), half)
	q.Add(q, bigOf(0.5, 53))
	k, _ := q.Int(nil)
	if q.Sign() < 0 && !q.IsInt() {
		k.Sub(k, big.NewInt(1))
	}
	r := bigMul(half, new(big.Float).SetInt(k))
	r.Sub(new(big.Float).SetPrec(wide).Set(x), r)
	r.SetPrec(bits + 16)
	s, c := sinSum(r), cosSum(r)
	switch new(big.Int).And(k, big.NewInt(3)).Int64() {
	case 1:
		return c, bigNeg(s)
	case 2:
		return bigNeg(s), bigNeg(c)
	case 3:
		return bigNeg(c), s
	}
	return s, c
}

func sinSum(r *big.Float) *big.Float { return series(r, r, 1) }
func cosSum(r *big.Float) *big.Float { return series(bigOf(1, r.Prec()), r, 0) }

// series sums first·(1 - r²/((n+1)(n+2)) + …), every factor two further.
func series(first, r *big.Float, n float64) *big.Float {
	sum, term, sq := new(big.Float).Copy(first), first, bigNeg(bigMul(r, r))
	for ; term.Sign() != 0 && term.MantExp(nil) > first.MantExp(nil)-int(r.Prec())-8; n += 2 {
		term = bigQuo(bigMul(term, sq), bigOf((n+1)*(n+2), 53))
		sum = bigAdd(sum, term)
	}
	return sum
}
