package precision

import (
	"math"
	"testing"
)

var (
	inf  = math.Inf(1)
	nan  = math.NaN()
	zero = math.Copysign(0, -1) // negative
)

// same reports equal bits, with every NaN alike.
func same(a, b float64) bool {
	return math.Float64bits(a) == math.Float64bits(b) || a != a && b != b
}

// TestSpecialUnary holds the special cases of C11 Annex F (F.10.3.7 log, F.10.3.10
// log2, F.10.3.1 exp, F.10.3.2 exp2, F.10.1.6 sin, F.10.1.5 cos, F.10.4.1 cbrt).
func TestSpecialUnary(t *testing.T) {
	tests := []struct {
		name string
		f    func(float64) float64
		want [][2]float64
	}{
		{"Log", Log, [][2]float64{{0, -inf}, {zero, -inf}, {1, 0}, {-1, nan}, {-0x1p-1074, nan}, {-inf, nan}, {inf, inf}, {nan, nan}}},
		{"Log2", Log2, [][2]float64{{0, -inf}, {zero, -inf}, {1, 0}, {-1, nan}, {-0x1p-1074, nan}, {-inf, nan}, {inf, inf}, {nan, nan}}},
		{"Exp", Exp, [][2]float64{{0, 1}, {zero, 1}, {-inf, 0}, {inf, inf}, {nan, nan}, {math.MaxFloat64, inf}, {-math.MaxFloat64, 0}, {710, inf}, {-746, 0}}},
		{"Exp2", Exp2, [][2]float64{{0, 1}, {zero, 1}, {-inf, 0}, {inf, inf}, {nan, nan}, {1024, inf}, {-1075, 0}, {-1074, 0x1p-1074}, {1023, 0x1p1023}}},
		{"Sin", Sin, [][2]float64{{0, 0}, {zero, zero}, {inf, nan}, {-inf, nan}, {nan, nan}}},
		{"Cos", Cos, [][2]float64{{0, 1}, {zero, 1}, {inf, nan}, {-inf, nan}, {nan, nan}}},
		{"Cbrt", Cbrt, [][2]float64{{0, 0}, {zero, zero}, {inf, inf}, {-inf, -inf}, {nan, nan}}},
	}
	for _, tt := range tests {
		for _, w := range tt.want {
			if got := tt.f(w[0]); !same(got, w[1]) {
				t.Errorf("%s(%g) = %g, want %g", tt.name, w[0], got, w[1])
			}
		}
	}
	if s, c := SinCos(zero); !same(s, zero) || c != 1 {
		t.Errorf("SinCos(-0) = %g, %g", s, c)
	}
	if s, c := SinCos(inf); s == s || c == c {
		t.Errorf("SinCos(Inf) = %g, %g", s, c)
	}
}

// TestSpecialAtan2 holds C11 F.10.1.4.
func TestSpecialAtan2(t *testing.T) {
	pi, half, quarter, three := math.Pi, math.Pi/2, math.Pi/4, 3*math.Pi/4
	tests := []struct{ y, x, want float64 }{
		{0, zero, pi}, {zero, zero, -pi}, {0, 0, 0}, {zero, 0, zero},
		{0, -1, pi}, {zero, -1, -pi}, {0, 1, 0}, {zero, 1, zero},
		{-1, 0, -half}, {-1, zero, -half}, {1, 0, half}, {1, zero, half},
		{2, -inf, pi}, {-2, -inf, -pi}, {2, inf, 0}, {-2, inf, zero},
		{inf, 2, half}, {-inf, -2, -half},
		{inf, -inf, three}, {-inf, -inf, -three}, {inf, inf, quarter}, {-inf, inf, -quarter},
		{nan, 1, nan}, {1, nan, nan}, {nan, inf, nan}, {1, 1, quarter}, {-1, -1, -three},
	}
	for _, tt := range tests {
		if got := Atan2(tt.y, tt.x); !same(got, tt.want) {
			t.Errorf("Atan2(%g, %g) = %g, want %g", tt.y, tt.x, got, tt.want)
		}
	}
}

