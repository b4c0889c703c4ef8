package precision

import (
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"math/big"
	"math/rand/v2"
	"regexp"
	"strings"
	"testing"
	"time"
)

// grammar is the number of RFC 8259, section 6.
var grammar = regexp.MustCompile(`^-?(0|[1-9][0-9]*)(\.[0-9]+)?([eE][+-]?[0-9]+)?$`)

func mustParse(t testing.TB, s string) Decimal {
	t.Helper()
	d, err := ParseDecimal(s)
	if err != nil {
		t.Fatalf("ParseDecimal(%.60q): %v", s, err)
	}
	return d
}

var accepted = []string{
	"0", "-0", "0.0", "0e5", "-0.00E-7", "1", "-1", "10", "1.0", "-1.25", "1e0", "1E+05", "100e-2", "0.001", "2.5e-41", "123456789.987654321e-3",
	"1e20000", "1e-20000", "0.5e20000", "10e-20000", "9.99e-0000020000", "1." + strings.Repeat("3", MaxDigits-1), "0." + strings.Repeat("0", MaxDigits-2) + "1",
}

var refused = []string{
	"", "-", "+1", ".5", "5.", "-.5", "00", "01", "-01.5", "1e", "1e+", "1e1.5", "1.e5", " 1", "1 ", "1\n", "1_000", "0x10", "inf", "NaN", "1e5x", "1,5", "--1", "1..2",
	"−1", "1\xff", "١",
}

func TestParseDecimal(t *testing.T) {
	for _, s := range accepted {
		if !grammar.MatchString(s) {
			t.Errorf("%.60q is no number in the first place", s)
		}
		if got := mustParse(t, s).String(); got != s {
			t.Errorf("%.60q came back as %.60q", s, got)
		}
	}
	for _, s := range refused {
		_, err := ParseDecimal(s)
		var syntax *DecimalSyntaxError
		if grammar.MatchString(s) || !errors.As(err, &syntax) || syntax.Hint() == "" {
			t.Errorf("%q: %v", s, err)
		}
	}
	if (Decimal{}).String() != "0" || (Decimal{}).Sign() != 0 || (Decimal{}).Float(64).Sign() != 0 {
		t.Error("the zero value is not 0")
	}
}

func TestParseDecimalLimits(t *testing.T) {
	tests := []struct{ text, limit string }{
		{strings.Repeat("1", MaxDigits+1), "digits"},
		{"0." + strings.Repeat("0", MaxDigits), "digits"},
		{strings.Repeat("1", MaxDigits+100), "characters"},
		{"1e20001", "exponent"}, {"1e-20001", "exponent"}, {"10e20000", "exponent"}, {"0.1e-20000", "exponent"}, {"0e20001", "exponent"},
		{"1e99999999999999999999999999", "exponent"}, {"1e-99999999999999999999999999", "exponent"},
	}
	for _, tt := range tests {
		_, err := ParseDecimal(tt.text)
		var limit *DecimalLimitError
		if !errors.As(err, &limit) || limit.Limit != tt.limit {
			t.Errorf("%.30q: %v, want a limit of %s", tt.text, err, tt.limit)
			continue
		}
		if !strings.Contains(limit.Hint(), "20000") || !strings.Contains(err.Error(), "2") {
			t.Errorf("%.30q: %v; hint: %s", tt.text, err, limit.Hint())
		}
	}
}

// TestRefusalIsCheap bounds the time that hostile texts take: ten megabytes are
// refused by their length alone. The best of several tries counts, since the
// machine may be busy.
func TestRefusalIsCheap(t *testing.T) {
	huge := strings.Repeat("9", 10<<20)
	var d Decimal
	quoted := []byte(`"` + huge + `"`)
	var err, err2 error
	best := time.Hour
	for range 20 {
		start := time.Now()
		_, err = ParseDecimal(huge)
		err2 = d.UnmarshalJSON(quoted)
		best = min(best, time.Since(start))
	}
	if best > 100*time.Microsecond {
		t.Errorf("refusing takes %v", best)
	}
	if err == nil || err2 == nil || len(err.Error()) > 200 || len(err2.Error()) > 200 {
		t.Errorf("errors: %v; %v", err, err2)
	}
	_, err = ParseDecimal("x" + strings.Repeat("é", 5000))
	if err == nil || len(err.Error()) > 200 {
		t.Errorf("a long text makes a long error: %v", err)
	}
}

