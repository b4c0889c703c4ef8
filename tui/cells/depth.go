package cells

import (
	"fmt"
	"strings"
)

// Depth is how many colours a terminal shows. The zero value is None.
type Depth uint8

// The depths, poorest first.
const (
	None       Depth = iota // no colour at all
	C16                     // the 16 of ECMA-48 and its bright variants
	C256                    // and the cube of 6×6×6 and 24 greys
	TrueColour              // 24 bits
	depthCount
)

// String names the depth for people.
func (d Depth) String() string {
	if d >= depthCount {
		return fmt.Sprintf("Depth(%d)", uint8(d))
	}
	return [depthCount]string{"no colour", "16 colours", "256 colours", "24-bit colour"}[d]
}

// Terminal is what the environment says of a terminal.
type Terminal struct {
	Depth Depth
	Mesh  Mesh // the finest that is safe to begin with; people may choose another
	ASCII bool // the locale is not UTF-8: only ASCII can be written
}

// Detect reads the variables of the environment. It promises a terminal no more
// than it is sure to show; whether its ground is light cannot be read there.
//
//   - NO_COLOR not empty (no-color.org), CLICOLOR=0 without CLICOLOR_FORCE
//     (bixense.com/clicolors), TERM empty or dumb, a DEC VT, or a name ending in
//     -m or -mono: none.
//   - COLORTERM=truecolor or 24bit, WT_SESSION (Windows Terminal), TERM ending in
//     -direct (terminfo's direct colour), or the TERM of a terminal that is newer
//     than 24-bit colour, for COLORTERM gets lost over ssh: 24-bit. GNU screen,
//     which hands on COLORTERM of a terminal it hides, gets 256.
//   - TERM with 256color: 256.
//   - Any other: 16.
//
// The locale is the first of LC_ALL, LC_CTYPE and LANG that is not empty (POSIX).
// Without UTF-8 the mesh is Plain, as it is without colour. Quadrant goes to
// terminals that draw block elements themselves, Half to the others.
func Detect(env func(string) string) Terminal {
	t := Terminal{Depth: detectDepth(env), Mesh: Half, ASCII: !utf8Locale(env)}
	switch {
	case t.Depth == None || t.ASCII:
		t.Mesh = Plain
	case drawsBlocks(env("TERM")):
		t.Mesh = Quadrant
	}
	return t
}

func detectDepth(env func(string) string) Depth {
	term := strings.ToLower(env("TERM"))
	windows := env("WT_SESSION") != ""
	switch {
	case env("NO_COLOR") != "":
		return None
	case env("CLICOLOR") == "0" && !forced(env("CLICOLOR_FORCE")):
		return None
	case term == "" && windows:
		return TrueColour
	case colourless(term):
		return None
	case strings.HasPrefix(term, "screen") && env("TMUX") == "":
		return indexed(term)
	case windows, strings.HasSuffix(term, "-direct"), drawsBlocks(term), saysTrueColour(env("COLORTERM")):
		return TrueColour
	}
	return indexed(term)
}

func forced(v string) bool { return v != "" && v != "0" }

func saysTrueColour(v string) bool {
	return strings.EqualFold(v, "truecolor") || strings.EqualFold(v, "24bit")
}

func indexed(term string) Depth {
	if strings.Contains(term, "256color") || strings.HasPrefix(term, "screen") {
		return C256
	}
	return C16
}

// colourless tells whether a terminal has no colour, by its name in terminfo.
func colourless(term string) bool {
	if term == "" || term == "dumb" || strings.HasSuffix(term, "-m") || strings.HasSuffix(term, "-mono") {
		return true
	}
	number, dec := strings.CutPrefix(term, "vt")
	return dec && number != "" && number[0] >= '0' && number[0] <= '9'
}

// drawsBlocks knows, by TERM, terminals that have had 24-bit colour from their
// first release and draw the block elements themselves, without seams (their own
// manuals).
func drawsBlocks(term string) bool {
	name := strings.TrimPrefix(strings.ToLower(term), "xterm-")
	for _, known := range []string{"kitty", "ghostty", "foot", "wezterm"} {
		if name == known || strings.HasPrefix(name, known+"-") {
			return true
		}
	}
	return false
}

func utf8Locale(env func(string) string) bool {
	for _, v := range []string{"LC_ALL", "LC_CTYPE", "LANG"} {
		if locale := strings.ToLower(env(v)); locale != "" {
			return strings.Contains(locale, "utf-8") || strings.Contains(locale, "utf8")
		}
	}
	return env("WT_SESSION") != ""
}
