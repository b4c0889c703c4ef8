package prints

import (
	"strings"
	"unicode"

	"github.com/charmbracelet/lipgloss"
	"github.com/charmbracelet/x/ansi"

	"leadline/render/words"
	"leadline/tui/kit"
)

// span is a piece of a line in one style.
type span struct {
	text  string
	style lipgloss.Style
}

// row is a line of spans.
type row []span

// width is how many cells the row takes.
func (r row) width() (n int) {
	for _, s := range r {
		n += ansi.StringWidth(s.text)
	}
	return n
}

// render writes the row in exactly width cells, cut with an ellipsis or filled
// up; ground, if there is one, is behind all of it.
func (r row) render(width int, ground lipgloss.TerminalColor) string {
	var b strings.Builder
	fill := lipgloss.Style{}
	left := width
	for _, s := range r {
		if ground != nil {
			s.style = s.style.Background(ground)
		}
		text := ansi.Truncate(s.text, left, "…")
		if text == "" {
			continue
		}
		left -= ansi.StringWidth(text)
		fill = s.style
		if ground != nil || strings.Trim(text, " ") != "" {
			text = s.style.Render(text)
		}
		b.WriteString(text)
	}
	if left <= 0 || ground == nil {
		return b.String() + strings.Repeat(" ", max(0, left))
	}
	return b.String() + fill.Render(strings.Repeat(" ", left))
}

// cell fits spans into a column.
func cell(width int, right bool, spans ...span) row {
	r := row{}
	left := width
	for _, s := range spans {
		s.text = ansi.Truncate(s.text, left, "…")
		left -= ansi.StringWidth(s.text)
		r = append(r, s)
	}
	pad := span{text: strings.Repeat(" ", max(0, left))}
	if len(spans) > 0 {
		pad.style = spans[0].style
	}
	if right {
		return append(row{pad}, r...)
	}
	return append(r, pad)
}

// clean takes out of a text from the queue what a terminal would obey, and what
// would change the direction or the width of a line.
func clean(s string) string {
	s = strings.ToValidUTF8(ansi.Strip(s), "?")
	s = strings.Map(func(r rune) rune {
		switch {
		case unicode.IsSpace(r), unicode.IsControl(r):
			return ' '
		case unicode.Is(unicode.Cf, r), unicode.Is(unicode.Co, r):
			return -1
		}
		return r
	}, s)
	return strings.TrimSpace(s)
}

// wrap breaks a text into lines of at most width cells, at spaces where there
// are any, and at the characters of at.
func wrap(s string, width int, at string) []string {
	if width < 1 {
		return nil
	}
	var lines []string
	for line := range strings.SplitSeq(ansi.Wrap(clean(s), width, at), "\n") {
		lines = append(lines, strings.TrimRight(line, " "))
	}
	return lines
}

// rule is a line with a title in it.
func rule(s kit.Style, title string, width int) string {
	r := row{{"── ", s.Faint}, {title, s.Strong}, {" ", s.Faint}}
	if title == "" {
		r = nil
	}
	return append(r, span{strings.Repeat("─", max(0, width-r.width())), s.Faint}).render(width, nil)
}

// window is the part of lines that fits, from line *at on, which is brought into
// range. Where some are hidden the last line says so.
func window(s kit.Style, lines []string, height int, at *int) []string {
	if height < 1 {
		return nil
	}
	if len(lines) <= height {
		*at = 0
		return lines
	}
	room := height - 1
	*at = max(0, min(*at, len(lines)-room))
	shown := append([]string{}, lines[*at:*at+room]...)
	return append(shown, s.Faint.Render(more(*at, len(lines)-room-*at)))
}

// more says how many lines are hidden above and below.
func more(above, below int) string {
	var parts []string
	if above > 0 {
		parts = append(parts, "pgup ↑ "+words.Plural(above, "line", "lines"))
	}
	if below > 0 {
		parts = append(parts, "pgdn ↓ "+words.Plural(below, "line", "lines"))
	}
	return strings.Join(parts, "   ")
}