func TestDecimalJSON(t *testing.T) {
	type view struct {
		Re Decimal `json:"re"`
	}
	for _, s := range accepted {
		text := `{"re":"` + s + `"}`
		var v view
		if err := json.Unmarshal([]byte(text), &v); err != nil {
			t.Fatalf("%.60s: %v", text, err)
		}
		back, err := json.Marshal(v)
		if err != nil || string(back) != text {
			t.Errorf("%.60s came back as %.60s (%v)", text, back, err)
		}
	}
	for _, text := range []string{`{"re":1.5}`, `{"re":null}`, `{"re":true}`, `{"re":["1"]}`, `{"re":{}}`} {
		var v view
		err := json.Unmarshal([]byte(text), &v)
		var syntax *DecimalSyntaxError
		if !errors.As(err, &syntax) || !strings.Contains(syntax.Hint(), "strings") {
			t.Errorf("%s: %v", text, err)
		}
	}
	var v view
	if err := json.Unmarshal([]byte(`{"re":"-\u0031.5"}`), &v); err != nil || v.Re.String() != "-1.5" {
		t.Errorf("escaped digits: %q, %v", v.Re, err)
	}
	if err := json.Unmarshal([]byte(`{"re":"1.5 "}`), &v); err == nil || v.Re.String() != "-1.5" {
		t.Errorf("a bad text must leave the value alone: %q, %v", v.Re, err)
	}
}

// randomText returns a number of up to the given digits.
func randomText(r *rand.Rand, digits, exp int) string {
	b := make([]byte, 1+r.IntN(digits))
	for i := range b {
		b[i] = byte('0' + r.IntN(10))
	}
	s := string(b)
	if r.IntN(2) == 0 && len(s) > 1 {
		k := 1 + r.IntN(len(s)-1)
		s = s[:k] + "." + s[k:]
	}
	if whole, _, _ := strings.Cut(s, "."); len(whole) > 1 && whole[0] == '0' {
		s = "7" + s
	}
	if r.IntN(2) == 0 {
		s = "-" + s
	}
	return fmt.Sprintf("%se%d", s, r.IntN(2*exp+1)-exp)
}

// exact returns the value of a text by way of big.Rat, which parses on its own.
func exact(t testing.TB, s string) *big.Rat {
	t.Helper()
	q, ok := new(big.Rat).SetString(s)
	if !ok {
		t.Fatalf("big.Rat does not read %q", s)
	}
	return q
}

// TestDecimalFloat compares with big.Rat and its rounding to big.Float, which is a
// single correctly rounded division.
func TestDecimalFloat(t *testing.T) {
	r := random()
	for range count(20000) {
		s := randomText(r, 60, 80)
		d, q := mustParse(t, s), exact(t, s)
		for _, bits := range []uint{1, 2, 24, 53, 64, 200} {
			want := new(big.Float).SetPrec(bits).SetRat(q)
			if got := d.Float(bits); got.Cmp(want) != 0 || got.Prec() != bits {
				t.Fatalf("%s to %d bits is %g, want %g", s, bits, got, want)
			}
		}
		if got, want := d.Ext().Big(53), new(big.Float).SetPrec(53).SetRat(q); got.Cmp(want) != 0 {
			t.Fatalf("Ext of %s is %g, want %g", s, got, want)
		}
		if got := d.Sign(); got != q.Sign() {
			t.Fatalf("sign of %s is %d", s, got)
		}
	}
}

// TestDecimalFloatTies parses numbers that lie exactly between two neighbours, and
// off by one in a far digit, where rounding twice goes wrong.
func TestDecimalFloatTies(t *testing.T) {
	tests := []struct {
		text string
		want float64
	}{
		{"9007199254740993", 9007199254740992},
		{"9007199254740993.00000000000000000000000000000000000000000000000001", 9007199254740994},
		{"9007199254740992.99999999999999999999999999999999999999999999999999", 9007199254740992},
		{"9007199254740995", 9007199254740996},
		{"1.00000000000000011102230246251565404236316680908203125", 1},
		{"1.00000000000000011102230246251565404236316680908203126", 1 + 0x1p-52},
		{"1.00000000000000011102230246251565404236316680908203124", 1},
		{"-1.00000000000000033306690738754696212708950042724609375", -1 - 0x1p-51},
	}
	for _, tt := range tests {
		if got := bigNear(mustParse(t, tt.text).Float(53)); got != tt.want {
			t.Errorf("%s is %.17g, want %.17g", tt.text, got, tt.want)
		}
	}
}

