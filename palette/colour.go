package palette

import (
	"math"
	"strconv"

	"leadline/precision"
)

// Colour is one opaque colour, which may lie outside every RGB gamut. The zero
// value is black. It remembers the text it was read from, so that a document
// is written back byte for byte; use Equal, not ==, to compare colours.
type Colour struct {
	lab  [3]float64 // OKLab
	text string     // as given to ParseColour, or empty
}

// FromOKLab makes the colour of OKLab coordinates: L is 0…1, a and b about
// ±0.4.
func FromOKLab(l, a, b float64) Colour { return Colour{lab: [3]float64{l, a, b}} }

// FromOKLCH makes the colour of lightness 0…1, chroma and hue in degrees.
func FromOKLCH(l, c, h float64) Colour {
	a, b := polar(c, h)
	return FromOKLab(l, a, b)
}

// FromXYZ makes the colour of CIE XYZ under D65, Y = 1 for white.
func FromXYZ(xyz [3]float64) Colour { return FromLinear(SRGB, SRGB.FromXYZ(xyz)) }

// FromLinear makes the colour of linear RGB in a space.
func FromLinear(s Space, linear [3]float64) Colour {
	return Colour{lab: labOfLMS(s.matrices().toLMS.apply(linear))}
}

// FromCodes makes the colour of 16-bit codes in a space.
func FromCodes(s Space, code [3]uint16) Colour {
	t := s.Transfer()
	return FromLinear(s, [3]float64{t.Decode(code[0]), t.Decode(code[1]), t.Decode(code[2])})
}

// fromEncoded makes the colour of encoded values, 0…1 within the gamut.
func fromEncoded(s Space, v [3]float64) Colour {
	c := s.definition().curve
	return FromLinear(s, [3]float64{c.decode(v[0]), c.decode(v[1]), c.decode(v[2])})
}

// OKLab gives the OKLab coordinates.
func (c Colour) OKLab() (l, a, b float64) { return c.lab[0], c.lab[1], c.lab[2] }

// OKLCH gives lightness, chroma and hue, the hue in degrees 0…360. A grey has
// hue 0 (chroma at most 4e-6, where CSS Color 4 §12.4 calls the hue
// powerless).
func (c Colour) OKLCH() (l, chroma, hue float64) {
	chroma, hue = unpolar(c.lab[1], c.lab[2])
	if chroma <= 4e-6 {
		hue = 0
	}
	return c.lab[0], chroma, hue
}

// XYZ gives CIE XYZ under D65, Y = 1 for white.
func (c Colour) XYZ() [3]float64 { return SRGB.ToXYZ(SRGB.matrices().fromLMS.apply(lmsOfLab(c.lab))) }

// Linear gives linear RGB in a space, outside 0…1 where the space cannot hold
// the colour.
func (c Colour) Linear(s Space) [3]float64 { return s.matrices().fromLMS.apply(lmsOfLab(c.lab)) }

// gamutSlack is how far outside 0…1 a linear value may lie by rounding alone.
// It is below half a 16-bit code of sRGB and ROMM at black, where codes are
// finest.
const gamutSlack = 1e-7

// In gives linear RGB in a space and whether the space holds the colour. The
// values are not clamped.
func (c Colour) In(s Space) (linear [3]float64, inGamut bool) {
	linear = c.Linear(s)
	inGamut = true
	for _, v := range linear {
		inGamut = inGamut && v >= -gamutSlack && v <= 1+gamutSlack
	}
	return linear, inGamut
}

// Equal tells whether two colours have the same coordinates, however written.
func (c Colour) Equal(d Colour) bool { return c.lab == d.lab }

// String is the text the colour was read from, or else CSS that reads back as
// exactly this colour.
func (c Colour) String() string {
	if c.text != "" {
		return c.text
	}
	if c.lab == [3]float64{} {
		return "#000000"
	}
	b := []byte("oklab(")
	for i, v := range c.lab {
		if i > 0 {
			b = append(b, ' ')
		}
		b = strconv.AppendFloat(b, v, 'g', -1, 64)
	}
	return string(append(b, ')'))
}

// MarshalText writes String.
func (c Colour) MarshalText() ([]byte, error) { return []byte(c.String()), nil }

// UnmarshalText reads with ParseColour.
func (c *Colour) UnmarshalText(text []byte) error {
	d, err := ParseColour(string(text))
	if err != nil {
		return err
	}
	*c = d
	return nil
}

const degree = math.Pi / 180

// polar gives the rectangular coordinates of a chroma and a hue in degrees.
func polar(chroma, hue float64) (a, b float64) {
	s, c := precision.SinCos(math.Mod(hue, 360) * degree)
	return chroma * c, chroma * s
}

// unpolar is the inverse of polar, the hue in 0…360.
func unpolar(a, b float64) (chroma, hue float64) {
	chroma = length(a, b)
	if chroma == 0 {
		return 0, 0
	}
	if hue = precision.Atan2(b, a) / degree; hue < 0 {
		hue += 360
	}
	return chroma, hue
}

// length is √(a²+b²); no colour is so large or small as to need more care.
func length(a, b float64) float64 { return math.Sqrt(math.FMA(a, a, float64(b*b))) }
