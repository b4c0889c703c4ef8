package precision

import (
	"math"
	"math/big"
	"math/bits"
)

// Fixed is a fixed-point complex number (Re + i·Im)/2^Frac of arbitrary size.
// It is the workhorse of reference orbits: one squaring allocates nothing once
// its scratch has grown. The zero value with Frac set is zero.
type Fixed struct {
	Re, Im big.Int
	Frac   uint
}

// FixedScratch holds the temporaries of Fixed products. The zero value is
// ready; it must not be shared between goroutines.
type FixedScratch struct{ a, b, c, d big.Int }

// NewFixed rounds re + i·im to frac fractional bits.
func NewFixed(re, im Decimal, frac uint) *Fixed {
	z := &Fixed{Frac: frac}
	z.Re.Set(re.Fixed(frac))
	z.Im.Set(im.Fixed(frac))
	return z
}

// Set copies x to z, fraction length included.
func (z *Fixed) Set(x *Fixed) *Fixed {
	z.Re.Set(&x.Re)
	z.Im.Set(&x.Im)
	z.Frac = x.Frac
	return z
}

// Add sets z = x + y; both have z's fraction length.
func (z *Fixed) Add(x, y *Fixed) *Fixed {
	z.Re.Add(&x.Re, &y.Re)
	z.Im.Add(&x.Im, &y.Im)
	return z
}

// Sub sets z = x - y; both have z's fraction length.
func (z *Fixed) Sub(x, y *Fixed) *Fixed {
	z.Re.Sub(&x.Re, &y.Re)
	z.Im.Sub(&x.Im, &y.Im)
	return z
}

// Sqr sets z = x² by three real squarings, (x+y)²-x²-y² being 2xy; each part is
// floored at the last fractional bit.
func (z *Fixed) Sqr(x *Fixed, s *FixedScratch) *Fixed {
	s.c.Add(&x.Re, &x.Im)
	s.a.Mul(&x.Re, &x.Re)
	s.b.Mul(&x.Im, &x.Im)
	s.d.Mul(&s.c, &s.c)
	s.d.Sub(&s.d, &s.a)
	s.d.Sub(&s.d, &s.b)
	s.a.Sub(&s.a, &s.b)
	z.Re.Rsh(&s.a, x.Frac)
	z.Im.Rsh(&s.d, x.Frac)
	z.Frac = x.Frac
	return z
}

// Mul sets z = x·y, each part floored at the last fractional bit; x and y have
// the same fraction length.
func (z *Fixed) Mul(x, y *Fixed, s *FixedScratch) *Fixed {
	s.a.Mul(&x.Re, &y.Re)
	s.b.Mul(&x.Im, &y.Im)
	s.a.Sub(&s.a, &s.b)
	s.b.Mul(&x.Re, &y.Im)
	s.c.Mul(&x.Im, &y.Re)
	s.b.Add(&s.b, &s.c)
	z.Re.Rsh(&s.a, x.Frac)
	z.Im.Rsh(&s.b, x.Frac)
	z.Frac = x.Frac
	return z
}

// Equal reports whether both parts agree to the last bit.
func (z *Fixed) Equal(x *Fixed) bool {
	return z.Re.Cmp(&x.Re) == 0 && z.Im.Cmp(&x.Im) == 0
}

// Ext returns z in extended range, each part rounded to nearest even.
func (z *Fixed) Ext() ExtComplex {
	re, er := nearest(&z.Re)
	im, ei := nearest(&z.Im)
	return ExtComplexOf(
		ExtOf(re).Ldexp(er-int64(z.Frac)),
		ExtOf(im).Ldexp(ei-int64(z.Frac)))
}

// Complex returns z as two doubles, each part rounded to nearest even (parts
// below the range of normal doubles are rounded twice or become zero).
func (z *Fixed) Complex() (re, im float64) {
	return fixedFloat(&z.Re, z.Frac), fixedFloat(&z.Im, z.Frac)
}

// AddExt sets z = z + x, x rounded to nearest at z's last fractional bit.
func (z *Fixed) AddExt(x ExtComplex) *Fixed {
	addScaled(&z.Re, x.Re, x.E+int64(z.Frac))
	addScaled(&z.Im, x.Im, x.E+int64(z.Frac))
	return z
}

// addScaled adds m·2^e, rounded to nearest (ties away), to z.
func addScaled(z *big.Int, m float64, e int64) {
	f, k := math.Frexp(m)
	shift := e + int64(k) - 53
	i := big.NewInt(int64(math.Ldexp(f, 53)))
	switch {
	case shift >= 0:
		i.Lsh(i, uint(shift))
	case shift < -60:
		return
	default:
		half := new(big.Int).Lsh(big.NewInt(1), uint(-shift-1))
		i.Add(i, half).Rsh(i, uint(-shift))
	}
	z.Add(z, i)
}

func fixedFloat(x *big.Int, frac uint) float64 {
	m, e := nearest(x)
	e -= int64(frac)
	if e < -1000 || e > 1000 {
		return math.Ldexp(m, int(max(e, -5000)))
	}
	return m * math.Float64frombits(uint64(1023+e)<<52)
}

// nearest returns m with |m| in [2^63, 2^64) and e, m·2^e being x rounded to
// nearest even in 53 bits. Truncating here instead would cost up to 200 times
// in position when thousands of iterations amplify the error.
func nearest(x *big.Int) (m float64, e int64) {
	w := x.Bits()
	n := len(w)
	if n == 0 {
		return 0, 0
	}
	top := uint64(w[n-1])
	s := uint(bits.LeadingZeros64(top))
	top <<= s
	var sticky uint64
	if n > 1 {
		if s > 0 {
			top |= uint64(w[n-2]) >> (64 - s)
		}
		sticky = uint64(w[n-2]) << s
		for i := n - 3; sticky == 0 && i >= 0; i-- {
			sticky = uint64(w[i])
		}
	}
	if sticky != 0 {
		top |= 1 // far below the 53 bits kept, so it only breaks ties
	}
	m = roundToFloat(top)
	if x.Sign() < 0 {
		m = -m
	}
	return m, int64(n-1)*64 - int64(s)
}

// roundToFloat converts a 64-bit integer with its top bit set to the nearest
// double, ties to even, in integer steps: the same on every machine.
func roundToFloat(u uint64) float64 {
	low := u & 0x7ff
	u >>= 11
	if low > 0x400 || low == 0x400 && u&1 == 1 {
		u++
	}
	return float64(int64(u)) * 2048
}
