package palette

import (
	"math"
	"math/rand/v2"
	"sort"
	"testing"
)

// IEC 61966-2-1 §5.2, the two branches: 0.04045 is the last of the straight
// part (the standard rounds the seam, so that only decode is exact there). The
// other constants are the formulas worked out with 40 digits.
func TestCurveValues(t *testing.T) {
	for _, c := range []struct {
		curve          curve
		encoded, light float64
	}{
		{curveSRGB, 0.04, 0.04 / 12.92},
		{curveSRGB, 0.5, 0.21404114048223244}, // ((0.5+0.055)/1.055)^2.4
		{curveA98, 0.5, 0.21775552814439455},  // 2^(-563/256)
		{curveROMM, 0.5, 0.2871745887492587},  // 2^-1.8
		{curveROMM, 1.0 / 64, 1.0 / 1024},     // E'/16 below 16·Et (ISO 22028-2)
		{curveSRGB, 1, 1}, {curveA98, 1, 1}, {curveROMM, 1, 1},
		{curveSRGB, 0, 0}, {curveA98, 0, 0}, {curveROMM, 0, 0},
	} {
		if got := c.curve.decode(c.encoded); math.Abs(got-c.light) > 2e-16 {
			t.Errorf("curve %d: decode(%v) = %.17g, want %.17g", c.curve, c.encoded, got, c.light)
		}
		if got := c.curve.encode(c.light); math.Abs(got-c.encoded) > 1e-15 {
			t.Errorf("curve %d: encode(%v) = %.17g, want %.17g", c.curve, c.light, got, c.encoded)
		}
		if got := c.curve.decode(-c.encoded); got != -c.curve.decode(c.encoded) {
			t.Errorf("curve %d is not odd at %v", c.curve, c.encoded)
		}
	}
}

func TestEveryCodeSurvives(t *testing.T) {
	for _, s := range Spaces() {
		last := -1.0
		for c := range codes {
			v := s.Decode(uint16(c))
			if v <= last {
				t.Fatalf("%v: code %d is not lighter than the one before", s, c)
			}
			last = v
			if got := s.Encode(v); int(got) != c {
				t.Fatalf("%v: code %d comes back as %d", s, c, got)
			}
		}
		if s.Decode(0) != 0 || s.Decode(white) != 1 {
			t.Errorf("%v: ends are %v, %v", s, s.Decode(0), s.Decode(white))
		}
	}
}

// Beside the fast search stands the plain one over the same bounds, and at
// each bound the code must change there and nowhere else.
func TestEncodeAgainstPlainSearch(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	for _, s := range Spaces() {
		table := s.Transfer()
		check := func(v float64) {
			want := sort.Search(len(table.bound), func(i int) bool { return v < table.bound[i] })
			if got := table.Encode(v); int(got) != want {
				t.Fatalf("%v: encode(%v) = %d, want %d", s, v, got, want)
			}
		}
		for range 100_000 {
			check(r.Float64())
			check(math.Exp(-30 * r.Float64()))
		}
		for _, b := range table.bound {
			check(math.Nextafter(b, 0))
			check(b)
			check(math.Nextafter(b, 1))
		}
	}
}

// Rounding is that of the encoding formula itself, away from the bounds.
func TestEncodeRoundsInEncodedDomain(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	for _, s := range Spaces() {
		for range 50_000 {
			v := r.Float64() * r.Float64()
			x := s.definition().curve.encode(v) * white
			if math.Abs(x-math.Floor(x)-0.5) < 1e-3 { // also spans the seam of sRGB's two branches
				continue
			}
			if got := s.Encode(v); float64(got) != math.Round(x) {
				t.Fatalf("%v: encode(%v) = %d, the formula gives %v", s, v, got, x)
			}
		}
	}
}

func TestEncodeIsMonotone(t *testing.T) {
	for _, s := range Spaces() {
		last := uint16(0)
		for i := range 400_000 {
			c := s.Encode(float64(i) / 400_000 * float64(i) / 400_000)
			if c < last {
				t.Fatalf("%v falls from %d to %d", s, last, c)
			}
			last = c
		}
	}
}

func TestEncodeBeyondTheEnds(t *testing.T) {
	for _, s := range Spaces() {
		for v, want := range map[float64]uint16{
			-1: 0, math.Inf(-1): 0, 0: 0, math.Copysign(0, -1): 0, 5e-324: 0,
			1: white, 1 + 1e-15: white, 2: white, math.Inf(1): white, math.MaxFloat64: white,
		} {
			if got := s.Encode(v); got != want {
				t.Errorf("%v: encode(%v) = %d, want %d", s, v, got, want)
			}
		}
		if got := s.Encode(math.NaN()); got != 0 {
			t.Errorf("%v: encode(NaN) = %d", s, got)
		}
	}
}

func TestEncodeDoesNotAllocate(t *testing.T) {
	table := SRGB.Transfer()
	sum := 0
	if n := testing.AllocsPerRun(100, func() { sum += int(table.Encode(0.3)) + int(SRGB.Encode(0.1)) }); n != 0 {
		t.Errorf("%v allocations", n)
	}
	if sum == 0 {
		t.Error("nothing was encoded")
	}
}

func BenchmarkEncode(b *testing.B) {
	r := rand.New(rand.NewPCG(7, 8))
	var light [4096]float64
	for i := range light {
		light[i] = r.Float64()
	}
	for _, s := range []Space{SRGB, A98, ProPhoto} {
		table := s.Transfer()
		b.Run(s.String(), func(b *testing.B) {
			sum := 0
			for i := 0; b.Loop(); i++ {
				sum += int(table.Encode(light[i%len(light)]))
			}
			if sum == 0 {
				b.Fatal("nothing was encoded")
			}
		})
	}
}

func BenchmarkNewTransfer(b *testing.B) {
	for b.Loop() {
		newTransfer(curveSRGB)
	}
}
