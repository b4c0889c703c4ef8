package palette

import "github.com/lucasb-eyer/go-colorful"

// Screen gives the colour for a terminal or a preview: mapped into sRGB and
// rounded to 8 bits a channel. The result is a color.Color and knows its Hex.
func (c Colour) Screen() colorful.Color {
	r, g, b := c.bytes()
	return colorful.Color{R: float64(r) / 255, G: float64(g) / 255, B: float64(b) / 255}
}

// Hex gives the nearest #rrggbb of the colour, mapped into sRGB.
func (c Colour) Hex() string { return c.Screen().Hex() }

func (c Colour) bytes() (r, g, b uint8) {
	code, _ := c.BakeOne(SRGB)
	to8 := func(v uint16) uint8 { return uint8((uint32(v)*255 + white/2) / white) }
	return to8(code[0]), to8(code[1]), to8(code[2])
}

// FromHSLuv makes a colour from HSLuv (hsluv.org, revision 4): hue 0…360,
// saturation and lightness 0…1, of which every combination lies within sRGB.
// It is a way to pick: the result is a 24-bit colour whose text is its #rrggbb,
// and that text, not the three numbers, is what a frame keeps.
func FromHSLuv(hue, saturation, lightness float64) Colour {
	return MustColour(colorful.HSLuv(hue, saturation, lightness).Hex())
}

// HSLuv gives the HSLuv coordinates of the nearest screen colour: hue 0…360,
// saturation and lightness 0…1.
func (c Colour) HSLuv() (hue, saturation, lightness float64) {
	// The hue is taken here: go-colorful's own gives 0 along the v axis and
	// the diagonals of the chromaticity plane.
	xyz := SRGB.ToXYZ(quantised(c).Linear(SRGB))
	white := SRGB.ToXYZ([3]float64{1, 1, 1})
	l, u, v := colorful.XyzToLuvWhiteRef(xyz[0], xyz[1], xyz[2], white)
	chroma, hue := unpolar(u, v)
	if chroma < 1e-8 {
		chroma, hue = 0, 0
	}
	return colorful.LuvLChToHSLuv(l, chroma, hue)
}

func quantised(c Colour) Colour { return fromBytes(c.bytes()) }
