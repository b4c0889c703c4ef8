package orbit

import (
	"context"
	"math"

	"leadline/precision"
)

// trace is one orbit as it was walked. Where period > 0 it closes: its last
// point equals the one at index wrap.
type trace struct {
	points  []Z
	tiny    []tinyZ
	period  int
	wrap    int
	nucleus *precision.Fixed
}

// walker iterates in fixed point, with progress and cancellation.
type walker struct {
	q       *Request
	ctx     context.Context
	frac    uint
	scratch precision.FixedScratch
}

// checkEvery is how many iterations pass between looks at the context: at
// 33,000 bits about a tenth of a second. Wider orbits look more often.
const (
	checkEvery     = 512
	checkEveryWide = 64
	wide           = 16000
)

// pause reports progress and returns the context's error once it is done.
func (w *walker) pause(stage string, n, of int) error {
	if n%checkEveryWide != 0 || n%checkEvery != 0 && w.frac < wide {
		return nil
	}
	if w.q.Progress != nil {
		w.q.Progress(Progress{stage, n, of})
	}
	return w.ctx.Err()
}

// record appends z to the trace and reports whether it lies outside.
func (w *walker) record(o *trace, z *precision.Fixed) (outside bool) {
	re, im := z.Complex()
	o.points = append(o.points, Z{re, im})
	if math.Abs(re) < 0x1p-900 && math.Abs(im) < 0x1p-900 {
		if x := z.Ext(); x.E < tinyExponent {
			o.tiny = append(o.tiny, tinyZ{len(o.points) - 1, x})
		}
	}
	return math.FMA(re, re, float64(im*im)) > float64(w.q.Bailout*w.q.Bailout)
}

// step sets z = f(z) + c.
func (w *walker) step(z, c *precision.Fixed) {
	w.q.Map.Advance(z, &w.scratch)
	z.Add(z, c)
}

// walk follows z under f + c for at most limit iterations, until it escapes or
// repeats a former value to the last bit (Brent's cycle detection). watch, if
// set, sees every iterate; a trace that it returns takes this one's place.
func (w *walker) walk(stage string, z0, c *precision.Fixed, limit int, watch watcher) (*trace, error) {
	o := new(trace)
	z := new(precision.Fixed).Set(z0)
	saved, savedAt, next := new(precision.Fixed).Set(z0), 0, 2
	if w.record(o, z) {
		return o, nil
	}
	for n := 1; n <= limit; n++ {
		if err := w.pause(stage, n, limit); err != nil {
			return nil, err
		}
		w.step(z, c)
		if w.record(o, z) {
			return o, nil
		}
		if z.Equal(saved) {
			o.close(n-savedAt, savedAt)
			return o, nil
		}
		if n == next {
			saved.Set(z)
			savedAt, next = n, 2*next
		}
		if watch == nil {
			continue
		}
		if better, err := watch(n, z); better != nil || err != nil {
			return better, err
		}
	}
	return o, nil
}

// watcher looks at the n-th iterate of a walk.
type watcher func(n int, z *precision.Fixed) (*trace, error)

// closedAtLeast is how long an orbit that closes without passing 0 is made by
// walking it round again: leaps end where the orbit does.
const closedAtLeast = 8192

// close notes that the last point equals the one at index wrap, a period ago,
// and repeats the cycle until the orbit is long enough for long leaps. A cycle
// through 0, which no leap passes, is only made long enough not to wrap at
// every step.
func (o *trace) close(period, wrap int) {
	o.period, o.wrap = period, wrap
	if len(o.tiny) > 0 {
		return // passes so near to 0 that no long leap would hold
	}
	least := closedAtLeast
	for i := range period {
		if p := o.points[wrap+i]; p.Re == 0 && p.Im == 0 {
			least = wrapAtLeast
		}
	}
	for len(o.points) <= least || (len(o.points)-1-wrap)%period != 0 {
		o.points = append(o.points, o.points[len(o.points)-period])
	}
}

// wrapAtLeast is the shortest closed reference: a shorter period is walked
// several times, so that pixels do not wrap at every step.
const wrapAtLeast = 256

// periodic walks a nucleus around its period. The point is a nucleus to far
// below a pixel, so what its return misses zero by is rounding, and is set to
// zero.
func (w *walker) periodic(c *precision.Fixed, period int) (*trace, error) {
	turns := (wrapAtLeast + period - 1) / period
	o, z := new(trace), &precision.Fixed{Frac: w.frac}
	w.record(o, z)
	for n := 1; n <= turns*period; n++ {
		if err := w.pause("orbit", n, period); err != nil {
			return nil, err
		}
		w.step(z, c)
		if n%period == 0 {
			z.Re.SetInt64(0)
			z.Im.SetInt64(0)
		}
		w.record(o, z)
	}
	o.period, o.wrap, o.nucleus = period, 0, c
	return o, nil
}
