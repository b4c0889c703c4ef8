package sheet

import (
	"encoding/json"
	"errors"
	"math/big"
	"strings"
	"testing"
)

func TestLengthKeepsItsText(t *testing.T) {
	for _, s := range []string{"600mm", "23.5in", "12cm", "400px", "0mm", "0.15mm", "0.125in",
		"3.50mm", "1.000000cm", "9999999.999999in"} {
		l, err := ParseLength(s)
		if err != nil {
			t.Errorf("%s: %v", s, err)
			continue
		}
		b, err := json.Marshal(l)
		if err != nil || string(b) != `"`+s+`"` {
			t.Errorf("%s became %s, %v", s, b, err)
		}
		var back Length
		if err := json.Unmarshal(b, &back); err != nil || back != l {
			t.Errorf("%s came back as %q, %v", s, back, err)
		}
	}
}

func TestLengthRefusals(t *testing.T) {
	bad := []string{"", "mm", "600", "600 mm", " 600mm", "600mm ", "600mm\n", "+5mm", "-5mm", ".5mm",
		"5.mm", "05mm", "00mm", "5e3mm", "1/2in", "5MM", "5pt", "5m", "0x10mm", "NaNmm", "Infmm",
		"5,5mm", "٣mm", "12345678mm", "1.1234567mm", strings.Repeat("9", 1<<20) + "mm"}
	for _, s := range bad {
		l, err := ParseLength(s)
		var le *LengthError
		if !errors.As(err, &le) || le.Hint() == "" || !l.IsZero() {
			t.Errorf("%q: got %v, %v", brief(s), l, err)
		}
		if len(err.Error()) > 100 {
			t.Errorf("%q: message of %d bytes", brief(s), len(err.Error()))
		}
	}
	l := MustLength("3mm")
	if err := json.Unmarshal([]byte(`"junk"`), &l); err == nil || l.String() != "3mm" {
		t.Errorf("a refused text changed the length to %q (%v)", l, err)
	}
	if err := json.Unmarshal([]byte(`12`), &l); err == nil {
		t.Error("a bare number was taken as a length")
	}
}

func TestZeroLength(t *testing.T) {
	var l Length
	if !l.IsZero() || l.String() != "" || l.Pixels(300) != 0 || l.MM(300) != 0 {
		t.Errorf("the zero length is %q, %d px, %g mm", l, l.Pixels(300), l.MM(300))
	}
	if MustLength("0mm").IsZero() {
		t.Error("0mm counts as absent")
	}
	defer func() {
		if recover() == nil {
			t.Error("MustLength took junk")
		}
	}()
	MustLength("junk")
}

// An inch is 25.4 mm exactly (international yard and pound agreement, 1959);
// the rest follows by hand.
func TestLengthExact(t *testing.T) {
	cases := []struct {
		text   string
		ppi    int
		mm, px string // exact rationals
	}{
		{"1in", 300, "127/5", "300"},
		{"25.4mm", 300, "127/5", "300"},
		{"2.54cm", 300, "127/5", "300"},
		{"300px", 300, "127/5", "300"},
		{"1px", 72, "127/360", "1"},
		{"0.125in", 300, "127/40", "75/2"},
		{"3mm", 300, "3", "4500/127"},
		{"12cm", 254, "120", "1200"},
	}
	for _, c := range cases {
		l := MustLength(c.text)
		if got := l.RatMM(c.ppi).RatString(); got != c.mm {
			t.Errorf("%s at %d ppi: %s mm, want %s", c.text, c.ppi, got, c.mm)
		}
		if got := l.RatPixels(c.ppi).RatString(); got != c.px {
			t.Errorf("%s at %d ppi: %s px, want %s", c.text, c.ppi, got, c.px)
		}
		want, _ := new(big.Rat).SetString(c.px)
		if f, _ := want.Float64(); l.PixelWidth(c.ppi) != f {
			t.Errorf("%s: width %v, want %v", c.text, l.PixelWidth(c.ppi), f)
		}
	}
	if got := MustLength("0.15mm").MM(300); got != 0.15 {
		t.Errorf("0.15mm is %v mm", got)
	}
}

// The rule stated by Pixels: halves go up. 0.125 in at 300 ppi is 37.5 px.
func TestPixelsRoundHalfUp(t *testing.T) {
	cases := []struct {
		text string
		ppi  int
		want int
	}{
		{"0.125in", 300, 38}, {"0.125in", 100, 13}, {"0.5px", 300, 1}, {"0.499999px", 300, 0},
		{"1.5px", 300, 2}, {"2.5px", 300, 3}, {"2.499999px", 300, 2}, {"0mm", 300, 0},
		{"3mm", 300, 35}, {"5mm", 300, 59}, {"6mm", 300, 71},
	}
	for _, c := range cases {
		if got := MustLength(c.text).Pixels(c.ppi); got != c.want {
			t.Errorf("%s at %d ppi: %d px, want %d", c.text, c.ppi, got, c.want)
		}
	}
}

func FuzzLength(f *testing.F) {
	for _, s := range []string{"600mm", "23.5in", "0.000001cm", "9999999px", "", "5", "-1mm"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		l, err := ParseLength(s)
		if err != nil {
			return
		}
		if l.String() != s {
			t.Fatalf("%q came back as %q", s, l)
		}
		exact := l.RatPixels(MaxPPI)
		diff := new(big.Rat).Sub(new(big.Rat).SetInt64(int64(l.Pixels(MaxPPI))), exact)
		half := big.NewRat(1, 2)
		if diff.Cmp(half) > 0 || diff.Cmp(new(big.Rat).Neg(half)) <= 0 {
			t.Fatalf("%q: %d pixels for %s", s, l.Pixels(MaxPPI), exact)
		}
	})
}
