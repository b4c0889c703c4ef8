package precision

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"
)

// randomExt returns numbers of either sign whose exponents meet often enough for
// cancellation and carries, and now and then are far apart; sometimes zero.
func randomExt(r *rand.Rand) Ext {
	spreads := []int64{1, 3, 60, 140, 40000}
	s := spreads[r.IntN(len(spreads))]
	m := math.Float64frombits(r.Uint64()&(1<<63|1<<52-1) | halfBits)
	if r.IntN(4) == 0 { // few bits, for ties
		m = math.Float64frombits(math.Float64bits(m) &^ (1<<46 - 1))
	}
	if r.IntN(50) == 0 {
		return Ext{}
	}
	return Ext{m, r.Int64N(2*s+1) - s}
}

func isNormalForm(a Ext) bool {
	m := math.Abs(a.M)
	return a == Ext{} && !math.Signbit(a.M) || m >= 0.5 && m < 1
}

// TestExtArithmetic compares with big.Float at 53 bits, which rounds to nearest
// even and has exponents of 32 bits.
func TestExtArithmetic(t *testing.T) {
	r := random()
	fl := func() *big.Float { return new(big.Float).SetPrec(53) }
	for range count(80000) {
		a, b := randomExt(r), randomExt(r)
		x, y := a.Big(53), b.Big(53)
		check := func(op string, got Ext, want *big.Float) {
			if got.Big(53).Cmp(want) != 0 || !isNormalForm(got) {
				t.Fatalf("%v %s %v = %v, want %.20g", a, op, b, got, want)
			}
		}
		check("+", a.Add(b), fl().Add(x, y))
		check("-", a.Sub(b), fl().Sub(x, y))
		check("*", a.Mul(b), fl().Mul(x, y))
		if b.M != 0 {
			check("/", a.Quo(b), fl().Quo(x, y))
		}
		check("abs sqrt", a.Abs().Sqrt(), fl().Sqrt(fl().Abs(x)))
		check("neg", a.Neg(), fl().Neg(x))
		if got, want := a.Cmp(b), x.Cmp(y); got != want {
			t.Fatalf("%v cmp %v = %d, want %d", a, b, got, want)
		}
		if got, want := a.Sign(), x.Sign(); got != want {
			t.Fatalf("sign of %v = %d", a, got)
		}
		if got := ExtOfBig(x); got != a {
			t.Fatalf("ExtOfBig(%v.Big) = %v", a, got)
		}
	}
}

// TestExtTies rounds sums that lie exactly between two doubles, or just off.
func TestExtTies(t *testing.T) {
	one, half := ExtOf(1), ExtOf(0x1p-53)
	tests := []struct{ got, want Ext }{
		{one.Add(half), one},
		{ExtOf(1 + 0x1p-52).Add(half), ExtOf(1 + 0x1p-51)},
		{one.Add(ExtOf(0x1.0000000000001p-53)), ExtOf(1 + 0x1p-52)},
		{one.Sub(ExtOf(0x1p-54)), one},
		{one.Sub(ExtOf(0x1.8p-54)), ExtOf(1 - 0x1p-53)},
		{one.Sub(ExtOf(0x1p-65)), one},
	}
	for i, tt := range tests {
		if tt.got != tt.want {
			t.Errorf("%d: %v, want %v", i, tt.got, tt.want)
		}
	}
}

