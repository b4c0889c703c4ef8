package orbit

import (
	"math"

	"leadline/precision"
)

// From is the same orbit seen from another view: the offset is taken anew, with
// bits fractional bits, everything else is shared.
func (r *Reference) From(centre [2]precision.Decimal, bits uint) *Reference {
	q := *r
	c := precision.NewFixed(centre[0], centre[1], bits)
	q.Offset = c.Sub(c, precision.NewFixed(r.Re, r.Im, bits)).Ext()
	return &q
}

// Lasts reports whether pixels can be followed for limit iterations: every
// segment closes, escapes, or is as long as that. A pixel at the end of an
// orbit that has escaped differs from it by as much as its own value is, so
// nothing is lost when it goes on from there by that value. At the end of one
// that was only cut off its difference may be far below the last bit of its
// value, and all pixels would go on as one.
func (r *Reference) Lasts(limit int, bailout float64) bool {
	for _, s := range r.Segments {
		z := r.Points[s.End]
		if s.Wrap < 0 && s.End-s.Start < limit && !(math.FMA(z.Re, z.Re, float64(z.Im*z.Im)) > float64(bailout*bailout)) {
			return false
		}
	}
	return true
}
