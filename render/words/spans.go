package words

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Amount writes a quantity to three places with a prefix of the SI, which joins
// a unit's symbol and stands apart from a word.
func Amount(v float64, unit string) string {
	prefixes := []string{"", "k", "M", "G", "T"}
	i := 0
	for v >= 999.5 && i < len(prefixes)-1 {
		v /= 1000
		i++
	}
	places := 0
	if v < 99.95 && i > 0 {
		places = 1
	}
	prefix := prefixes[i]
	if symbol, _, _ := strings.Cut(unit, "/"); prefix != "" && len(symbol) > 3 {
		prefix += " "
	}
	return strconv.FormatFloat(v, 'f', places, 64) + " " + prefix + unit
}

// Span writes seconds as roughly as they are known.
func Span(s float64) string {
	switch m := math.Round(s / 60); {
	case math.IsNaN(s) || s >= longest:
		return "years"
	case s < 99.5:
		return fmt.Sprintf("%.0f s", max(1, math.Round(s)))
	case m < 100:
		return fmt.Sprintf("%.0f min", m)
	case m < 48*60:
		return fmt.Sprintf("%d h %02d min", int(m)/60, int(m)%60)
	default:
		h := int(math.Round(s / 3600))
		return fmt.Sprintf("%d d %d h", h/24, h%24)
	}
}

// longest is where a time to go is no longer told in days.
const longest = 1000 * 24 * 3600

// Between writes a range of seconds, in one unit where one will do.
func Between(low, high float64) string {
	switch {
	case high < 99.5:
		return fmt.Sprintf("between %.0f and %.0f s", low, high)
	case high < 10*60:
		return fmt.Sprintf("between %.1f and %.1f min", low/60, high/60)
	case high < 100*60:
		return fmt.Sprintf("between %.0f and %.0f min", low/60, high/60)
	}
	return "between " + Span(low) + " and " + Span(high)
}

// Plural writes a number of things.
func Plural(n int, one, more string) string {
	if n == 1 {
		return "1 " + one
	}
	return Count(int64(n)) + " " + more
}
