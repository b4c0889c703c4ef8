package render

import (
	"math"
	"math/bits"

	"leadline/precision"
	"leadline/render/frame"
)

// sampler places a pixel's samples. Positions come from the (0,2)-sequence of
// Sobol' (1967), moved by a random digital shift keyed on the pixel's lattice
// coordinates alone (Kollig and Keller 2002), and are drawn from the filter's
// own shape, so that every sample weighs the same and a pixel needs no
// neighbour (filter importance sampling: Ernst, Stamminger and Greiner 2006).
type sampler struct {
	least, most int
	tolerance   float64
	gaussian    bool
}

// The Gaussian filter: standard deviation and radius in pixels.
const (
	sigma  = 0.5
	cutoff = 1.5
)

// gaussianMass is the share of the Gaussian inside the cutoff,
// 1 - exp(-cutoff²/2σ²).
var gaussianMass = 1 - precision.Exp(-(cutoff*cutoff)/(2*sigma*sigma))

func newSampler(r *frame.Resolved) sampler {
	return sampler{r.Least, r.Most, r.Tolerance, r.Filter == frame.Gaussian}
}

// key is a pixel's random number: a mix of its coordinates in which every bit
// of either reaches every bit of the result.
func key(x, y int) uint64 {
	k := mix64(uint64(uint32(int32(x))) | uint64(uint32(int32(y)))<<32)
	return mix64(k + 0x9e3779b97f4a7c15) // 2^64 over the golden ratio
}

// mix64 is an invertible mix of multiplications and shifts; the odd factors
// are the leading digits of sqrt(2) and sqrt(3).
func mix64(k uint64) uint64 {
	k = (k ^ k>>32) * 0xb504f333f9de6485
	k = (k ^ k>>29) * 0xddb3d742c265539d
	return k ^ k>>32
}

// at returns sample i of a pixel as an offset from the pixel's centre, in
// pixels.
func (s *sampler) at(key uint64, i int) (x, y float64) {
	u := unit(bits.Reverse32(uint32(i)) ^ uint32(key))
	v := unit(sobol2(uint32(i)) ^ uint32(key>>32))
	if !s.gaussian {
		return u - 0.5, v - 0.5
	}
	r := float64(sigma * math.Sqrt(float64(-2*precision.Log(1-float64(u*gaussianMass)))))
	sin, cos := precision.SinCos(float64(2 * math.Pi * v))
	return float64(r * cos), float64(r * sin)
}

// unit maps 32 bits to (0, 1), to the middle of their cell.
func unit(k uint32) float64 { return float64((float64(k) + 0.5) * 0x1p-32) }

// sobol2 is the second coordinate of the sequence: its direction numbers are
// v_1 = 1/2, v_(j+1) = v_j xor v_j/2 (primitive polynomial x + 1).
func sobol2(i uint32) uint32 {
	r := uint32(0)
	for v := uint32(1) << 31; i != 0; i, v = i>>1, v^v>>1 {
		if i&1 != 0 {
			r ^= v
		}
	}
	return r
}
