package cells

import (
	"strings"
	"testing"
	"unicode/utf8"
)

// TestText: widths are those of UAX 11 (East Asian Width) and the combining classes
// of the Unicode character database.
func TestText(t *testing.T) {
	for _, c := range []struct {
		name, text string
		width      int
		shown      string
	}{
		{"ASCII", "lead", 4, "lead"},
		{"accents", "été", 3, "été"},
		{"accent as a mark", "e\u0301te", 3, "e\u0301te"},
		{"Vietnamese in marks", "e\u0302\u0301", 1, "e\u0302\u0301"},
		{"too many marks", "a" + strings.Repeat("\u0301", 9), 1, "a" + strings.Repeat("\u0301", 3)},
		{"mark first", "\u0301x", 1, "x"},
		{"wide", "東京", 4, "東京"},
		{"Hangul syllables", "한글", 4, "한글"},
		{"Hangul jamo", "\u1112\u1161\u11ab", 2, "\u1112\u1161\u11ab"},
		{"Hangul vowel alone", "a\u1161", 2, "a\ufffd"},
		{"fullwidth", "Ａ", 2, "Ａ"},
		{"halfwidth", "ｱ", 1, "ｱ"},
		{"Thai", "ที่", 1, "ที่"},
		{"emoji", "🌊", 2, "🌊"},
		{"emoji joined", "👩\u200d🚀", 4, "👩🚀"},
		{"emoji selector", "❤\ufe0f", 1, "❤"},
		{"skin tone", "👍🏽", 2, "👍"},
		{"flag", "🇳🇱", 2, "NL"},
		{"soft hyphen", "a\u00adb", 2, "ab"},
		{"direction override", "a\u202eb", 2, "ab"},
		{"escape", "a\x1b[31mb", 7, "a\ufffd[31mb"},
		{"newline and tab", "a\n\tb", 4, "a\ufffd\ufffdb"},
		{"line separator", "a\u2028b", 3, "a\ufffdb"},
		{"C1 control", "a\u009bb", 3, "a\ufffdb"},
		{"bad UTF-8", "a\xffb", 3, "a\ufffdb"},
		{"empty", "", 0, ""},
	} {
		if got := TextWidth(c.text); got != c.width {
			t.Errorf("%s: width %d, want %d", c.name, got, c.width)
		}
		g := NewGrid(20, 1, None)
		if end := g.Text(2, 0, c.text, Style{}); end != 2+c.width {
			t.Errorf("%s: ends at %d, want %d", c.name, end, 2+c.width)
		}
		want := "  " + c.shown + strings.Repeat(" ", 18-c.width)
		if got := g.Lines()[0]; got != want {
			t.Errorf("%s: %q, want %q", c.name, got, want)
		}
	}
}

func TestTextIsCut(t *testing.T) {
	for _, c := range []struct {
		x, y int
		text string
		want string
	}{
		{0, 0, "abcdef", "abcd"},
		{-2, 0, "abcd", "cd.."},
		{3, 0, "東", "... "},
		{-1, 0, "東x", " x.."},
		{-2, 0, "東x", "x..."},
		{4, 0, "a", "...."},
		{0, 1, "a", "...."},
		{0, -1, "a", "...."},
		{-9, 0, "a", "...."},
	} {
		g := NewGrid(4, 1, None)
		g.Text(0, 0, "....", Style{})
		g.Text(c.x, c.y, c.text, Style{})
		if got := g.Lines()[0]; got != c.want {
			t.Errorf("%q at %d, %d: %q, want %q", c.text, c.x, c.y, got, c.want)
		}
	}
}

func TestTextInASCII(t *testing.T) {
	g := NewGrid(6, 1, None)
	g.ASCII = true
	g.Text(0, 0, "2° 東e\u0301", Style{})
	if got := g.Lines()[0]; got != "2? ?e " {
		t.Errorf("got %q", got)
	}
}

// FuzzText: whatever is written, the line is as wide as the grid, valid UTF-8 and
// free of control characters, and the width foretold is the width taken.
func FuzzText(f *testing.F) {
	for _, s := range []string{"lead", "東京", "e\u0301", "\x1b]0;x\a", "👩\u200d🚀🇳🇱", "\xff\u202e"} {
		f.Add(s, 0)
		f.Add(s, -1)
	}
	f.Fuzz(func(t *testing.T, s string, x int) {
		x %= 30
		g := NewGrid(9, 1, None)
		if end := g.Text(x, 0, s, Style{}); end-x != TextWidth(s) {
			t.Errorf("takes %d cells, foretold %d", end-x, TextWidth(s))
		}
		line := g.Lines()[0]
		compareLine(t, g, 0, line)
		if !utf8.ValidString(line) || strings.ContainsAny(line, "\x1b\x07\n\t\u009b\u202e") {
			t.Errorf("line %q", line)
		}
	})
}
