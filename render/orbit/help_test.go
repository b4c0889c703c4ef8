package orbit

import (
	"context"
	"math"
	"math/big"
	"runtime"
	"testing"

	"leadline/precision"
	"leadline/render/formula"
)

func decimal(t testing.TB, s string) precision.Decimal {
	t.Helper()
	d, err := precision.ParseDecimal(s)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// request asks for the reference of a view of 600 by 400 pixels.
func request(t testing.TB, power int, re, im, height string, limit int) Request {
	t.Helper()
	f, err := formula.ForPower(power)
	if err != nil {
		t.Fatal(err)
	}
	pixel := decimal(t, height).Ext().Quo(precision.ExtOf(400))
	return Request{Map: f, Centre: [2]precision.Decimal{decimal(t, re), decimal(t, im)}, Pixel: pixel,
		Radius: pixel.Mul(precision.ExtOf(361)), Limit: limit, Bailout: 1000}
}

// reference computes it.
func reference(t testing.TB, q Request) *Reference {
	t.Helper()
	r, err := New(context.Background(), q)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// number is a complex big.Float, with a straightforward product: independent
// of precision.Fixed.
type number struct{ re, im *big.Float }

func numberOf(re, im precision.Decimal, bits uint) number {
	return number{re.Float(bits), im.Float(bits)}
}

func (a number) add(b number) number {
	return number{new(big.Float).Add(a.re, b.re), new(big.Float).Add(a.im, b.im)}
}

func (a number) mul(b number) number {
	m := func(x, y *big.Float) *big.Float { return new(big.Float).Mul(x, y) }
	re, im := m(a.re, b.re), m(a.re, b.im)
	return number{re.Sub(re, m(a.im, b.im)), im.Add(im, m(a.im, b.re))}
}

// next is z^p + c.
func (a number) next(power int, c number) number {
	z := a
	for range power - 1 {
		z = z.mul(a)
	}
	return z.add(c)
}

func (a number) doubles() (re, im float64) {
	re, _ = a.re.Float64()
	im, _ = a.im.Float64()
	return re, im
}

// walkerFor is a walker with a wide field for Newton's method.
func walkerFor(t testing.TB, power int, bits uint) *walker {
	t.Helper()
	f, err := formula.ForPower(power)
	if err != nil {
		t.Fatal(err)
	}
	q := &Request{Map: f, Radius: precision.ExtOf(16), Pixel: precision.Ext{M: 0.5, E: 1 + precision.Guard - int64(bits)},
		Limit: 1 << 20, Bailout: 1000}
	return &walker{q: q, ctx: context.Background(), frac: bits}
}

// fixed is a point in fixed point.
func fixed(re, im float64, bits uint) *precision.Fixed {
	z := &precision.Fixed{Frac: bits}
	return z.AddExt(precision.NewExtComplex(re, im, 0))
}

// float is the real part of a fixed-point number.
func float(z *precision.Fixed) *big.Float {
	x := new(big.Float).SetPrec(z.Frac + 8).SetInt(&z.Re)
	return x.SetMantExp(x, -int(z.Frac))
}

func cabs(re, im float64) float64 { return math.Hypot(re, im) }

// alone runs f on one core.
func alone[T any](f func() T) T {
	defer runtime.GOMAXPROCS(runtime.GOMAXPROCS(1))
	return f()
}
