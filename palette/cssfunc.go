package palette

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// value is one component of a colour function.
type value struct {
	number float64
	unit   string // "", "%", "none", or the unit of an angle
}

// notation describes a colour function.
type notation struct {
	legacy func(v []value) error // the rules of the comma syntax, nil if it has none
	build  func(v []value) (Colour, error)
}

var notations map[string]notation

func init() {
	rgb := notation{legacyRGB, buildRGB}
	hsl := notation{legacyHSL, buildHSL}
	notations = map[string]notation{
		"rgb": rgb, "rgba": rgb, "hsl": hsl, "hsla": hsl,
		"hwb":   {build: buildHWB},
		"lab":   {build: rectangular(100, 125, FromLab)},
		"lch":   {build: cylindrical(100, 150, FromLab)},
		"oklab": {build: rectangular(1, 0.4, FromOKLab)},
		"oklch": {build: cylindrical(1, 0.4, FromOKLab)},
	}
}

// parseFunction reads what follows "name(".
func parseFunction(name, rest string) (Colour, error) {
	body, ok := strings.CutSuffix(rest, ")")
	if !ok {
		return Colour{}, &fault{problem: "no closing bracket"}
	}
	build := notations[name].build
	if name == "color" {
		body = strings.TrimLeft(body, cssSpace)
		end := strings.IndexFunc(body+" ", isSpace)
		var err error
		if build, err = builderOf(body[:end]); err != nil {
			return Colour{}, err
		}
		body = body[end:]
	}
	if build == nil {
		return Colour{}, &fault{problem: fmt.Sprintf("no colour function %q", name)}
	}
	v, err := parseValues(body, notations[name].legacy)
	if err != nil {
		return Colour{}, err
	}
	return build(v)
}

// parseValues reads three components, divided by space or, in legacy syntax,
// by commas throughout.
func parseValues(body string, legacy func([]value) error) ([]value, error) {
	if strings.Contains(body, "/") {
		return nil, &fault{"has an alpha value", opaqueCure}
	}
	commas := strings.Contains(body, ",")
	if commas && legacy == nil {
		return nil, &fault{"has commas", "divide the components by spaces"}
	}
	words := strings.FieldsFunc(body, isSpace)
	if commas {
		words = strings.Split(body, ",")
	}
	if len(words) == 4 && commas {
		return nil, &fault{"has an alpha value", opaqueCure}
	}
	if len(words) != 3 {
		return nil, &fault{problem: fmt.Sprintf("%d components, want 3", len(words))}
	}
	v := make([]value, len(words))
	for i, w := range words {
		var err error
		if v[i], err = parseValue(strings.Trim(w, cssSpace)); err != nil {
			return nil, err
		}
	}
	if commas {
		return v, legacy(v)
	}
	return v, nil
}

func isSpace(r rune) bool { return strings.ContainsRune(cssSpace, r) }

const spacesCure = "divide the components by spaces instead of commas"

// legacyRGB allows three numbers or three percentages (CSS Color 4 §5.1).
func legacyRGB(v []value) error {
	for _, c := range v {
		if c.unit != v[0].unit || c.unit == "none" {
			return &fault{"numbers, percentages or none are mixed", spacesCure}
		}
	}
	return nil
}

// legacyHSL wants a hue and two percentages (CSS Color 4 §7).
func legacyHSL(v []value) error {
	if v[0].unit == "none" || v[1].unit != "%" || v[2].unit != "%" {
		return &fault{"saturation and lightness are not percentages", spacesCure}
	}
	return nil
}

// maxComponent keeps every later product finite.
const maxComponent = 1e6

// parseValue reads a CSS number with an optional unit.
func parseValue(w string) (value, error) {
	if w == "none" {
		return value{unit: "none"}, nil
	}
	n := numberLength(w)
	if n == 0 {
		return value{}, &fault{problem: fmt.Sprintf("%q is not a number", w)}
	}
	x, err := strconv.ParseFloat(w[:n], 64)
	if err != nil || math.Abs(x) > maxComponent {
		return value{}, &fault{problem: fmt.Sprintf("%q is out of range", w)}
	}
	switch unit := w[n:]; unit {
	case "", "%", "deg", "grad", "rad", "turn":
		return value{x, unit}, nil
	default:
		return value{}, &fault{problem: fmt.Sprintf("%q has the unknown unit %q", w, unit)}
	}
}

// numberLength is the length of the number at the head of w by the grammar of
// CSS Syntax 3 §4.3.12, or 0.
func numberLength(w string) int {
	digits := func(i int) int {
		for i < len(w) && '0' <= w[i] && w[i] <= '9' {
			i++
		}
		return i
	}
	sign := func(i int) int {
		if i < len(w) && (w[i] == '+' || w[i] == '-') {
			i++
		}
		return i
	}
	start := sign(0)
	end := digits(start)
	if end < len(w) && w[end] == '.' {
		if fraction := digits(end + 1); fraction > end+1 {
			end = fraction
		}
	}
	if end == start {
		return 0
	}
	if end < len(w) && w[end] == 'e' {
		first := sign(end + 1)
		if last := digits(first); last > first {
			end = last
		}
	}
	return end
}

// scaled reads a number, or a percentage of hundred.
func (v value) scaled(hundred float64) (float64, error) {
	switch v.unit {
	case "%":
		return v.number / 100 * hundred, nil
	case "", "none":
		return v.number, nil
	}
	return 0, &fault{problem: fmt.Sprintf("an angle in %q where a number is wanted", v.unit)}
}

// angle reads a hue in degrees.
func (v value) angle() (float64, error) {
	switch v.unit {
	case "grad":
		return v.number * 0.9, nil
	case "rad":
		return v.number / degree, nil
	case "turn":
		return v.number * 360, nil
	case "%":
		return 0, &fault{problem: "a percentage where a hue is wanted"}
	}
	return v.number, nil
}
