package precision

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"github.com/ALTree/bigfloat"
)

const refBits = 240 // precision of the references; bigfloat loses some bits of it

// worst accumulates the largest error of a function in units of the last place.
type worst struct {
	ulp  float64
	args [2]float64
}

// note compares got with the reference. The unit is that of the reference, and
// never below the smallest subnormal.
func (w *worst) note(got float64, want *big.Float, args ...float64) {
	if math.IsNaN(got) {
		w.ulp = math.NaN()
		copy(w.args[:], args)
		return
	}
	unit := max(want.MantExp(nil)-53, -1074)
	if math.IsInf(got, 0) { // right where the reference rounds to infinity too
		if got != bigNear(want) {
			w.ulp = inf
			copy(w.args[:], args)
		}
		return
	}
	d := new(big.Float).SetPrec(refBits).Sub(bigOf(got, 53), want)
	e := math.Abs(bigNear(d.SetMantExp(d, -unit)))
	if e > w.ulp || math.IsNaN(w.ulp) {
		w.ulp = e
		copy(w.args[:], args)
	}
}

func (w *worst) check(t *testing.T, bound float64) {
	t.Helper()
	t.Logf("largest error %.5f ulp at %x (stated: %g)", w.ulp, w.args, bound)
	if !(w.ulp <= bound) {
		t.Errorf("error of %g ulp at %x is above the stated %g", w.ulp, w.args, bound)
	}
}

// count cuts sample sizes in short mode.
func count(n int) int {
	if testing.Short() {
		return n / 10
	}
	return n
}

func random() *rand.Rand { return rand.New(rand.NewPCG(2027, 1)) }

// positive returns a positive double with exponents from lo to hi.
func positive(r *rand.Rand, lo, hi int) float64 {
	return math.Ldexp(1+r.Float64(), lo+r.IntN(hi-lo+1))
}

// positives mixes arguments of every size, many near one, and edges.
func positives(n int) []float64 {
	r := random()
	xs := []float64{0x1p-1074, 0x1.8p-1073, 0x1p-1023, 0x1.fffffffffffffp-1023, 0x1p-1022, math.MaxFloat64, 0.5, 1, 2, 3, 10,
		math.Nextafter(1, 0), math.Nextafter(1, 2), 1 - 0x1p-9, 1 + 0x1p-8, math.E, math.Pi, math.Sqrt2, math.Sqrt2 / 2}
	for i := range uint64(128) { // the borders of the logarithm's table
		b := math.Float64frombits(logOffset + i<<45)
		xs = append(xs, b, math.Nextafter(b, 0))
	}
	for range n {
		xs = append(xs, positive(r, -1074, 1023), positive(r, -3, 3), 1+(r.Float64()-0.5)*math.Ldexp(1, -r.IntN(52)))
	}
	return xs
}

func bigLn(x *big.Float) *big.Float { return bigfloat.Log(x) }

func TestLogAccuracy(t *testing.T) {
	var nat, two worst
	ln2 := bigLn(bigOf(2, refBits))
	for _, x := range positives(count(1000)) {
		m, e := math.Frexp(x)
		want := bigAdd(bigLn(bigOf(m, refBits)), bigMul(ln2, bigOf(float64(e), 53)))
		if m > 0.99 || x >= 1 && x < 1.01 {
			want = bigLn(bigOf(x, refBits+60)).SetPrec(refBits)
		}
		if x == 1 {
			want = bigOf(0, refBits)
		}
		nat.note(Log(x), want, x)
		two.note(Log2(x), bigQuo(want, ln2), x)
	}
	nat.check(t, 0.502)
	two.check(t, 0.502)
}

func TestExpAccuracy(t *testing.T) {
	r := random()
	xs := []float64{709.782712893384, 709.7827128933841, -708.3964185322641, -708.4, -744.4400719213812, -745.1332191019411, -745.13321910194122, -746,
		0, math.Copysign(0, -1), 0x1p-1074, -0x1p-1074, 0x1p-54, -0x1p-54, 1, -1, 0.5, math.Ln2, math.Ln2 / 256, 3 * math.Ln2 / 256}
	for range count(350) {
		xs = append(xs, (r.Float64()-0.5)*1490, (r.Float64()-0.5)*4, (r.Float64()-0.5)*math.Ldexp(1, -r.IntN(60)), -708-37*r.Float64())
	}
	var nat, two worst
	ln2 := bigLn(bigOf(2, refBits))
	for _, x := range xs {
		if x < 709.7827128933841 {
			nat.note(Exp(x), bigExpRef(bigOf(x, refBits)), x)
		}
		two.note(Exp2(x), bigExpRef(bigMul(ln2, bigOf(x, 53))), x)
	}
	nat.check(t, 0.51)
	two.check(t, 0.51)
}

// bigExpRef is e^x by Taylor's series of x/2^k, squared k times.
func bigExpRef(x *big.Float) *big.Float {
	if x.Sign() == 0 {
		return bigOf(1, refBits)
	}
	bits := x.Prec() + 40
	k := max(0, x.MantExp(nil)) + 12
	y := new(big.Float).SetPrec(bits).Set(x)
	y.SetMantExp(y, -k)
	sum, term := bigOf(1, bits), bigOf(1, bits)
	for n := 1.0; term.Sign() != 0 && term.MantExp(nil) > -int(bits); n++ {
		term = bigQuo(bigMul(term, y), bigOf(n, 53))
		sum = bigAdd(sum, term)
	}
	for range k {
		sum = bigMul(sum, sum)
	}
	return sum.SetPrec(refBits)
}

