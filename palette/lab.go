package palette

import (
	"math"
	"math/big"
	"sync"

	"leadline/precision"
)

// CIE L*a*b* (ISO/CIE 11664-4) under D50, reached from D65 by Bradford, as
// CSS Color 4 §9.3 and the ICC profile connection space have it. The constants
// are the exact fractions of CIE 15.
const (
	labEpsilon = 216.0 / 24389
	labKappa   = 24389.0 / 27
)

// labFrame holds the adaptations and the white of the Lab coordinates.
type labFrame struct {
	toD50, toD65 matrix
	white        [3]float64
}

var labD50 = sync.OnceValue(func() *labFrame {
	w := whiteD50.exactXYZ()
	m := bradford(whiteD65.exactXYZ(), w)
	return &labFrame{toD50: m.round(), toD65: m.inverse().round(), white: roundAll(w)}
})

func roundAll(v [3]*big.Rat) (f [3]float64) {
	for i := range v {
		f[i], _ = v[i].Float64()
	}
	return f
}

// FromLab makes the colour of CIE L*a*b* under D50, L* being 0…100.
func FromLab(l, a, b float64) Colour {
	frame := labD50()
	fy := (l + 16) / 116
	xyz := [3]float64{labInverse(fy + a/500), labInverse(fy), labInverse(fy - b/200)}
	for i := range xyz {
		xyz[i] *= frame.white[i]
	}
	return FromXYZ(frame.toD65.apply(xyz))
}

// Lab gives CIE L*a*b* under D50, L* being 0…100.
func (c Colour) Lab() (l, a, b float64) {
	frame := labD50()
	xyz := frame.toD50.apply(c.XYZ())
	for i := range xyz {
		xyz[i] = labForward(xyz[i] / frame.white[i])
	}
	return math.FMA(116, xyz[1], -16), 500 * (xyz[0] - xyz[1]), 200 * (xyz[1] - xyz[2])
}

// LCh gives the cylindrical form of Lab, the hue in degrees 0…360.
func (c Colour) LCh() (l, chroma, hue float64) {
	l, a, b := c.Lab()
	chroma, hue = unpolar(a, b)
	return l, chroma, hue
}

// labForward is the function f of the CIE definition.
func labForward(t float64) float64 {
	if t > labEpsilon {
		return precision.Cbrt(t)
	}
	return math.FMA(labKappa, t, 16) / 116
}

// labInverse undoes labForward.
func labInverse(f float64) float64 {
	if cube := f * f * f; cube > labEpsilon {
		return cube
	}
	return math.FMA(116, f, -16) / labKappa
}