// TestSpecialPow holds C11 F.10.4.4.
func TestSpecialPow(t *testing.T) {
	tests := []struct{ x, y, want float64 }{
		{0, -3, inf}, {zero, -3, -inf}, {0, -2, inf}, {zero, -2, inf}, {zero, -2.5, inf}, {0, -inf, inf}, {zero, -inf, inf},
		{0, 3, 0}, {zero, 3, zero}, {0, 2, 0}, {zero, 2, 0}, {zero, 0.5, 0}, {zero, inf, 0},
		{-1, inf, 1}, {-1, -inf, 1}, {1, nan, 1}, {1, inf, 1}, {nan, 0, 1}, {nan, zero, 1}, {inf, 0, 1},
		{-2, 0.5, nan}, {-0x1p-1074, -1.5, nan}, {nan, 1, nan}, {2, nan, nan},
		{0.5, -inf, inf}, {-0.5, -inf, inf}, {2, -inf, 0}, {-2, -inf, 0},
		{0.5, inf, 0}, {-0.5, inf, 0}, {2, inf, inf}, {-2, inf, inf},
		{-inf, -3, zero}, {-inf, -2, 0}, {-inf, -0.5, 0}, {-inf, 3, -inf}, {-inf, 2, inf}, {-inf, 0.5, inf},
		{inf, -1, 0}, {inf, 1, inf},
		{-2, 3, -8}, {-2, -3, -0.125}, {-3, 2, 9}, {-2, 1023, -0x1p1023}, {-2, 1025, -inf}, {-2, -1075, zero},
		{2, 1e300, inf}, {2, -1e300, 0}, {-2, 1e300, inf}, {0.5, 1e308, 0}, {2, 0x1p-1074, 1}, {-1, 0x1p53, 1}, {-1, 0x1p53 - 1, -1},
	}
	for _, tt := range tests {
		if got := Pow(tt.x, tt.y); !same(got, tt.want) {
			t.Errorf("Pow(%g, %g) = %g, want %g", tt.x, tt.y, got, tt.want)
		}
	}
}

// TestExactResults asks for the exact result wherever one is representable.
func TestExactResults(t *testing.T) {
	for n := -1074; n <= 1023; n++ {
		p := math.Ldexp(1, n)
		if Exp2(float64(n)) != p || Log2(p) != float64(n) || Pow(2, float64(n)) != p || Pow(p, 1) != p {
			t.Errorf("powers of two fail at 2^%d", n)
		}
		if n%3 == 0 && Cbrt(p) != math.Ldexp(1, n/3) {
			t.Errorf("Cbrt(2^%d) = %x", n, Cbrt(p))
		}
	}
	for i := range 2000 {
		x := float64(i)
		if Cbrt(x*x*x) != x || Pow(x, 3) != x*x*x || Pow(x*x, 0.5) != x || Pow(-x, 2) != x*x {
			t.Errorf("powers fail at %d", i)
		}
	}
	for p, i := 1.0, 0; i <= 22; i++ { // 10^22 is the last power of ten in a double
		if Pow(10, float64(i)) != p {
			t.Errorf("Pow(10, %d) = %g", i, Pow(10, float64(i)))
		}
		p *= 10
	}
}

// TestPublishedValues compares with printed tables: Abramowitz and Stegun, Handbook
// of Mathematical Functions, table 1.1 (constants) and chapter 4 (elementary
// functions); the digits are also those of the OEIS entries named.
func TestPublishedValues(t *testing.T) {
	tests := []struct {
		name      string
		got, want float64
	}{
		{"e, A001113", Exp(1), 2.71828182845904523536},
		{"1/e, A068985", Exp(-1), 0.36787944117144232160},
		{"ln 2, A002162", Log(2), 0.69314718055994530942},
		{"ln 3, A002391", Log(3), 1.09861228866810969140},
		{"ln 10, A002392", Log(10), 2.30258509299404568402},
		{"log2 10, A020862", Log2(10), 3.32192809488736234787},
		{"√2, A002193", Exp2(0.5), 1.41421356237309504880},
		{"2^(1/3), A002580", Cbrt(2), 1.25992104989487316477},
		{"3^(1/3), A002581", Cbrt(3), 1.44224957030740838232},
		{"√10, A010467", Pow(10, 0.5), 3.16227766016837933200},
		{"sin 1, A049469", Sin(1), 0.84147098480789650665},
		{"cos 1, A049470", Cos(1), 0.54030230586813971740},
		{"π/4, A003881", Atan2(1, 1), 0.78539816339744830962},
		{"π, A000796", Atan2(0, -1), 3.14159265358979323846},
		{"atan 1/2, A073000", Atan2(1, 2), 0.46364760900080611621},
	}
	for _, tt := range tests {
		if tt.got != tt.want {
			t.Errorf("%s: %.17g, want %.17g", tt.name, tt.got, tt.want)
		}
	}
}

// TestAgainstLibrary compares coarsely with package math, whose functions were
// written by others: a slip shared by code and references here would show.
func TestAgainstLibrary(t *testing.T) {
	r := random()
	for range 20000 {
		x, y := positive(r, -300, 300), (r.Float64()-0.5)*200
		for _, p := range [][2]float64{
			{Log(x), math.Log(x)}, {Log2(x), math.Log2(x)}, {Exp(y), math.Exp(y)}, {Exp2(y), math.Exp2(y)}, {Cbrt(x), math.Cbrt(x)},
			{Sin(y), math.Sin(y)}, {Cos(y), math.Cos(y)}, {Atan2(y, x), math.Atan2(y, x)}, {Pow(x, y/200), math.Pow(x, y/200)}, // math.Pow is off by 60 ulp at times
		} {
			if d := math.Abs(p[0] - p[1]); !(d <= 1e-13*math.Abs(p[1])+1e-15) {
				t.Fatalf("at x = %g, y = %g: %g against %g", x, y, p[0], p[1])
			}
		}
	}
}