func TestPowAccuracy(t *testing.T) {
	r := random()
	pairs := [][2]float64{{2, 0.5}, {10, 308}, {10, -323}, {0x1p-1074, 1}, {0x1p-1074, -0.5}, {1 + 0x1p-52, 0x1p60}, {1 - 0x1p-53, 0x1p61},
		{math.MaxFloat64, 1}, {math.MaxFloat64, 0.5}, {1.5, 1000}, {3, 40}, {2.4, 1 / 2.4}, {0.5, 1074}, {0.5, 1075}}
	for range count(250) {
		x := positive(r, -1022, 1022)
		y := (r.Float64() - 0.5) * 2 * 1020 / math.Log2(x)
		pairs = append(pairs, [2]float64{x, y}, [2]float64{r.Float64(), 1 + 2*r.Float64()}, [2]float64{positive(r, -4, 4), (r.Float64() - 0.5) * 20})
		z := 1 + (r.Float64()-0.5)*math.Ldexp(1, -r.IntN(50))
		pairs = append(pairs, [2]float64{z, 700 * (r.Float64() - 0.5) / math.Log1p(z-1)}, [2]float64{x, -1045 / math.Log2(x)})
	}
	var w worst
	for _, p := range pairs {
		x, y := p[0], p[1]
		if x == 1 || math.IsNaN(y) || math.IsInf(y, 0) {
			continue
		}
		want := bigExpRef(bigMul(bigLn(bigOf(x, refBits+60)), bigOf(y, 53)))
		w.note(Pow(x, y), want, x, y)
	}
	w.check(t, 0.53)
}

func TestCbrtAccuracy(t *testing.T) {
	var w worst
	for _, x := range positives(count(10000)) {
		// The root r of x is known by its cube: got - r = (got³ - x)/(3r²) + …, and
		// the terms left out are below 1e-16 of the error.
		got := Cbrt(x)
		g := bigOf(got, refBits)
		d := bigMul(bigMul(g, g), g)
		d.Sub(d, bigOf(x, 53))
		d.Quo(d, bigMul(bigMul(g, g), bigOf(3, 53)))
		w.note(got, g.Sub(g, d), x)
		if Cbrt(-x) != -got {
			t.Fatalf("Cbrt(-%g) is not -Cbrt(%g)", x, x)
		}
	}
	w.check(t, 0.501)
}

func TestSinCosAccuracy(t *testing.T) {
	r := random()
	xs := []float64{0x1p-1074, 0x1p-1022, 0x1p-27, 0.5, math.Pi / 4, math.Nextafter(math.Pi/4, 1), math.Pi / 2, math.Pi, 2 * math.Pi, 1e5, 0x1p20,
		1e6, 1e22, 0x1p1023, math.MaxFloat64,
		6381956970095103 * 0x1p797, // nearest to a multiple of π/2 of all doubles (Muller, Elementary Functions, 3rd ed., 11.1)
	}
	for k := 1.0; k < 1<<20; k = k*1.7 + 1 { // near multiples of π/2
		x := bigNear(bigMul(bigPi(120), bigOf(math.Floor(k)/2, 120)))
		xs = append(xs, x, math.Nextafter(x, 0))
	}
	for range count(1000) {
		xs = append(xs, r.Float64()*math.Pi/4, r.Float64()*10, r.Float64()*1e5, positive(r, -30, 21), positive(r, 19, 1023))
	}
	var s, c worst
	for i, x := range xs {
		if i%2 == 1 {
			x = -x
		}
		ws, wc := bigSinCos(bigOf(x, refBits))
		s.note(Sin(x), ws, x)
		c.note(Cos(x), wc, x)
		if a, b := SinCos(x); a != Sin(x) || b != Cos(x) {
			t.Fatalf("SinCos(%g) differs from Sin and Cos", x)
		}
	}
	s.check(t, 0.7)
	c.check(t, 0.7)
}

func TestAtan2Accuracy(t *testing.T) {
	r := random()
	pairs := [][2]float64{{1, 1}, {1, 0x1p30}, {1, 0x1p-30}, {0x1p-1074, 0x1p-1074}, {0x1p-1074, 3}, {3, 0x1p-1074}, {0x1p-1074, 0x1p-1070},
		{math.MaxFloat64, 0x1p-1074}, {0x1p-1074, math.MaxFloat64}, {math.MaxFloat64, math.MaxFloat64}, {math.MaxFloat64, 1}, {1, 63.99}, {0x1p-1022, 3.7}}
	for i := range 64 {
		q := (float64(i) + 0.5) / 64
		pairs = append(pairs, [2]float64{q, 1}, [2]float64{math.Nextafter(q, 0), 1})
	}
	for range count(1000) {
		x := positive(r, -1000, 1000)
		pairs = append(pairs, [2]float64{r.Float64(), r.Float64()}, [2]float64{x, positive(r, -1000, 1000)},
			[2]float64{x * (r.Float64() - 0.5), x}, [2]float64{x, x * math.Ldexp(r.Float64(), -r.IntN(20))})
	}
	var w worst
	for i, p := range pairs {
		y, x := p[0], p[1]
		if i&1 != 0 {
			y = -y
		}
		if i&2 != 0 {
			x = -x
		}
		w.note(Atan2(y, x), bigAngle(y, x), y, x)
	}
	w.check(t, 0.51)
}

// bigAngle is atan2 for numbers that are not zero.
func bigAngle(y, x float64) *big.Float {
	a := bigAtan(bigQuo(bigOf(math.Abs(y), refBits), bigOf(math.Abs(x), refBits)))
	if x < 0 {
		a.Sub(bigPi(refBits), a)
	}
	if y < 0 {
		a.Neg(a)
	}
	return a
}
