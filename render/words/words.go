// Package words says figures as a person would: sizes, times, counts, rates and
// long decimals, for the command line, the screens and the queue's page alike.
// It knows nothing of what the figures are of.
package words

import (
	"fmt"
	"strconv"
	"strings"
	"time"
)

// Size writes a file's or a memory's size, in powers of ten.
func Size(bytes int64) string {
	switch n := float64(bytes); {
	case n >= 1e9:
		return fmt.Sprintf("%.2f GB", n/1e9)
	case n >= 1e6:
		return fmt.Sprintf("%.1f MB", n/1e6)
	default:
		return fmt.Sprintf("%.1f kB", n/1e3)
	}
}

// Clock writes a time of so many seconds.
func Clock(seconds float64) string {
	switch d := time.Duration(seconds * float64(time.Second)); {
	case d < 10*time.Second:
		return fmt.Sprintf("%.1f s", seconds)
	case d < 2*time.Minute:
		return fmt.Sprintf("%.0f s", seconds)
	case d < 2*time.Hour:
		return fmt.Sprintf("%d min %02d s", int(d.Minutes()), int(d.Seconds())%60)
	}
	return fmt.Sprintf("%d h %02d min", int(seconds/3600), int(seconds/60)%60)
}

// Count writes a whole number with a comma between thousands.
func Count(n int64) string {
	s := strconv.FormatInt(n, 10)
	sign := ""
	if n < 0 {
		sign, s = "-", s[1:]
	}
	var groups []string
	for len(s) > 3 {
		groups = append([]string{s[len(s)-3:]}, groups...)
		s = s[:len(s)-3]
	}
	return sign + strings.Join(append([]string{s}, groups...), ",")
}

// Percent writes a share, 0…1, with as many decimals as tell it from 0 and 1.
func Percent(share float64) string {
	switch {
	case share == 0 || share == 1:
		return fmt.Sprintf("%.0f %%", 100*share)
	case share < 0.0005:
		return "under 0.1 %"
	case share > 0.9995:
		return "over 99.9 %"
	}
	return fmt.Sprintf("%.1f %%", 100*share)
}

// Digits shortens a long decimal to width characters: its beginning, an
// ellipsis and, if it has one, its exponent.
func Digits(decimal string, width int) string {
	if len(decimal) <= width {
		return decimal
	}
	digits, exponent, found := strings.Cut(decimal, "e")
	if found {
		exponent = "e" + exponent
	}
	keep := max(1, width-1-len(exponent))
	if keep >= len(digits) {
		return digits + exponent
	}
	return digits[:keep] + "…" + exponent
}
