package jobs

import (
	"context"
	"errors"
	"maps"
	"time"
)

// A worker's lease is its row in leadline_worker, which it must change every
// few seconds. Others judge it by their own monotonic clocks: a row that has
// not changed for timing.silence is removed, and what its worker held is put
// back. No wall clock is compared, so a clock that jumps takes no lease.

const (
	// tidyEvery is how often a worker clears the spool of what others removed.
	tidyEvery = 10 * time.Minute
	// roundTime bounds a round of queries: a connection on which no answer comes
	// is given up, and the next round makes another.
	roundTime = 15 * time.Second
)

// keep keeps the lease until the context ends, or the queue is drained.
func (w *worker) keep(ctx context.Context) error {
	r := &rounds{reaper: newReaper(w.q, w.id), strays: map[ticket]bool{}, beat: time.Now(), tidied: time.Now()}
	tick := time.NewTicker(w.q.time.watch)
	defer tick.Stop()
	for {
		select {
		case <-ctx.Done():
			return ctx.Err()
		case <-tick.C:
		}
		err := w.round(ctx, r)
		if err != nil {
			w.q.log.Warn("keeping the lease", "error", err)
		}
		if err == nil && w.o.Drain {
			if left, err := w.left(ctx); err == nil && !left {
				return nil
			}
		}
	}
}

// rounds is what keep has in mind between rounds.
type rounds struct {
	reaper             *reaper
	strays             map[ticket]bool
	beat, reap, tidied time.Time // when that was done last
}

// round does what is due.
func (w *worker) round(ctx context.Context, r *rounds) error {
	ctx, cancel := context.WithTimeout(ctx, roundTime)
	defer cancel()
	t := w.q.time
	var errs []error
	if time.Since(r.beat) >= t.beat {
		r.beat = time.Now()
		errs = append(errs, w.beat(ctx))
	}
	errs = append(errs, w.watch(ctx))
	if time.Since(r.reap) >= t.reap {
		r.reap = time.Now()
		errs = append(errs, r.reaper.pass(ctx), w.stray(ctx, r.strays))
	}
	if time.Since(r.tidied) >= tidyEvery {
		r.tidied = time.Now()
		w.q.tidy(ctx)
	}
	return errors.Join(errs...)
}

// beat gives a sign of life, and registers the worker where it is not.
func (w *worker) beat(ctx context.Context) error {
	w.beats++
	_, err := w.q.e.read().exec(ctx, `INSERT INTO leadline_worker (id, name, host, pid, slots, release, numerics, beat, started, seen)
		VALUES (?, ?, ?, ?, ?, ?, ?, ?, {now}, {now}) ON CONFLICT (id) DO UPDATE SET beat = excluded.beat, seen = excluded.seen`,
		w.id, w.o.Name, w.host, pid(), w.o.Slots, w.q.release, w.q.numbers, w.beats)
	return err
}

// watch stops the tasks in hand that are not wanted any more: their print was
// paused or ended, or another worker has them. Tasks that the database says
// are in hand and are not are put back.
func (w *worker) watch(ctx context.Context) error {
	wanted, leased := map[ticket]bool{}, map[ticket]bool{}
	before := w.inHand()
	err := each(ctx, w.q.e.read(), `SELECT t.print, t.idx, t.try,
		CASE WHEN p.paused = 0 AND p.state IN ('planning', 'rendering', 'assembling') THEN 1 ELSE 0 END
		FROM leadline_tile t JOIN leadline_print p ON p.id = t.print WHERE t.worker = ? AND t.state = 'running'`,
		[]any{w.id}, func(scan func(...any) error) error {
			var k ticket
			var ok int
			err := scan(&k.Print, &k.Index, &k.Try, &ok)
			leased[k], wanted[k] = true, ok != 0
			return err
		})
	if err != nil {
		return err
	}
	w.mu.Lock()
	var orphans []ticket
	for _, k := range before {
		if t := w.held[k]; t != nil && !wanted[k] {
			t.cancel(errGone)
		}
	}
	for k := range leased {
		if w.held[k] == nil {
			orphans = append(orphans, k)
		}
	}
	w.mu.Unlock()
	for _, k := range orphans {
		if e := w.q.putBack(ctx, k, held{by: w.id, discard: true}); e != nil {
			err = e
		}
	}
	return errors.Join(err, w.forget(ctx))
}

// stray puts back the tasks that River gave to this worker and that never
// arrived, as when the database's answer is lost on the way: River would count
// them as running for ever. A task must be found so twice, as it may just be
// arriving; strays holds those found before.
func (w *worker) stray(ctx context.Context, strays map[ticket]bool) error {
	all, err := tickets(ctx, w.q.e.read(), `SELECT t.print, t.idx, t.try FROM leadline_tile t JOIN river_job j ON j.id = t.job
		WHERE t.state = 'queued' AND j.state = 'running' AND {by} = ?`, w.id)
	if err != nil {
		return err
	}
	before := maps.Clone(strays)
	clear(strays)
	for _, k := range all {
		switch {
		case w.holds(k):
		case before[k]:
			err = errors.Join(err, w.q.putBack(ctx, k, held{discard: true}))
		default:
			strays[k] = true
		}
	}
	return err
}

func (w *worker) holds(k ticket) bool {
	w.mu.Lock()
	defer w.mu.Unlock()
	return w.held[k] != nil
}

// inHand lists the tasks whose lease is entered.
func (w *worker) inHand() []ticket {
	w.mu.Lock()
	defer w.mu.Unlock()
	var all []ticket
	for k, t := range w.held {
		if t.begun {
			all = append(all, k)
		}
	}
	return all
}

// forget releases the plans of prints that are over.
func (w *worker) forget(ctx context.Context) error {
	for _, id := range w.plans.ids() {
		var n int
		err := one(ctx, w.q.e.read(), `SELECT count(*) FROM leadline_print WHERE id = ? AND paused = 0
			AND state IN ('queued', 'planning', 'rendering', 'assembling')`, []any{id}, &n)
		if err != nil {
			return err
		}
		if n == 0 {
			w.plans.drop(id)
		}
	}
	return nil
}

// left says whether a print is left that this worker could work on.
func (w *worker) left(ctx context.Context) (bool, error) {
	var n int
	err := one(ctx, w.q.e.read(), `SELECT count(*) FROM leadline_print WHERE release = ? AND numerics = ? AND paused = 0
		AND state IN ('queued', 'planning', 'rendering', 'assembling')`, []any{w.q.release, w.q.numbers}, &n)
	return n > 0, err
}
