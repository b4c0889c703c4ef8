package jobs

import (
	"context"
	"errors"
	"fmt"
)

// held says how a task is held that is to be put back.
type held struct {
	by      string // the worker that has it; "": nobody, it is queued
	fault   string // what the task did to its worker; "": nothing
	rescued bool   // the worker is gone, whether or not the task was why
	discard bool   // its River job will not end by itself
}

// lay ends a worker's try at a task and leaves it idle; 0 where the worker has
// it no longer.
func lay(ctx context.Context, t tx, k ticket, by string) (int64, error) {
	state := "running"
	if by == "" {
		state = "queued"
	}
	return t.exec(ctx, `UPDATE leadline_tile SET state = 'idle', try = try + 1, worker = ''
		WHERE print = ? AND idx = ? AND try = ? AND state = ? AND worker = ?`, k.Print, k.Index, k.Try, state, by)
}

// putBack ends a try and queues the task again, in front, unless the print does
// not want it now. A print whose task was at fault too often fails.
func (q *Queue) putBack(ctx context.Context, k ticket, h held) error {
	err := q.change(ctx, k.Print, func(t tx, o *order) error {
		if h.discard {
			if err := discard(ctx, t, k); err != nil {
				return err
			}
		}
		n, err := lay(ctx, t, k, h.by)
		if err != nil || n == 0 {
			return err
		}
		var failed bool
		switch {
		case h.rescued:
			failed, err = lose(ctx, t, k, h.by)
		case h.fault != "":
			failed, err = blame(ctx, t, k, h.fault)
		}
		if failed || err != nil {
			return err
		}
		return q.putFirst(ctx, t, o, k)
	})
	var none *NoPrintError
	if errors.As(err, &none) {
		return nil
	}
	return err
}

// putFirst queues a laid task before all others, where it is wanted.
func (q *Queue) putFirst(ctx context.Context, t tx, o *order, k ticket) error {
	if k.Index == planIndex {
		if _, err := t.exec(ctx, `UPDATE leadline_print SET state = ? WHERE id = ? AND state = ?`, string(Queued), k.Print, string(Planning)); err != nil {
			return err
		}
	}
	if !o.fits(k) {
		return nil
	}
	k.Try++
	return q.put(ctx, t, o, 1, k)
}

// lose counts a task whose worker was lost with it. Workers are lost for
// reasons of their own, too. A task is held to be the cause, and its print
// fails, where it was in hand at maxFaults losses and no other worker of this
// print was lost meanwhile or shortly before; where others were, at twice as
// many that are half of all; in any case at maxLosses.
func lose(ctx context.Context, t tx, k ticket, worker string) (failed bool, err error) {
	if _, err := t.exec(ctx, `UPDATE leadline_print SET rescued = rescued + 1 WHERE id = ?`, k.Print); err != nil {
		return false, err
	}
	if _, err := t.exec(ctx, `INSERT INTO leadline_loss (print, idx, worker) VALUES (?, ?, ?)`, k.Print, k.Index, worker); err != nil {
		return false, err
	}
	var own, all int
	err = one(ctx, t, `SELECT count(DISTINCT CASE WHEN idx = ? THEN worker END), count(DISTINCT worker) FROM leadline_loss
		WHERE print = ? AND id >= (SELECT min(id) FROM leadline_loss WHERE print = ? AND idx = ?) - ?`,
		[]any{k.Index, k.Print, k.Print, k.Index, lossesBefore}, &own, &all)
	alone, often := own >= maxFaults && own == all, own >= 2*maxFaults && 2*own >= all
	if err != nil || !(alone || often || own >= maxLosses) {
		return false, err
	}
	return true, fail(ctx, t, k.Print, fmt.Sprintf("%s was in hand %d times when its worker was lost", k, own), faultHint)
}

// blame counts a fault of a task, and fails its print where there are too many.
func blame(ctx context.Context, t tx, k ticket, reason string) (failed bool, err error) {
	var n int
	err = one(ctx, t, `UPDATE leadline_tile SET faults = faults + 1 WHERE print = ? AND idx = ? RETURNING faults`,
		[]any{k.Print, k.Index}, &n)
	if err != nil || n < maxFaults {
		return false, err
	}
	return true, fail(ctx, t, k.Print, fmt.Sprintf("%s failed %d times: %s", k, n, reason), faultHint)
}

const faultHint = "queue again goes on from the tiles that are kept; if the same task fails again report the frame"

// discard ends the River job of a task whose worker will not.
func discard(ctx context.Context, t tx, k ticket) error {
	_, err := t.exec(ctx, `UPDATE river_job SET state = 'discarded', finalized_at = {stamp}
		WHERE state NOT IN ('completed', 'cancelled', 'discarded') AND id IN
		(SELECT job FROM leadline_tile WHERE print = ? AND idx = ? AND try = ?)`, k.Print, k.Index, k.Try)
	return err
}

// damage names kept payloads that cannot be used.
type damage struct {
	tickets []ticket
	err     error
}

func (e *damage) Error() string { return fmt.Sprintf("%s: %v", e.tickets[0], e.err) }
func (e *damage) Unwrap() error { return e.err }

// spoil ends a task that found damage: what is damaged is computed again, and
// then the task is done again.
func (q *Queue) spoil(ctx context.Context, k ticket, by string, d *damage) error {
	return q.change(ctx, k.Print, func(t tx, o *order) error {
		n, err := lay(ctx, t, k, by)
		if err != nil || n == 0 {
			return err
		}
		state := Rendering
		for _, bad := range d.tickets {
			if bad.Index == planIndex {
				state = Queued
			}
			n, err := t.exec(ctx, `UPDATE leadline_tile SET state = 'idle', try = try + 1
				WHERE print = ? AND idx = ? AND try = ? AND state = 'done'`, bad.Print, bad.Index, bad.Try)
			if err != nil {
				return err
			}
			if n == 0 {
				continue // another task found it first
			}
			if failed, err := blame(ctx, t, bad, d.err.Error()); failed || err != nil {
				return err
			}
		}
		if o.state.over() {
			return nil
		}
		if o.state == Queued || o.state == Planning {
			state = o.state // the plan is being made again already
		}
		return q.enter(ctx, t, o, state)
	})
}
