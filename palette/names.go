package palette

import "slices"

// NamedRamp is a ramp of the house.
type NamedRamp struct {
	Name string // unique, for people and for configuration
	Note string // one line: what it is good for
	Ramp Ramp
}

// RampByName finds a ramp of the house.
func RampByName(name string) (Ramp, bool) {
	for _, r := range Ramps() {
		if r.Name == name {
			return r.Ramp, true
		}
	}
	return Ramp{}, false
}

// DefaultRamp is the ramp of a frame that names none: the first of Ramps.
// The stops are the caller's own.
func DefaultRamp() Ramp {
	r := house()[0].Ramp
	r.Stops = slices.Clone(r.Stops)
	return r
}

// DefaultInside is the colour of points that do not escape, for a frame that
// names none: a shade below the darkest of DefaultRamp, so that the two meet
// without a step and ink still lies on the paper.
func DefaultInside() Colour { return MustColour("#070d10") }
