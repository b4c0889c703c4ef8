package jobs

import (
	"context"
	"errors"
	"os"
	"time"
)

func pid() int { return os.Getpid() }

// reaper finds workers that fell silent and tasks that nobody has. Every
// worker has one.
type reaper struct {
	q    *Queue
	self string
	seen map[string]sighting
	last time.Time // of the last pass that could read
	n    int
}

// sighting is when a worker's beat was first seen.
type sighting struct {
	beat int64
	at   time.Time
}

func newReaper(q *Queue, self string) *reaper {
	return &reaper{q: q, self: self, seen: map[string]sighting{}}
}

// fillEvery is the number of passes between looks at whole prints.
const fillEvery = 5

// pass looks once.
func (r *reaper) pass(ctx context.Context) error {
	if err := r.bury(ctx); err != nil {
		return err
	}
	if err := r.rescue(ctx); err != nil {
		return err
	}
	if r.n++; r.n%fillEvery == 0 {
		return errors.Join(r.q.hasten(ctx), r.q.fillAll(ctx))
	}
	return nil
}

// hasten makes due what is queued but lies ahead of the database's clock, which
// must have been set back: River would wait until it is there again.
func (q *Queue) hasten(ctx context.Context) error {
	_, err := q.e.read().exec(ctx, `UPDATE river_job SET scheduled_at = {stamp} WHERE state = 'available'
		AND scheduled_at > {ahead} AND id IN (SELECT job FROM leadline_tile WHERE state = 'queued')`)
	return err
}

// bury removes the leases that have not changed for too long. A time in which
// this process could not look (it was stopped, or the database was away) counts
// as one pass.
func (r *reaper) bury(ctx context.Context) error {
	now := time.Now()
	if blind := now.Sub(r.last) - r.q.time.reap; blind > 2*r.q.time.reap+r.q.time.beat {
		for id, s := range r.seen {
			r.seen[id] = sighting{s.beat, s.at.Add(blind)}
		}
	}
	var silent []string
	alive := map[string]sighting{}
	err := each(ctx, r.q.e.read(), `SELECT id, beat FROM leadline_worker`, nil, func(scan func(...any) error) error {
		var id string
		s := sighting{at: now}
		if err := scan(&id, &s.beat); err != nil {
			return err
		}
		if old, known := r.seen[id]; known && old.beat == s.beat {
			s = old
		}
		alive[id] = s
		if id != r.self && now.Sub(s.at) >= r.q.time.silence {
			silent = append(silent, id)
		}
		return nil
	})
	if err != nil {
		return err
	}
	r.seen, r.last = alive, now
	for _, id := range silent {
		if _, err := r.q.e.read().exec(ctx, `DELETE FROM leadline_worker WHERE id = ? AND beat = ?`, id, alive[id].beat); err != nil {
			clear(r.seen) // nobody could write a beat either, it may be
			return err
		}
		r.q.log.Warn("a worker fell silent", "worker", id)
	}
	return nil
}

// rescue puts back tasks whose worker is gone, and those that stand as queued
// though River will not hand them out.
func (r *reaper) rescue(ctx context.Context) error {
	type lost struct {
		ticket
		worker string
	}
	var all []lost
	read := func(scan func(...any) error) error {
		var l lost
		err := scan(&l.Print, &l.Index, &l.Try, &l.worker)
		all = append(all, l)
		return err
	}
	err := each(ctx, r.q.e.read(), `SELECT print, idx, try, worker FROM leadline_tile
		WHERE state = 'running' AND worker NOT IN (SELECT id FROM leadline_worker)`, nil, read)
	if err != nil {
		return err
	}
	err = each(ctx, r.q.e.read(), `SELECT t.print, t.idx, t.try, '' FROM leadline_tile t LEFT JOIN river_job j ON j.id = t.job
		WHERE t.state = 'queued' AND (j.id IS NULL OR j.state NOT IN ('available', 'pending', 'scheduled', 'running')
		OR (j.state = 'running' AND {by} NOT IN (SELECT id FROM leadline_worker)))`, nil, read)
	if err != nil {
		return err
	}
	var errs []error
	for _, l := range all {
		errs = append(errs, r.q.putBack(ctx, l.ticket, held{by: l.worker, discard: true, rescued: l.worker != ""}))
	}
	return errors.Join(errs...)
}

// fillAll queues what unfinished prints are waiting for, should anything have
// been missed.
func (q *Queue) fillAll(ctx context.Context) error {
	var ids []int64
	err := each(ctx, q.e.read(), `SELECT id FROM leadline_print WHERE paused = 0
		AND state IN ('queued', 'planning', 'rendering', 'assembling')`, nil, func(scan func(...any) error) error {
		var id int64
		err := scan(&id)
		ids = append(ids, id)
		return err
	})
	for _, id := range ids {
		err = errors.Join(err, q.e.do(ctx, func(t tx) error { return q.fill(ctx, t, id) }))
	}
	return err
}
