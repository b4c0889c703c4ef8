package engine

import (
	"context"
	"math"
	"slices"
	"time"

	"leadline/render"
	"leadline/render/frame"
	"leadline/render/kernel"
)

// How the iteration limit is found. After the first pass the undecided samples
// are tried with four times the limit, and again, as long as that decides
// enough of them or nothing is known yet; but not for longer than a few
// seconds, and not beyond what a frame may have. If there were undecided samples
// and the limit is below what the counts ask for it becomes that: as far above
// their lowest as eight times their spread, for the print's finer samples reach
// higher than the preview's; but no more than one rise above the last that was
// worth it.
const (
	riseBy     = 4
	riseWorth  = 200 // a rise decides at least one in so many samples, or is the last
	riseTime   = 3 * time.Second
	riseSample = 512 // samples tried at most
	highest    = frame.MaxLimit
	// cutMost bounds the limit where the reference orbit neither closes nor
	// escapes, so that it is as long as the limit: about a hundred megabytes.
	cutMost = 1 << 22
	// lowerBy is how many times the 99.9 % point of the counts a limit may be
	// before it comes down.
	lowerBy = 16
	top     = 0.999
	spreads = 8
	// lowest is asked for in any case: it costs next to nothing.
	lowest = 1000
)

// settledLimit is the limit to begin with: one that was found for a whole
// picture of the same set, if the frame's own is still what that began with or
// led to, else the frame's.
func settledLimit(old []*Picture, r Request) int {
	own := r.Frame.Iteration.Limit
	for i := len(old) - 1; i >= 0; i-- {
		p := old[i]
		if p.Whole && !p.Pinned && sameSet(p.Frame, r.Frame) {
			if p.Frame.Iteration.Limit == own || p.Limit == own {
				return p.Limit
			}
			return own
		}
	}
	return own
}

// needed is the limit that escape counts ask for, a round number; 0 where there
// are none. top99 is their 99.9 % point, by nearest rank.
func needed(counts []int) (limit, top99 int) {
	if len(counts) == 0 {
		return 0, 0
	}
	c := slices.Clone(counts)
	slices.Sort(c)
	low, high := c[0], c[max(0, int(math.Ceil(top*float64(len(c))))-1)]
	return roundUp(min(highest, max(low+spreads*(high-low), high+high/4, lowest))), high
}

// roundUp rounds up to two significant digits.
func roundUp(n int) int {
	unit := 1
	for n/unit >= 100 {
		unit *= 10
	}
	return min(highest, (n+unit-1)/unit*unit)
}

// findLimit settles the limit after the first pass.
func (w *work) findLimit(ctx context.Context) error {
	start := time.Now()
	within, cancel := context.WithDeadline(ctx, start.Add(riseTime))
	defer cancel()
	plan, limit := w.plan, w.limit // the latest rise that was worth it
	tried, total := w.undecided()
	undecided := len(tried) > 0
	for p := plan; len(tried) > 0; {
		var err error
		if p, err = w.raise(within, p); p == nil {
			if err != nil && ctx.Err() != nil {
				return ctx.Err()
			}
			break // as high as it goes, or time is up
		}
		if w.compute(within, p, tried, coarsest) != nil {
			if ctx.Err() != nil {
				return ctx.Err()
			}
			break
		}
		before := len(tried)
		tried = w.still(tried)
		if decided := before - len(tried); decided*riseWorth >= total && decided > 0 {
			plan, limit = p, p.Frame().Iteration.Limit
		} else if len(w.counts()) > 0 {
			break
		}
	}
	w.settle(ctx, plan, limit, undecided)
	return ctx.Err()
}

// raise is the plan with a higher limit, nil where there is none.
func (w *work) raise(ctx context.Context, p *render.Plan) (*render.Plan, error) {
	limit := p.Frame().Iteration.Limit
	if limit >= highest {
		return nil, nil
	}
	limit = min(highest, limit*riseBy)
	if q, ok := p.WithLimit(limit); ok {
		return q, nil
	}
	if limit > cutMost {
		return nil, nil
	}
	return render.NewProbe(ctx, withLimit(w.r.Frame, limit), render.Options{Progress: func(g render.Progress) {
		w.stage(g.Phase, float64(g.Done)/float64(max(1, g.Total)))
		w.showNow() // NewProbe reports from the goroutine it is called in
	}})
}

// settle takes the limit that the counts ask for; plan and limit are those of
// the last rise that was worth it.
func (w *work) settle(ctx context.Context, plan *render.Plan, limit int, undecided bool) {
	need, high := needed(w.counts())
	switch {
	case need == 0: // nothing is known: so many more iterations were no use
		plan, need = w.plan, w.limit
	case w.limit > lowerBy*high:
		need = min(need, w.limit)
	case w.limit >= need || !undecided:
		plan, need = w.plan, w.limit
	default:
		need = min(need, max(lowest, roundUp(riseBy*limit)))
	}
	q, ok := plan.WithLimit(need)
	if !ok { // the reference was cut off below
		q, need = plan, limit
	}
	if need > w.limit {
		w.forget()
	}
	w.setLimit(need)
	w.use(ctx, q)
}

// lowerLimit brings the limit down where a whole picture shows that it is far
// too high.
func (w *work) lowerLimit(ctx context.Context) {
	need, high := needed(w.counts())
	if need >= w.limit || w.limit <= lowerBy*high || need == 0 {
		return
	}
	w.setLimit(need)
	if q, ok := w.plan.WithLimit(need); ok {
		w.use(ctx, q)
	}
}

// setLimit takes a limit and makes the samples those of that limit.
func (w *work) setLimit(limit int) {
	w.grid.mu.Lock()
	defer w.grid.mu.Unlock()
	w.limit = limit
	p := &w.grid.pic
	p.Limit = limit
	for k := range p.Fields {
		p.Fields[k] = clamped(p.Fields[k], limit)
	}
}

// undecided lists the computed samples that are not decided, spread over the
// picture where there are many, and counts all that are computed.
func (w *work) undecided() (list []int32, total int) {
	w.grid.mu.Lock()
	defer w.grid.mu.Unlock()
	p := &w.grid.pic
	for _, k := range w.order {
		if p.From[k] != Computed {
			continue
		}
		total++
		if p.Fields[k].State == kernel.Undecided {
			list = append(list, k)
		}
	}
	if n := len(list); n > riseSample {
		for i := range riseSample {
			list[i] = list[i*n/riseSample]
		}
		list, total = list[:riseSample], total*riseSample/n
	}
	return list, total
}

// still are those of a list that are undecided yet.
func (w *work) still(list []int32) []int32 {
	return slices.DeleteFunc(slices.Clone(list), func(k int32) bool { return w.grid.pic.Fields[k].State != kernel.Undecided })
}

// counts are the escape counts of all computed samples.
func (w *work) counts() []int {
	var c []int
	for k, o := range w.grid.pic.From {
		if f := w.grid.pic.Fields[k]; o == Computed && f.State == kernel.Escaped {
			c = append(c, f.N)
		}
	}
	return c
}

// forget has undecided samples computed again: the limit has risen.
func (w *work) forget() {
	w.grid.mu.Lock()
	defer w.grid.mu.Unlock()
	p := &w.grid.pic
	for k, o := range p.From {
		if o == Computed && p.Fields[k].State == kernel.Undecided {
			p.From[k] = Coarse
		}
	}
}
