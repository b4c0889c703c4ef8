package palette

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"os/exec"
	"strings"
	"testing"

	"github.com/lucasb-eyer/go-colorful"
)

// encoded gives the encoded sRGB of a colour in percent.
func encoded(c Colour) []float64 {
	out := make([]float64, 3)
	for i, v := range c.Linear(SRGB) {
		out[i] = 100 * curveSRGB.encode(v)
	}
	return out
}

// Web Platform Tests, css/css-color: the tests that paint the colour "green",
// #008000, in every notation, and the value of oklch(0.8 0.15 160).
func TestColoursOfWPT(t *testing.T) {
	for _, css := range []string{
		"#008000", "#080", "green", "GREEN", " green ", "rgb(0, 128, 0)", "rgb(0 128 0)", "rgb(0% 50.2% 0%)",
		"RGB(0,128,0)", "rgb(none 128 0)", "rgb(-10 128 0)", "hsl(120 100% 25.1%)", "hsl(120, 100%, 25.1%)",
		"hsl(120deg 100 25.1)", "hsl(-240 100% 25.1%)", "hsl(0.33333333333turn 100% 25.1%)", "hsl(133.333333grad 100% 25.1%)",
		"hsl(2.0943951rad 100% 25.1%)", "hwb(120 0% 49.8%)", "hwb(120 none 49.8)",
		"lab(46.2775% -47.5621 48.5837)", "lab(46.2775 -38.04968% 38.86696%)", "lch(46.2775% 67.9892 134.3912)",
		"oklab(51.975% -0.1403 0.10768)", "oklab(0.51975 -35.075% 26.92%)", "oklch(51.975% 0.17686 142.495)",
		"color(srgb 0 0.50196 0)", "color(srgb 0% 50.196% 0%)", "color(srgb-linear 0 0.21586 0)",
		"color(display-p3 0.21604 0.49418 0.13151)", "color(a98-rgb 0.281363 0.498012 0.116746)",
		"color(prophoto-rgb 0.230479 0.395789 0.129968)",
		"color(xyz 0.07719 0.15438 0.02573)", "color(xyz-d65 0.07719 0.15438 0.02573)", "color(xyz-d50 0.08312 0.15475 0.02096)",
	} {
		c, err := ParseColour(css)
		if err != nil {
			t.Errorf("%s: %v", css, err)
			continue
		}
		if css == "#080" {
			near(t, css, encoded(c), []float64{0, 800.0 / 15, 0}, 1e-10)
			continue
		}
		near(t, css, encoded(c), []float64{0, 12800.0 / 255, 0}, 0.25)
	}
	near(t, "oklch(0.8 0.15 160)", encoded(MustColour("oklch(0.8 0.15 160)")), []float64{32.022, 85.805, 61.147}, 0.0006)
}

// CSS Color 4: what is not a colour (§4, §5), and what is one but has no place
// in a print.
func TestColoursRefused(t *testing.T) {
	for _, css := range []string{
		"", " ", "#", "#12", "#1234", "#12345", "#1234567", "#12345678", "#ggg", "#+12", "#-1-2-3", "# 123",
		"transparent", "currentcolor", "canvastext", "reddish", "rgb", "rgb()", "rgb(1 2)", "rgb(1 2 3 4)",
		"rgb(1 2 3 / 1)", "rgb(1, 2, 3, 1)", "rgb(1, 2 3)", "rgb(1,2,)", "rgb(,1,2,3)", "rgb(1%, 2, 3)", "rgb(1, 2%, 3%)",
		"rgb(none, 1, 2)", "rgb(1 2 3", "rgb 1 2 3", "rgb (1 2 3)", "rgb(1 2 3))", "rgb(1. 2 3)", "rgb(. 2 3)", "rgb(1e 2 3)",
		"rgb(0x10 2 3)", "rgb(inf 2 3)", "rgb(nan 2 3)", "rgb(1deg 2 3)", "rgb(1e9 2 3)", "rgb(1px 2 3)",
		"hsl(120, 50, 50)", "hsl(50% 50% 50%)", "hwb(120, 0%, 0%)", "lab(50, 0, 0)", "lch(50% 20 30%)", "oklch(0.5 0.1 20 / 50%)",
		"color(0 0 0)", "color(cmyk 0 0 0)", "color(srgb, 0, 0, 0)", "color(srgb 0 0)", "calc(1)", "rgb(calc(1) 2 3)",
	} {
		c, err := ParseColour(css)
		var bad *ColourError
		if !errors.As(err, &bad) {
			t.Errorf("%q is read as %v (%v)", css, c.lab, err)
			continue
		}
		if bad.Text != css || bad.Problem == "" || bad.Hint() == "" {
			t.Errorf("%q: error tells %+v", css, bad)
		}
	}
}

