package palette

import "math"

// Gamut mapping by chroma reduction: lightness and hue in OKLab stay but for
// little, chroma shrinks until the space holds the colour. A colour the space
// holds already is not touched.
//
// Neighbouring colours must map to neighbouring colours, or a gradient shows a
// line. Two obvious ways fail. The bisection of CSS Color 4 §13.2 accepts a
// clipped colour once it is just not noticeably different. And the gamut as
// seen in OKLab has a dent, in sRGB beside blue: a ray of constant lightness
// and hue may leave it and enter it again, so that the crossing jumps from one
// hue to the next by more than a just noticeable difference.
//
// In linear light, though, a gamut is a cube, and convex: a ray from the grey
// of the same lightness leaves it once, at a place that depends continuously on
// the colour. That place has the wrong lightness and hue by a little, so its
// chroma alone is kept and the ray cast again, a fixed number of times. Each
// step is continuous, and so is the whole.

// gamutRounds is the number of casts before the last. More follow lightness
// and hue closer; fewer bend less where the gamut is dented.
const gamutRounds = 4

// blackest is a lightness whose light, its cube, is less than half a code in
// every space.
const blackest = 1e-4

// Map brings a colour into the gamut of a space. Lightness outside 0…1 gives
// black or white.
func (c Colour) Map(s Space) Colour {
	if _, in := c.In(s); in {
		return c
	}
	return FromLinear(s, c.mapped(s))
}

// mapped gives linear RGB within 0…1 for a colour outside the gamut.
func (c Colour) mapped(s Space) [3]float64 {
	l := c.lab[0]
	if l <= blackest {
		return [3]float64{}
	}
	if l >= 1 {
		return [3]float64{1, 1, 1}
	}
	m := s.matrices()
	grey := l * l * l
	full := length(c.lab[1], c.lab[2])
	for range gamutRounds {
		linear := c.Linear(s)
		lab := labOfLMS(m.toLMS.apply(cast(grey, linear, exit(grey, linear))))
		scale := math.Min(length(lab[1], lab[2]), full) / length(c.lab[1], c.lab[2])
		c.lab[1] *= scale
		c.lab[2] *= scale
	}
	linear := c.Linear(s)
	linear = cast(grey, linear, math.Min(1, exit(grey, linear)))
	for i, v := range linear { // the dust of rounding
		linear[i] = math.Max(0, math.Min(1, v))
	}
	return linear
}

// exit gives where the ray from a grey within 0…1 through a colour leaves the
// cube, the colour being at 1.
func exit(grey float64, linear [3]float64) float64 {
	k := math.Inf(1)
	for _, v := range linear {
		switch {
		case v > grey:
			k = math.Min(k, (1-grey)/(v-grey))
		case v < grey:
			k = math.Min(k, grey/(grey-v))
		}
	}
	return k
}

// cast gives the point k of the ray.
func cast(grey float64, linear [3]float64, k float64) [3]float64 {
	for i, v := range linear {
		linear[i] = math.FMA(k, v-grey, grey)
	}
	return linear
}
