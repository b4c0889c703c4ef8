package palette

import (
	"math"
	"sync"
)

// Transfer is the table form of a space's transfer function at 16 bits. It is
// immutable and safe for concurrent use. Take one from Space.Transfer once and
// keep it in hot loops.
//
// Code c stands for the light of c/65535. Encode gives the code nearest in the
// encoded domain: the boundary between c and c+1 is the light of
// (c+½)/65535. Both sides come from tables, so no power is taken at run time
// and Encode(Decode(c)) = c for every code.
type Transfer struct {
	light [codes]float64     // light of each code
	bound [codes - 1]float64 // bound[c] divides code c from c+1
	guide []segment          // where to look, by the leading bits of the light
	first uint64             // leading bits of the smallest guided light
}

const (
	codes = 1 << 16
	white = codes - 1

	// The guide has 2^guideBits segments an octave. Within one the curve is
	// straight to a small part of a code, so the guess is at most one off.
	guideBits  = 7
	guideShift = 52 - guideBits
)

// segment is a stretch of the encoding curve taken as straight.
type segment struct{ start, code, slope float64 }

var transfers [curveCount]func() *Transfer

func init() {
	for c := range curveCount {
		transfers[c] = sync.OnceValue(func() *Transfer { return newTransfer(c) })
	}
}

// Transfer gives the tables of the space, built at first use (a few
// milliseconds) and shared.
func (s Space) Transfer() *Transfer { return transfers[s.definition().curve]() }

// Decode gives the light of a code: linear, 0…1.
func (s Space) Decode(code uint16) float64 { return s.Transfer().Decode(code) }

// Encode gives the nearest code of linear light. Light below 0 and NaN give 0,
// light above 1 gives 65535.
func (s Space) Encode(linear float64) uint16 { return s.Transfer().Encode(linear) }

// Decode gives the light of a code: linear, 0…1.
func (t *Transfer) Decode(code uint16) float64 { return t.light[code] }

// Encode gives the nearest code of linear light. Light below 0 and NaN give 0,
// light above 1 gives 65535.
func (t *Transfer) Encode(linear float64) uint16 {
	if !(linear >= t.bound[0]) {
		return 0
	}
	if linear >= t.bound[codes-2] {
		return white
	}
	g := &t.guide[math.Float64bits(linear)>>guideShift-t.first]
	// Rounded or fused, the guess is only where the search starts.
	c := int(math.FMA(linear-g.start, g.slope, g.code))
	for linear < t.bound[c-1] {
		c--
	}
	for linear >= t.bound[c] {
		c++
	}
	return uint16(c)
}

func newTransfer(c curve) *Transfer {
	t := new(Transfer)
	for i := range t.light {
		t.light[i] = c.decode(float64(i) / white)
	}
	for i := range t.bound {
		t.bound[i] = c.decode(float64(2*i+1) / (2 * white))
	}
	t.guideBy()
	return t
}

// guideBy draws the guide through the table of bounds.
func (t *Transfer) guideBy() {
	t.first = math.Float64bits(t.bound[0]) >> guideShift
	last := math.Float64bits(t.bound[codes-2]) >> guideShift
	t.guide = make([]segment, last-t.first+1)
	for i := range t.guide {
		from := math.Float64frombits((t.first + uint64(i)) << guideShift)
		to := math.Float64frombits((t.first + uint64(i) + 1) << guideShift)
		low, high := t.position(from), t.position(to)
		t.guide[i] = segment{start: from, code: max(low, 1), slope: (high - low) / (to - from)}
	}
}

// position is where light falls on the scale of codes, between whole numbers:
// bound[c] lies at c+1.
func (t *Transfer) position(light float64) float64 {
	low, high := 0, codes-2
	if light <= t.bound[low] {
		return 1
	}
	if light >= t.bound[high] {
		return float64(high)
	}
	for high-low > 1 {
		if mid := (low + high) / 2; light < t.bound[mid] {
			high = mid
		} else {
			low = mid
		}
	}
	part := (light - t.bound[low]) / (t.bound[high] - t.bound[low])
	return float64(low) + 1 + part
}
