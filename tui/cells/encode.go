package cells

import (
	"strconv"
	"unicode/utf8"
)

// pen is what the terminal is set to draw with. Colours are coded as kind<<24 and
// the number or RGB; 0 is the terminal's own.
type pen struct {
	fg, bg uint32
	attr   Attr
}

const (
	penTrue = solid
	pen256  = 2 << 24
	pen16   = 3 << 24
)

// code is how the grid's depth shows a paint.
func (g *Grid) code(p Paint) uint32 {
	c, ok := p.RGB()
	if !ok || g.depth == None {
		return 0
	}
	switch g.depth {
	case C16:
		return pen16 | uint32(nearest16().at(c))
	case C256:
		return pen256 | uint32(nearest256().at(c))
	}
	return p.code
}

// Lines writes every row with AppendLine.
func (g *Grid) Lines() []string {
	lines := make([]string, g.rows)
	var buf []byte
	for y := range lines {
		buf = g.AppendLine(buf[:0], y)
		lines[y] = string(buf)
	}
	return lines
}

// AppendLine appends row y as text with escape sequences (ECMA-48 SGR): only what
// changes from cell to cell, and at the end a reset if anything is set. The line is
// exactly as wide as the grid. A blank leaves the letter's colour and weight alone,
// and a block whose two colours come out alike is a blank. It panics for a row
// outside the grid.
func (g *Grid) AppendLine(dst []byte, y int) []byte {
	var cur pen
	var fgOf, bgOf Paint // what the last cell had, to code only changes
	var fg, bg uint32
	row := g.row(y)
	for i := range row {
		c := &row[i]
		if c.Rune == Tail {
			continue
		}
		if c.FG != fgOf {
			fgOf, fg = c.FG, g.code(c.FG)
		}
		if c.BG != bgOf {
			bgOf, bg = c.BG, g.code(c.BG)
		}
		want, r := pen{fg, bg, c.Attr}, c.Rune
		if blank(c, want) {
			want, r = pen{cur.fg, bg, cur.attr & Bold}, ' '
		}
		if want != cur {
			dst = appendSGR(dst, cur, want)
			cur = want
		}
		dst = appendLetter(dst, r, c)
	}
	if cur != (pen{}) {
		dst = append(dst, "\x1b[m"...)
	}
	return dst
}

func appendLetter(dst []byte, r rune, c *Cell) []byte {
	dst = utf8.AppendRune(dst, r)
	for _, m := range c.marks {
		if m == 0 {
			break
		}
		dst = utf8.AppendRune(dst, m)
	}
	return dst
}

// blank tells whether a cell shows nothing but its ground.
func blank(c *Cell, p pen) bool {
	if c.Attr&(Underline|Inverse) != 0 {
		return false
	}
	if c.Rune == ' ' || c.Rune == 0 {
		return c.marks[0] == 0
	}
	if p.fg != p.bg || p.fg == 0 {
		return false
	}
	_, parts := coverage(c.Rune)
	return parts > 0
}

// appendSGR appends the one sequence that takes the terminal from one pen to
// another.
func appendSGR(dst []byte, from, to pen) []byte {
	if to == (pen{}) {
		return append(dst, "\x1b[m"...)
	}
	dst = append(dst, "\x1b["...)
	if from.attr != to.attr {
		dst = appendAttr(dst, from.attr, to.attr)
	}
	if from.fg != to.fg {
		dst = appendColour(dst, to.fg, 30)
	}
	if from.bg != to.bg {
		dst = appendColour(dst, to.bg, 40)
	}
	dst[len(dst)-1] = 'm' // instead of the last semicolon
	return dst
}

func appendAttr(dst []byte, from, to Attr) []byte {
	for _, a := range [...]struct {
		attr    Attr
		on, off string
	}{{Bold, "1;", "22;"}, {Underline, "4;", "24;"}, {Inverse, "7;", "27;"}} {
		switch {
		case to&^from&a.attr != 0:
			dst = append(dst, a.on...)
		case from&^to&a.attr != 0:
			dst = append(dst, a.off...)
		}
	}
	return dst
}

// appendColour appends the parameters of a colour: 30 and up for letters, 40 and up
// for the ground; 90 and 100 for the bright eight; 38 and 48 with 5 and a number, or
// with 2 and RGB (ISO 8613-6, with the semicolons that all terminals read).
func appendColour(dst []byte, code uint32, base int) []byte {
	n := uint8(code)
	switch code &^ (1<<24 - 1) {
	case 0:
		return append(dst, decimals[base+9]...)
	case pen16:
		if n >= 8 {
			base += 60 - 8
		}
		return append(dst, decimals[base+int(n)]...)
	case pen256:
		dst = append(dst, decimals[base+8]...)
		dst = append(dst, "5;"...)
		return append(dst, decimals[n]...)
	}
	dst = append(dst, decimals[base+8]...)
	dst = append(dst, "2;"...)
	dst = append(dst, decimals[uint8(code>>16)]...)
	dst = append(dst, decimals[uint8(code>>8)]...)
	return append(dst, decimals[n]...)
}

// decimals are the numbers of one byte, each with a semicolon.
var decimals = func() (d [256]string) {
	for i := range d {
		d[i] = strconv.Itoa(i) + ";"
	}
	return d
}()
