package precision

import (
	"math"
)

// Guard is the number of bits that a reference orbit carries beyond the spacing
// of the pixels. From 48 on no pixel was seen to change; 16 move the picture by
// 3e-4 of a pixel.
const Guard = 64

// Depth returns log10(1/height), the number by which makers call the scale of a
// view, within 1 ulp or 2^-180, whichever is more. A height of zero gives +Inf, a
// negative one NaN.
func Depth(height Decimal) float64 {
	switch height.Sign() {
	case 0:
		return math.Inf(1)
	case -1:
		return math.NaN()
	}
	d, _ := BigLog10(height.Float(192), 192).Float64()
	return 0 - d // not -d, so that the height 1 has the depth +0
}

// BitsFor returns the precision, in bits after the binary point, for orbits of a
// picture whose pixels are that far apart: ceil(log2(1/pixel)) + Guard, and never
// less than Guard. A spacing that is not positive and finite panics.
func BitsFor(pixel Ext) uint {
	if pixel.Sign() <= 0 || !pixel.finite() {
		panic("precision: pixel spacing must be positive and finite")
	}
	// With pixel = M·2^E and 0.5 <= M < 1, log2(1/pixel) lies in (-E, 1-E].
	return uint(max(0, 1-pixel.E)) + Guard
}
