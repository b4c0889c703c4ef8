package printfile

import (
	"encoding/binary"
	"math/bits"
)

// Filter types of the PNG specification, §9.2.
const (
	filterNone = iota
	filterSub
	filterUp
	filterAverage
	filterPaeth
	filterCount
)

// bpp is the distance from a byte to the same byte of the pixel to the left.
const bpp = 6

// The filters below write the filtered form of the row cur into dst; prev is
// the raw row above, zeros for the first. All have the same length, a multiple
// of bpp and at least bpp. Eight bytes are taken at a time where no byte
// depends on another's result, which is everywhere but in the Paeth predictor's
// choices.

// subFilter subtracts the pixel to the left.
func subFilter(dst, cur []byte) {
	copy(dst[:bpp], cur)
	i := bpp
	for ; i+8 <= len(cur); i += 8 {
		x, a := load(cur[i:]), load(cur[i-bpp:])
		store(dst[i:], subBytes(x, a))
	}
	for ; i < len(cur); i++ {
		dst[i] = cur[i] - cur[i-bpp]
	}
}

// upFilter subtracts the pixel above.
func upFilter(dst, cur, prev []byte) {
	i := 0
	for ; i+8 <= len(cur); i += 8 {
		store(dst[i:], subBytes(load(cur[i:]), load(prev[i:])))
	}
	for ; i < len(cur); i++ {
		dst[i] = cur[i] - prev[i]
	}
}

// averageFilter subtracts the mean of left and above, rounded down.
func averageFilter(dst, cur, prev []byte) {
	for i := range bpp {
		dst[i] = cur[i] - prev[i]/2
	}
	i := bpp
	for ; i+8 <= len(cur); i += 8 {
		x, a, b := load(cur[i:]), load(cur[i-bpp:]), load(prev[i:])
		store(dst[i:], subBytes(x, averageBytes(a, b)))
	}
	for ; i < len(cur); i++ {
		dst[i] = cur[i] - byte((int(cur[i-bpp])+int(prev[i]))/2)
	}
}

// paethFilter subtracts whichever of left, above and upper left is nearest to
// left + above - upper left.
func paethFilter(dst, cur, prev []byte) {
	for i := range bpp {
		dst[i] = cur[i] - prev[i]
	}
	left, upper := cur[:len(cur)-bpp], prev[:len(cur)-bpp]
	cur, prev, dst = cur[bpp:], prev[bpp:], dst[bpp:]
	for i, c := range upper {
		dst[i] = cur[i] - paeth(left[i], prev[i], c)
	}
}

// paeth is the predictor of §9.4: ties go to a (left), then b (above). Branches
// would be guessed wrong all the time, so it selects by masks.
func paeth(a, b, c byte) byte {
	pa, pb := int(b)-int(c), int(a)-int(c) // p-a and p-b, where p = a+b-c
	pc := distance(pa + pb)
	pa, pb = distance(pa), distance(pb)
	useB := negative(pb - pc - 1)
	nearest := pc + (pb-pc)&useB // of b and c
	useA := negative(pa - nearest - 1)
	best := int(c) ^ (int(c)^int(b))&useB
	return byte(best ^ (best^int(a))&useA)
}

// distance is |v|.
func distance(v int) int {
	sign := negative(v)
	return (v ^ sign) - sign
}

// negative is all ones if v < 0, otherwise 0.
func negative(v int) int { return v >> (bits.UintSize - 1) }

const highBits = 0x8080808080808080

// subBytes is x-y in each of eight bytes. With the high bit of every byte set
// in x and clear in y no byte borrows from the next; the high bits themselves
// are put right by exclusive or.
func subBytes(x, y uint64) uint64 {
	return ((x | highBits) - (y &^ highBits)) ^ ((x ^ ^y) & highBits)
}

// averageBytes is (x+y)/2 rounded down in each of eight bytes: the common bits
// and half of the differing ones.
func averageBytes(x, y uint64) uint64 {
	return (x & y) + ((x^y)&^0x0101010101010101)>>1
}

func load(b []byte) uint64     { return binary.LittleEndian.Uint64(b) }
func store(b []byte, v uint64) { binary.LittleEndian.PutUint64(b, v) }
