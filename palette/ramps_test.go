package palette

import (
	"image"
	"image/color"
	"image/png"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode/utf8"
)

func TestHouseRamps(t *testing.T) {
	if n := len(Ramps()); n < 12 {
		t.Errorf("%d ramps, a dozen are promised", n)
	}
	seen := map[string]bool{}
	for _, n := range Ramps() {
		if n.Name == "" || seen[n.Name] {
			t.Errorf("name %q is missing or used twice", n.Name)
		}
		if w := utf8.RuneCountInString(n.Note); w == 0 || w > 120 || strings.ContainsAny(n.Note, "\n") {
			t.Errorf("%s: the note %q is not one line", n.Name, n.Note)
		}
		seen[n.Name] = true
		if err := n.Ramp.Validate(); err != nil {
			t.Errorf("%s: %v", n.Name, err)
		}
		if _, out := n.Ramp.Bake(SRGB, 4096); out != 0 {
			t.Errorf("%s leaves sRGB in %d of 4096 places", n.Name, out)
		}
		if r, ok := RampByName(n.Name); !ok || len(r.Stops) != len(n.Ramp.Stops) {
			t.Errorf("%s is not found by its name", n.Name)
		}
		for i, s := range n.Ramp.Stops {
			if c, err := ParseColour(s.Colour.String()); err != nil || !c.Equal(s.Colour) {
				t.Errorf("%s, stop %d: %s does not read back: %v", n.Name, i+1, s.Colour, err)
			}
		}
	}
	if _, ok := RampByName("no such ramp"); ok {
		t.Error("a ramp that is not there is found")
	}
	Ramps()[0].Ramp.Stops[0].Colour = MustColour("red")
	if DefaultRamp().Stops[0].Colour.Equal(MustColour("red")) {
		t.Error("a caller can change the house ramps")
	}
}

// The two kinds keep their word: round ramps close, rising ones only rise.
func TestRampsRoundAndRising(t *testing.T) {
	for _, n := range roundRamps() {
		if !n.Ramp.Cyclic() {
			t.Errorf("%s does not close", n.Name)
		}
	}
	for _, n := range risingRamps() {
		last := -1.0
		for _, c := range baked(n.Ramp) {
			l, _, _ := c.Lab()
			if l <= last {
				t.Errorf("%s: L* falls from %.2f to %.2f", n.Name, last, l)
			}
			last = l
		}
	}
}

// baked is a ramp at the places of a frame's baked entries.
func baked(r Ramp) []Colour {
	curve, out := r.Curve(), make([]Colour, 1024)
	for i := range out {
		out[i] = curve.At(float64(i) / 1023)
	}
	return out
}

// Neighbouring entries differ by less than half of what a trained eye tells
// apart side by side (ΔE00 of 1: common practice, no source). DefaultRamp came
// before this rule and keeps its colours, which frames without a ramp are
// printed in: one step in its darkest twentieth is 0.66. Tone runs over half
// the scale at least, so that a picture is there in grey; the default's runs
// over nearly all of it.
func TestHouseRampsInPrint(t *testing.T) {
	for i, n := range Ramps() {
		most, least := 0.5, 50.0
		if i == 0 {
			most, least = 0.67, 86.0
		}
		low, high := math.Inf(1), math.Inf(-1)
		all := baked(n.Ramp)
		for k, c := range all {
			l, _, _ := c.Lab()
			low, high = min(low, l), max(high, l)
			if d := DeltaE00(c, all[max(k-1, 0)]); d > most {
				t.Errorf("%s: a step of ΔE00 %.2f at entry %d", n.Name, d, k)
			}
		}
		if high-low < least {
			t.Errorf("%s: L* runs from %.1f to %.1f", n.Name, low, high)
		}
	}
	if l, _, _ := DefaultInside().Lab(); l > 5 || l <= 0 {
		t.Errorf("the inside is L* %.1f", l)
	}
}

// No two ramps are one in other words: entry by entry they differ by ΔE00 10
// on average, either way round.
func TestHouseRampsDiffer(t *testing.T) {
	all := Ramps()
	colours := make([][]Colour, len(all))
	for i, n := range all {
		colours[i] = baked(n.Ramp)
	}
	for i := range all {
		for j := range i {
			var same, turned float64
			for k := 0; k < 1024; k += 8 {
				same += DeltaE00(colours[i][k], colours[j][k]) / 128
				turned += DeltaE00(colours[i][k], colours[j][1023-k]) / 128
			}
			if d := min(same, turned); d < 10 {
				t.Errorf("%s and %s differ by ΔE00 %.1f", all[i].Name, all[j].Name, d)
			}
		}
	}
}

// TestContactSheet draws all ramps as bands, each above its lightness in grey,
// into the PNG that LEADLINE_CONTACT names, for looking at. The greys are as
// light as the colours to within what 8 bits hold.
func TestContactSheet(t *testing.T) {
	path := os.Getenv("LEADLINE_CONTACT")
	if path == "" {
		path = filepath.Join(t.TempDir(), "sheet.png")
	}
	const colours, greys, gap = 56, 16, 8
	all := Ramps()
	img := image.NewNRGBA(image.Rect(0, 0, 1024, len(all)*(colours+greys+gap)))
	for i, n := range all {
		for x, c := range baked(n.Ramp) {
			l, _, _ := c.OKLab()
			if g, _, _ := quantised(FromOKLab(l, 0, 0)).OKLab(); math.Abs(g-l) > 0.006 {
				t.Errorf("%s at %d: the grey is %v light, not %v", n.Name, x, g, l)
			}
			for y := range colours + greys {
				r, g, b := c.bytes()
				if y >= colours {
					r, g, b = FromOKLab(l, 0, 0).bytes()
				}
				img.SetNRGBA(x, i*(colours+greys+gap)+y, color.NRGBA{r, g, b, 255})
			}
		}
	}
	f, err := os.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if err := png.Encode(f, img); err != nil {
		t.Fatal(err)
	}
}
