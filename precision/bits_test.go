package precision

import (
	"errors"
	"math"
	"math/big"
	"testing"
)

func TestDepth(t *testing.T) {
	tests := []struct {
		height string
		want   float64
	}{
		{"1", 0}, {"0.1", 1}, {"10", -1}, {"1e-3000", 3000}, {"1e-20000", 20000}, {"1e20000", -20000}, {"0", inf}, {"-1", nan},
		{"2.5e-41", 40.60205999132796239}, // 41 - log10 2.5, and log10 2 = 0.30102 99956 63981 (Abramowitz and Stegun, table 1.1)
		{"2", -0.30102999566398119521},
		{"0.5", 0.30102999566398119521},
		{"1.00000000000000000001", -4.3429448190325182763e-21}, // 1e-20/ln 10
	}
	for _, tt := range tests {
		if got := Depth(mustParse(t, tt.height)); !same(got, tt.want) {
			t.Errorf("Depth(%s) = %.17g, want %.17g", tt.height, got, tt.want)
		}
	}
}

func TestBitsFor(t *testing.T) {
	tests := []struct {
		pixel Ext
		want  uint
	}{
		{ExtOf(1), Guard}, {ExtOf(0.5), Guard + 1}, {ExtOf(0.5000001), Guard + 1}, {ExtOf(0.4999999), Guard + 2}, {ExtOf(0.25), Guard + 2},
		{ExtOf(3), Guard}, {Ext{0.5, 1 << 40}, Guard}, {Ext{0.5, -9999}, Guard + 10000}, {Ext{0.6, -9999}, Guard + 10000},
	}
	for _, tt := range tests {
		if got := BitsFor(tt.pixel); got != tt.want {
			t.Errorf("BitsFor(%v) = %d, want %d", tt.pixel, got, tt.want)
		}
	}
}

// ulps returns |got - want| in units of the last of the given bits.
func ulps(got, want *big.Float, bits uint) float64 {
	d := new(big.Float).SetPrec(64).Sub(got, want)
	if d.Sign() == 0 {
		return 0
	}
	return math.Abs(bigNear(d.SetMantExp(d, int(bits)-want.MantExp(nil))))
}

// TestBigLog compares with 2·artanh((m-1)/(m+1)) summed as a series.
func TestBigLog(t *testing.T) {
	r := random()
	xs := []*big.Float{big.NewFloat(2), big.NewFloat(0.5), mustParse(t, "1e-3000").Float(300), mustParse(t, "1e20000").Float(300),
		mustParse(t, "7e-20000").Float(3000), mustParse(t, "1.00000000000000000000000000000000000000000000000001").Float(400),
		mustParse(t, "0.99999999999999999999999999999999999999999999999999").Float(400), mustParse(t, "1e-1").Float(1000),
		new(big.Float).SetMantExp(big.NewFloat(0.7), 1<<30)}
	for range count(100) {
		xs = append(xs, mustParse(t, randomText(r, 30, 300)).Float(uint(60+r.IntN(400))))
	}
	for _, x := range xs {
		if x.Sign() <= 0 {
			continue
		}
		for _, bits := range []uint{20, 64, 192, 700} {
			want := seriesLog(x, bits+150)
			if u := ulps(BigLog(x, bits), want, bits); u > 0.51 {
				t.Errorf("BigLog(%g, %d) is off by %g", x, bits, u)
			}
			want.Quo(want, seriesLog(big.NewFloat(10), bits+150))
			if u := ulps(BigLog10(x, bits), want, bits); u > 0.51 {
				t.Errorf("BigLog10(%g, %d) is off by %g", x, bits, u)
			}
		}
	}
	if !BigLog(new(big.Float), 64).IsInf() || BigLog2(new(big.Float), 64).Sign() > 0 || BigLog(big.NewFloat(1), 64).Sign() != 0 ||
		BigLog10(new(big.Float).SetInf(false), 64).Sign() < 0 {
		t.Error("special cases of BigLog")
	}
	for n := -300; n < 300; n++ { // exact for powers of two
		if got := BigLog2(new(big.Float).SetMantExp(big.NewFloat(1), n), 100); got.Cmp(big.NewFloat(float64(n))) != 0 {
			t.Errorf("BigLog2(2^%d) = %g", n, got)
		}
	}
}

