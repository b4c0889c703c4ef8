package palette

import (
	"math"
	"testing"
)

func TestScreenColours(t *testing.T) {
	for css, want := range map[string]string{
		"#0b1d2a": "#0b1d2a", "white": "#ffffff", "rgb(12.4 12.6 0)": "#0c0d00",
		"color(display-p3 1 1 1)": "#ffffff", "oklch(-1 0 0)": "#000000",
	} {
		if got := MustColour(css).Hex(); got != want {
			t.Errorf("%s shows as %s, want %s", css, got, want)
		}
	}
	c := MustColour("color(display-p3 0 1 0)").Screen()
	if !c.IsValid() || c.G < 0.9 || c.R > 0.5 {
		t.Errorf("Display P3 green shows as %v", c)
	}
}

// Values of the HSLuv reference snapshot, revision 4 (hsluv.org), among them
// hues where go-colorful's own reading gives 0.
func TestHSLuvSnapshot(t *testing.T) {
	for css, want := range map[string][3]float64{
		"#11ee00": {127.478988192005161, 1, 0.825213119008325577},
		"#11eedd": {180.081412911690762, 0.991570549081779546, 0.852434517572140749},
		"#00aa00": {127.71501294924046, 1, 0.605587499434736287},
		"#11ccff": {226.666757851513921, 0.999999999999169162, 0.763887144168947714},
		"#11dd88": {143.083472555296623, 0.98842607114853692, 0.782321436880382919},
	} {
		h, s, l := MustColour(css).HSLuv()
		near(t, css, []float64{h / 360, s, l}, []float64{want[0] / 360, want[1], want[2]}, 1e-4)
		if got := FromHSLuv(want[0], want[1], want[2]).String(); got != css {
			t.Errorf("%s comes back as %s", css, got)
		}
	}
	for hue := 0.0; hue < 360; hue += 7.5 {
		h, _, _ := FromHSLuv(hue, 0.9, 0.6).HSLuv()
		if d := math.Abs(math.Remainder(h-hue, 360)); d > 1.2 { // 24 bits of colour
			t.Errorf("hue %v reads as %v", hue, h)
		}
	}
	if h, s, _ := MustColour("#777777").HSLuv(); h != 0 || s > 1e-6 {
		t.Errorf("a grey has hue %v, saturation %v", h, s)
	}
}