// TestDecimalFixed compares with a rounding of big.Rat by floor(2q+1)/2 and parity.
func TestDecimalFixed(t *testing.T) {
	r := random()
	texts := []string{"0.5", "1.5", "2.5", "-0.5", "-1.5", "-2.5", "0.25", "0.125", "0", "-0", "3e5", "1e-300", "0.4999", "0.5001", "-0.75", "1e20"}
	for range count(20000) {
		texts = append(texts, randomText(r, 40, 30))
	}
	for _, s := range texts {
		d := mustParse(t, s)
		for _, frac := range []uint{0, 1, 7, 64, 200} {
			q := exact(t, s)
			q.Mul(q, new(big.Rat).SetInt(new(big.Int).Lsh(big.NewInt(1), frac)))
			if got, want := d.Fixed(frac), ratEven(q); got.Cmp(want) != 0 {
				t.Fatalf("%s with %d bits is %d, want %d", s, frac, got, want)
			}
		}
	}
}

// ratEven rounds q to nearest, ties to even: floor(q + 1/2), less one for odd ties.
func ratEven(q *big.Rat) *big.Int {
	h := new(big.Rat).Add(q, big.NewRat(1, 2))
	n := new(big.Int).Div(h.Num(), h.Denom()) // denominator positive: Euclid is floor
	if h.IsInt() && n.Bit(0) == 1 {
		n.Sub(n, big.NewInt(1))
	}
	return n
}

func TestDecimalCmp(t *testing.T) {
	r := random()
	texts := append([]string{"1.0", "1", "10e-1", "-1", "1.00001", "0.99999", "12", "123", "-12", "-123", "1e-20000", "-1e20000"}, accepted[:12]...)
	for range 200 {
		texts = append(texts, randomText(r, 4, 2))
	}
	for _, a := range texts {
		for _, b := range texts {
			if got, want := mustParse(t, a).Cmp(mustParse(t, b)), exact(t, a).Cmp(exact(t, b)); got != want {
				t.Fatalf("%s cmp %s = %d, want %d", a, b, got, want)
			}
		}
	}
}

// TestDecimalOf compares with big.Float's own %e formatting, which rounds exactly.
func TestDecimalOf(t *testing.T) {
	r := random()
	for range count(10000) {
		x := mustParse(t, randomText(r, 80, 60)).Float(uint(1 + r.IntN(250)))
		digits := 1 + r.IntN(90)
		got, want := DecimalOf(x, digits), mustParse(t, x.Text('e', digits-1))
		if got.Cmp(want) != 0 {
			t.Fatalf("%g to %d digits is %s, want %s", x, digits, got, want)
		}
		if again := mustParse(t, got.String()); again != got {
			t.Fatalf("%s reads back as something else", got)
		}
	}
	tests := []struct {
		x      float64
		digits int
		want   string
	}{
		{0, 5, "0"}, {1, 5, "1"}, {-1.5, 9, "-1.5"}, {0.25, 1, "0.2"}, {0.75, 1, "0.8"}, {9.99, 2, "10"}, {999999, 1, "1000000"}, {1e7, 3, "1e7"},
		{0.00001, 3, "0.00001"}, {1e-7, 3, "1e-7"}, {2.5e-41, 2, "2.5e-41"}, {123456, 2, "120000"}, {1e300, 1, "1e300"}, {-0.000123, 2, "-0.00012"}, {0.5, 0, "0.5"},
	}
	for _, tt := range tests {
		if got := DecimalOf(big.NewFloat(tt.x), tt.digits).String(); got != tt.want {
			t.Errorf("%g to %d digits is %s, want %s", tt.x, tt.digits, got, tt.want)
		}
	}
}

// TestDecimalOfRoundTrip holds that enough digits bring every bit back, at the
// length of real centres too (Matula's condition: 10^(n-1) > 2^bits).
func TestDecimalOfRoundTrip(t *testing.T) {
	r := random()
	for _, bits := range []uint{53, 200, 1100, 10000, 33300} {
		for range 5 {
			n := new(big.Int)
			for range bits/64 + 1 {
				n.Lsh(n, 64).Add(n, new(big.Int).SetUint64(r.Uint64()))
			}
			x := new(big.Float).SetPrec(bits).SetInt(n)
			x.SetMantExp(x, -int(bits)-r.IntN(3000))
			digits := int(float64(bits)*math.Log10(2)) + 3
			if got := mustParse(t, DecimalOf(x, digits).String()).Float(bits); got.Cmp(x) != 0 {
				t.Fatalf("%d digits do not bring %d bits back", digits, bits)
			}
		}
	}
}

