package jobs

import (
	"context"
	"errors"
	"fmt"
	"runtime/debug"
	"time"

	"github.com/riverqueue/river/rivertype"

	"leadline/render/frame"
	"leadline/render/printfile"
)

// Why a task stops before its end.
var (
	errStopped = errors.New("the worker stops")
	errGone    = errors.New("the task is no longer wanted here")
	errLate    = errors.New("another try has taken the task over")
	errDamaged = errors.New("what was kept is damaged")
)

// maxFaults is how often a task may panic, be found damaged or, by the rule of
// lose, end its worker before its print fails; maxLosses how often its worker
// may be lost whatever happens to others.
const (
	maxFaults = 3
	maxLosses = 12
	// lossesBefore is how many losses before a task's first are looked at.
	lossesBefore = 8
)

// panicError is a panic in a task.
type panicError struct{ value any }

func (e *panicError) Error() string { return fmt.Sprintf("panic: %v", e.value) }

// do does one River job. It always ends well for River: what went wrong is
// written into our tables.
func (w *worker) do(ctx context.Context, job *rivertype.JobRow, k ticket) error {
	ctx, cancel := context.WithCancelCause(ctx)
	defer cancel(nil)
	if !w.hold(k, cancel) {
		return nil
	}
	defer w.drop(k)
	var o *order
	err := persist(ctx, func() (err error) { // River would give a job up whose taking fails
		o, err = w.take(ctx, k)
		return err
	})
	if err != nil || o == nil {
		return err
	}
	w.begun(k)
	if err = w.run(ctx, job, k, o); err == nil {
		return nil
	}
	end, stop := context.WithTimeout(context.WithoutCancel(ctx), stopTime)
	defer stop()
	return w.account(end, ctx.Err() != nil, k, err)
}

// run does a task, whatever its kind.
func (w *worker) run(ctx context.Context, job *rivertype.JobRow, k ticket, o *order) (err error) {
	defer func() {
		if v := recover(); v != nil {
			w.q.log.Error("panic", "task", k.String(), "value", v, "stack", string(debug.Stack()))
			err = &panicError{v}
		}
	}()
	if w.o.before != nil {
		w.o.before(ctx, k)
	}
	if err := ctx.Err(); err != nil {
		return err
	}
	if err := w.allowed(o); err != nil {
		return err
	}
	switch k.Index {
	case planIndex:
		return w.doPlan(ctx, job, k, o)
	case assemblyIndex:
		return w.doAssembly(ctx, job, k, o)
	}
	return w.doTile(ctx, job, k, o)
}

// allowed holds a print to this worker's limits: another with higher ones may
// have planned it.
func (w *worker) allowed(o *order) error {
	if w.o.Limits == (Limits{}) {
		return nil
	}
	f, err := o.parse()
	if err != nil {
		return err
	}
	return w.o.Limits.check(f, o, w.o.Slots)
}

// account writes down how a task failed.
func (w *worker) account(ctx context.Context, stopped bool, k ticket, err error) error {
	var damage *damage
	var panicked *panicError
	var store *storeError
	q := w.q
	switch {
	case errors.Is(err, errLate):
		return nil
	case errors.As(err, &damage):
		return q.spoil(ctx, k, w.id, damage)
	case stopped, errors.Is(err, errGone), errors.Is(err, errNotRunning), errors.As(err, &store):
		return q.putBack(ctx, k, held{by: w.id})
	case errors.As(err, &panicked):
		return q.putBack(ctx, k, held{by: w.id, fault: err.Error()})
	}
	w.say("print %d failed: %v", k.Print, err)
	return q.e.do(ctx, func(t tx) error {
		if _, err := load(ctx, t, k.Print, "{lock}"); err != nil {
			return err
		}
		n, e := lay(ctx, t, k, w.id)
		if e != nil || n == 0 {
			return e
		}
		return fail(ctx, t, k.Print, err.Error(), cure(err))
	})
}

// cure is the hint of a failed print.
func cure(err error) string {
	var file *printfile.WriteError
	if h := hintOf(err); errors.As(err, &file) {
		return h + "; then queue again goes on from the tiles that are kept"
	} else if h != "" {
		return h
	}
	var faults frame.Faults
	if errors.As(err, &faults) {
		return "correct the frame and add it again"
	}
	return "when the cause is gone, queue again goes on from the tiles that are kept"
}

// hintOf finds the cure that the failing package knows.
func hintOf(err error) string {
	var h interface{ Hint() string }
	if errors.As(err, &h) {
		return h.Hint()
	}
	return ""
}

// fits says whether a print's state asks for a task.
func (o *order) fits(k ticket) bool {
	if o.paused {
		return false
	}
	switch k.Index {
	case planIndex:
		return o.state == Queued || o.state == Planning
	case assemblyIndex:
		return o.state == Assembling
	}
	return o.state == Rendering
}

// take enters the lease of a task; no order where it is not to be done.
func (w *worker) take(ctx context.Context, k ticket) (o *order, err error) {
	err = w.q.e.do(ctx, func(t tx) error {
		o, err = load(ctx, t, k.Print, "{lock}")
		if err != nil {
			return err
		}
		if !o.fits(k) {
			o = nil
			_, err := t.exec(ctx, `UPDATE leadline_tile SET state = 'idle', try = try + 1
				WHERE print = ? AND idx = ? AND try = ? AND state = 'queued'`, k.Print, k.Index, k.Try)
			return err
		}
		n, err := t.exec(ctx, `UPDATE leadline_tile SET state = 'running', worker = ?, started = {now}
			WHERE print = ? AND idx = ? AND try = ? AND state = 'queued'`, w.id, k.Print, k.Index, k.Try)
		if err != nil || n == 0 {
			o = nil
			return err
		}
		state := o.state
		if k.Index == planIndex {
			state = Planning
		}
		_, err = t.exec(ctx, `UPDATE leadline_print SET attempts = attempts + 1, state = ? WHERE id = ?`, string(state), k.Print)
		return err
	})
	var none *NoPrintError
	if errors.As(err, &none) {
		return nil, nil
	}
	return o, err
}

// persist repeats a write while the database is away, as long as the task is
// wanted.
func persist(ctx context.Context, f func() error) error {
	for wait := 50 * time.Millisecond; ; wait = min(2*wait, 2*time.Second) {
		err := f()
		var store *storeError
		if err == nil || !errors.As(err, &store) || ctx.Err() != nil {
			return err
		}
		select {
		case <-time.After(wait):
		case <-ctx.Done():
			return err
		}
	}
}
