package jobs

import (
	"context"
	"errors"
	"fmt"
	"sync"

	"github.com/riverqueue/river/rivertype"

	"leadline/render"
	"leadline/render/printfile"
)

// doPlan computes what a print's tiles share, freezes the frame and lets the
// tiles begin. Where tiles are kept from before, only those missing follow.
func (w *worker) doPlan(ctx context.Context, job *rivertype.JobRow, k ticket, o *order) error {
	f, err := o.parse()
	if err != nil {
		return err
	}
	if err := printfile.Try(o.out); err != nil {
		return err // rather than when everything is rendered
	}
	p, err := render.NewPlan(ctx, f, render.Options{Workers: w.o.Slots})
	if err != nil {
		return err
	}
	shared, err := p.Shared()
	if err != nil {
		return err
	}
	frozen, err := text(p.Frame())
	if err != nil {
		return err
	}
	return w.finish(ctx, job, k, result{payload: shared}, func(t tx, o *order) error {
		if _, err := t.exec(ctx, `UPDATE leadline_print SET frame = ?, began = {now} WHERE id = ?`, frozen, o.id); err != nil {
			return err
		}
		if o.state != Planning {
			return nil // cancelled meanwhile; the plan is kept
		}
		return w.q.enter(ctx, t, o, Rendering)
	})
}

// doTile renders one tile.
func (w *worker) doTile(ctx context.Context, job *rivertype.JobRow, k ticket, o *order) error {
	p, err := w.plan(ctx, o.id)
	if err != nil {
		return err
	}
	rect := o.cut().At(k.Index)
	c := render.NewCanvas(rect)
	n, err := p.Tile(ctx, c, rect, o.scale)
	if err != nil {
		return err
	}
	b, err := (&render.Part{Rect: rect, Counts: n, Pix: c.Pix}).Encode()
	if err != nil {
		return err
	}
	look := reduce(o.rect).look(c, p.Space)
	return w.finish(ctx, job, k, result{b, look, n.Pixels}, func(t tx, o *order) error { return w.q.fill(ctx, t, o.id) })
}

// plan is a print's plan, made once a process from what was computed once a
// print. Damage is a *damage.
func (w *worker) plan(ctx context.Context, id int64) (*render.Plan, error) {
	return w.plans.get(ctx, id, func(ctx context.Context) (*render.Plan, error) {
		list, err := w.q.finished(ctx, id, planIndex, planIndex)
		if err != nil {
			return nil, err
		}
		if len(list) == 0 {
			return nil, errLate // it is being made again
		}
		b, err := w.q.payload(ctx, list[0])
		if err == nil {
			var p *render.Plan
			p, err = render.NewPlanFromShared(ctx, b, render.Options{Workers: w.o.Slots})
			if err == nil {
				return p, nil
			}
		}
		if errors.Is(err, errDamaged) || errors.Is(err, render.ErrShared) {
			return nil, &damage{[]ticket{list[0].ticket}, err}
		}
		return nil, fmt.Errorf("making the plan ready: %w", err)
	})
}

// maxPlans bounds the plans in memory; the one longest unused makes room.
const maxPlans = 4

// plans are the plans in a process' memory.
type plans struct {
	mu   sync.Mutex
	all  map[int64]*planEntry
	uses int64
}

// planEntry is one plan, or its making.
type planEntry struct {
	turn chan struct{} // holds one token: whose turn it is to make the plan
	plan *render.Plan
	used int64 // plans.uses at the last use
}

func newPlans() *plans { return &plans{all: map[int64]*planEntry{}} }

// get returns a print's plan; one task at a time makes it where it is missing.
func (p *plans) get(ctx context.Context, id int64, make1 func(context.Context) (*render.Plan, error)) (*render.Plan, error) {
	e := p.entry(id)
	select {
	case e.turn <- struct{}{}:
	case <-ctx.Done():
		return nil, ctx.Err()
	}
	defer func() { <-e.turn }()
	if e.plan != nil {
		return e.plan, nil
	}
	made, err := make1(ctx)
	if err != nil {
		return nil, err
	}
	e.plan = made
	return made, nil
}

// entry finds or makes room for a print's plan.
func (p *plans) entry(id int64) *planEntry {
	p.mu.Lock()
	defer p.mu.Unlock()
	e := p.all[id]
	if e == nil {
		e = &planEntry{turn: make(chan struct{}, 1)}
		p.all[id] = e
	}
	p.uses++
	e.used = p.uses
	for len(p.all) > maxPlans {
		oldest := id
		for other, o := range p.all {
			if o.used < p.all[oldest].used {
				oldest = other
			}
		}
		delete(p.all, oldest) // who is using it goes on with it
	}
	return e
}

func (p *plans) ids() []int64 {
	p.mu.Lock()
	defer p.mu.Unlock()
	ids := make([]int64, 0, len(p.all))
	for id := range p.all {
		ids = append(ids, id)
	}
	return ids
}

func (p *plans) drop(id int64) {
	p.mu.Lock()
	defer p.mu.Unlock()
	delete(p.all, id)
}
