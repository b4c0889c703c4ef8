package engine

import (
	"context"
	"errors"
	"sync"
	"sync/atomic"
	"time"

	"leadline/render"
	"leadline/render/sheet"
)

// errNoSamples refuses an empty picture.
var errNoSamples = errors.New("a preview needs at least one sample")

// every is the least time between two pictures of one pass.
const every = 50 * time.Millisecond

// work is one preview on its way.
type work struct {
	e     *Engine
	r     Request
	grid  *grid
	order []int32
	plan  *render.Plan
	limit int

	silent bool // nothing is shown any more: the picture is whole
}

// begin gathers what is known of a frame already.
func (e *Engine) begin(r Request, g sheet.Geometry) *work {
	p, old := blank(r, g), e.pictures()
	if !r.Pinned {
		p.Limit = settledLimit(old, r)
	}
	ls := links(old, p)
	p.carry(ls)
	p.keepExact(ls)
	p.Stage = render.PhaseReference
	return &work{e: e, r: r, grid: newGrid(p), limit: p.Limit, order: e.paths.from(r.Size, r.Focus)}
}

// paint takes the picture through its passes.
func (w *work) paint(ctx context.Context) error {
	if ctx.Err() != nil {
		return ctx.Err()
	}
	w.show()
	if w.done() {
		return ctx.Err() // all of it was known; lookAhead makes the plan
	}
	if err := w.prepare(ctx); err != nil {
		return err
	}
	if err := w.pass(ctx, coarsest, w.missing(coarsest, all)); err != nil {
		return err
	}
	if !w.r.Pinned {
		if err := w.findLimit(ctx); err != nil {
			return err
		}
	}
	for _, block := range []int{4, 2, 1} {
		if err := w.pass(ctx, block, w.missing(block, lacking)); err != nil {
			return err
		}
	}
	if err := w.pass(ctx, 1, w.missing(1, all)); err != nil {
		return err
	}
	if !w.r.Pinned {
		w.lowerLimit(ctx)
	}
	return nil
}

// coarsest is the block of the first pass.
const coarsest = 8

// show sends the picture as it stands.
func (w *work) show() { w.e.emit(w.grid.snapshot()) }

// showNow sends the picture if the last one was sent long enough ago.
func (w *work) showNow() {
	if !w.silent && time.Since(w.e.sent) >= every {
		w.show()
	}
}

// stage notes what runs.
func (w *work) stage(name string, part float64) {
	w.grid.mu.Lock()
	w.grid.pic.Stage, w.grid.pic.Part = name, part
	w.grid.mu.Unlock()
}

// done reports whether every sample is computed.
func (w *work) done() bool { return len(w.missing(1, all)) == 0 }

// Which samples of a block's pass are wanted: any that are not computed, or
// only those that a carried one of the same fineness does not stand in for.
// The latter look right already, and come last.
type wanted bool

const (
	all     wanted = false
	lacking wanted = true
)

// missing lists the samples of a pass that are not computed, in their order.
func (w *work) missing(block int, want wanted) []int32 {
	p, a := &w.grid.pic, anchor(block)
	var list []int32
	for _, k := range w.order {
		i, j := int(k)%p.Size.X, int(k)/p.Size.X
		if i%block != a || j%block != a || p.From[k] == Computed {
			continue
		}
		if want == lacking && p.From[k] == Carried && p.spread[k] <= 1 {
			continue
		}
		list = append(list, k)
	}
	return list
}

// pass computes samples, shows them as they come, and the pass's end.
func (w *work) pass(ctx context.Context, block int, list []int32) error {
	if len(list) == 0 {
		return ctx.Err()
	}
	w.stage(render.PhasePixels, 0)
	if err := w.compute(ctx, w.plan, list, block); err != nil {
		return err
	}
	w.grid.mu.Lock()
	w.grid.pic.Pass = block
	w.grid.mu.Unlock()
	w.show()
	return nil
}

// Results are handed in this many at a time, or after this long.
const (
	batch     = 32
	batchTime = 10 * time.Millisecond
)

// compute has all cores compute samples with a plan, into the grid, and shows
// the grid now and then. Nothing computed is lost when the context ends.
func (w *work) compute(ctx context.Context, p *render.Plan, list []int32, block int) error {
	var stopped atomic.Bool
	defer context.AfterFunc(ctx, func() { stopped.Store(true) })()
	var next atomic.Int64
	var wg sync.WaitGroup
	for range min(workers(), len(list)) {
		wg.Go(func() { w.computeSome(p, list, block, &next, &stopped) })
	}
	done := make(chan struct{})
	go func() { wg.Wait(); close(done) }()
	tick := time.NewTicker(every)
	defer tick.Stop()
	for {
		select {
		case <-done:
			w.measure()
			return ctx.Err()
		case <-tick.C:
			w.stage(render.PhasePixels, min(1, float64(next.Load())/float64(len(list))))
			if ctx.Err() == nil && w.grid.changed() {
				w.showNow()
			}
		}
	}
}

// changed reports whether there is something to show.
func (g *grid) changed() bool {
	g.mu.Lock()
	defer g.mu.Unlock()
	return g.dirty
}

// computeSome is one worker.
func (w *work) computeSome(p *render.Plan, list []int32, block int, next *atomic.Int64, stopped *atomic.Bool) {
	const stride = 8
	rs := make([]result, 0, batch)
	start := time.Now()
	flush := func() {
		now := time.Now()
		w.grid.put(rs, block, now.Sub(start))
		rs, start = rs[:0], now
	}
	for !stopped.Load() {
		to := int(next.Add(stride))
		from := to - stride
		if from >= len(list) {
			break
		}
		for _, k := range list[from:min(to, len(list))] {
			if stopped.Load() {
				break
			}
			rs = append(rs, result{k, p.Field(w.grid.pic.At(int(k)%w.r.Size.X, int(k)/w.r.Size.X))})
		}
		if len(rs) >= batch || time.Since(start) > batchTime {
			flush()
		}
	}
	flush()
}

// measure notes how long samples take.
func (w *work) measure() {
	w.grid.mu.Lock()
	busy, n := w.grid.busy, w.grid.taken
	w.grid.mu.Unlock()
	if n >= 64 || n > 0 && w.e.perSample.Load() == 0 {
		w.e.perSample.Store(int64(busy) / int64(n*workers()))
	}
}
