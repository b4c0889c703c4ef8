package palette

import (
	"math"
	"testing"
)

func TestHouseRamps(t *testing.T) {
	seen := map[string]bool{}
	for _, n := range Ramps() {
		if n.Name == "" || n.Note == "" || seen[n.Name] {
			t.Errorf("name %q or note is missing or used twice", n.Name)
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
	}
	if _, ok := RampByName("no such ramp"); ok {
		t.Error("a ramp that is not there is found")
	}
	Ramps()[0].Ramp.Stops[0].Colour = MustColour("red")
	if DefaultRamp().Stops[0].Colour.Equal(MustColour("red")) {
		t.Error("a caller can change the house ramps")
	}
}

// Full range of tone, and no step that would show: 8-bit displays step by about
// 0.4 L*, so neighbours among 1024 entries stay within two of those (common
// practice, no source).
func TestHouseRampsInPrint(t *testing.T) {
	for _, n := range Ramps() {
		low, high := math.Inf(1), math.Inf(-1)
		last := n.Ramp.At(0)
		for i := range 1024 {
			c := n.Ramp.At(float64(i) / 1023)
			l, _, _ := c.Lab()
			low, high = min(low, l), max(high, l)
			if d := DeltaE00(c, last); d > 0.8 {
				t.Errorf("%s: a step of ΔE00 %.2f at entry %d", n.Name, d, i)
			}
			last = c
		}
		if low > 6 || high < 92 {
			t.Errorf("%s: L* runs from %.1f to %.1f", n.Name, low, high)
		}
	}
	if l, _, _ := DefaultInside().Lab(); l > 5 || l <= 0 {
		t.Errorf("the inside is L* %.1f", l)
	}
}
