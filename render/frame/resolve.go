package frame

import (
	"leadline/palette"
	"leadline/precision"
	"leadline/render/sheet"
)

// Resolved is a frame with every default in its place: what the renderer
// works from.
type Resolved struct {
	Title, Maker, Rights string

	Kind      Kind
	Power     int
	Parameter Point // of a Julia set, else the origin

	Centre Point
	Height precision.Decimal
	Turn   Turn

	Limit   int
	Bailout float64

	Least, Most int // samples a pixel
	Tolerance   float64
	Filter      Filter

	Ramp   palette.Ramp
	Drive  ResolvedDrive
	Inside palette.Colour
	Edge   ResolvedEdge
	Baked  *Baked // nil until the frame is frozen

	Sheet sheet.Geometry
	Space palette.Space
}

// ResolvedDrive is Drive with its defaults. Period is 0 where the ramp is
// fitted; Fit then says how, and Fitted, where it is not nil, with what result.
type ResolvedDrive struct {
	Scale    Scale
	Exponent float64 // 1 unless the scale is Power
	Base     float64
	Period   float64
	Offset   float64
	Fit      Fit
	Fitted   *Fitted
}

// ResolvedEdge is Edge with its width in pixels of the unscaled sheet, not
// rounded; 0 is no edge.
type ResolvedEdge struct {
	Width  float64
	Colour palette.Colour
}

// Resolve validates the frame and gives every value with the defaults applied.
// The error is the Faults of Validate. Baked and Fitted point into f.
func (f *Frame) Resolve() (*Resolved, error) {
	if err := f.Validate(); err != nil {
		return nil, err
	}
	g, err := f.Sheet.Geometry()
	if err != nil {
		return nil, err
	}
	space, err := palette.ParseSpace(or(f.Sheet.Space, DefaultSpace))
	if err != nil {
		return nil, err
	}
	r := &Resolved{
		Title: f.Title, Maker: f.Maker, Rights: f.Rights,
		Kind: f.Set.Kind, Power: or(f.Set.Power, DefaultPower),
		Parameter: deref(f.Set.Parameter, Point{}),
		Centre:    f.View.Centre, Height: f.View.Height,
		Turn:  or(f.View.Turn, Turn{text: DefaultTurn}),
		Limit: f.Iteration.Limit, Bailout: or(f.Iteration.Bailout, DefaultBailout),
		Tolerance: deref(f.Sampling.Tolerance, DefaultTolerance),
		Filter:    or(f.Sampling.Filter, DefaultFilter),
		Sheet:     g, Space: space,
	}
	r.Least, r.Most = f.Sampling.bounds()
	f.Ink.resolve(r)
	return r, nil
}

// bounds is the least and the most samples; a default gives way to the other
// where that was given.
func (s Sampling) bounds() (least, most int) {
	least, most = s.Least, s.Most
	if least == 0 {
		least = min(DefaultLeast, or(most, DefaultMost))
	}
	return least, or(most, max(DefaultMost, least))
}

// resolve fills in what the ink decides.
func (k Ink) resolve(r *Resolved) {
	r.Ramp = palette.DefaultRamp()
	if k.Ramp != nil {
		r.Ramp = k.Ramp.palette()
	}
	d := k.Drive
	r.Drive = ResolvedDrive{
		Scale: or(d.Scale, DefaultScale), Exponent: 1,
		Base: deref(d.Base, 0), Period: d.Period, Offset: deref(d.Offset, 0),
		Fit: deref(d.Fit, Fit{DefaultFitLow, DefaultFitHigh}), Fitted: d.Fitted,
	}
	if d.Scale == Power {
		r.Drive.Exponent = or(d.Exponent, DefaultExponent)
	}
	r.Inside = deref(k.Inside, palette.DefaultInside())
	if e := k.Edge; e != nil {
		r.Edge = ResolvedEdge{Width: e.Width.PixelWidth(r.Sheet.PPI), Colour: e.Colour}
	}
	r.Baked = k.Baked
}

// deref is *p, or def where p is nil.
func deref[T any](p *T, def T) T {
	if p == nil {
		return def
	}
	return *p
}
