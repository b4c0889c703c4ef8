package cells

import (
	"math"
	"sync"

	"leadline/palette"
)

// lab is a colour in OKLab.
type lab struct{ l, a, b float32 }

func (p lab) plus(q lab) lab          { return lab{p.l + q.l, p.a + q.a, p.b + q.b} }
func (p lab) minus(q lab) lab         { return lab{p.l - q.l, p.a - q.a, p.b - q.b} }
func (p lab) times(k float32) lab     { return lab{p.l * k, p.a * k, p.b * k} }
func (p lab) squared() float32        { return p.l*p.l + p.a*p.a + p.b*p.b }
func (p lab) distance(q lab) float32  { return p.minus(q).squared() }
func (p lab) lightness() (code uint8) { return uint8(min(max(p.l, 0), 1)*255 + 0.5) }

// The cube root is a table over the bits of a float32: rootSteps intervals an
// octave, straight in between, which is off by at most (2/9)/(8·rootSteps²) =
// 7e-6 of the value. It covers 2^-16 to 2: the least cone response of a colour
// other than black is 0.0514 · 0.000303 = 1.56e-5, just above 2^-16.
const (
	rootBits  = 6
	rootSteps = 1 << rootBits
	rootShift = 23 - rootBits
	rootFirst = (127 - 16) << rootBits // index of 2^-16
	rootCount = 17 * rootSteps
	codeSteps = 1 << 14 // steps of linear light in the table of sRGB codes
)

// labTables make the way to OKLab and back cheap.
type labTables struct {
	linear [256]float32         // sRGB code to linear light
	code   [codeSteps + 1]uint8 // linear light to the nearest sRGB code
	root   [rootCount]struct{ at, step float32 }
}

var tables = sync.OnceValue(func() *labTables {
	t := new(labTables)
	for i := range t.linear {
		t.linear[i] = float32(palette.SRGB.Decode(uint16(i) * 257))
	}
	for i := range t.code {
		t.code[i] = uint8((uint32(palette.SRGB.Encode(float64(i)/codeSteps)) + 128) / 257)
	}
	place := func(i int) float64 { return math.Float64frombits(uint64(i+rootFirst+896<<rootBits) << (52 - rootBits)) }
	for i := range t.root {
		from, to := math.Cbrt(place(i)), math.Cbrt(place(i+1))
		t.root[i].at, t.root[i].step = float32(from), float32((to-from)/(1<<rootShift))
	}
	return t
})

// cbrt is the cube root of x, from 2^-16 up to 2.
func (t *labTables) cbrt(x float32) float32 {
	bits := math.Float32bits(x)
	r := &t.root[bits>>rootShift-rootFirst]
	return r.at + float32(bits&(1<<rootShift-1))*r.step
}

// lab takes a colour to OKLab, with the matrices of Ottosson, "A perceptual color
// space for image processing", 2020 (as revised 2021-01-25).
func (t *labTables) lab(c RGB) lab {
	if c == (RGB{}) {
		return lab{}
	}
	r, g, b := t.linear[c.R], t.linear[c.G], t.linear[c.B]
	l := t.cbrt(0.4122214708*r + 0.5363325363*g + 0.0514459929*b)
	m := t.cbrt(0.2119034982*r + 0.6806995451*g + 0.1073969566*b)
	s := t.cbrt(0.0883024619*r + 0.2817188376*g + 0.6299787005*b)
	return lab{
		0.2104542553*l + 0.7936177850*m - 0.0040720468*s,
		1.9779984951*l - 2.4285922050*m + 0.4505937099*s,
		0.0259040371*l + 0.7827717662*m - 0.8086757660*s,
	}
}

// rgb takes OKLab to the nearest colour, each channel clamped.
func (t *labTables) rgb(p lab) RGB {
	l := p.l + 0.3963377774*p.a + 0.2158037573*p.b
	m := p.l - 0.1055613458*p.a - 0.0638541728*p.b
	s := p.l - 0.0894841775*p.a - 1.2914855480*p.b
	l, m, s = l*l*l, m*m*m, s*s*s
	return RGB{
		t.encode(4.0767416621*l - 3.3077115913*m + 0.2309699292*s),
		t.encode(-1.2684380046*l + 2.6097574011*m - 0.3413193965*s),
		t.encode(-0.0041960863*l - 0.7034186147*m + 1.7076147010*s),
	}
}

func (t *labTables) encode(linear float32) uint8 {
	return t.code[int(min(max(linear, 0), 1)*codeSteps+0.5)]
}
