package jobs

import (
	"context"
	"errors"
	"sync/atomic"
	"testing"
	"time"
)

// TestLateLimits has a print planned where nothing is limited, then comes a
// worker whose owner allows less: it does not work on it, and what is done stays.
func TestLateLimits(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		for at, done := range map[int]int{2: 2, assemblyIndex: 6} {
			id := add(t, q, AddOptions{})
			g := newGate(at)
			stop := start(t, q, WorkOptions{Slots: 1, before: g.before})
			<-g.entered
			stop()
			for limit, what := range map[Limits]string{{Pixels: 1535}: "1536 pixels", {Iterations: 299}: "300 iterations", {Memory: 1000}: "memory"} {
				if err := q.Work(t.Context(), WorkOptions{Slots: 1, Drain: true, Limits: limit}); err != nil {
					t.Fatal(err)
				}
				failed(t, show(t, q, id), done, what, "limits are higher")
				again(t, q, id)
			}
			g.open.Store(true)
			if err := q.Work(t.Context(), WorkOptions{Slots: 1, Drain: true, before: g.before,
				Limits: Limits{Pixels: 1536, Iterations: 300, Memory: 1 << 20}}); err != nil {
				t.Fatal(err)
			}
			whole(t, q, show(t, q, id))
			if g.count(planIndex) != 1 || g.count(0) != 1 {
				t.Errorf("the plan began %d times, tile 0 %d times", g.count(planIndex), g.count(0))
			}
		}
	})
}

// TestFrameSpoiledLate spoils the frame's text when the plan is made: the plan
// holds all that the tiles need.
func TestFrameSpoiledLate(t *testing.T) {
	t.Parallel()
	d := onDesk(t)
	q := d.open(t)
	id := add(t, q, AddOptions{})
	r := newCounter(2, func() {
		if n, err := q.e.read().exec(t.Context(), `UPDATE leadline_print SET frame = '{' WHERE id = ?`, id); err != nil || n != 1 {
			t.Error(n, err)
		}
	})
	whole(t, q, drained(t, q, id, r.before))
	r.expect(t, 1, 1, 1, 1, 1, 1, 1)
	// Where it is needed, to hold it to limits, the print fails with what is wrong.
	id = add(t, q, AddOptions{})
	r = newCounter(2, func() {
		if n, err := q.e.read().exec(t.Context(), `UPDATE leadline_print SET frame = '{"format":"leadline.frame/1"}' WHERE id = ?`, id); err != nil || n != 1 {
			t.Error(n, err)
		}
	})
	if err := q.Work(t.Context(), WorkOptions{Slots: 1, Drain: true, before: r.before, Limits: Limits{Pixels: 1 << 30}}); err != nil {
		t.Fatal(err)
	}
	failed(t, show(t, q, id), 3, "set", "correct the frame")
}

// TestStrayJob has River count a job as running here that never arrived, as
// when the answer to its question was lost.
func TestStrayJob(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		ctx := t.Context()
		self := "jsonb_array(?)"
		if d.kind == "postgres" {
			self = "ARRAY[cast(? AS text)]"
		}
		id := add(t, q, AddOptions{})
		r := newCounter(1, func() {
			var id string
			if err := one(ctx, q.e.read(), `SELECT id FROM leadline_worker`, nil, &id); err != nil {
				t.Error(err)
			}
			if n, err := q.e.read().exec(ctx, `UPDATE river_job SET state = 'running', attempted_at = {stamp}, attempted_by = `+self+`
				WHERE id IN (SELECT job FROM leadline_tile WHERE idx = 4 AND state = 'queued')`, id); err != nil || n != 1 {
				t.Error(n, err)
			}
		})
		p := drained(t, q, id, r.before)
		whole(t, q, p)
		r.expect(t, 1, 1, 1, 1, 1, 1, 1)
		if p.Rescued != 0 || p.Attempts != 8 {
			t.Errorf("%d rescued, %d attempts", p.Rescued, p.Attempts)
		}
	})
}

// TestRefusedWorker starts a worker on a database that is there and may not be
// written: it ends at once.
func TestRefusedWorker(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		id := add(t, q, AddOptions{})
		work, reader := "PRAGMA query_only = 0", "PRAGMA query_only = 1" // there is one connection
		if d.kind == "postgres" {
			work, reader = "ALTER TABLE away RENAME TO leadline_worker", "ALTER TABLE leadline_worker RENAME TO away"
		}
		if _, err := q.e.read().exec(t.Context(), reader); err != nil {
			t.Fatal(err)
		}
		begun := time.Now()
		err := q.Work(t.Context(), WorkOptions{Drain: true})
		if after := time.Since(begun); err == nil || hintOf(err) == "" || after > startTime/2 {
			t.Errorf("after %v: %v", after, err)
		}
		if _, err := q.e.read().exec(t.Context(), work); err != nil {
			t.Fatal(err)
		}
		whole(t, q, drained(t, q, id, nil))
	})
}

// failing is an engine whose transactions fail for a while.
type failing struct {
	engine
	left atomic.Int32
}

func (f *failing) do(ctx context.Context, g func(tx) error) error {
	if f.left.Add(-1) >= 0 {
		return &storeError{"opening a transaction", errors.New("the database is away")}
	}
	return f.engine.do(ctx, g)
}

// TestTakingWaits has the database away when tasks are taken: they are neither
// dropped nor begun twice, and River never hears of it.
func TestTakingWaits(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		id := add(t, q, AddOptions{})
		f := &failing{engine: q.e}
		q.e = f
		f.left.Store(3)
		r := newCounter(3, func() { f.left.Store(3) }) // when it is to be finished
		p := drained(t, q, id, r.before)
		whole(t, q, p)
		r.expect(t, 1, 1, 1, 1, 1, 1, 1)
		var n int
		if err := one(t.Context(), q.e.read(), `SELECT count(*) FROM river_job WHERE state <> 'completed'`, nil, &n); err != nil || n != 0 || p.Attempts != 8 {
			t.Errorf("%d jobs of River's did not end well, %d attempts, %v", n, p.Attempts, err)
		}
	})
}
