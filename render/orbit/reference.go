package orbit

import (
	"context"
	"fmt"
	"sort"

	"leadline/precision"
	"leadline/render/formula"
)

// Z is one point of the reference orbit, rounded to doubles.
type Z struct{ Re, Im float64 }

// Segment is a stretch of the reference, indices Start to End inclusive. A
// pixel that arrives at End goes on at Wrap with its difference unchanged
// (the orbit is periodic), or, where Wrap is negative, takes its own value as
// difference and goes on at the critical orbit's start.
type Segment struct{ Start, End, Wrap int }

// Kind says where a reference starts.
type Kind string

// The kinds of reference.
const (
	Centre  Kind = "centre"  // the view's centre
	Nucleus Kind = "nucleus" // a superattracting parameter near the centre
)

// Reference is the orbit that the pixels of one frame are measured against.
// For a Mandelbrot set it is one critical orbit; for a Julia set the orbit of
// the centre is followed by the critical orbit, onto which pixels rebase.
type Reference struct {
	Map      formula.Map
	Kind     Kind
	Re, Im   precision.Decimal    // the starting point
	Offset   precision.ExtComplex // view centre minus starting point
	Period   int                  // of the orbit if it closes, else 0
	Length   int                  // iterations computed
	Bits     uint                 // fractional bits it was computed with
	Points   []Z
	Segments []Segment
	Rebase   int // index where the critical orbit starts

	tiny []tinyZ
}

// tinyZ keeps in extended range a point that doubles cannot hold.
type tinyZ struct {
	index int
	z     precision.ExtComplex
}

// tinyExponent is the binary exponent under which a point is kept in extended
// range as well.
const tinyExponent = -900

// At returns point m in extended range.
func (r *Reference) At(m int) precision.ExtComplex {
	p := r.Points[m]
	if len(r.tiny) > 0 {
		i := sort.Search(len(r.tiny), func(i int) bool { return r.tiny[i].index >= m })
		if i < len(r.tiny) && r.tiny[i].index == m {
			return r.tiny[i].z
		}
	}
	return precision.NewExtComplex(p.Re, p.Im, 0)
}

// Request says what a reference is wanted for.
type Request struct {
	Map       formula.Map
	Julia     bool
	Parameter [2]precision.Decimal // Julia sets: c
	Centre    [2]precision.Decimal // the view's centre
	Pixel     precision.Ext        // pixel spacing in the plane
	Radius    precision.Ext        // half diagonal of all that is ever drawn
	Limit     int                  // iteration limit
	Bailout   float64
	// Progress, if set, is told now and then what runs and how far it is.
	Progress func(Progress)
}

// Progress is a sign of life during a long reference.
type Progress struct {
	Stage string // "orbit", "nucleus"
	Done  int    // iterations done
	Of    int    // at most this many
}

// New computes the reference of a frame. A nucleus in or near the view is
// preferred, for its orbit closes and so outlives every pixel; otherwise the
// centre's orbit is followed until it escapes, closes or reaches the limit,
// never less.
func New(ctx context.Context, q Request) (*Reference, error) {
	bits := precision.BitsFor(q.Pixel)
	r := &Reference{Map: q.Map, Bits: bits, Kind: Centre, Re: q.Centre[0], Im: q.Centre[1]}
	w := &walker{q: &q, ctx: ctx, frac: bits}
	centre := precision.NewFixed(q.Centre[0], q.Centre[1], bits)
	var err error
	if q.Julia {
		err = r.julia(w, centre)
	} else {
		err = r.mandelbrot(w, centre)
	}
	if err != nil {
		return nil, fmt.Errorf("reference orbit: %w", err)
	}
	return r, nil
}

// mandelbrot follows the centre until a nucleus turns up or the orbit ends.
func (r *Reference) mandelbrot(w *walker, centre *precision.Fixed) error {
	o, err := w.detect(centre)
	if err != nil {
		return err
	}
	if o.nucleus != nil {
		r.Kind = Nucleus
		diff := new(precision.Fixed).Set(centre)
		r.Offset = diff.Sub(centre, o.nucleus).Ext()
		r.Re, r.Im = decimals(o.nucleus, w.frac)
	}
	r.append(o)
	return nil
}

// julia follows the centre and then the critical point, both under the map of
// the frame's parameter.
func (r *Reference) julia(w *walker, centre *precision.Fixed) error {
	c := precision.NewFixed(w.q.Parameter[0], w.q.Parameter[1], w.frac)
	o, err := w.walk("orbit", centre, c, w.q.Limit, nil)
	if err != nil {
		return err
	}
	r.append(o)
	zero := &precision.Fixed{Frac: w.frac}
	if o, err = w.walk("critical orbit", zero, c, w.q.Limit, nil); err != nil {
		return err
	}
	r.Rebase = len(r.Points)
	r.append(o)
	return nil
}

// append adds an orbit as one more segment.
func (r *Reference) append(o *trace) {
	start := len(r.Points)
	s := Segment{Start: start, End: start + len(o.points) - 1, Wrap: -1}
	if o.period > 0 {
		s.Wrap = start + o.wrap
		if start == 0 {
			r.Period = o.period
		}
	}
	for _, t := range o.tiny {
		r.tiny = append(r.tiny, tinyZ{t.index + start, t.z})
	}
	r.Points = append(r.Points, o.points...)
	r.Segments = append(r.Segments, s)
	r.Length += len(o.points)
}