// TestDecimalNear holds DecimalNear to its definition: within tol, no number of one
// place fewer is, and none of the same places is nearer.
func TestDecimalNear(t *testing.T) {
	r := random()
	for range count(5000) {
		x := mustParse(t, randomText(r, 50, 40)).Float(200)
		tol := ExtOfBig(x).Abs().Ldexp(int64(-r.IntN(150))).Mul(ExtOf(0.5 + r.Float64()))
		if tol.M == 0 {
			continue
		}
		got := DecimalNear(x, tol)
		q, tq := ratOf(x), ratOf(tol.Big(53))
		dist := func(d *big.Rat) *big.Rat { z := new(big.Rat).Sub(d, q); return z.Abs(z) }
		g := exact(t, got.String())
		if dist(g).Cmp(tq) > 0 {
			t.Fatalf("%s is not within %v of %g", got, tol, x)
		}
		if got.Sign() == 0 {
			if q.Abs(q).Cmp(tq) > 0 {
				t.Fatalf("zero is not within %v of %g", tol, x)
			}
			continue
		}
		unit := exact(t, fmt.Sprintf("1e%d", got.exp))
		if twice := new(big.Rat).Add(dist(g), dist(g)); twice.Cmp(unit) > 0 {
			t.Fatalf("%s is not the nearest of its places to %g", got, x)
		}
		coarse := exact(t, DecimalOf(x, len(got.digits)-1+boolInt(len(got.digits) == 1)).String())
		if len(got.digits) > 1 && dist(coarse).Cmp(tq) <= 0 {
			t.Fatalf("%s is longer than need be within %v of %g: %s", got, tol, x, coarse)
		}
	}
	tests := []struct{ x, tol, want string }{
		{"0.5", "1e-20", "0.5"}, {"0.333333333", "0.01", "0.33"}, {"-1.7490812690237", "1e-7", "-1.7490813"}, {"12345", "600", "12000"},
		{"0.3", "5", "0"}, {"0.999", "0.01", "1"}, {"0", "1", "0"}, {"0.25", "0", "0.25"}, {"1024", "0", "1024"},
	}
	for _, tt := range tests {
		x, tol := mustParse(t, tt.x).Float(300), mustParse(t, tt.tol).Ext()
		if got := DecimalNear(x, tol).String(); got != tt.want {
			t.Errorf("within %s of %s: %s, want %s", tt.tol, tt.x, got, tt.want)
		}
	}
}

func ratOf(x *big.Float) *big.Rat { q, _ := x.Rat(nil); return q }

func boolInt(b bool) int {
	if b {
		return 1
	}
	return 0
}

func TestDecimalPanics(t *testing.T) {
	huge := new(big.Float).SetMantExp(big.NewFloat(0.7), 1<<30)
	tiny := new(big.Float).SetMantExp(big.NewFloat(0.7), -1<<30)
	for name, f := range map[string]func(){
		"Float(0)": func() { Decimal{}.Float(0) },
		"Inf":      func() { DecimalOf(new(big.Float).SetInf(false), 5) },
		"huge":     func() { DecimalOf(huge, 5) },
		"tiny":     func() { DecimalNear(tiny, Ext{}) },
		"1e20001":  func() { DecimalOf(new(big.Float).Mul(mustParse(t, "1e20000").Float(64), big.NewFloat(10.1)), 5) },
		"BitsFor":  func() { BitsFor(Ext{}) },
	} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("%s did not panic", name)
				}
			}()
			f()
		}()
	}
}

// FuzzParseDecimal holds the parser to the grammar, the text to its bytes, and the
// value to big.Float's own parser at a precision that leaves no doubt.
func FuzzParseDecimal(f *testing.F) {
	for _, s := range append(append([]string{}, accepted[:16]...), refused...) {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		d, err := ParseDecimal(s)
		var limit *DecimalLimitError
		if ok := err == nil || errors.As(err, &limit); ok != grammar.MatchString(s) && len(s) <= maxText {
			t.Fatalf("%q: %v", s, err)
		}
		if err != nil {
			if d != (Decimal{}) {
				t.Fatal("a value beside an error")
			}
			return
		}
		if d.String() != s {
			t.Fatalf("%q came back as %q", s, d)
		}
		if len(s) > 400 || d.exp > 2000 || d.exp < -2000 {
			return
		}
		want := new(big.Float).SetPrec(53).SetRat(exact(t, s))
		if got := d.Float(53); got.Cmp(want) != 0 {
			t.Fatalf("%q is %g, want %g", s, got, want)
		}
		wide, _, err := big.ParseFloat(s, 10, 9000, big.ToNearestEven)
		if err != nil {
			t.Fatal(err)
		}
		diff := new(big.Float).Sub(d.Float(8000), wide)
		if diff.Sign() != 0 && diff.MantExp(nil) > wide.MantExp(nil)-7990 {
			t.Fatalf("%q differs from big.ParseFloat", s)
		}
	})
}
