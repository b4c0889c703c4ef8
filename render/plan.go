package render

import (
	"context"
	"fmt"
	"image"
	"math"
	"runtime"
	"time"

	"leadline/palette"
	"leadline/precision"
	"leadline/render/formula"
	"leadline/render/frame"
	"leadline/render/ink"
	"leadline/render/kernel"
	"leadline/render/orbit"
	"leadline/render/sheet"
)

// Progress is a sign of life: how much of a phase is done. Orbit phases count
// iterations, the survey samples, the others pixels.
type Progress struct {
	Phase string
	Done  int64
	Total int64
}

// The phases of a render, in order.
const (
	PhaseReference = "reference"
	PhaseTables    = "tables"
	PhaseSurvey    = "survey"
	PhasePixels    = "pixels"
	PhaseColour    = "colour"
	PhaseFile      = "file"
	PhaseAudit     = "audit"
)

// Options are the choices that no pixel depends on. The zero value works.
type Options struct {
	Workers  int            // goroutines that compute; 0: all cores
	Progress func(Progress) // called from several goroutines; nil: silent
}

func (o Options) workers() int {
	if o.Workers > 0 {
		return o.Workers
	}
	return runtime.GOMAXPROCS(0)
}

func (o Options) tell(phase string, done, total int64) {
	if o.Progress != nil {
		o.Progress(Progress{phase, done, total})
	}
}

// Plan is a frame made ready: everything that its pixels share. It is
// read-only and safe for any number of goroutines.
type Plan struct {
	Geometry sheet.Geometry
	Space    palette.Space
	// Clipped counts the ramp's entries that lay outside the sheet's space and
	// were brought in.
	Clipped int
	Seconds map[string]float64 // by phase, so far

	frame   *frame.Frame // frozen
	r       *frame.Resolved
	kernel  *kernel.Kernel
	shader  *ink.Shader
	sampler sampler
	ref     *orbit.Reference
	pixel   precision.Ext
	config  kernel.Config
	leaps   leaps
}

// leaps are a reference's tables and what they were built for: the largest
// |δc| and the exponent that δc is given in.
type leaps struct {
	tables []*orbit.Table
	far    precision.Ext
	scale  int64
}

// NewPlan computes what a frame's pixels share. The frame may be as written by
// hand or frozen by an earlier render; what is frozen is kept.
func NewPlan(ctx context.Context, f *frame.Frame, o Options) (*Plan, error) {
	r, err := f.Resolve()
	if err != nil {
		return nil, err
	}
	return finishPlan(ctx, f, r, nil, o)
}

// finishPlan makes a plan, around a stored reference where there is one.
func finishPlan(ctx context.Context, f *frame.Frame, r *frame.Resolved, ref *orbit.Reference, o Options) (*Plan, error) {
	p, err := newPlan(ctx, f, r, ref, o)
	if err != nil {
		return nil, err
	}
	return p, p.finish(ctx, o)
}

// finish makes the part of a plan that colours.
func (p *Plan) finish(ctx context.Context, o Options) error {
	if err := p.freezeInk(ctx, o); err != nil {
		return err
	}
	p.shader = ink.New(p.frame.Ink.Baked, p.r.Drive, p.r.Edge, p.Space)
	return nil
}

// NewProbe is NewPlan without the ink: enough for Field, Exact and Compare.
func NewProbe(ctx context.Context, f *frame.Frame, o Options) (*Plan, error) {
	r, err := f.Resolve()
	if err != nil {
		return nil, err
	}
	return newPlan(ctx, f, r, nil, o)
}

// newPlan makes the part of a plan that iterates.
func newPlan(ctx context.Context, f *frame.Frame, r *frame.Resolved, ref *orbit.Reference, o Options) (*Plan, error) {
	p := unmade(f, r)
	p.ref = ref
	return p, p.iterate(ctx, o)
}

// unmade is a plan in which nothing is computed yet.
func unmade(f *frame.Frame, r *frame.Resolved) *Plan {
	p := &Plan{frame: frozen(f, r), r: r, Geometry: r.Sheet, Space: r.Space,
		Seconds: map[string]float64{}, sampler: newSampler(r)}
	p.pixel = r.Height.Ext().Quo(precision.ExtOf(float64(p.Geometry.TrimH)))
	return p
}

// Frame is the frozen frame: every default written out, the fit and the baked
// ink filled in. It must not be changed.
func (p *Plan) Frame() *frame.Frame { return p.frame }

// clock adds the time since start to a phase.
func (p *Plan) clock(phase string, start time.Time) {
	p.Seconds[phase] += time.Since(start).Seconds()
}

