package jobs

import (
	"context"
	"errors"
	"io/fs"
	"sync/atomic"
	"testing"
	"time"
)

// TestLateCommit finishes a tile whose lease has been taken back: it is not
// counted, and the next try is not disturbed.
func TestLateCommit(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		ctx := t.Context()
		id := add(t, q, AddOptions{})
		var once atomic.Bool
		err := q.Work(ctx, WorkOptions{Slots: 1, Drain: true, before: func(_ context.Context, k ticket) {
			if k.Index != 1 || !once.CompareAndSwap(false, true) {
				return
			}
			var self string
			if err := one(ctx, q.e.read(), `SELECT worker FROM leadline_tile WHERE print = ? AND idx = 1`, []any{id}, &self); err != nil {
				t.Error(err)
			}
			if err := q.putBack(ctx, k, held{by: self, rescued: true}); err != nil {
				t.Error(err)
			}
		}})
		if err != nil {
			t.Fatal(err)
		}
		p := show(t, q, id)
		whole(t, q, p)
		if p.Attempts != 9 || p.Rescued != 1 {
			t.Errorf("%d attempts, %d rescued", p.Attempts, p.Rescued)
		}
		w := q.newWorker(WorkOptions{})
		err = w.finish(ctx, nil, ticket{id, 1, 0}, result{[]byte("late"), nil, 1}, nil)
		if !errors.Is(err, errLate) && (q.spool == nil || !errors.Is(err, fs.ErrNotExist)) { // its folder went with the print
			t.Errorf("a late commit: %v", err)
		}
		whole(t, q, show(t, q, id))
	})
}

// TestLostJob has River end jobs behind our backs, one waiting and one running:
// both tiles are done, once.
func TestLostJob(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		ctx := t.Context()
		id := add(t, q, AddOptions{})
		var once atomic.Bool
		err := q.Work(ctx, WorkOptions{Slots: 1, Drain: true, before: func(_ context.Context, k ticket) {
			if k.Index == 1 && once.CompareAndSwap(false, true) {
				if n, err := q.e.read().exec(ctx, `UPDATE river_job SET state = 'discarded', finalized_at = {stamp} WHERE id IN
					(SELECT job FROM leadline_tile WHERE print = ? AND idx IN (1, 4))`, id); err != nil || n != 2 {
					t.Error(n, err)
				}
			}
		}})
		if err != nil {
			t.Fatal(err)
		}
		p := show(t, q, id)
		whole(t, q, p)
		if p.Rescued != 0 || p.Attempts < 9 {
			t.Errorf("%d rescued, %d attempts", p.Rescued, p.Attempts)
		}
	})
}

// TestOtherRelease has prints begun by another release, or under other
// numerics: nobody here touches them.
func TestOtherRelease(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q, older, other := d.open(t), d.open(t), d.open(t)
		older.release, other.numbers = "0.0.9", 7
		ids := []int64{add(t, older, AddOptions{}), add(t, other, AddOptions{})}
		own := add(t, q, AddOptions{Priority: 4})
		if err := q.Work(t.Context(), WorkOptions{Drain: true}); err != nil {
			t.Fatal(err)
		}
		whole(t, q, show(t, q, own))
		for _, id := range ids {
			if p := show(t, q, id); p.State != Queued || p.Attempts != 0 {
				t.Errorf("%+v", p)
			}
			if err := q.Cancel(t.Context(), id); err != nil {
				t.Fatal(err)
			}
			var refused *StateError
			if err := q.Again(t.Context(), id); !errors.As(err, &refused) {
				t.Errorf("again: %v", err)
			}
		}
		if err := other.Again(t.Context(), ids[1]); err != nil {
			t.Error(err)
		}
	})
}

// TestClockSetBack has a queued tile that is due in an hour, as when the clock
// is set back by one.
func TestClockSetBack(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		ctx := t.Context()
		ahead := "datetime('now', 'subsec', '+1 hour')"
		if d.kind == "postgres" {
			ahead = "now() + interval '1 hour'"
		}
		id := add(t, q, AddOptions{})
		var once atomic.Bool
		begun := time.Now()
		err := q.Work(ctx, WorkOptions{Slots: 1, Drain: true, before: func(_ context.Context, k ticket) {
			if k.Index == 0 && once.CompareAndSwap(false, true) {
				if n, err := q.e.read().exec(ctx, `UPDATE river_job SET scheduled_at = `+ahead+` WHERE id IN
					(SELECT job FROM leadline_tile WHERE print = ? AND idx = 4 AND state = 'queued')`, id); err != nil || n != 1 {
					t.Error(n, err)
				}
			}
		}})
		if err != nil {
			t.Fatal(err)
		}
		whole(t, q, show(t, q, id))
		if time.Since(begun) < fillEvery*quick.reap/2 {
			t.Error("the tile never had to wait")
		}
	})
}

// TestReaperAfterSleep has a reaper that could not look for a while: it gives
// every worker the full time anew.
func TestReaperAfterSleep(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		ctx := t.Context()
		w := q.newWorker(WorkOptions{Name: "still"})
		if err := w.beat(ctx); err != nil {
			t.Fatal(err)
		}
		r := newReaper(q, "self")
		alive := func() int {
			if err := r.bury(ctx); err != nil {
				t.Fatal(err)
			}
			list, err := q.Workers(ctx)
			if err != nil {
				t.Fatal(err)
			}
			return len(list)
		}
		past := func(d time.Duration) {
			for id, s := range r.seen {
				r.seen[id] = sighting{s.beat, s.at.Add(-d)}
			}
		}
		if n := alive(); n != 1 {
			t.Fatalf("%d workers", n)
		}
		past(time.Hour)
		r.last = r.last.Add(-time.Hour) // asleep for as long
		if n := alive(); n != 1 {
			t.Error("buried a worker without looking twice")
		}
		past(q.time.silence / 2)
		if err := w.beat(ctx); err != nil {
			t.Fatal(err)
		}
		past(q.time.silence)
		if n := alive(); n != 1 {
			t.Error("buried a worker that gave a sign of life")
		}
		past(q.time.silence)
		if n := alive(); n != 0 {
			t.Error("did not bury a silent worker")
		}
	})
}
