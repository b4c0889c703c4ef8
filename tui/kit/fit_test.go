package kit

import (
	"strings"
	"testing"

	"github.com/charmbracelet/x/ansi"
)

// TestFit makes lines of exactly the width, whatever is in them.
func TestFit(t *testing.T) {
	for _, s := range []string{"", "abc", "\x1b[31mred\x1b[0m and more of it", "日本語の題", "e\u0301e\u0301e\u0301e\u0301e\u0301"} {
		for width := range 12 {
			if n := ansi.StringWidth(Fit(s, width)); n != width {
				t.Errorf("%q at %d: %d", s, width, n)
			}
		}
	}
	if got := Fit("abcdef", 4); got != "abc…" {
		t.Errorf("%q", got)
	}
	b := Block("one\ntwo and more\nthree", 5, 4)
	if b != "one  \ntwo …\nthree\n     " {
		t.Errorf("%q", b)
	}
	if got := Beside(Block("a\nb", 2, 2), Block("c\nd", 1, 2)); got != "a c\nb d" || strings.Count(got, "\n") != 1 {
		t.Errorf("%q", got)
	}
}
