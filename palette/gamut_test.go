package palette

import (
	"math"
	"math/rand/v2"
	"testing"
)

func TestMapKeepsWhatFits(t *testing.T) {
	r := rand.New(rand.NewPCG(21, 22))
	for range 5000 {
		v := [3]float64{r.Float64(), r.Float64(), r.Float64()}
		for _, s := range Spaces() {
			c := FromLinear(s, v)
			if !c.Map(s).Equal(c) {
				t.Fatalf("%v: %v is moved", s, v)
			}
		}
	}
}

// walk goes along the ray of constant lightness and hue and gives the chroma
// at which it first leaves the gamut, short by less than step.
func walk(c Colour, s Space, step float64) float64 {
	l, chroma, _ := c.OKLCH()
	for at := step; ; at += step {
		if _, in := FromOKLab(l, c.lab[1]*at/chroma, c.lab[2]*at/chroma).In(s); !in {
			return at - step
		}
	}
}

// What does not fit keeps lightness and hue and comes close to the chroma
// that a plain walk finds. 0.01 in OKLab is half a just noticeable difference.
// ProPhoto is left out: hardly a real colour lies outside it.
func TestMapReducesChroma(t *testing.T) {
	r := rand.New(rand.NewPCG(23, 24))
	mapped := 0
	for range 1500 {
		c := FromOKLCH(0.1+0.88*r.Float64(), 0.37*r.Float64(), 360*r.Float64())
		for _, s := range []Space{SRGB, DisplayP3, A98} {
			if _, in := c.In(s); in {
				continue
			}
			mapped++
			m := c.Map(s)
			l, chroma, hue := c.OKLCH()
			l2, chroma2, hue2 := m.OKLCH()
			if math.Abs(l2-l) > 0.0005 {
				t.Errorf("%v: %v gets lightness %v", s, c, l2)
			}
			if d := 2 * chroma2 * math.Abs(math.Sin((hue2-hue)/2*degree)); d > 0.01 {
				t.Errorf("%v: %v moves by %v in hue", s, c, d)
			}
			if want := walk(c, s, 0.001); chroma2 > chroma || chroma2 < want-0.015 {
				t.Errorf("%v: %v gets chroma %v, the walk %v", s, c, chroma2, want)
			}
		}
	}
	if mapped < 1000 {
		t.Errorf("only %d colours were mapped", mapped)
	}
}

// Anything at all is brought inside.
func TestMapEndsInside(t *testing.T) {
	r := rand.New(rand.NewPCG(25, 26))
	for range 20_000 {
		size := math.Exp(20*r.Float64() - 10)
		c := FromOKLab(r.Float64()*1.2-0.1, size*r.NormFloat64(), size*r.NormFloat64())
		if r.IntN(4) == 0 {
			c.lab[0] = math.Exp(-40 * r.Float64())
		}
		for _, s := range Spaces() {
			if v, in := c.Map(s).In(s); !in {
				t.Fatalf("%v: %v is mapped to %v", s, c, v)
			}
		}
	}
}

func TestMapOfExtremes(t *testing.T) {
	for _, c := range []struct {
		from Colour
		want [3]uint16
	}{
		{FromOKLCH(1.2, 0.1, 40), [3]uint16{white, white, white}},
		{FromOKLCH(1, 0.3, 200), [3]uint16{white, white, white}},
		{FromOKLCH(0, 0.3, 200), [3]uint16{}},
		{FromOKLCH(-0.5, 0.1, 10), [3]uint16{}},
	} {
		for _, s := range Spaces() {
			if code, in := c.from.BakeOne(s); code != c.want || in {
				t.Errorf("%v in %v: %v, %v", c.from, s, code, in)
			}
		}
	}
}

// A gradient that runs out of the gamut and back must not show a line: no step
// between neighbours is more than a few times that of the gradient itself,
// however fine the gradient. The hues pass that of sRGB's blue, 264°, where
// the gamut is dented.
func TestMapIsContinuous(t *testing.T) {
	const n = 6000
	for _, s := range Spaces() {
		out := 0
		for hue := 0.0; hue < 360; hue += 10 {
			var last, before Colour
			for i := range n + 1 {
				x := float64(i) / n
				c := FromOKLCH(0.15+0.8*x, 0.36*math.Sin(math.Pi*x), hue+40*x)
				if _, in := c.In(s); !in {
					out++
				}
				m := c.Map(s)
				if d := DeltaEOK(m, last); i > 0 && d > 4*DeltaEOK(c, before) {
					t.Fatalf("%v, hue %v: a step of %v at %v", s, hue, d, x)
				}
				last, before = m, c
			}
		}
		if out == 0 {
			t.Errorf("nothing leaves %v: the test shows nothing", s)
		}
	}
}
