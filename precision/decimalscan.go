package precision

import (
	"fmt"
	"strings"
)

// DecimalSyntaxError reports a text that is not a decimal number.
type DecimalSyntaxError struct {
	Text    string // the text, shortened where long
	Problem string // what is wrong with it
	bare    bool   // a JSON value that is not a string
}

// Error names the text and the problem.
func (e *DecimalSyntaxError) Error() string {
	return fmt.Sprintf("number %q: %s", e.Text, e.Problem)
}

// Hint says how numbers are written.
func (e *DecimalSyntaxError) Hint() string {
	if e.bare {
		return `write long numbers as strings, in quotation marks ("-1.25"), so that no program rounds them on the way`
	}
	return `write it like -1.25, 0.5 or 2.5e-41: digits before and after the point, no leading zeros, no plus sign, no spaces`
}

// DecimalLimitError reports a number longer or more extreme than ParseDecimal reads.
type DecimalLimitError struct {
	Limit string // what is limited: "characters", "digits" or "exponent"
	Max   int    // the most that is accepted
}

// Error names the limit.
func (e *DecimalLimitError) Error() string {
	if e.Limit == "exponent" {
		return fmt.Sprintf("number beyond the powers of ten -%d to %d", e.Max, e.Max)
	}
	return fmt.Sprintf("number longer than %d %s", e.Max, e.Limit)
}

// Hint states both limits.
func (e *DecimalLimitError) Hint() string {
	return fmt.Sprintf("a number may have up to %d digits and a power of ten from -%d to %d; round it to the digits the view needs",
		MaxDigits, MaxExponent, MaxExponent)
}

// decimalParts are the pieces of a written number.
type decimalParts struct {
	neg         bool
	whole, frac string
	exp         int // clamped to a little over ±MaxExponent
}

// scanDecimal splits s into its parts.
func scanDecimal(s string) (p decimalParts, err error) {
	bad := func(problem string) (decimalParts, error) {
		return decimalParts{}, &DecimalSyntaxError{Text: shorten(s), Problem: problem}
	}
	rest := s
	if strings.HasPrefix(rest, "-") {
		p.neg, rest = true, rest[1:]
	}
	p.whole, rest = leadingDigits(rest)
	switch {
	case p.whole == "":
		return bad("no digits before the point")
	case len(p.whole) > 1 && p.whole[0] == '0':
		return bad("leading zero")
	}
	if strings.HasPrefix(rest, ".") {
		if p.frac, rest = leadingDigits(rest[1:]); p.frac == "" {
			return bad("no digits after the point")
		}
	}
	if rest != "" && (rest[0] == 'e' || rest[0] == 'E') {
		var ok bool
		if p.exp, rest, ok = scanExponent(rest[1:]); !ok {
			return bad("no digits in the exponent")
		}
	}
	if rest != "" {
		return bad(fmt.Sprintf("unexpected %q", []rune(rest)[0]))
	}
	return p, nil
}

// scanExponent reads an optional sign and digits; sizes beyond MaxExponent clamp.
func scanExponent(s string) (n int, rest string, ok bool) {
	neg := strings.HasPrefix(s, "-")
	if neg || strings.HasPrefix(s, "+") {
		s = s[1:]
	}
	digits, rest := leadingDigits(s)
	if digits == "" {
		return 0, rest, false
	}
	for _, c := range []byte(digits) {
		n = min(10*n+int(c-'0'), MaxExponent+1)
	}
	if neg {
		n = -n
	}
	return n, rest, true
}

// leadingDigits cuts s after its leading decimal digits.
func leadingDigits(s string) (digits, rest string) {
	i := 0
	for i < len(s) && s[i] >= '0' && s[i] <= '9' {
		i++
	}
	return s[:i], s[i:]
}

// shorten keeps error messages readable whatever was in the file.
func shorten(s string) string {
	const keep = 40
	if len(s) <= keep {
		return s
	}
	return strings.ToValidUTF8(s[:keep], "") + "…"
}