// seriesLog returns ln x with a relative error of about 2^-bits.
func seriesLog(x *big.Float, bits uint) *big.Float {
	bits += 200 + x.MinPrec()
	m := new(big.Float).SetPrec(bits).Set(x)
	e := x.MantExp(m)
	m.SetPrec(bits)
	if bigNear(m) < 0.7 {
		m.SetMantExp(m, 1)
		e--
	}
	sum := artanhTwice(m)
	return sum.Add(sum, bigMul(artanhTwice(bigOf(2, bits)), bigOf(float64(e), 53)))
}

// artanhTwice returns ln m = 2(u + u³/3 + u⁵/5 + …) with u = (m-1)/(m+1).
func artanhTwice(m *big.Float) *big.Float {
	u := bigQuo(bigAdd(m, bigOf(-1, 53)), bigAdd(m, bigOf(1, 53)))
	sum, power, sq := bigOf(0, m.Prec()), u, bigMul(u, u)
	for k := 1.0; power.Sign() != 0 && power.MantExp(nil) > u.MantExp(nil)-int(m.Prec()); k += 2 {
		sum = bigAdd(sum, bigQuo(power, bigOf(k, 53)))
		power = bigMul(power, sq)
	}
	return sum.SetMantExp(sum, 1)
}

// TestBigExpPow compares with Taylor's series, and powers with exact ones.
func TestBigExpPow(t *testing.T) {
	r := random()
	xs := []float64{0, 1, -1, 0.5, 1e-60, -1e-60, 0x1p-200, 1e-300, 700, -745, 7000, -7000, 46000}
	for range count(50) {
		xs = append(xs, (r.Float64()-0.5)*2000, r.Float64()*math.Ldexp(1, -r.IntN(200)))
	}
	for _, x := range xs {
		for _, bits := range []uint{20, 64, 150} {
			got, err := BigExp(big.NewFloat(x), bits)
			if err != nil {
				t.Fatal(err)
			}
			if u := ulps(got, bigExpRef(bigOf(x, refBits)), bits); u > 0.51 {
				t.Errorf("BigExp(%g, %d) is off by %g", x, bits, u)
			}
		}
	}
	for _, tt := range []struct{ x, y, want string }{
		{"10", "-3000", "1e-3000"}, {"10", "20000", "1e20000"}, {"2", "0.5", "1.41421356237309504880168872420969807856967187537694"},
		{"0.1", "3000", "1e-3000"}, {"1", "1e9", "1"}, {"7", "0", "1"}, {"1e-3000", "0.25", "1e-750"}, {"3", "5", "243"},
	} {
		x, y := mustParse(t, tt.x).Float(20000), mustParse(t, tt.y).Float(100)
		if tt.x == "0.1" || tt.x == "1e-3000" {
			x.SetPrec(500)
		}
		got, err := BigPow(x, y, 128)
		if err != nil {
			t.Fatal(err)
		}
		if u := ulps(got, mustParse(t, tt.want).Float(200), 128); u > 0.51 {
			t.Errorf("BigPow(%s, %s) = %.40g is off by %g", tt.x, tt.y, got, u)
		}
	}
}

func TestBigRange(t *testing.T) {
	for _, x := range []*big.Float{big.NewFloat(1e300), big.NewFloat(-1e300), new(big.Float).SetInf(true)} {
		var e *RangeError
		if _, err := BigExp(x, 64); !errors.As(err, &e) {
			t.Errorf("BigExp(%g): %v", x, err)
		}
	}
	var e *RangeError
	if _, err := BigPow(big.NewFloat(2), big.NewFloat(1e9), 64); !errors.As(err, &e) {
		t.Errorf("BigPow(2, 1e9): %v", err)
	}
}
