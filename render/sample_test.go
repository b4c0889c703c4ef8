package render

import (
	"math"
	"math/bits"
	"testing"
)

// TestSamplesAreANet checks the defining property of a (0,2)-sequence in base 2
// (Niederreiter 1987), which a digital shift keeps: of the first 2^m points,
// each elementary interval of area 2^-m holds exactly one.
func TestSamplesAreANet(t *testing.T) {
	s := sampler{}
	for _, k := range []uint64{0, key(3, -4), key(-2000000, 17)} {
		for m := 1; m <= 8; m++ {
			for a := 0; a <= m; a++ {
				cols, rows := 1<<a, 1<<(m-a)
				hit := make([]int, 1<<m)
				for i := range hit {
					x, y := s.at(k, i)
					hit[int((x+0.5)*float64(cols))+cols*int((y+0.5)*float64(rows))]++
				}
				for cell, n := range hit {
					if n != 1 {
						t.Fatalf("key %x, %d points, %dx%d cells: cell %d holds %d", k, 1<<m, cols, rows, cell, n)
					}
				}
			}
		}
	}
}

// TestGaussianMoments compares radius and spread of the Gaussian filter's
// samples with the truncated distribution's own moments: with R = cutoff and
// q = exp(-R²/2σ²), E[r²] = 2σ² (1 - q(1 + R²/2σ²)) / (1 - q).
func TestGaussianMoments(t *testing.T) {
	s := sampler{gaussian: true}
	a := cutoff * cutoff / (2 * sigma * sigma)
	q := math.Exp(-a)
	want := 2 * sigma * sigma * (1 - q*(1+a)) / (1 - q)
	var sum, sx, sy float64
	n := 0
	for p := range 200 {
		k := key(p, 7*p)
		for i := range 64 {
			x, y := s.at(k, i)
			r2 := x*x + y*y
			if r2 > cutoff*cutoff*(1+1e-12) {
				t.Fatalf("sample %v, %v lies beyond the cutoff", x, y)
			}
			sum, sx, sy, n = sum+r2, sx+x, sy+y, n+1
		}
	}
	if got := sum / float64(n); math.Abs(got-want) > 0.005*want {
		t.Errorf("mean square radius %v, want %v", got, want)
	}
	if m := math.Hypot(sx, sy) / float64(n); m > 0.005 {
		t.Errorf("mean lies %v px off the centre", m)
	}
}

// TestKeysAvalanche: one bit of a coordinate changes about half of a key's
// bits, so neighbours share no pattern (the strict avalanche criterion of
// Webster and Tavares 1985, to 3 standard deviations over the mean of 64 bits).
func TestKeysAvalanche(t *testing.T) {
	const trials = 4000
	for bit := range 20 {
		sumX, sumY := 0, 0
		for i := range trials {
			x, y := i*7-9000, i*13-20000
			sumX += bits.OnesCount64(key(x, y) ^ key(x^1<<bit, y))
			sumY += bits.OnesCount64(key(x, y) ^ key(x, y^1<<bit))
		}
		for _, s := range []int{sumX, sumY} {
			if mean := float64(s) / trials; math.Abs(mean-32) > 3*4/math.Sqrt(trials)*2 {
				t.Errorf("bit %d of a coordinate changes %.2f bits of 64 on average", bit, mean)
			}
		}
	}
}

// TestKeysDiffer: no two pixels of a large patch share a key.
func TestKeysDiffer(t *testing.T) {
	seen := make(map[uint64]bool)
	for y := -50; y < 250; y++ {
		for x := -50; x < 250; x++ {
			k := key(x, y)
			if seen[k] {
				t.Fatalf("key of %d,%d stands twice", x, y)
			}
			seen[k] = true
		}
	}
}
