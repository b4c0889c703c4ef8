package palette

import (
	"math"

	"leadline/precision"
)

// DeltaE76 is the CIE 1976 colour difference of two colours: the distance in
// CIE Lab under D50.
func DeltaE76(c, d Colour) float64 {
	l1, a1, b1 := c.Lab()
	l2, a2, b2 := d.Lab()
	l, a, b := l1-l2, a1-a2, b1-b2
	return math.Sqrt(math.FMA(l, l, math.FMA(a, a, float64(b*b))))
}

// DeltaEOK is the distance of two colours in OKLab; about 0.02 is just
// noticeable (CSS Color 4 §13.2).
func DeltaEOK(c, d Colour) float64 {
	l, a, b := c.lab[0]-d.lab[0], c.lab[1]-d.lab[1], c.lab[2]-d.lab[2]
	return math.Sqrt(math.FMA(l, l, math.FMA(a, a, float64(b*b))))
}

// DeltaE00 is the CIEDE2000 difference of two colours in CIE Lab under D50.
func DeltaE00(c, d Colour) float64 {
	l1, a1, b1 := c.Lab()
	l2, a2, b2 := d.Lab()
	return DeltaE00Lab([3]float64{l1, a1, b1}, [3]float64{l2, a2, b2})
}

// DeltaE00Lab is the CIEDE2000 difference of two L*a*b* triples, all weights
// 1, after the notes of Sharma, Wu and Dalal (Color Research & Application
// 30(1), 2005).
func DeltaE00Lab(p, q [3]float64) float64 {
	c1, h1, c2, h2 := adjustedPolar(p, q)
	dh, mean := hueStep(c1*c2 == 0, h1, h2)
	dL, dC := q[0]-p[0], c2-c1
	dH := 2 * math.Sqrt(c1*c2) * precision.Sin(float64(dh/2*degree))

	l50 := float64((p[0]+q[0])/2) - 50
	l50 = float64(l50 * l50)
	chroma := float64((c1 + c2) / 2)
	sL := 1 + float64(0.015*l50)/math.Sqrt(20+l50)
	sC := math.FMA(0.045, chroma, 1)
	sH := math.FMA(0.015*chroma, hueWeight(mean), 1)

	x, y, z := dL/sL, dC/sC, dH/sH
	sum := math.FMA(x, x, math.FMA(y, y, float64(z*z)))
	return math.Sqrt(max(0, math.FMA(rotation(chroma, mean)*y, z, sum)))
}

// adjustedPolar gives chroma and hue (degrees) after the stretch of a* that
// evens out greys.
func adjustedPolar(p, q [3]float64) (c1, h1, c2, h2 float64) {
	r1, _ := unpolar(p[1], p[2])
	r2, _ := unpolar(q[1], q[2])
	stretch := 1 + float64((1-math.Sqrt(chroma7((r1+r2)/2)))/2)
	c1, h1 = unpolar(stretch*p[1], p[2])
	c2, h2 = unpolar(stretch*q[1], q[2])
	return c1, h1, c2, h2
}

// chroma7 is c⁷/(c⁷+25⁷).
func chroma7(c float64) float64 {
	c6 := c * c * c * c * c * c
	return c6 * c / math.FMA(c6, c, 6103515625)
}

// hueStep gives the signed hue difference and the mean hue. Opposite hues
// belong to the first branch; the slack keeps the rounding of an arc tangent
// from deciding otherwise (pair 10 of the published test data).
func hueStep(grey bool, h1, h2 float64) (step, mean float64) {
	if grey {
		return 0, h1 + h2
	}
	step, mean = h2-h1, float64((h1+h2)/2)
	const opposite = 180 + 1e-9
	switch {
	case math.Abs(step) <= opposite:
		return step, mean
	case step > 0:
		step -= 360
	default:
		step += 360
	}
	if h1+h2 < 360 {
		return step, mean + 180
	}
	return step, mean - 180
}

// hueWeight is T of the definition, the mean hue in degrees.
func hueWeight(mean float64) float64 {
	t := math.FMA(-0.17, precision.Cos(float64((mean-30)*degree)), 1)
	t = math.FMA(0.24, precision.Cos(float64(2*mean*degree)), t)
	t = math.FMA(0.32, precision.Cos(float64(math.FMA(3, mean, 6)*degree)), t)
	return math.FMA(-0.20, precision.Cos(float64(math.FMA(4, mean, -63)*degree)), t)
}

// rotation is R_T of the definition, which turns the ellipses of blue.
func rotation(chroma, mean float64) float64 {
	u := (mean - 275) / 25
	theta := float64(30 * precision.Exp(float64(-u*u))) // doubled below, which compiles as a sum
	return -2 * math.Sqrt(chroma7(chroma)) * precision.Sin(float64(2*theta*degree))
}
