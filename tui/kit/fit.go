package kit

import (
	"strings"

	"github.com/charmbracelet/x/ansi"
)

// Fit makes a line exactly width cells wide: cut with an ellipsis, or filled up
// with spaces. Escape sequences take no room.
func Fit(s string, width int) string {
	if width <= 0 {
		return ""
	}
	if n := ansi.StringWidth(s); n <= width {
		return s + strings.Repeat(" ", width-n)
	}
	s = ansi.Truncate(s, width, "…")
	return s + strings.Repeat(" ", width-ansi.StringWidth(s)) // a wide character may have left a cell
}

// Block makes a text exactly height lines of exactly width cells.
func Block(s string, width, height int) string {
	lines := strings.Split(s, "\n")
	out := make([]string, max(0, height))
	for i := range out {
		line := ""
		if i < len(lines) {
			line = lines[i]
		}
		out[i] = Fit(line, width)
	}
	return strings.Join(out, "\n")
}

// Beside sets blocks of equal height side by side.
func Beside(blocks ...string) string {
	var rows []string
	for _, b := range blocks {
		for i, line := range strings.Split(b, "\n") {
			if i == len(rows) {
				rows = append(rows, "")
			}
			rows[i] += line
		}
	}
	return strings.Join(rows, "\n")
}
