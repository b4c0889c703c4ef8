package palette

import (
	"fmt"
	"math"
)

// MaxStops is the largest number of stops a ramp may have.
const MaxStops = 256

// Stop is a colour at a place of a ramp, 0…1.
type Stop struct {
	At     float64 `json:"at"`
	Colour Colour  `json:"colour"`
}

// Ramp is a run of colours over 0…1. Between stops it is interpolated in
// OKLab: straight, or by monotone cubics when Smooth is set. The zero value is
// not valid; DefaultRamp gives one that is.
type Ramp struct {
	Stops  []Stop `json:"stops"`
	Smooth bool   `json:"smooth"`
}

// RampError reports what is wrong with a ramp.
type RampError struct {
	Stop    int // index of the stop at fault, from 0; -1 if it is the whole ramp
	Problem string
	cure    string
}

func (e *RampError) Error() string {
	if e.Stop < 0 {
		return "ramp: " + e.Problem
	}
	return fmt.Sprintf("ramp: stop %d: %s", e.Stop+1, e.Problem)
}

// Hint says how a ramp is made valid.
func (e *RampError) Hint() string { return e.cure }

// Validate checks that a ramp has 2…MaxStops stops, the first at 0, the last
// at 1, each further on than the one before. The error is a *RampError.
func (r Ramp) Validate() error {
	if n := len(r.Stops); n < 2 || n > MaxStops {
		return &RampError{-1, fmt.Sprintf("%d stops", n),
			fmt.Sprintf("give 2 to %d stops; for one flat colour, give it twice, at 0 and at 1", MaxStops)}
	}
	before := -1.0
	for i, s := range r.Stops {
		if !(s.At >= 0 && s.At <= 1) {
			return &RampError{i, fmt.Sprintf("at %v", s.At), "places run from 0 to 1"}
		}
		if s.At <= before {
			return &RampError{i, fmt.Sprintf("at %v, not beyond the stop before it (%v)", s.At, before),
				"order the stops by place, no two at the same one; for a hard edge, put two very close"}
		}
		before = s.At
	}
	if first := r.Stops[0].At; first != 0 {
		return &RampError{0, fmt.Sprintf("at %v, the first must be at 0", first), "repeat its colour at 0"}
	}
	if before != 1 {
		return &RampError{len(r.Stops) - 1, fmt.Sprintf("at %v, the last must be at 1", before), "repeat its colour at 1"}
	}
	return nil
}

// Cyclic tells whether the ramp ends in the colour it begins with, so that it
// can be repeated without a seam. A smooth cyclic ramp also keeps its slope
// across the seam.
func (r Ramp) Cyclic() bool {
	n := len(r.Stops)
	return n > 0 && r.Stops[0].Colour.Equal(r.Stops[n-1].Colour)
}

// At gives the colour at t, which is clamped to 0…1 (NaN counts as 0). It
// panics on a ramp that Validate refuses. For many values use Curve.
func (r Ramp) At(t float64) Colour { return r.Curve().At(t) }

// Curve prepares the interpolation. It panics on a ramp that Validate refuses.
func (r Ramp) Curve() *Curve {
	if err := r.Validate(); err != nil {
		panic(err)
	}
	n := len(r.Stops)
	c := &Curve{x: make([]float64, n)}
	for i, s := range r.Stops {
		c.x[i] = s.At
	}
	for k := range c.y {
		c.y[k] = make([]float64, n)
		for i, s := range r.Stops {
			c.y[k][i] = s.Colour.lab[k]
		}
		if r.Smooth {
			c.slope[k] = monotoneSlopes(c.x, c.y[k], r.Cyclic())
		}
	}
	return c
}

// Curve is a ramp made ready for many look-ups; immutable.
type Curve struct {
	x     []float64
	y     [3][]float64 // OKLab
	slope [3][]float64 // nil for a straight ramp
}

// At gives the colour at t, clamped to 0…1 (NaN counts as 0).
func (c *Curve) At(t float64) Colour {
	if !(t > 0) {
		t = 0
	}
	t = math.Min(t, 1)
	i := interval(c.x, t)
	var lab [3]float64
	for k := range lab {
		if c.slope[k] == nil {
			lab[k] = straight(c.x, c.y[k], i, t)
		} else {
			lab[k] = hermite(c.x, c.y[k], c.slope[k], i, t)
		}
	}
	return Colour{lab: lab}
}
