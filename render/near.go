package render

import (
	"context"
	"fmt"

	"leadline/precision"
	"leadline/render/frame"
	"leadline/render/kernel"
)

// What a reference orbit serves besides the view it was computed for. Only
// previews ask; a print's reference is always its own frame's.
const (
	// nearBits is how many of the guard's 64 bits a finer pixel may use up. The
	// 24 that are left place the picture to about 1e-6 of a pixel: 16 were seen
	// to move it by 3e-4, and every further bit halves that.
	nearBits = 40
	// nearHeights bounds the distance between the orbit's start and the view's
	// centre, in view heights. A difference that begins so far out has an error
	// of 2^-53 of that a step. On the shared frames (4,724 rows) samples were
	// seen to move by 6e-8 of a pixel at 64 heights, 5e-7 at 512 and 4e-6 at
	// 4096, at no cost in time: leaps lose log2 of the distance, nine bits, from
	// a growth of as many bits as the view is deep.
	nearHeights = 512
	// nearFar is how much wider than needed the leaps of an earlier plan may
	// be laid out before it is worth building others, as a power of two.
	nearFar = 3
)

// NewProbeNear is NewProbe around the reference orbit of an earlier plan where
// that serves, which reused reports. old may be nil.
func NewProbeNear(ctx context.Context, f *frame.Frame, old *Plan, o Options) (p *Plan, reused bool, err error) {
	r, err := f.Resolve()
	if err != nil {
		return nil, false, err
	}
	p = unmade(f, r)
	if !kernel.Direct(p.pixel) && old.reaches(p) && old.ref.Lasts(r.Limit, r.Bailout) {
		p.takeReference(old)
		reused = true
	}
	return p, reused, p.iterate(ctx, o)
}

// Serves reports whether NewProbeNear would do without a new reference orbit:
// the plan's own serves, or none is needed. A nil plan serves frames that need
// none.
func (p *Plan) Serves(f *frame.Frame) bool {
	g, err := bare(f)
	if err != nil {
		return false
	}
	return kernel.Direct(g.pixel) || p.reaches(g) && p.ref.Lasts(g.r.Limit, g.r.Bailout)
}

// Reaches reports whether the reference orbit of a plan for f, not yet
// computed, will serve g, as far as can be told beforehand: the orbit may end
// too soon for a higher limit, or start at a nucleus on the far side.
func Reaches(f, g *frame.Frame) bool {
	a, err := bare(f)
	if err != nil {
		return false
	}
	b, err := bare(g)
	return err == nil && !kernel.Direct(a.pixel) && reaches(a, a.r.Centre, precision.BitsFor(a.pixel), b)
}

// reaches reports whether p's reference is near enough to q's view and has
// bits enough for its pixels.
func (p *Plan) reaches(q *Plan) bool {
	return p != nil && p.ref != nil && reaches(p, frame.Point{Re: p.ref.Re, Im: p.ref.Im}, p.ref.Bits, q)
}

// reaches is the rule for an orbit of p's set that starts at a point.
func reaches(p *Plan, start frame.Point, bits uint, q *Plan) bool {
	a, b := p.r, q.r
	need := precision.BitsFor(q.pixel)
	if a.Kind != b.Kind || a.Power != b.Power || a.Bailout != b.Bailout || !same(a.Parameter, b.Parameter) || need > bits+nearBits {
		return false
	}
	c := precision.NewFixed(b.Centre.Re, b.Centre.Im, need)
	away := c.Sub(c, precision.NewFixed(start.Re, start.Im, need)).Ext().Abs()
	return away.Cmp(b.Height.Ext().Mul(precision.ExtOf(nearHeights))) <= 0
}

func same(a, b frame.Point) bool { return a.Re.Cmp(b.Re) == 0 && a.Im.Cmp(b.Im) == 0 }

// takeReference gives p the reference of an earlier plan, and its leaps where
// they were laid out for the same unit and for no less.
func (p *Plan) takeReference(old *Plan) {
	p.ref = old.ref.From([2]precision.Decimal{p.r.Centre.Re, p.r.Centre.Im}, precision.BitsFor(p.pixel))
	l := old.leaps
	if p.r.Kind == frame.Julia {
		p.leaps = l // they hold at every depth: there is no δc
		return
	}
	far := p.far()
	if l.scale == p.pixel.E && l.far.Cmp(far) >= 0 && l.far.E <= far.E+nearFar {
		p.leaps = l
	}
}

// WithLimit is the plan with another iteration limit; it shares everything
// else. Not ok where the reference orbit was cut off before the limit: then
// another is needed.
func (p *Plan) WithLimit(limit int) (q *Plan, ok bool) {
	if p.ref != nil && !p.ref.Lasts(limit, p.r.Bailout) {
		return nil, false
	}
	c, f, r := *p, p.frame.Clone(), *p.r
	f.Iteration.Limit, r.Limit = limit, limit
	c.frame, c.r, c.Seconds = f, &r, map[string]float64{}
	c.config.Limit = limit
	c.kernel = kernel.New(c.config)
	return &c, true
}

// The orbit of Ahead may be some times as long as the frame's limit, for deeper
// views count higher, but no longer than takes a hundred megabytes or so with
// its leaps.
const (
	aheadLimit = 4
	aheadMost  = 1 << 22
)

// Ahead is a plan for the view that many decades deeper at the same centre. Its
// reference orbit serves the views from here to there, and nearBits' worth
// beyond.
func Ahead(ctx context.Context, f *frame.Frame, decades int, o Options) (*Plan, error) {
	if precision.Depth(f.View.Height)+float64(decades) > frame.MaxDepth {
		return nil, fmt.Errorf("no view lies %d decades deeper", decades)
	}
	ratio, err := precision.ParseDecimal(fmt.Sprintf("1e-%d", decades))
	if err != nil {
		return nil, err
	}
	g := f.Clone()
	height := f.View.Height.Ext().Mul(ratio.Ext())
	g.View.Height = precision.DecimalNear(height.Big(64), height.Ldexp(-pointGuard))
	g.Iteration.Limit = max(f.Iteration.Limit, min(aheadLimit*f.Iteration.Limit, aheadMost))
	return NewProbe(ctx, g, o)
}
