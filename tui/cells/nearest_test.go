package cells

import (
	"math"
	"testing"
)

// nearestBrute is the least distance in OKLab, by package palette, from c to the
// colours from..to-1.
func nearestBrute(labs [][3]float64, c [3]float64) float64 {
	least := math.Inf(1)
	for _, p := range labs {
		least = min(least, distance(p, c))
	}
	return least
}

func distance(p, q [3]float64) float64 {
	sum := 0.0
	for k := range p {
		sum += (p[k] - q[k]) * (p[k] - q[k])
	}
	return math.Sqrt(sum)
}

func TestNearestAgainstBruteForce(t *testing.T) {
	for _, set := range []struct {
		name     string
		boxes    *boxes
		from, to int
	}{{"256", nearest256(), 16, 256}, {"16", nearest16(), 0, 16}} {
		var labs [][3]float64
		for i := set.from; i < set.to; i++ {
			labs = append(labs, exactLab(indexed256[i]))
		}
		for i := set.from; i < set.to; i++ {
			if c := indexed256[i]; indexed256[set.boxes.at(c)] != c {
				t.Errorf("%s: colour %d, %v, is shown as %v", set.name, i, c, indexed256[set.boxes.at(c)])
			}
		}
		check := func(c RGB) {
			want := exactLab(c)
			got := distance(exactLab(indexed256[set.boxes.at(c)]), want)
			if least := nearestBrute(labs, want); got > least+1e-4 {
				t.Fatalf("%s: %v is shown at distance %.4f, the nearest is at %.4f", set.name, c, got, least)
			}
		}
		for i := 0; i < len(set.boxes.number); i += 7 {
			check(boxColour(i))
		}
		for i := range 256 {
			check(RGB{uint8(i), uint8(i), uint8(i)})
		}
	}
}

// TestIndexedColours: figures of xterm's 256colres.h and XTerm-col.ad.
func TestIndexedColours(t *testing.T) {
	for number, want := range map[int]RGB{
		1: {205, 0, 0}, 4: {0, 0, 238}, 7: {229, 229, 229}, 8: {127, 127, 127}, 12: {92, 92, 255}, 15: {255, 255, 255},
		16: {0, 0, 0}, 17: {0, 0, 95}, 21: {0, 0, 255}, 22: {0, 95, 0}, 52: {95, 0, 0}, 110: {135, 175, 215},
		196: {255, 0, 0}, 231: {255, 255, 255}, 232: {8, 8, 8}, 244: {128, 128, 128}, 255: {238, 238, 238},
	} {
		if indexed256[number] != want {
			t.Errorf("colour %d is %v, want %v", number, indexed256[number], want)
		}
	}
}

// TestThreshold: the first rows of Bayer's matrix of side 8 as printed in the
// literature (from memory).
func TestThreshold(t *testing.T) {
	want := [2][8]int{{0, 32, 8, 40, 2, 34, 10, 42}, {48, 16, 56, 24, 50, 18, 58, 26}}
	seen := map[int]bool{}
	for y := range 8 {
		for x := range 8 {
			seen[threshold(x, y)] = true
			if y < len(want) && threshold(x, y) != want[y][x] {
				t.Errorf("threshold(%d, %d) = %d, want %d", x, y, threshold(x, y), want[y][x])
			}
			if threshold(x+8, y+16) != threshold(x, y) {
				t.Errorf("the matrix does not repeat at (%d, %d)", x, y)
			}
		}
	}
	if len(seen) != 64 {
		t.Errorf("%d different thresholds, want 64", len(seen))
	}
}

// TestMixturesComeNearer: over all boxes, the mean light of a mixture is nearer to
// the colour than the nearest single colour is, at both depths.
func TestMixturesComeNearer(t *testing.T) {
	tab := tables()
	linear := func(c RGB) [3]float64 {
		return [3]float64{float64(tab.linear[c.R]), float64(tab.linear[c.G]), float64(tab.linear[c.B])}
	}
	for _, set := range []struct {
		depth  Depth
		mix    *mixtures
		single *boxes
	}{{C16, mixtures16(), nearest16()}, {C256, mixtures256(), nearest256()}} {
		var mixed, alone float64
		for i := range set.mix {
			c := linear(boxColour(i))
			var mean [3]float64
			for _, number := range set.mix[i] {
				for k, v := range linear(indexed256[number]) {
					mean[k] += v / 8
				}
			}
			mixed += distance(mean, c)
			alone += distance(linear(indexed256[set.single.number[i]]), c)
		}
		if mixed > 0.5*alone {
			t.Errorf("%s: mixtures are off by %.4f, single colours by %.4f", set.depth, mixed/(1<<15), alone/(1<<15))
		} else {
			t.Logf("%s: mixtures are off by %.4f, single colours by %.4f", set.depth, mixed/(1<<15), alone/(1<<15))
		}
	}
}
