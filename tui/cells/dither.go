package cells

import (
	"math/bits"
	"slices"
	"sync"
)

// threshold is the ordered dither matrix of Bayer (1973) of side 8, 0…63: the bits
// of x^y and y interleaved, lowest first on top.
func threshold(x, y int) int {
	spread := func(v int) int { return int(bits.Reverse8(uint8(v&7)) >> 5) }
	a, b := spread(x^y), spread(y)
	return (a&4)<<3 | (b&4)<<2 | (a&2)<<2 | (b&2)<<1 | (a&1)<<1 | b&1
}

// mixtures have, for each box of RGB, eight colours of the terminal whose mean in
// linear light is near that of the box, darkest first; the threshold of a place says
// which of them is shown there. Each colour is chosen to make up for the error of
// those before (pattern dithering, after Knoll). With so few colours, none of them
// dark and deep, the nearest alone would leave most of a picture grey.
type mixtures [1 << 15][8]uint8

var (
	mixtures256 = sync.OnceValue(func() *mixtures { return newMixtures(nearest256()) })
	mixtures16  = sync.OnceValue(func() *mixtures { return newMixtures(nearest16()) })
)

// strength is the part of an error that is made up for: the whole of it would set
// vivid dots into every soft colour.
const strength = 0.5

// mixtureOf gives the mixtures of C16 or C256.
func mixtureOf(d Depth) *mixtures {
	if d == C16 {
		return mixtures16()
	}
	return mixtures256()
}

// at is the colour shown for c at a place.
func (m *mixtures) at(c RGB, x, y int) RGB {
	return indexed256[m[box(c)][threshold(x, y)>>3]]
}

func newMixtures(nearest *boxes) *mixtures {
	m, t := new(mixtures), tables()
	for i := range m {
		m[i] = t.mixture(boxColour(i), nearest)
	}
	return m
}

func (t *labTables) mixture(c RGB, nearest *boxes) (mix [8]uint8) {
	want := [3]float32{t.linear[c.R], t.linear[c.G], t.linear[c.B]}
	seek := want
	for i := range mix {
		mix[i] = nearest.at(RGB{t.encode(seek[0]), t.encode(seek[1]), t.encode(seek[2])})
		got := indexed256[mix[i]]
		for k, v := range [3]uint8{got.R, got.G, got.B} {
			seek[k] += (want[k] - t.linear[v]) * strength
		}
	}
	slices.SortFunc(mix[:], func(a, b uint8) int {
		if la, lb := t.lab(indexed256[a]).l, t.lab(indexed256[b]).l; la != lb {
			if la < lb {
				return -1
			}
			return 1
		}
		return int(a) - int(b)
	})
	return mix
}
