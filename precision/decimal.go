package precision

import (
	"encoding/json"
	"strings"
)

// Limits of what ParseDecimal accepts. They bound the work that a number in a
// file can cause; both lie far beyond any view that can be rendered.
const (
	MaxDigits   = 20000 // decimal digits of a number as written, exponent aside
	MaxExponent = 20000 // largest |n| of the exponent as written, and of the leading digit's power of ten
)

// maxText is the longest text worth reading: sign, digits, point and an exponent.
const maxText = MaxDigits + 16

// Decimal is an exact decimal number that remembers how it was written. It is a
// value: copying and comparing with == are safe, though == tells 1 from 1.0; see
// Cmp for the order of the numbers themselves. The zero value is 0.
type Decimal struct {
	text   string // as given; "" reads "0"
	digits string // significant digits, no zeros at either end; "" is zero
	exp    int    // the value is ±digits·10^exp
	neg    bool   // never set for zero
}

// ParseDecimal reads a number as JSON writes them, -?(0|[1-9][0-9]*)(\.[0-9]+)?([eE][+-]?[0-9]+)?,
// within MaxDigits and MaxExponent. Anything else is a *DecimalSyntaxError or a
// *DecimalLimitError; both offer a hint.
func ParseDecimal(s string) (Decimal, error) {
	if len(s) > maxText {
		return Decimal{}, &DecimalLimitError{Limit: "characters", Max: maxText}
	}
	p, err := scanDecimal(s)
	if err != nil {
		return Decimal{}, err
	}
	if n := len(p.whole) + len(p.frac); n > MaxDigits {
		return Decimal{}, &DecimalLimitError{Limit: "digits", Max: MaxDigits}
	}
	if p.exp > MaxExponent || p.exp < -MaxExponent {
		return Decimal{}, &DecimalLimitError{Limit: "exponent", Max: MaxExponent}
	}
	return p.decimal(s)
}

// decimal assembles the value of the parts of s.
func (p decimalParts) decimal(s string) (Decimal, error) {
	digits := strings.TrimLeft(p.whole+p.frac, "0")
	exp := p.exp - len(p.frac)
	kept := strings.TrimRight(digits, "0")
	exp += len(digits) - len(kept)
	if s == "0" {
		return Decimal{}, nil // the zero value, so that == holds
	}
	d := Decimal{text: strings.Clone(s), digits: kept}
	if kept == "" {
		return d, nil
	}
	if lead := exp + len(kept) - 1; lead > MaxExponent || lead < -MaxExponent {
		return Decimal{}, &DecimalLimitError{Limit: "exponent", Max: MaxExponent}
	}
	d.exp, d.neg = exp, p.neg
	return d, nil
}

// String returns the number exactly as it was written.
func (d Decimal) String() string {
	if d.text == "" {
		return "0"
	}
	return d.text
}

// Sign returns -1, 0 or +1.
func (d Decimal) Sign() int {
	switch {
	case d.digits == "":
		return 0
	case d.neg:
		return -1
	}
	return 1
}

// Cmp returns -1, 0 or +1 as d is less than, equal to or greater than e, exactly.
func (d Decimal) Cmp(e Decimal) int {
	sd, se := d.Sign(), e.Sign()
	if sd != se {
		if sd < se {
			return -1
		}
		return 1
	}
	ld, le := d.exp+len(d.digits), e.exp+len(e.digits)
	switch {
	case ld < le:
		return -sd
	case ld > le:
		return sd
	}
	return sd * strings.Compare(d.digits, e.digits)
}

// MarshalJSON writes d as a JSON string, character for character as given.
func (d Decimal) MarshalJSON() ([]byte, error) {
	s := d.String()
	return append(append(append(make([]byte, 0, len(s)+2), '"'), s...), '"'), nil
}

// UnmarshalJSON reads a JSON string that ParseDecimal accepts. JSON numbers are
// refused, since other programs would round them, and so is null.
func (d *Decimal) UnmarshalJSON(data []byte) error {
	if len(data) == 0 || data[0] != '"' {
		return &DecimalSyntaxError{Text: shorten(string(data[:min(len(data), 64)])), Problem: "not a JSON string", bare: true}
	}
	if len(data) > 6*maxText+2 { // six characters at most stand for one: \u0031
		return &DecimalLimitError{Limit: "characters", Max: maxText}
	}
	var s string
	if err := json.Unmarshal(data, &s); err != nil {
		return &DecimalSyntaxError{Text: shorten(string(data)), Problem: err.Error()}
	}
	v, err := ParseDecimal(s)
	if err != nil {
		return err
	}
	*d = v
	return nil
}
