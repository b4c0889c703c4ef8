package palette

import (
	"errors"
	"fmt"
	"maps"
	"slices"
	"strings"

	"github.com/lucasb-eyer/go-colorful"
)

// ColourError reports text that is not a colour of a print.
type ColourError struct {
	Text    string // what was given
	Problem string // what is wrong with it
	cure    string
}

func (e *ColourError) Error() string {
	text := e.Text
	if len(text) > 60 {
		text = text[:57] + "..."
	}
	return fmt.Sprintf("colour %q: %s", text, e.Problem)
}

// Hint says what to write instead.
func (e *ColourError) Hint() string {
	if e.cure != "" {
		return e.cure
	}
	return "write a CSS colour: #0b1d2a, teal, rgb(12 30 40), oklch(62% 0.12 210), color(display-p3 0.2 0.5 0.4)"
}

// fault is a problem found while reading, before the whole text is known.
type fault struct{ problem, cure string }

func (f *fault) Error() string { return f.problem }

const opaqueCure = "prints are opaque: leave the alpha out and give the colour as it shall be printed"

// ParseColour reads a colour in the syntax of CSS Color 4: hexadecimal
// notation, the 148 keywords, rgb(), hsl(), hwb(), lab(), lch(), oklab(),
// oklch() and color() with srgb, srgb-linear, display-p3, a98-rgb,
// prophoto-rgb, xyz, xyz-d50 and xyz-d65. Alpha, system colours, currentcolor
// and calc() are refused; "none" counts as 0. The error is a *ColourError.
func ParseColour(css string) (Colour, error) {
	c, err := parseColour(strings.ToLower(strings.Trim(css, cssSpace)))
	if err != nil {
		problem := &ColourError{Text: css, Problem: err.Error()}
		if f := (*fault)(nil); errors.As(err, &f) {
			problem.cure = f.cure
		}
		return Colour{}, problem
	}
	c.text = css
	return c, nil
}

// MustColour is ParseColour for constants in programs; it panics on an error.
func MustColour(css string) Colour {
	c, err := ParseColour(css)
	if err != nil {
		panic(err)
	}
	return c
}

const cssSpace = " \t\n\r\f"

func parseColour(s string) (Colour, error) {
	switch open := strings.IndexByte(s, '('); {
	case s == "":
		return Colour{}, &fault{problem: "empty"}
	case s[0] == '#':
		return parseHex(s)
	case open >= 0:
		return parseFunction(s[:open], s[open+1:])
	default:
		return parseKeyword(s)
	}
}

// parseHex reads #rgb and #rrggbb. The digits are read by go-colorful, whose
// values are then counted in 255ths so that no rounding of its own remains.
func parseHex(s string) (Colour, error) {
	switch len(s) {
	case 4, 7:
	case 5, 9:
		return Colour{}, &fault{"has an alpha value", opaqueCure}
	default:
		return Colour{}, &fault{problem: fmt.Sprintf("%d hexadecimal digits, want 3 or 6", len(s)-1)}
	}
	c, err := colorful.Hex(s)
	if err != nil {
		return Colour{}, &fault{problem: "not hexadecimal digits"}
	}
	r, g, b := c.RGB255()
	return fromBytes(r, g, b), nil
}

func fromBytes(r, g, b uint8) Colour {
	return FromCodes(SRGB, [3]uint16{257 * uint16(r), 257 * uint16(g), 257 * uint16(b)})
}

func parseKeyword(s string) (Colour, error) {
	if v, ok := namedColours[s]; ok {
		return fromBytes(uint8(v>>16), uint8(v>>8), uint8(v)), nil
	}
	if s == "transparent" {
		return Colour{}, &fault{"is transparent", opaqueCure}
	}
	if s == "currentcolor" {
		return Colour{}, &fault{problem: "has no meaning in a print"}
	}
	f := &fault{problem: "no such colour keyword"}
	if near := nearestKeyword(s); near != "" {
		f.cure = "did you mean " + near + "?"
	}
	return Colour{}, f
}

// nearestKeyword finds the keyword within two edits, or "".
func nearestKeyword(s string) string {
	best, least := "", 3
	if len(s) > 30 {
		return best
	}
	for _, name := range keywords() {
		if d := edits(s, name); d < least {
			best, least = name, d
		}
	}
	return best
}

func keywords() []string {
	return slices.Sorted(maps.Keys(namedColours))
}

// edits is the Levenshtein distance, by rows.
func edits(a, b string) int {
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range len(a) {
		diagonal := row[0]
		row[0] = i + 1
		for j := range len(b) {
			cost := diagonal
			if a[i] != b[j] {
				cost++
			}
			diagonal = row[j+1]
			row[j+1] = min(cost, row[j]+1, row[j+1]+1)
		}
	}
	return row[len(b)]
}

// NearestKeyword gives the CSS colour keyword that looks most like c, by
// CIEDE2000, and the difference: a word for a swatch in a listing.
func NearestKeyword(c Colour) (name string, deltaE float64) {
	for _, n := range keywords() {
		v := namedColours[n]
		d := DeltaE00(c, fromBytes(uint8(v>>16), uint8(v>>8), uint8(v)))
		if name == "" || d < deltaE {
			name, deltaE = n, d
		}
	}
	return name, deltaE
}
