package cells

import (
	"math"
	"math/rand/v2"
)

// scene is a made-up picture with what is hard to draw in cells: a smooth wash,
// rings that grow finer towards the right, hairlines at every angle, a flat area
// and a speckled one. It is drawn in the unit square, the same for all meshes.
func scene(m Mesh, cols, rows int) Picture {
	p := NewPicture(cols, rows, m)
	rng := rand.New(rand.NewPCG(1, 2))
	aspect := float64(cols) / float64(2*rows)
	for y := range p.H {
		for x := range p.W {
			u, v := (float64(x)+0.5)/float64(p.W)*aspect, (float64(y)+0.5)/float64(p.H)
			p.Pix[y*p.W+x] = shade(u, v, aspect, rng)
		}
	}
	return p
}

func shade(u, v, aspect float64, rng *rand.Rand) RGB {
	t := u / aspect
	if math.Hypot(u-0.35, v-0.6) < 0.18 {
		return RGB{6, 10, 18}
	}
	if angle := math.Atan2(v-0.6, u-0.35) * 9 / math.Pi; math.Abs(angle-math.Round(angle)) < 0.06 {
		return RGB{250, 240, 214}
	}
	if t > 0.86 && v > 0.7 {
		g := uint8(rng.IntN(256))
		return RGB{g, g, g}
	}
	d := math.Hypot(u-aspect, v-0.1)
	ring := 0.5 + 0.5*math.Sin(90*d*d)
	wash := func(lo, hi float64) uint8 { return uint8(math.Round(lo + (hi-lo)*(0.7*t+0.3*ring))) }
	return RGB{wash(12, 236), wash(34, 200-90*v), wash(58, 150)}
}
