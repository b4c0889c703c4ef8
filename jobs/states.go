package jobs

import (
	"context"
	"fmt"
)

// StateError refuses a change that a print's state does not allow.
type StateError struct {
	What, Cure string
}

func (e *StateError) Error() string { return e.What }

// Hint says what can be done instead.
func (e *StateError) Hint() string { return e.Cure }

// change loads and holds a print, and changes it.
func (q *Queue) change(ctx context.Context, id int64, f func(tx, *order) error) error {
	return q.e.do(ctx, func(t tx) error {
		o, err := load(ctx, t, id, "{lock}")
		if err != nil {
			return err
		}
		return f(t, o)
	})
}

// Pause stops the work on a print until Resume. Its running tiles are dropped
// and begun again later; finished ones are kept. Pausing twice is no error.
func (q *Queue) Pause(ctx context.Context, id int64) error {
	return q.change(ctx, id, func(t tx, o *order) error {
		if o.state.over() {
			return &StateError{fmt.Sprintf("print %d is %s and cannot be paused", id, o.state), "only a print that is still to be worked on can be"}
		}
		_, err := t.exec(ctx, `UPDATE leadline_print SET paused = 1 WHERE id = ?`, id)
		return err
	})
}

// Resume goes on with a paused print. Resuming one that is not paused is no
// error.
func (q *Queue) Resume(ctx context.Context, id int64) error {
	return q.change(ctx, id, func(t tx, o *order) error {
		if o.state.over() {
			return &StateError{fmt.Sprintf("print %d is %s and cannot be resumed", id, o.state), "queue again begins a failed or cancelled print again"}
		}
		if !o.paused {
			return nil
		}
		if _, err := t.exec(ctx, `UPDATE leadline_print SET paused = 0, began = {now} WHERE id = ?`, id); err != nil {
			return err
		}
		return q.fill(ctx, t, id)
	})
}

// Cancel ends the work on a print. Its finished tiles are kept for Again.
// Cancelling twice is no error.
func (q *Queue) Cancel(ctx context.Context, id int64) error {
	return q.change(ctx, id, func(t tx, o *order) error {
		if o.state == Done || o.state == Failed {
			return &StateError{fmt.Sprintf("print %d is %s and cannot be cancelled", id, o.state), "nothing of it is being worked on"}
		}
		if o.state == Cancelled {
			return nil
		}
		_, err := t.exec(ctx, `UPDATE leadline_print SET state = ?, paused = 0, ended = {now} WHERE id = ?`, string(Cancelled), id)
		return err
	})
}

// Again goes on with a failed or cancelled print from what is kept of it. A
// print that another release or other numerics began is refused.
func (q *Queue) Again(ctx context.Context, id int64) error {
	return q.change(ctx, id, func(t tx, o *order) error {
		if o.state != Failed && o.state != Cancelled {
			return &StateError{fmt.Sprintf("print %d is %s: there is nothing to begin again", id, o.state), "only a failed or cancelled print can be begun again"}
		}
		if o.release != q.release || o.number != q.numbers {
			return &StateError{fmt.Sprintf("print %d was begun by release %s with numerics %d; this is %s with %d",
				id, o.release, o.number, q.release, q.numbers), "use the release that began it, or add the frame anew"}
		}
		if _, err := t.exec(ctx, `UPDATE leadline_tile SET faults = 0 WHERE print = ?`, id); err != nil {
			return err
		}
		if _, err := t.exec(ctx, `DELETE FROM leadline_loss WHERE print = ?`, id); err != nil {
			return err
		}
		if _, err := t.exec(ctx, `UPDATE leadline_print SET paused = 0, began = {now} WHERE id = ?`, id); err != nil {
			return err
		}
		planned, err := isPlanned(ctx, t, id)
		if err != nil {
			return err
		}
		if planned {
			return q.enter(ctx, t, o, Rendering) // and on to the assembly where all tiles are done
		}
		return q.enter(ctx, t, o, Queued)
	})
}

// isPlanned says whether a print's plan is kept.
func isPlanned(ctx context.Context, c conn, id int64) (bool, error) {
	var n int
	err := one(ctx, c, `SELECT count(*) FROM leadline_tile WHERE print = ? AND idx = ? AND state = 'done'`, []any{id, planIndex}, &n)
	return n > 0, err
}

// Move gives a print another priority; prints of one priority share the
// workers. Tiles that are being rendered are not disturbed.
func (q *Queue) Move(ctx context.Context, id int64, priority int) error {
	if err := checkPriority(priority); err != nil {
		return err
	}
	return q.change(ctx, id, func(t tx, o *order) error {
		if o.state.over() {
			return &StateError{fmt.Sprintf("print %d is %s and cannot be moved", id, o.state), "only a print that is still to be worked on can be"}
		}
		if _, err := t.exec(ctx, `UPDATE leadline_print SET priority = ? WHERE id = ?`, priority, id); err != nil {
			return err
		}
		_, err := t.exec(ctx, `UPDATE river_job SET priority = ? WHERE state = 'available' AND id IN
			(SELECT job FROM leadline_tile WHERE print = ? AND state = 'queued' AND idx <> ?)`, priority, id, assemblyIndex)
		return err
	})
}

// Remove takes a print that is over off the list, with all that is kept of it
// for Again. What it delivered stays.
func (q *Queue) Remove(ctx context.Context, id int64) error {
	err := q.change(ctx, id, func(t tx, o *order) error {
		if !o.state.over() {
			return &StateError{fmt.Sprintf("print %d is %s and cannot be removed", id, o.state), "queue cancel gives it up first"}
		}
		_, err := t.exec(ctx, `DELETE FROM leadline_print WHERE id = ?`, id) // and its rows in the other tables
		return err
	})
	if err == nil && q.spool != nil {
		err = q.spool.dropPrint(id) // a worker would tidy it up, some time
	}
	return err
}

// fail ends a print with a reason and, where somebody knows it, a cure.
func fail(ctx context.Context, t tx, id int64, reason, hint string) error {
	_, err := t.exec(ctx, `UPDATE leadline_print SET state = ?, paused = 0, reason = ?, hint = ?, ended = {now}
		WHERE id = ? AND state NOT IN ('done', 'cancelled', 'failed')`, string(Failed), reason, hint, id)
	return err
}
