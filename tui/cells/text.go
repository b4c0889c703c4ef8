package cells

import (
	"unicode"
	"unicode/utf8"

	"github.com/charmbracelet/x/ansi"
)

// marks are the combining marks kept on one letter, 0 for none; any more are left
// out. An array and not a string, so that a grid holds no pointers.
type marks [3]rune

// Text writes s from column x of row y on, and returns the column after it. What
// falls outside the grid is cut off; half of a wide character is a blank. Combining
// marks stay on their letter. A control character shows as U+FFFD. Characters that
// terminals disagree about are made plain: joiners, direction and format controls,
// variation selectors and skin tones are left out, flags become their two letters.
// With ASCII set, marks are left out and any other character is a question mark.
func (g *Grid) Text(x, y int, s string, st Style) int {
	for len(s) > 0 {
		r, m, rest := nextLetter(s)
		s = rest
		if r == 0 {
			continue
		}
		if g.ASCII {
			m = marks{}
			if r > unicode.MaxASCII {
				r = '?'
			}
		}
		w := runeWidth(r)
		g.put(x, y, w, Cell{Rune: r, FG: st.FG, BG: st.BG, Attr: st.Attr, marks: m})
		x += w
	}
	return x
}

// put sets a letter, or blanks in what is to be seen of one that is cut.
func (g *Grid) put(x, y, w int, c Cell) {
	if w == 2 && (x == -1 || x == g.cols-1) {
		c.Rune, c.marks = ' ', marks{}
		x = max(x, 0)
	}
	g.Set(x, y, c)
}

// TextWidth is the number of cells that Text takes for s on a grid that is not ASCII
// (on one that is, it may take fewer).
func TextWidth(s string) int {
	n := 0
	for len(s) > 0 {
		r, _, rest := nextLetter(s)
		if s = rest; r != 0 {
			n += runeWidth(r)
		}
	}
	return n
}

// nextLetter takes one letter and its marks off the front of s; the letter is 0
// when what came first is not drawn.
func nextLetter(s string) (r rune, on marks, rest string) {
	r, n := utf8.DecodeRuneInString(s)
	r, rest = plainRune(r), s[n:]
	if r == 0 || runeWidth(r) == 0 {
		return 0, on, rest
	}
	kept := 0
	for len(rest) > 0 {
		m, n := utf8.DecodeRuneInString(rest)
		joins := isMark(m) || joinsSyllable(m) && hangul(r)
		if !joins && !dropped(m) {
			break
		}
		if joins && !dropped(m) && kept < len(on) {
			on[kept] = m
			kept++
		}
		rest = rest[n:]
	}
	return r, on, rest
}

// plainRune is the character that stands for r, or 0 for none.
func plainRune(r rune) rune {
	switch {
	case unicode.Is(unicode.Cc, r), unicode.Is(unicode.Zl, r), unicode.Is(unicode.Zp, r):
		return utf8.RuneError
	case dropped(r):
		return 0
	case joinsSyllable(r):
		return utf8.RuneError // there is none to join
	case r >= firstFlag && r <= lastFlag:
		return 'A' + r - firstFlag
	}
	return r
}

const (
	firstFlag, lastFlag = 0x1F1E6, 0x1F1FF // regional indicator symbols
	firstTone, lastTone = 0x1F3FB, 0x1F3FF // emoji modifiers
)

// dropped are characters left out: formats (among them the joiners, the marks of
// direction, tags and the soft hyphen), variation selectors and emoji modifiers.
func dropped(r rune) bool {
	return r >= 0xAD && (unicode.In(r, unicode.Cf, unicode.Variation_Selector) || r >= firstTone && r <= lastTone)
}

// isMark tells whether r is drawn on the letter before it.
func isMark(r rune) bool { return r >= 0x300 && unicode.In(r, unicode.Mn, unicode.Me) }

// joinsSyllable tells whether r is a Hangul vowel or final, which take no cell of
// their own after a syllable (UAX 29, GB6 to GB8).
func joinsSyllable(r rune) bool {
	return r >= 0x1160 && r <= 0x11FF || r >= 0xD7B0 && r <= 0xD7FF
}

// hangul tells whether r is a Hangul initial or syllable.
func hangul(r rune) bool {
	return r >= 0x1100 && r < 0x1160 || r >= 0xA960 && r < 0xA980 || r >= 0xAC00 && r < 0xD7A4
}

// runeWidth is the number of cells of a character: 2 where Unicode's East Asian
// Width (UAX 11) is Wide or Fullwidth, 0 for marks, controls and what is dropped,
// else 1. Package ansi is asked because what shows the lines measures them with it.
func runeWidth(r rune) int {
	switch {
	case r < ' ', r >= 0x7F && r < 0xA0, isMark(r), joinsSyllable(r), dropped(r):
		return 0
	case r < 0x300, r >= 0x2500 && r < 0x25A0, r >= 0x1FB00 && r < 0x1FB3C:
		return 1
	}
	return ansi.StringWidth(string(r))
}