func TestColourHints(t *testing.T) {
	for css, want := range map[string]string{
		"stelblue": "steelblue", "#0b1d2aff": "opaque", "rgb(1 2 3 / 0.5)": "opaque", "lab(1, 2, 3)": "spaces", "color(p3 0 0 0)": "display-p3",
	} {
		_, err := ParseColour(css)
		var bad *ColourError
		if !errors.As(err, &bad) || !strings.Contains(bad.Hint(), want) {
			t.Errorf("%q: %v; the hint lacks %q", css, err, want)
		}
	}
}

// 8-bit colours must come out as exactly the codes they went in as.
func TestHexIsExact(t *testing.T) {
	for v := 0; v < 1<<24; v += 4099 {
		r, g, b := uint16(v>>16), uint16(v>>8&255), uint16(v&255)
		code, in := MustColour(fmt.Sprintf("#%06x", v)).BakeOne(SRGB)
		if want := [3]uint16{257 * r, 257 * g, 257 * b}; code != want || !in {
			t.Fatalf("#%06x bakes to %v, want %v", v, code, want)
		}
	}
}

// hsl() against go-colorful, another implementation of the same definition.
func TestHSLAgainstColorful(t *testing.T) {
	r := rand.New(rand.NewPCG(17, 18))
	for range 5000 {
		h, s, l := r.Float64()*360, r.Float64(), r.Float64()
		want := colorful.Hsl(h, s, l)
		got := hslToRGB(h, s, l)
		near(t, "hsl", got[:], []float64{want.R, want.G, want.B}, 1e-14)
	}
}

// The keywords against ImageMagick's table of SVG colours, which are those of
// CSS but for rebeccapurple, whose value is from CSS Color 4.
func TestKeywordsAgainstImageMagick(t *testing.T) {
	if len(namedColours) != 148 {
		t.Errorf("%d keywords, CSS Color 4 has 148", len(namedColours))
	}
	if namedColours["rebeccapurple"] != 0x663399 {
		t.Error("rebeccapurple is not #663399")
	}
	path, err := exec.LookPath("convert")
	if err != nil {
		t.Skip("convert not found: apt-get install imagemagick")
	}
	list, err := exec.Command(path, "-list", "color").Output()
	if err != nil {
		t.Fatal(err)
	}
	seen := 0
	known := map[string]map[uint32]bool{}
	for lines := bufio.NewScanner(bytes.NewReader(list)); lines.Scan(); {
		var name string
		var r, g, b uint32
		if n, _ := fmt.Sscanf(lines.Text(), "%s srgb(%d,%d,%d)", &name, &r, &g, &b); n == 4 && strings.Contains(lines.Text(), "SVG") {
			name = strings.ToLower(name)
			if known[name] == nil {
				known[name] = map[uint32]bool{}
			}
			known[name][r<<16|g<<8|b] = true
		}
	}
	for _, name := range keywords() {
		if name == "gray" || name == "grey" || known[name] == nil {
			continue // ImageMagick gives grey 126 of 255; #808080 is checked below
		}
		seen++
		if !known[name][namedColours[name]] {
			t.Errorf("%s is %06x, ImageMagick has %v", name, namedColours[name], known[name])
		}
	}
	if seen < 140 {
		t.Errorf("only %d keywords compared", seen)
	}
	if namedColours["gray"] != 0x808080 || namedColours["grey"] != 0x808080 {
		t.Error("gray is not #808080 (CSS Color 4 §6.1)")
	}
}

func TestNearestKeyword(t *testing.T) {
	for css, want := range map[string]string{"#4682b5": "steelblue", "#010101": "black", "oklch(1 0 0)": "white"} {
		if name, d := NearestKeyword(MustColour(css)); name != want || d > 1 {
			t.Errorf("%s is called %s (%v)", css, name, d)
		}
	}
}

// Whatever is accepted has finite coordinates, bakes in every space, and is
// written back as the same bytes.
func FuzzParseColour(f *testing.F) {
	for _, s := range []string{"#fff", "#0b1d2a", "teal", "rgb(1, 2%, 3)", "hsl(1e3turn 20% 30)", "oklch(none 4e5 -1e6rad)",
		"color(xyz 1e6 -1e6 1e6)", "color(prophoto-rgb 1 0 0)", "lab(100 1e6 -1e6)", "hwb(0 100% 100%)", "rgb(1 2 3 / 4)"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, css string) {
		c, err := ParseColour(css)
		if err != nil {
			if _, hinted := err.(interface{ Hint() string }); !hinted {
				t.Fatalf("%q: error without a hint: %v", css, err)
			}
			return
		}
		for _, v := range c.lab {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				t.Fatalf("%q gives %v", css, c.lab)
			}
		}
		for _, s := range Spaces() {
			c.BakeOne(s)
			linear, in := c.Map(s).In(s)
			if !in {
				t.Fatalf("%q is mapped to %v in %v", css, linear, s)
			}
		}
		if back, err := ParseColour(c.String()); err != nil || !back.Equal(c) || c.String() != css {
			t.Fatalf("%q is written back as %q (%v)", css, c, err)
		}
	})
}
