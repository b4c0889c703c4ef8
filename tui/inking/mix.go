package inking

import (
	"fmt"
	"math"

	"leadline/palette"
)

// mix is a colour as the sliders have it. It keeps the hue of a grey, which the
// colour itself cannot.
type mix struct {
	v  [3]float64 // L 0…1, C 0…maxChroma, h in degrees
	of palette.Colour
}

// maxChroma is the right end of the chroma slider; the most chromatic colour of
// the four spaces that a sheet can have in sRGB's range of hues is about 0.37.
const maxChroma = 0.4

// The sliders.
const (
	sliderL = iota
	sliderC
	sliderH
)

var sliders = [3]struct {
	name         string
	most         float64
	coarse, fine float64
	form         string
}{
	{"L", 1, 0.01, 0.002, "%.3f"},
	{"C", maxChroma, 0.005, 0.001, "%.3f"},
	{"h", 360, 3, 0.5, "%.1f"},
}

// mixOf is the sliders' state for a colour; was is kept where it stands for the
// same one.
func mixOf(c palette.Colour, was mix) mix {
	if was.of.Equal(c) {
		return was
	}
	l, chroma, h := c.OKLCH()
	if chroma == 0 {
		h = was.v[2]
	}
	return mix{[3]float64{l, chroma, h}, c}
}

// with is the mix with one slider at a value, which is held to the slider's ends
// (a hue goes round).
func (m mix) with(i int, v float64) mix {
	s := sliders[i]
	if i == sliderH {
		v = math.Mod(math.Mod(v, 360)+360, 360)
	}
	m.v[i] = min(max(math.Round(v/s.fine)*s.fine, 0), s.most)
	if i == sliderH && m.v[i] == 360 {
		m.v[i] = 0
	}
	m.of = written(m.v[0], m.v[1], m.v[2])
	return m
}

// at is the colour with one slider elsewhere.
func (m mix) at(i int, v float64) palette.Colour {
	m.v[i] = v
	return palette.FromOKLCH(m.v[0], m.v[1], m.v[2])
}

// mostLimit ends the search for a limit; no sheet's space goes as far with a
// colour that an eye can see.
const mostLimit = 0.5

// limit is how far the chroma goes in a space at the mix's lightness and hue
// before it leaves it for the first time.
func (m mix) limit(s palette.Space) float64 {
	low, high := 0.0, 0.0
	for high < mostLimit {
		high += 1.0 / 64
		if _, in := m.at(sliderC, high).In(s); !in {
			break
		}
		low = high
	}
	for range 20 {
		mid := (low + high) / 2
		if _, in := m.at(sliderC, mid).In(s); in {
			low = mid
		} else {
			high = mid
		}
	}
	return low
}

// written is the colour of OKLCH coordinates with as many decimals as a frame
// should have to hold.
func written(l, c, h float64) palette.Colour {
	return palette.MustColour(fmt.Sprintf("oklch(%s %s %s)", decimals(l, 4), decimals(c, 4), decimals(h, 2)))
}

// decimals is a number with at most n decimals.
func decimals(v float64, n int) string {
	p := math.Pow10(n)
	return fmt.Sprintf("%g", math.Round(v*p)/p)
}

// beyond is how far outside a space a colour lies: the ΔE00 between it and what
// is printed instead. It is 0 for a colour inside.
func beyond(c palette.Colour, s palette.Space) float64 {
	if _, in := c.In(s); in {
		return 0
	}
	return max(palette.DeltaE00(c, c.Map(s)), math.SmallestNonzeroFloat64)
}
