package inking

import (
	"fmt"
	"math"
	"slices"

	"leadline/palette"
)

// What can be done to a ramp. Each gives a ramp of its own and leaves the one
// at hand as it is.

// nearest is how close two stops come when one is pushed against the other.
const nearest = 0.001

// rounded is a place with no more decimals than are of use.
func rounded(at float64) float64 { return math.Round(at*1e6) / 1e6 }

// split adds a stop half-way between stop i and the next (the last: the one
// before), in the colour that is there. It gives the new stop's number.
func split(r palette.Ramp, i int) (palette.Ramp, int, error) {
	i = min(i, len(r.Stops)-2)
	a, b := r.Stops[i].At, r.Stops[i+1].At
	at := rounded(a + (b-a)/2)
	switch {
	case len(r.Stops) >= palette.MaxStops:
		return r, i, &refusal{fmt.Sprintf("the ramp has %d stops", palette.MaxStops), "that is as many as a ramp takes; remove one first"}
	case at <= a || at >= b:
		return r, i, &refusal{"there is no room between the two stops", "move them apart first"}
	}
	c := written(r.At(at).OKLCH())
	r.Stops = slices.Insert(slices.Clone(r.Stops), i+1, palette.Stop{At: at, Colour: c})
	return r, i + 1, nil
}

// without takes stop i out; next to an end, the neighbour becomes the end.
func without(r palette.Ramp, i int) (palette.Ramp, error) {
	n := len(r.Stops)
	if n <= 2 {
		return r, &refusal{"a ramp has at least two stops", "recolour one of the two instead"}
	}
	r.Stops = slices.Delete(slices.Clone(r.Stops), i, i+1)
	r.Stops[0].At, r.Stops[n-2].At = 0, 1
	return r, nil
}

// moved puts stop i at a place, no nearer than nearest to its neighbours.
func moved(r palette.Ramp, i int, at float64) (palette.Ramp, error) {
	if i == 0 || i == len(r.Stops)-1 {
		return r, &refusal{"the first and the last stop keep the ends", "move one between them, or add one: a"}
	}
	low, high := r.Stops[i-1].At, r.Stops[i+1].At
	gap := min(nearest, (high-low)/4)
	r.Stops = slices.Clone(r.Stops)
	r.Stops[i].At = rounded(min(max(at, low+gap), high-gap))
	return r, nil
}

// recoloured gives stop i a colour. With tied ends, the ends go together.
func recoloured(r palette.Ramp, i int, c palette.Colour, tied bool) palette.Ramp {
	last := len(r.Stops) - 1
	r.Stops = slices.Clone(r.Stops)
	r.Stops[i].Colour = c
	if tied && (i == 0 || i == last) {
		r.Stops[0].Colour, r.Stops[last].Colour = c, c
	}
	return r
}

// reversed is the ramp run the other way.
func reversed(r palette.Ramp) palette.Ramp {
	r.Stops = slices.Clone(r.Stops)
	slices.Reverse(r.Stops)
	for i := range r.Stops {
		r.Stops[i].At = rounded(1 - r.Stops[i].At)
	}
	return r
}

// sameRamp tells whether two ramps give the same colours.
func sameRamp(a, b palette.Ramp) bool {
	return a.Smooth == b.Smooth && slices.EqualFunc(a.Stops, b.Stops, func(s, t palette.Stop) bool {
		return s.At == t.At && s.Colour.Equal(t.Colour)
	})
}

// refusal says why something is not done, and what would be.
type refusal struct{ problem, cure string }

func (e *refusal) Error() string { return e.problem }

// Hint says what can be done instead.
func (e *refusal) Hint() string { return e.cure }
