package cells

import (
	"math"
	"math/rand/v2"
	"testing"

	"leadline/palette"
)

// exactLab is OKLab by package palette, in float64.
func exactLab(c RGB) [3]float64 {
	wide := func(v uint8) uint16 { return uint16(v) * 257 }
	l, a, b := palette.FromCodes(palette.SRGB, [3]uint16{wide(c.R), wide(c.G), wide(c.B)}).OKLab()
	return [3]float64{l, a, b}
}

func randomRGB(rng *rand.Rand) RGB {
	v := rng.Uint32()
	return RGB{uint8(v), uint8(v >> 8), uint8(v >> 16)}
}

// TestLabAgainstPalette: the tables agree with palette's arithmetic to 1e-4, a
// two-hundredth of what is just noticeable (0.02, CSS Color 4). The matrices differ
// in their sixth digit: palette has those of CSS.
func TestLabAgainstPalette(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	tab := tables()
	for i := range 20000 {
		c := randomRGB(rng)
		if i < 256 {
			c = RGB{uint8(i), uint8(i), uint8(i)}
		}
		got, want := tab.lab(c), exactLab(c)
		for k, v := range [3]float32{got.l, got.a, got.b} {
			if math.Abs(float64(v)-want[k]) > 1e-4 {
				t.Fatalf("%v: %v, palette has %v", c, got, want)
			}
		}
	}
}

// TestLabAndBack: every colour of a set of one sample comes back as itself.
func TestLabAndBack(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	tab := tables()
	step := 5
	for r := 0; r < 256; r += step {
		for g := 0; g < 256; g += step {
			for b := 0; b < 256; b += step {
				c := RGB{uint8(r), uint8(g), uint8(b)}
				if got := tab.rgb(tab.lab(c)); got != c {
					t.Fatalf("%v comes back as %v", c, got)
				}
			}
		}
	}
	for range 100000 {
		c := randomRGB(rng)
		if got := tab.rgb(tab.lab(c)); got != c {
			t.Fatalf("%v comes back as %v", c, got)
		}
	}
}

func TestCubeRoot(t *testing.T) {
	tab := tables()
	for x := math.Ldexp(1, -16); x < 2; x *= 1.0001 {
		want := math.Cbrt(float64(float32(x)))
		if got := float64(tab.cbrt(float32(x))); math.Abs(got/want-1) > 7.2e-6 {
			t.Fatalf("cbrt(%g) = %g, want %g", x, got, want)
		}
	}
}

// TestContrast: figures of WCAG 2.2 itself (21:1, 1:1) and of its understanding
// document (#767676 on white is the lightest grey that passes 4.5).
func TestContrast(t *testing.T) {
	white := RGB{255, 255, 255}
	for _, c := range []struct {
		a, b RGB
		want float64
	}{
		{RGB{}, white, 21},
		{white, white, 1},
		{RGB{0x76, 0x76, 0x76}, white, 4.54},
		{RGB{0x77, 0x77, 0x77}, white, 4.48},
	} {
		if got := Contrast(c.a, c.b); math.Abs(got-c.want) > 0.005 {
			t.Errorf("contrast of %v and %v is %.3f, want %.2f", c.a, c.b, got, c.want)
		}
	}
}