// TestExtFloat64 checks the way back to float64, exact where it can be and rounded
// once at the subnormal end, against big.Float.
func TestExtFloat64(t *testing.T) {
	r := random()
	for range count(100000) {
		x := math.Float64frombits(r.Uint64())
		if r.IntN(3) == 0 {
			x = math.Float64frombits(r.Uint64() & (1<<63 | 1<<53 - 1)) // subnormal and just above
		}
		if got := ExtOf(x).Float64(); !same(got, x) {
			t.Fatalf("ExtOf(%x).Float64() = %x", x, got)
		}
		a := randomExt(r)
		a.E = a.E%60 - 1074
		if got, want := a.Float64(), bigNear(a.Big(53)); got != want {
			t.Fatalf("%v.Float64() = %x, want %x", a, got, want)
		}
	}
	for _, e := range []int64{1025, 1 << 40, math.MaxInt64} {
		if got := (Ext{-0.5, e}).Float64(); got != -inf {
			t.Errorf("-0.5·2^%d = %g", e, got)
		}
		if got := (Ext{0.5, -e - 1000}).Float64(); e < 1<<50 && got != 0 {
			t.Errorf("0.5·2^-%d = %g", e, got)
		}
	}
}

// TestExtSpecial sends zeros, infinities and NaN through the arithmetic.
func TestExtSpecial(t *testing.T) {
	zeroExt, one, infExt := Ext{}, ExtOf(1), ExtOf(inf)
	tests := []struct {
		name string
		got  Ext
		want float64
	}{
		{"-0", ExtOf(zero), 0},
		{"neg 0", zeroExt.Neg(), 0},
		{"1-1", one.Sub(one), 0},
		{"1/0", one.Quo(zeroExt), inf},
		{"-1/0", one.Neg().Quo(zeroExt), -inf},
		{"0/0", zeroExt.Quo(zeroExt), nan},
		{"0*inf", zeroExt.Mul(infExt), nan},
		{"inf+1", infExt.Add(one), inf},
		{"1-inf", one.Sub(infExt), -inf},
		{"inf-inf", infExt.Sub(infExt), nan},
		{"1e300ish+inf", Ext{0.5, 5000}.Add(infExt), inf},
		{"1/inf", one.Quo(infExt), 0},
		{"sqrt -1", one.Neg().Sqrt(), nan},
		{"sqrt 0", zeroExt.Sqrt(), 0},
		{"nan+1", ExtOf(nan).Add(one), nan},
		{"inf ldexp", infExt.Ldexp(5), inf},
		{"0 ldexp", zeroExt.Ldexp(5), 0},
	}
	for _, tt := range tests {
		if !same(tt.got.Float64(), tt.want) || tt.got.E != 0 && tt.want != 0 {
			t.Errorf("%s = %v, want %g", tt.name, tt.got, tt.want)
		}
	}
	if infExt.Cmp(Ext{0.5, 1 << 40}) != 1 || infExt.Neg().Cmp(Ext{-0.5, 1 << 40}) != -1 || infExt.Cmp(infExt) != 0 || one.Cmp(ExtOf(nan)) != 0 {
		t.Error("infinities are out of order")
	}
	if got := (Ext{0.75, -3}).String(); got != "0.75p-3" {
		t.Errorf("String: %s", got)
	}
}

func TestExtLog2Accuracy(t *testing.T) {
	r := random()
	var w worst
	for range count(1500) {
		a := randomExt(r).Abs()
		if a.M == 0 {
			continue
		}
		w.note(a.Log2(), BigLog2(a.Big(53), refBits), a.M, float64(a.E))
	}
	w.check(t, 1)
	if (Ext{}).Log2() != -inf || !math.IsNaN(ExtOf(-1).Log2()) || (Ext{0.5, 1 << 50}).Log2() != 1<<50-1 {
		t.Error("special cases of Log2")
	}
}

// TestNoAllocation keeps the arithmetic off the heap.
func TestNoAllocation(t *testing.T) {
	a, b, s := ExtOf(1.7), Ext{0.7, -9000}, Ext{}
	f := 0.0
	n := testing.AllocsPerRun(100, func() {
		s = a.Mul(b).Add(a).Sub(b).Quo(a).Abs().Sqrt().Ldexp(3)
		f += s.Float64() + s.Log2() + Log(3) + Exp(f) + Pow(2.3, 4.5) + Sin(1e300) + Atan2(f, 2) + Cbrt(f)
	})
	if n != 0 {
		t.Errorf("%g allocations, f = %g", n, f)
	}
}