// iterate makes the reference, the tables and the kernel.
func (p *Plan) iterate(ctx context.Context, o Options) error {
	r := p.r
	m, err := formula.ForPower(r.Power)
	if err != nil {
		return err
	}
	c := kernel.Config{Map: m, Julia: r.Kind == frame.Julia, Limit: r.Limit,
		Bailout: r.Bailout, View: p.view(), Centre: doubles(r.Centre)}
	if c.Julia {
		c.Parameter = doubles(r.Parameter)
	}
	if !kernel.Direct(p.pixel) {
		if err := p.refer(ctx, &c, o); err != nil {
			return err
		}
	}
	p.config, p.kernel = c, kernel.New(c)
	return nil
}

// refer computes the reference orbit and its tables. Both depend on the frame
// alone: on its trim and bleed, never on the part or scale rendered.
func (p *Plan) refer(ctx context.Context, c *kernel.Config, o Options) error {
	r, start := p.r, time.Now()
	q := orbit.Request{Map: c.Map, Julia: c.Julia, Pixel: p.pixel, Radius: p.radius(p.Geometry.Trim()),
		Centre: [2]precision.Decimal{r.Centre.Re, r.Centre.Im}, Limit: r.Limit, Bailout: r.Bailout,
		Progress: func(s orbit.Progress) { o.tell(PhaseReference, int64(s.Done), int64(s.Of)) }}
	if c.Julia {
		q.Parameter = [2]precision.Decimal{r.Parameter.Re, r.Parameter.Im}
	}
	if p.ref == nil {
		var err error
		if p.ref, err = orbit.New(ctx, q); err != nil {
			return err
		}
	}
	p.clock(PhaseReference, start)
	start = time.Now()
	o.tell(PhaseTables, 0, 1)
	var far precision.Ext
	if !c.Julia {
		far = p.far()
	}
	if p.leaps.tables == nil {
		p.leaps = leaps{p.ref.Tables(far, p.pixel.E, c.Bailout), far, p.pixel.E}
	}
	c.Reference, c.Tables = p.ref, p.leaps.tables
	o.tell(PhaseTables, 1, 1)
	p.clock(PhaseTables, start)
	return nil
}

// radius is half a rectangle's diagonal in the plane.
func (p *Plan) radius(r image.Rectangle) precision.Ext {
	w, h := float64(r.Dx()), float64(r.Dy())
	return p.pixel.Mul(precision.ExtOf(float64(0.5 * math.Sqrt(math.FMA(w, w, float64(h*h))))))
}

// far bounds |δc| over everything ever drawn, at any scale: the full sheet's
// radius and a quarter more, plus the reference's distance from the centre,
// rounded up to a power of two.
func (p *Plan) far() precision.Ext {
	r := p.radius(p.Geometry.Full()).Mul(precision.ExtOf(1.25)).Add(p.ref.Offset.Abs())
	return precision.Ext{M: 0.5, E: r.E + 1}
}

// view places the lattice: the view's centre is the trim's centre.
func (p *Plan) view() kernel.View {
	v := kernel.View{MidX: float64(p.Geometry.TrimW) / 2, MidY: float64(p.Geometry.TrimH) / 2,
		Pixel: p.pixel}
	v.Cos, v.Sin = turn(p.r.Turn.Degrees())
	return v
}

// turn returns cosine and sine of an angle in degrees, exact at right angles.
func turn(deg float64) (c, s float64) {
	deg -= float64(360 * math.Floor(deg/360))
	q := math.Floor(deg / 90)
	s, c = precision.SinCos(float64((deg - float64(90*q)) * (math.Pi / 180)))
	switch q {
	case 1:
		return -s, c
	case 2:
		return -c, -s
	case 3:
		return s, -c
	}
	return c, s
}

func doubles(p frame.Point) [2]float64 {
	re, _ := p.Re.Float(53).Float64()
	im, _ := p.Im.Float(53).Float64()
	return [2]float64{re, im}
}

// ScaleError refuses a scale 1/K that leaves nothing to look at.
type ScaleError struct{ K, Most int }

// Error says why.
func (e *ScaleError) Error() string {
	return fmt.Sprintf("scale 1/%d leaves fewer than 8 pixels a side", e.K)
}

// Hint says what this sheet allows.
func (e *ScaleError) Hint() string {
	if e.Most == 1 {
		return "this sheet is too small to be scaled"
	}
	return fmt.Sprintf("at most 1/%d of this sheet", e.Most)
}

// checkScale refuses scales that leave nothing to look at.
func checkScale(g sheet.Geometry, k int) error {
	most := max(1, min(g.TrimW, g.TrimH)/8)
	if k < 1 || k > most {
		return &ScaleError{k, most}
	}
	return nil
}
