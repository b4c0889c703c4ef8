package palette

import (
	"fmt"
	"math"
)

// scaledAll reads three components, each with its own meaning of 100 %.
func scaledAll(v []value, hundred [3]float64) (x [3]float64, err error) {
	for i := range x {
		if x[i], err = v[i].scaled(hundred[i]); err != nil {
			return x, err
		}
	}
	return x, nil
}

// buildRGB is CSS Color 4 §5.1: 0…255 or percentages, clamped.
func buildRGB(v []value) (Colour, error) {
	x, err := scaledAll(v, [3]float64{255, 255, 255})
	if err != nil {
		return Colour{}, err
	}
	for i := range x {
		x[i] = min(max(x[i]/255, 0), 1)
	}
	return fromEncoded(SRGB, x), nil
}

// hueAndShares reads a hue in degrees, 0…360, and two percentages as 0…1.
func hueAndShares(v []value) (hue, p, q float64, err error) {
	if hue, err = v[0].angle(); err != nil {
		return
	}
	if hue = math.Mod(hue, 360); hue < 0 {
		hue += 360
	}
	if p, err = v[1].scaled(100); err != nil {
		return
	}
	if q, err = v[2].scaled(100); err != nil {
		return
	}
	return hue, min(max(p/100, 0), 1), min(max(q/100, 0), 1), nil
}

// buildHSL is CSS Color 4 §7.
func buildHSL(v []value) (Colour, error) {
	hue, s, l, err := hueAndShares(v)
	if err != nil {
		return Colour{}, err
	}
	return fromEncoded(SRGB, hslToRGB(hue, s, l)), nil
}

// hslToRGB gives encoded sRGB: each channel is the lightness moved by a
// trapezium of the hue, whose height is the saturation times the room to the
// nearer of black and white (CSS Color 4 §7.1).
func hslToRGB(hue, s, l float64) (rgb [3]float64) {
	height := s * min(l, 1-l)
	for i, n := range [3]float64{0, 8, 4} {
		k := math.Mod(n+hue/30, 12)
		rgb[i] = math.FMA(-height, max(-1, min(k-3, 9-k, 1)), l)
	}
	return rgb
}

// buildHWB is CSS Color 4 §8.
func buildHWB(v []value) (Colour, error) {
	hue, w, b, err := hueAndShares(v)
	if err != nil {
		return Colour{}, err
	}
	if w+b >= 1 {
		grey := w / (w + b)
		return fromEncoded(SRGB, [3]float64{grey, grey, grey}), nil
	}
	rgb := hslToRGB(hue, 1, 0.5)
	for i := range rgb {
		rgb[i] = math.FMA(rgb[i], 1-w-b, w)
	}
	return fromEncoded(SRGB, rgb), nil
}

// rectangular builds lab() and oklab(): 100 % of lightness and of the two
// axes. Lightness is clamped, as CSS Color 4 §9.3 and §9.4 ask.
func rectangular(top, axis float64, make func(l, a, b float64) Colour) func([]value) (Colour, error) {
	return func(v []value) (Colour, error) {
		x, err := scaledAll(v, [3]float64{top, axis, axis})
		if err != nil {
			return Colour{}, err
		}
		return make(min(max(x[0], 0), top), x[1], x[2]), nil
	}
}

// cylindrical builds lch() and oklch(); negative chroma is 0.
func cylindrical(top, axis float64, make func(l, a, b float64) Colour) func([]value) (Colour, error) {
	return func(v []value) (Colour, error) {
		l, err := v[0].scaled(top)
		if err != nil {
			return Colour{}, err
		}
		chroma, err := v[1].scaled(axis)
		if err != nil {
			return Colour{}, err
		}
		hue, err := v[2].angle()
		if err != nil {
			return Colour{}, err
		}
		a, b := polar(max(chroma, 0), hue)
		return make(min(max(l, 0), top), a, b), nil
	}
}

// builderOf finds the reading of color(space …), CSS Color 4 §10. Values
// outside the gamut are kept: mapping waits until the print's space is known.
func builderOf(space string) (func([]value) (Colour, error), error) {
	var from func([3]float64) Colour
	switch space {
	case "srgb-linear":
		from = func(x [3]float64) Colour { return FromLinear(SRGB, x) }
	case "xyz", "xyz-d65":
		from = FromXYZ
	case "xyz-d50":
		from = func(x [3]float64) Colour { return FromXYZ(labD50().toD65.apply(x)) }
	default:
		s, err := ParseSpace(space)
		if err != nil {
			return nil, &fault{fmt.Sprintf("unknown colour space %q", space),
				"use one of srgb, srgb-linear, display-p3, a98-rgb, prophoto-rgb, xyz, xyz-d50, xyz-d65"}
		}
		from = func(x [3]float64) Colour { return fromEncoded(s, x) }
	}
	return func(v []value) (Colour, error) {
		x, err := scaledAll(v, [3]float64{1, 1, 1})
		if err != nil {
			return Colour{}, err
		}
		return from(x), nil
	}, nil
}
