package engine

import (
	"context"
	"sync/atomic"
	"time"

	"leadline/precision"
	"leadline/render"
	"leadline/render/frame"
)

// making is a plan being made from scratch, reference orbit and all. It outlives
// the request it was begun for if a later one can use it.
type making struct {
	frame    *frame.Frame
	stop     context.CancelFunc
	done     chan struct{}
	plan     *render.Plan // once done
	err      error
	progress atomic.Pointer[render.Progress]
}

// make begins a plan.
func (e *Engine) make(f *frame.Frame) *making {
	ctx, cancel := context.WithCancel(e.ctx)
	m := &making{frame: f, stop: cancel, done: make(chan struct{})}
	e.wg.Go(func() {
		defer close(m.done)
		defer cancel()
		m.plan, m.err = render.NewProbe(ctx, f, render.Options{Progress: func(p render.Progress) { m.progress.Store(&p) }})
	})
	return m
}

// prepare gets the plan of the work's frame.
func (w *work) prepare(ctx context.Context) error {
	p, reused, err := w.e.planFor(ctx, withLimit(w.r.Frame, w.limit), w)
	if err != nil {
		return err
	}
	w.grid.mu.Lock()
	w.grid.pic.Reused = reused
	w.grid.mu.Unlock()
	w.use(ctx, p)
	return nil
}

// use takes a plan for the work, and for all that comes near it.
func (w *work) use(ctx context.Context, p *render.Plan) {
	w.plan = p
	w.e.adopt(p)
	w.e.read(ctx, p)
}

// planFor makes the plan of a frame: around the reference of an earlier plan,
// around one that is already being made, or from scratch. told shows how far it is.
func (e *Engine) planFor(ctx context.Context, f *frame.Frame, told *work) (p *render.Plan, reused bool, err error) {
	for {
		if old, ok := e.serving(f); ok {
			told.stage(render.PhaseTables, 0)
			return render.NewProbeNear(ctx, f, old, render.Options{})
		}
		m := e.making
		if m != nil && !render.Reaches(m.frame, f) {
			m.stop()
			m = nil
		}
		if m == nil {
			m = e.make(f)
			e.making = m
		}
		if err := m.await(ctx, told); err != nil {
			return nil, false, err
		}
		e.making = nil
		if m.err == nil {
			e.adopt(m.plan)
		}
		if m.frame == f {
			return m.plan, false, m.err
		}
	}
}

// serving is an earlier plan whose reference serves a frame; nil and true where
// the frame needs none.
func (e *Engine) serving(f *frame.Frame) (old *render.Plan, ok bool) {
	e.mu.Lock()
	plans := []*render.Plan{e.plan, e.ahead}
	e.mu.Unlock()
	for _, p := range plans {
		if p.Serves(f) {
			return p, true
		}
	}
	return nil, false
}

// await waits for the plan to be made or the context to end, and shows how far
// it is.
func (m *making) await(ctx context.Context, told *work) error {
	tick := time.NewTicker(every)
	defer tick.Stop()
	for {
		select {
		case <-m.done:
			return nil
		case <-ctx.Done():
			return ctx.Err()
		case <-tick.C:
			if p := m.progress.Load(); p != nil && p.Total > 0 {
				told.stage(p.Phase, float64(p.Done)/float64(p.Total))
				told.showNow()
			}
		}
	}
}

// Decades of depth: an orbit is computed ahead of time where none serves a view
// so much deeper, and then has bits for so much.
const (
	aheadWant = 6
	aheadGet  = 24
)

// lookAhead makes use of a pause: it makes the plan if the picture did without,
// and a reference for deeper views about the same centre, so that going deeper
// waits for no orbit.
func (e *Engine) lookAhead(ctx context.Context, w *work) {
	f := withLimit(w.r.Frame, w.limit)
	if w.plan == nil {
		w.silent = true
		if w.prepare(ctx) != nil {
			return
		}
	}
	deeper := f.Clone()
	height := f.View.Height.Ext().Mul(precision.ExtOf(1e-6))
	deeper.View.Height = precision.DecimalNear(height.Big(64), height.Ldexp(-20))
	if _, ok := e.serving(deeper); ok {
		return
	}
	// Too deep for a frame, or given up for new work: either way there is none.
	if p, err := render.Ahead(ctx, f, aheadGet, render.Options{}); err == nil {
		e.mu.Lock()
		e.ahead = p
		e.mu.Unlock()
	}
}
