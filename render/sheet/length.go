package sheet

import (
	"fmt"
	"math/big"
	"regexp"
	"strings"
)

// Unit is the unit a Length was given in.
type Unit string

// The units a length may have. An inch is 25.4 mm exactly (international
// yard and pound agreement, 1959); a pixel's size follows from the ppi.
const (
	MM Unit = "mm"
	CM Unit = "cm"
	In Unit = "in"
	Px Unit = "px"
)

// Limits of a length's text, so that its value is a small exact rational.
const (
	MaxWholeDigits    = 7 // digits before the point
	MaxFractionDigits = 6 // digits after the point
)

// lengthPattern is the grammar of a length; the frame's schema repeats it.
var lengthPattern = regexp.MustCompile(
	`^(?:0|[1-9][0-9]{0,6})(?:\.[0-9]{1,6})?(mm|cm|in|px)\z`)

// Length is an exact, non-negative length of paper or of pixels. It keeps the
// text it was given, byte for byte. The zero value is no length at all: its
// text is empty, it measures nothing, and IsZero reports true.
type Length struct {
	text string
	unit Unit
}

// LengthError says that a text is not a length.
type LengthError struct{ Text string }

// Error names the text, cut short where it is long.
func (e *LengthError) Error() string { return fmt.Sprintf("%q is not a length", brief(e.Text)) }

// Hint says what a length looks like.
func (e *LengthError) Hint() string {
	return fmt.Sprintf("write a plain number and mm, cm, in or px, such as 600mm or 23.5in; "+
		"at most %d digits before the point and %d after it", MaxWholeDigits, MaxFractionDigits)
}

// ParseLength reads a length such as "600mm", "23.5in", "12cm" or "400px":
// a plain decimal without sign, exponent or space, and its unit. The error is
// a *LengthError.
func ParseLength(s string) (Length, error) {
	m := lengthPattern.FindStringSubmatch(s)
	if m == nil {
		return Length{}, &LengthError{Text: s}
	}
	return Length{text: s, unit: Unit(m[1])}, nil
}

// MustLength is ParseLength for texts written in the program itself; it
// panics where the text is not a length.
func MustLength(s string) Length {
	l, err := ParseLength(s)
	if err != nil {
		panic(err)
	}
	return l
}

// String gives the text exactly as it was parsed, "" for the zero value.
func (l Length) String() string { return l.text }

// Unit is the unit the length was given in, "" for the zero value.
func (l Length) Unit() Unit { return l.unit }

// IsZero reports whether l is the zero value: absent, not "0mm".
func (l Length) IsZero() bool { return l.text == "" }

// MarshalText gives the text, so that JSON holds a length as a string.
func (l Length) MarshalText() ([]byte, error) { return []byte(l.text), nil }

// UnmarshalText is ParseLength in the form encoding packages ask for.
func (l *Length) UnmarshalText(b []byte) error {
	v, err := ParseLength(string(b))
	if err == nil {
		*l = v
	}
	return err
}

// number is the length's number without its unit, exactly.
func (l Length) number() *big.Rat {
	r := new(big.Rat)
	if l.text != "" {
		r.SetString(strings.TrimSuffix(l.text, string(l.unit)))
	}
	return r
}

// perMM is how many of the unit make one millimetre, and for pixels ppi/25.4.
func (u Unit) perMM(ppi int) *big.Rat {
	switch u {
	case CM:
		return big.NewRat(1, 10)
	case In:
		return big.NewRat(10, 254)
	case Px:
		return big.NewRat(int64(ppi)*10, 254)
	}
	return big.NewRat(1, 1)
}

// RatMM is the length in millimetres, exactly; ppi (1 or more) gives pixels
// their size.
func (l Length) RatMM(ppi int) *big.Rat {
	n := l.number()
	return n.Quo(n, l.unit.perMM(ppi))
}

// RatPixels is the length in pixels at ppi (1 or more), exactly.
func (l Length) RatPixels(ppi int) *big.Rat {
	mm := l.RatMM(ppi)
	return mm.Mul(mm, Px.perMM(ppi))
}

// MM is the double nearest to the length in millimetres at ppi.
func (l Length) MM(ppi int) float64 { f, _ := l.RatMM(ppi).Float64(); return f }

// PixelWidth is the double nearest to the length in pixels at ppi; it is for
// widths that need not be whole pixels, such as a line's.
func (l Length) PixelWidth(ppi int) float64 { f, _ := l.RatPixels(ppi).Float64(); return f }

// Pixels is the length in whole pixels at ppi: the exact value plus one half,
// rounded down, so halves go up.
func (l Length) Pixels(ppi int) int { return int(roundHalfUp(l.RatPixels(ppi))) }

// roundHalfUp is floor(r + 1/2) for r >= 0 within int64.
func roundHalfUp(r *big.Rat) int64 {
	twice := new(big.Int).Lsh(r.Num(), 1)
	twice.Add(twice, r.Denom())
	return twice.Quo(twice, new(big.Int).Lsh(r.Denom(), 1)).Int64()
}

// brief cuts a text that came from outside to a length fit for a message.
func brief(s string) string {
	const most = 40
	if len(s) <= most {
		return s
	}
	return strings.ToValidUTF8(s[:most], "") + "…"
}
