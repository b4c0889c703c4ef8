package palette

import (
	"math"

	"leadline/precision"
)

// curve is a transfer function: the rule between encoded values and light.
type curve uint8

const (
	curveSRGB curve = iota // IEC 61966-2-1 §5.2; CSS Color 4 §10.2
	curveA98               // gamma 563/256; CSS Color 4 §10.6
	curveROMM              // ISO 22028-2; CSS Color 4 §10.7
	curveCount
)

// decode takes an encoded value to light; 0…1 maps to 0…1. It is odd: negative
// values are mirrored, as CSS Color 4 does for colours outside the gamut.
func (c curve) decode(v float64) float64 {
	if v < 0 {
		return -c.decode(-v)
	}
	switch c {
	case curveSRGB:
		if v <= 0.04045 {
			return v / 12.92
		}
		return precision.Pow((v+0.055)/1.055, 2.4)
	case curveA98:
		return precision.Pow(v, 563.0/256)
	default:
		if v < 16.0/512 {
			return v / 16
		}
		return precision.Pow(v, 1.8)
	}
}

// encode is the inverse of decode.
func (c curve) encode(v float64) float64 {
	if v < 0 {
		return -c.encode(-v)
	}
	switch c {
	case curveSRGB:
		if v <= 0.0031308 {
			return v * 12.92
		}
		return math.FMA(1.055, precision.Pow(v, 1/2.4), -0.055)
	case curveA98:
		return precision.Pow(v, 256.0/563)
	default:
		if v < 1.0/512 {
			return v * 16
		}
		return precision.Pow(v, 1/1.8)
	}
}
