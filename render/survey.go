package render

import (
	"context"
	"math"
	"sync"
	"sync/atomic"
	"time"

	"leadline/render/ink"
	"leadline/render/kernel"
)

// surveyPoints is about how many samples a survey takes.
const surveyPoints = 6144

// freezeInk fills in what the ink leaves open: the fitted ends of the ramp,
// from a survey of the whole trim, and the baked colours.
func (p *Plan) freezeInk(ctx context.Context, o Options) error {
	k := &p.frame.Ink
	if k.Baked == nil || k.Baked.Space != p.Space.String() {
		start := time.Now()
		b, clipped, err := ink.Freeze(p.r)
		if err != nil {
			return err
		}
		k.Baked, p.Clipped = b, clipped
		p.clock(PhaseColour, start)
	}
	if p.r.Drive.Period != 0 || p.r.Drive.Fitted != nil {
		return nil
	}
	start := time.Now()
	fields, err := p.Survey(ctx, o)
	if err != nil {
		return err
	}
	var counts []float64
	for _, f := range fields {
		if f.State == kernel.Escaped {
			counts = append(counts, f.Smooth)
		}
	}
	fitted := ink.Fit(p.r.Drive, k.Drive.Base, counts)
	k.Drive.Fitted, p.r.Drive.Fitted = &fitted, &fitted
	p.clock(PhaseSurvey, start)
	return nil
}

// Survey samples the whole trim on a jittered grid, the same for every part
// and scale rendered, and returns the fields in the grid's order.
func (p *Plan) Survey(ctx context.Context, o Options) ([]kernel.Field, error) {
	w, h := float64(p.Geometry.TrimW), float64(p.Geometry.TrimH)
	cols := int(math.Ceil(math.Sqrt(float64(surveyPoints*w) / h)))
	cols = min(max(cols, 1), surveyPoints)
	rows := (surveyPoints + cols - 1) / cols
	fields := make([]kernel.Field, cols*rows)
	box := sampler{}
	err := each(ctx, o.workers(), len(fields), func(i int) {
		cx, cy := i%cols, i/cols
		jx, jy := box.at(key(cx, cy), 0)
		x := float64((float64(cx)+0.5+jx)*w) / float64(cols)
		y := float64((float64(cy)+0.5+jy)*h) / float64(rows)
		fields[i] = p.kernel.Sample(x, y)
	}, func(done int) { o.tell(PhaseSurvey, int64(done), int64(len(fields))) })
	return fields, err
}

// each calls f(0) … f(n-1) from several goroutines, each index once, and stops
// early with the context's error. told, if set, hears of progress.
func each(ctx context.Context, workers, n int, f func(int), told func(done int)) error {
	var next, done atomic.Int64
	var stopped atomic.Bool
	defer context.AfterFunc(ctx, func() { stopped.Store(true) })()
	var wg sync.WaitGroup
	for range min(workers, n) {
		wg.Go(func() {
			for !stopped.Load() {
				i := int(next.Add(1)) - 1
				if i >= n {
					return
				}
				f(i)
				if d := int(done.Add(1)); told != nil && (d%64 == 0 || d == n) {
					told(d)
				}
			}
		})
	}
	wg.Wait()
	return ctx.Err()
}
