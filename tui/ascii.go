package tui

import (
	"strings"

	"github.com/charmbracelet/x/ansi"
)

// standIns are the ASCII characters for what the screens write beside letters.
var standIns = strings.NewReplacer("←", "<", "→", ">", "↑", "^", "↓", "v", "▸", ">", "…", ".", "×", "x", "±", "~", "°", "o", "·", "-",
	"—", "-", "–", "-", "─", "-", "│", "|", "├", "+", "┤", "+", "┼", "+", "┊", ":", "◆", "O", "“", "\"", "”", "\"", "’", "'")

// inASCII is a view for terminals that show nothing else: what has no stand-in,
// a letter of a title for instance, is a question mark for each of its cells.
func inASCII(view string) string {
	var b strings.Builder
	for _, r := range standIns.Replace(view) {
		if r < 0x80 {
			b.WriteRune(r)
			continue
		}
		b.WriteString(strings.Repeat("?", ansi.StringWidth(string(r))))
	}
	return b.String()
}
