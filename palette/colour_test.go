package palette

import (
	"encoding/json"
	"math"
	"math/rand/v2"
	"testing"

	"github.com/lucasb-eyer/go-colorful"
)

// The four pairs of Ottosson, "A perceptual color space for image processing"
// (2020), three digits. They place the axes; finer checks follow.
func TestOKLabOfOttosson(t *testing.T) {
	for _, c := range []struct{ xyz, lab [3]float64 }{
		{[3]float64{0.950, 1.000, 1.089}, [3]float64{1.000, 0.000, 0.000}},
		{[3]float64{1, 0, 0}, [3]float64{0.450, 1.236, -0.019}},
		{[3]float64{0, 1, 0}, [3]float64{0.922, -0.671, 0.263}},
		{[3]float64{0, 0, 1}, [3]float64{0.153, -1.415, -0.449}},
	} {
		lab := FromXYZ(c.xyz).lab
		near(t, "OKLab", lab[:], c.lab[:], 0.0011)
	}
}

// Web Platform Tests, css/css-color: #008000 in OKLab and OKLCH.
func TestOKLabOfGreen(t *testing.T) {
	green := MustColour("#008000")
	near(t, "OKLab", green.lab[:], []float64{0.51975, -0.1403, 0.10768}, 0.000006)
	l, c, h := green.OKLCH()
	near(t, "OKLCH", []float64{l, c, h}, []float64{0.51975, 0.17686, 142.495}, 0.0006)
}

func TestGreyAxis(t *testing.T) {
	for _, s := range Spaces() {
		for i := range 1001 {
			v := float64(i) / 1000
			c := FromLinear(s, [3]float64{v, v, v})
			near(t, s.String(), c.lab[:], []float64{math.Cbrt(v), 0, 0}, 1e-12)
			_, a, b := c.Lab()
			near(t, "Lab", []float64{a, b}, []float64{0, 0}, 1e-10)
		}
	}
}

func TestOKLabRoundTrip(t *testing.T) {
	r := rand.New(rand.NewPCG(9, 10))
	for range 5000 {
		v := [3]float64{r.Float64()*1.5 - 0.25, r.Float64()*1.5 - 0.25, r.Float64()*1.5 - 0.25}
		for _, s := range Spaces() {
			linear := FromLinear(s, v).Linear(s)
			near(t, s.String(), linear[:], v[:], 1e-12)
		}
	}
}

func TestPolarRoundTrip(t *testing.T) {
	for h := 0.0; h < 360; h += 0.37 {
		l, c, hue := FromOKLCH(0.6, 0.1, h).OKLCH()
		near(t, "OKLCH", []float64{l, c, hue}, []float64{0.6, 0.1, h}, 1e-12)
	}
	if _, c, h := FromOKLCH(0.5, 3e-6, 200).OKLCH(); h != 0 || c == 0 {
		t.Errorf("a grey has hue %v", h)
	}
}

// The workings published with css-color-4 give Display P3 green as Lab
// 86.61 −106.56 102.87, from a white and matrices rounded earlier than here.
func TestLabOfDisplayP3Green(t *testing.T) {
	l, a, b := FromLinear(DisplayP3, [3]float64{0, 1, 0}).Lab()
	near(t, "Lab", []float64{l, a, b}, []float64{86.61, -106.56, 102.87}, 0.025)
}

// Web Platform Tests, css/css-color (lab-001, lch-001): #008000 is
// lab(46.2775% -47.5621 48.5837) and lch(46.2775% 67.9892 134.3912),
// worked out with the earlier D65 white of .95047 1 1.08883.
func TestLabOfGreen(t *testing.T) {
	l, a, b := MustColour("green").Lab()
	near(t, "Lab", []float64{l, a, b}, []float64{46.2775, -47.5621, 48.5837}, 0.012)
	l, c, h := MustColour("green").LCh()
	near(t, "LCh", []float64{l, c, h}, []float64{46.2775, 67.9892, 134.3912}, 0.012)
}

// The definition of L*a*b* against go-colorful, over the same XYZ and white;
// the adaptation has its own test.
func TestLabAgainstColorful(t *testing.T) {
	r := rand.New(rand.NewPCG(15, 16))
	for range 5000 {
		c := FromLinear(SRGB, [3]float64{r.Float64(), r.Float64(), r.Float64() * r.Float64() * 0.02})
		xyz := labD50().toD50.apply(c.XYZ())
		l1, a1, b1 := colorful.XyzToLabWhiteRef(xyz[0], xyz[1], xyz[2], labD50().white)
		l, a, b := c.Lab()
		near(t, "Lab", []float64{l, a, b}, []float64{100 * l1, 100 * a1, 100 * b1}, 1e-11)
	}
}

func TestLabRoundTrip(t *testing.T) {
	r := rand.New(rand.NewPCG(11, 12))
	for range 5000 {
		want := []float64{r.Float64() * 100, r.Float64()*200 - 100, r.Float64()*200 - 100}
		l, a, b := FromLab(want[0], want[1], want[2]).Lab()
		near(t, "Lab", []float64{l, a, b}, want, 1e-9)
	}
}

func TestColourText(t *testing.T) {
	type doc struct{ C Colour }
	for _, css := range []string{"#0B1d2a", "teal", "oklch(62%  0.12 210)", "color(display-p3 .1 .2 .3)"} {
		var d doc
		text, _ := json.Marshal(map[string]string{"C": css})
		if err := json.Unmarshal(text, &d); err != nil {
			t.Fatal(err)
		}
		if out, err := json.Marshal(d); err != nil || string(out) != string(text) {
			t.Errorf("%s is written back as %s, %v", text, out, err)
		}
	}
	r := rand.New(rand.NewPCG(13, 14))
	for range 1000 {
		c := FromOKLab(r.Float64(), r.Float64()-0.5, (r.Float64()-0.5)*1e-7)
		back, err := ParseColour(c.String())
		if err != nil || !back.Equal(c) {
			t.Errorf("%v reads back as %v, %v", c, back.lab, err)
		}
	}
	if s := (Colour{}).String(); s != "#000000" {
		t.Errorf("the zero colour is %q", s)
	}
}
