// Package ink turns fields into light: the smooth count drives a baked ramp,
// the distance draws the line along the set's edge, and what does not escape
// takes the inside colour. Everything comes out as linear light in the sheet's
// own colour space. It knows no lattice and no file.
package ink

import (
	"fmt"
	"math"

	"leadline/palette"
	"leadline/precision"
	"leadline/render/frame"
	"leadline/render/kernel"
)

// Light is linear R, G, B in the sheet's space, 0…1.
type Light [3]float64

// Shader maps fields to light. It is read-only and safe for any number of
// goroutines.
type Shader struct {
	ramp     [frame.RampSize + 1]Light // one more, so that interpolation needs no case
	inside   Light
	edge     Light
	half     float64 // half the edge line's width, pixels; negative: no line
	scale    Scale
	fitted   bool
	low      float64
	span     float64 // fitted: high - low; else the period
	offset   float64
	mirrored bool
}

// Scale bends the smooth count: s = μ, ln(1 + μ - base) or (μ - base)^exponent,
// with μ - base taken as 0 where it is negative and the scale is not linear.
type Scale struct {
	Kind     frame.Scale
	Exponent float64
	Base     float64
}

// Of returns the scaled count.
func (s Scale) Of(smooth float64) float64 {
	x := smooth - s.Base
	switch s.Kind {
	case frame.Linear:
		return x
	case frame.Log:
		return precision.Log(1 + math.Max(x, 0))
	}
	return precision.Pow(math.Max(x, 0), s.Exponent)
}

// Freeze returns the baked form of a frame's ink in the sheet's space, and how
// many ramp entries had to be brought into the space's gamut.
func Freeze(r *frame.Resolved) (*frame.Baked, int, error) {
	if err := r.Ramp.Validate(); err != nil {
		return nil, 0, fmt.Errorf("ink: %w", err)
	}
	b := &frame.Baked{Space: r.Space.String()}
	codes, outside := r.Ramp.Bake(r.Space, frame.RampSize)
	copy(b.Ramp[:], codes)
	b.Inside, _ = r.Inside.BakeOne(r.Space)
	if r.Edge.Width > 0 {
		e, _ := r.Edge.Colour.BakeOne(r.Space)
		b.Edge = &e
	}
	return b, outside, nil
}

// New makes the shader of a frozen ink: b its baked form, and Fitted set in d
// where the drive has no period.
func New(b *frame.Baked, d frame.ResolvedDrive, e frame.ResolvedEdge, space palette.Space) *Shader {
	s := &Shader{inside: light(space, b.Inside), half: -1, span: d.Period, offset: d.Offset,
		scale: Scale{Kind: d.Scale, Exponent: d.Exponent, Base: d.Base}}
	for i, c := range b.Ramp {
		s.ramp[i] = light(space, c)
	}
	s.ramp[frame.RampSize] = s.ramp[frame.RampSize-1]
	s.mirrored = b.Ramp[0] != b.Ramp[frame.RampSize-1]
	if d.Period == 0 {
		s.fitted, s.scale.Base = true, d.Fitted.Base
		s.low, s.span = d.Fitted.Low, d.Fitted.High-d.Fitted.Low
	}
	if e.Width > 0 && b.Edge != nil {
		s.edge, s.half = light(space, *b.Edge), float64(e.Width*0.5)
	}
	return s
}

func light(space palette.Space, code [3]uint16) Light {
	return Light{space.Decode(code[0]), space.Decode(code[1]), space.Decode(code[2])}
}

// Place returns where on the ramp, 0…1, a smooth count falls. A fitted ramp is
// held at its ends. One with a period goes round; where its ends differ it
// runs to and fro instead, so that no seam is printed.
func (s *Shader) Place(smooth float64) float64 {
	t := (s.scale.Of(smooth)-s.low)/s.span + s.offset
	switch {
	case !(t == t) || math.IsInf(t, 0):
		return 0
	case s.fitted:
		return math.Min(math.Max(t, 0), 1)
	case s.mirrored:
		t -= float64(2 * math.Floor(float64(t*0.5)))
		return math.Min(t, 2-t)
	}
	return t - math.Floor(t)
}

// Shade returns the light of a field. unit is the number of lattice pixels
// (the distance's unit) to one pixel of the picture at hand.
func (s *Shader) Shade(f kernel.Field, unit float64) Light {
	if f.State != kernel.Escaped {
		return s.inside
	}
	t := float64(s.Place(f.Smooth) * (frame.RampSize - 1))
	i := int(t)
	u := t - float64(i)
	a, b := &s.ramp[i], &s.ramp[i+1]
	c := Light{mix(a[0], b[0], u), mix(a[1], b[1], u), mix(a[2], b[2], u)}
	if s.half < 0 {
		return c
	}
	// The line is soft over one pixel, so that its own edge does not alias.
	cover := math.Min(math.Max((s.half-f.Distance)/unit+0.5, 0), 1)
	if cover > 0 {
		for j := range c {
			c[j] = mix(c[j], s.edge[j], cover)
		}
	}
	return c
}

// mix is a + u(b-a).
func mix(a, b, u float64) float64 { return math.FMA(u, b-a, a) }
