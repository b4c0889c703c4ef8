package cells

import "sync"

// The 256 colours by number, after xterm's 256colres.h: 16 to 231 a cube whose
// levels are 0, 95, 135, 175, 215 and 255, 232 to 255 greys from 8 in steps of
// 10. The first 16 are xterm's defaults (XTerm-col.ad); other terminals and their
// users set them otherwise, which is why they stand for nothing at 256 colours.
var indexed256 = func() (c [256]RGB) {
	copy(c[:], []RGB{
		{0, 0, 0}, {205, 0, 0}, {0, 205, 0}, {205, 205, 0},
		{0, 0, 238}, {205, 0, 205}, {0, 205, 205}, {229, 229, 229},
		{127, 127, 127}, {255, 0, 0}, {0, 255, 0}, {255, 255, 0},
		{92, 92, 255}, {255, 0, 255}, {0, 255, 255}, {255, 255, 255},
	})
	level := [6]uint8{0, 95, 135, 175, 215, 255}
	for i := range 216 {
		c[16+i] = RGB{level[i/36], level[i/6%6], level[i%6]}
	}
	for i := range 24 {
		grey := uint8(8 + 10*i)
		c[232+i] = RGB{grey, grey, grey}
	}
	return c
}()

// boxes divides RGB into 32×32×32 boxes and has a colour number for each. Greys,
// where a step shows most, have a number for each of the 256.
type boxes struct {
	number [1 << 15]uint8
	grey   [256]uint8
}

func (b *boxes) at(c RGB) uint8 {
	if c.R == c.G && c.G == c.B {
		return b.grey[c.R]
	}
	return b.number[box(c)]
}

func box(c RGB) int { return int(c.R>>3)<<10 | int(c.G>>3)<<5 | int(c.B>>3) }

// boxColour is the colour a box is judged by, near its middle.
func boxColour(i int) RGB {
	spread := func(v int) uint8 { return uint8(v<<3 | v>>2) }
	return RGB{spread(i >> 10), spread(i >> 5 & 31), spread(i & 31)}
}

var (
	nearest256 = sync.OnceValue(func() *boxes { return newBoxes(16, 256) })
	nearest16  = sync.OnceValue(func() *boxes { return newBoxes(0, 16) })
)

// newBoxes finds for each box and grey the nearest in OKLab of the colours
// from..to-1, the lower number where two are equally near. The colours of the set
// themselves come out as they are.
func newBoxes(from, to int) *boxes {
	t, b := tables(), new(boxes)
	var p [256]lab
	for i := from; i < to; i++ {
		p[i] = t.lab(indexed256[i])
	}
	for i := range b.number {
		b.number[i] = nearestOf(p[:to], from, t.lab(boxColour(i)))
	}
	for i := range b.grey {
		v := uint8(i)
		b.grey[i] = nearestOf(p[:to], from, t.lab(RGB{v, v, v}))
	}
	return b
}

func nearestOf(p []lab, from int, c lab) uint8 {
	best, least := from, float32(100)
	for i := from; i < len(p); i++ {
		if d := p[i].distance(c); d < least {
			best, least = i, d
		}
	}
	return uint8(best)
}
