package palette

import (
	"fmt"
	"math/big"
	"strings"
	"sync"
)

// Space is an RGB colour space a print can be delivered in. The zero value is
// SRGB.
type Space uint8

// The spaces. All but ProPhoto have the white point D65.
const (
	SRGB      Space = iota // IEC 61966-2-1
	DisplayP3              // SMPTE RP 431-2 primaries, D65, transfer function of sRGB
	A98                    // compatible with Adobe RGB (1998)
	ProPhoto               // ROMM RGB, ISO 22028-2, white point D50
	spaceCount
)

// chromaticity is a CIE 1931 xy pair as printed in the standard.
type chromaticity struct{ x, y string }

// White points: D65 and D50 as CSS Color 4 §10.1 takes them from CIE 15, to
// four digits.
var (
	whiteD65 = chromaticity{"0.3127", "0.3290"}
	whiteD50 = chromaticity{"0.3457", "0.3585"}
)

// definition is what a standard says of a space.
type definition struct {
	css, name string
	primaries [3]chromaticity
	white     chromaticity
	curve     curve
}

var definitions = [spaceCount]definition{
	SRGB: {
		css: "srgb", name: "sRGB (IEC 61966-2-1)",
		primaries: [3]chromaticity{{"0.64", "0.33"}, {"0.30", "0.60"}, {"0.15", "0.06"}},
		white:     whiteD65, curve: curveSRGB,
	},
	DisplayP3: {
		css: "display-p3", name: "Display P3",
		primaries: [3]chromaticity{{"0.68", "0.32"}, {"0.265", "0.69"}, {"0.15", "0.06"}},
		white:     whiteD65, curve: curveSRGB,
	},
	A98: {
		css: "a98-rgb", name: "compatible with Adobe RGB (1998)",
		primaries: [3]chromaticity{{"0.64", "0.33"}, {"0.21", "0.71"}, {"0.15", "0.06"}},
		white:     whiteD65, curve: curveA98,
	},
	ProPhoto: {
		css: "prophoto-rgb", name: "ROMM RGB (ISO 22028-2)",
		primaries: [3]chromaticity{{"0.7347", "0.2653"}, {"0.1596", "0.8404"}, {"0.0366", "0.0001"}},
		white:     whiteD50, curve: curveROMM,
	},
}

// Spaces lists every space, in order of their constants.
func Spaces() []Space { return []Space{SRGB, DisplayP3, A98, ProPhoto} }

// ParseSpace finds a space by its CSS Color 4 name, in any letter case.
func ParseSpace(css string) (Space, error) {
	for _, s := range Spaces() {
		if strings.EqualFold(css, s.String()) {
			return s, nil
		}
	}
	return SRGB, &SpaceError{Name: css}
}

// SpaceError reports a colour space this package does not have.
type SpaceError struct{ Name string }

func (e *SpaceError) Error() string { return fmt.Sprintf("unknown colour space %q", e.Name) }

// Hint lists the names that are known.
func (e *SpaceError) Hint() string {
	return "use one of srgb, display-p3, a98-rgb, prophoto-rgb"
}

// definition panics on a Space that is none of the constants.
func (s Space) definition() *definition {
	if s >= spaceCount {
		panic(fmt.Sprintf("palette: no colour space %d", uint8(s)))
	}
	return &definitions[s]
}

// String is the CSS Color 4 name, as in a frame.
func (s Space) String() string { return s.definition().css }

// Name is the name for people and for profile descriptions.
func (s Space) Name() string { return s.definition().name }

// MarshalText writes the CSS name.
func (s Space) MarshalText() ([]byte, error) { return []byte(s.String()), nil }

// UnmarshalText reads the CSS name.
func (s *Space) UnmarshalText(text []byte) error {
	p, err := ParseSpace(string(text))
	if err != nil {
		return err
	}
	*s = p
	return nil
}

// ToXYZ takes linear RGB to CIE XYZ under D65 (Bradford-adapted from D50 for
// ProPhoto). Values outside 0…1 are carried through.
func (s Space) ToXYZ(linear [3]float64) [3]float64 { return s.matrices().toXYZ.apply(linear) }

// FromXYZ is the inverse of ToXYZ.
func (s Space) FromXYZ(xyz [3]float64) [3]float64 { return s.matrices().fromXYZ.apply(xyz) }

// spaceMatrices are the conversions of one space, each rounded once from the
// exact product.
type spaceMatrices struct {
	toXYZ, fromXYZ matrix // XYZ under D65
	toLMS, fromLMS matrix // the cone responses of OKLab, before the cube root
}

var matricesOf [spaceCount]func() *spaceMatrices

func init() {
	for _, s := range Spaces() {
		matricesOf[s] = sync.OnceValue(func() *spaceMatrices {
			exact := s.exactToXYZ()
			lms := exactXYZToLMS().times(exact)
			return &spaceMatrices{
				toXYZ: exact.round(), fromXYZ: exact.inverse().round(),
				toLMS: lms.round(), fromLMS: lms.inverse().round(),
			}
		})
	}
}

func (s Space) matrices() *spaceMatrices {
	s.definition()
	return matricesOf[s]()
}

// exactToXYZ is linear RGB to XYZ under D65.
func (s Space) exactToXYZ() ratMatrix {
	m := s.exactNative()
	if s.definition().white != whiteD65 {
		m = bradford(s.definition().white.exactXYZ(), whiteD65.exactXYZ()).times(m)
	}
	return m
}

// exactNative is linear RGB to XYZ under the space's own white: the columns
// are the primaries, scaled so that (1,1,1) gives the white point (SMPTE RP
// 177-1993 §3.3).
func (s Space) exactNative() ratMatrix {
	d := s.definition()
	var p ratMatrix
	for j, c := range d.primaries {
		for i, v := range c.exactXYZ() {
			p[i][j] = v
		}
	}
	return p.times(diagonal(p.inverse().apply(d.white.exactXYZ())))
}

// exactXYZ is the colour of that chromaticity with Y = 1.
func (c chromaticity) exactXYZ() [3]*big.Rat {
	x, y := rat(c.x), rat(c.y)
	z := new(big.Rat).Sub(big.NewRat(1, 1), x)
	z.Sub(z, y)
	return [3]*big.Rat{x.Quo(x, y), big.NewRat(1, 1), z.Quo(z, y)}
}

// bradford is the linear Bradford adaptation between two whites (cone matrix
// of Lam 1985 as printed in ICC.1:2022 Annex E).
func bradford(from, to [3]*big.Rat) ratMatrix {
	cone := ratRows([3][3]string{
		{"0.8951", "0.2664", "-0.1614"},
		{"-0.7502", "1.7135", "0.0367"},
		{"0.0389", "-0.0685", "1.0296"},
	})
	a, b := cone.apply(from), cone.apply(to)
	var gain [3]*big.Rat
	for i := range gain {
		gain[i] = new(big.Rat).Quo(b[i], a[i])
	}
	return cone.inverse().times(diagonal(gain)).times(cone)
}
