package cells

import "image/color"

// RGB is an opaque colour in sRGB, 8 bits a channel. The zero value is black.
type RGB struct{ R, G, B uint8 }

// RGBOf rounds a colour to 8 bits a channel; transparency is drawn on black.
func RGBOf(c color.Color) RGB {
	r, g, b, _ := c.RGBA()
	to8 := func(v uint32) uint8 { return uint8((v*255 + 32767) / 65535) }
	return RGB{to8(r), to8(g), to8(b)}
}

// Solid is the paint of a colour.
func (c RGB) Solid() Paint {
	return Paint{solid | uint32(c.R)<<16 | uint32(c.G)<<8 | uint32(c.B)}
}

// Paint says how the letter or the ground of a cell is coloured. The zero value
// is Own.
type Paint struct {
	code uint32 // the kind, and below it the RGB of a solid one
}

// The kinds of paint. Own is 0.
const (
	solid   = 1 << 24
	under   = 2 << 24
	against = 3 << 24
	rgbMask = 1<<24 - 1
)

var (
	// Own is the terminal's own colour for letters or for the ground.
	Own = Paint{}
	// Under, as a ground, keeps what lies there: the mean colour of the cell
	// that is drawn over.
	Under = Paint{under}
	// Against, as a letter's colour, is black or white, whichever stands out
	// more from the ground; Own where the ground is.
	Against = Paint{against}
)

// RGB gives the colour of a solid paint; ok is false for every other.
func (p Paint) RGB() (c RGB, ok bool) {
	if p.code&^rgbMask != solid {
		return RGB{}, false
	}
	return RGB{uint8(p.code >> 16), uint8(p.code >> 8), uint8(p.code)}, true
}

// Attr is a set of attributes of letters.
type Attr uint8

// The attributes, and no others, because every terminal has these.
const (
	Bold Attr = 1 << iota
	Underline
	Inverse
)

// Style is how text and lines are drawn. The zero value is the terminal's own.
type Style struct {
	FG, BG Paint
	Attr   Attr
}

// Contrast is the ratio of WCAG 2.2 for two colours, 1 to 21.
func Contrast(a, b RGB) float64 {
	p, q := luminance(a), luminance(b)
	return (max(p, q) + 0.05) / (min(p, q) + 0.05)
}

// luminance is the relative luminance of WCAG 2.2: the Y of sRGB, 0…1.
func luminance(c RGB) float64 {
	t := tables()
	return 0.2126*float64(t.linear[c.R]) + 0.7152*float64(t.linear[c.G]) + 0.0722*float64(t.linear[c.B])
}

// standout is black or white, whichever has more contrast with c.
func standout(c RGB) RGB {
	white := RGB{255, 255, 255}
	if Contrast(c, white) >= Contrast(c, RGB{}) {
		return white
	}
	return RGB{}
}
