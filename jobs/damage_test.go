package jobs

import (
	"context"
	"os"
	"path/filepath"
	"testing"
)

// harm damages what is kept of a task, wherever it is kept.
func harm(t *testing.T, q *Queue, id int64, index int, how func([]byte) []byte) {
	t.Helper()
	ctx := context.WithoutCancel(t.Context())
	list, err := q.finished(ctx, id, index, index)
	if err != nil || len(list) != 1 {
		t.Errorf("task %d: %v, %v", index, list, err)
		return
	}
	b, err := q.payload(ctx, list[0])
	if err != nil {
		t.Error(err)
		return
	}
	b = how(b)
	if q.spool == nil {
		_, err = q.e.read().exec(ctx, `UPDATE leadline_payload SET data = ? WHERE print = ? AND idx = ?`, b, id, index)
	} else if path := filepath.Join(q.spool.dir, list[0].file); b == nil {
		err = os.Remove(path)
	} else {
		err = os.WriteFile(path, b, 0o600)
	}
	if err != nil {
		t.Error(err)
	}
}

func flip(b []byte) []byte { b[len(b)/2] ^= 4; return b }
func cut(b []byte) []byte  { return b[:len(b)/2] }

// TestDamagedTiles damages tiles before they are assembled: those are rendered
// again, and no others.
func TestDamagedTiles(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		id := add(t, q, AddOptions{})
		g := newGate(-9)
		err := q.Work(t.Context(), WorkOptions{Slots: 1, Drain: true, before: func(ctx context.Context, k ticket) {
			if k.Index == assemblyIndex && g.count(assemblyIndex) == 0 {
				harm(t, q, id, 1, flip)
				harm(t, q, id, 4, cut)
				if q.spool != nil {
					harm(t, q, id, 5, func([]byte) []byte { return nil }) // the file is gone
				}
			}
			g.before(ctx, k)
		}})
		if err != nil {
			t.Fatal(err)
		}
		whole(t, q, show(t, q, id))
		for i, want := range []int{1, 2, 1, 1, 2, 1} {
			if i == 5 && q.spool != nil {
				want = 2
			}
			if g.count(i) != want {
				t.Errorf("tile %d was rendered %d times, not %d", i, g.count(i), want)
			}
		}
	})
}

// TestExchangedTiles puts one tile's bytes in the place of another's, checksum
// and all.
func TestExchangedTiles(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		id := add(t, q, AddOptions{})
		ctx := t.Context()
		done := false
		err := q.Work(ctx, WorkOptions{Slots: 1, Drain: true, before: func(_ context.Context, k ticket) {
			if k.Index != assemblyIndex || done {
				return
			}
			done = true
			if q.spool == nil {
				_, _ = q.e.read().exec(ctx, `UPDATE leadline_payload SET data = (SELECT data FROM leadline_payload WHERE print = ? AND idx = 0) WHERE print = ? AND idx = 3`, id, id)
			}
			if n, err := q.e.read().exec(ctx, `UPDATE leadline_tile SET file = (SELECT file FROM leadline_tile WHERE print = ? AND idx = 0),
				sum = (SELECT sum FROM leadline_tile WHERE print = ? AND idx = 0) WHERE print = ? AND idx = 3`, id, id, id); err != nil || n != 1 {
				t.Error(n, err)
			}
		}})
		if err != nil {
			t.Fatal(err)
		}
		p := show(t, q, id)
		whole(t, q, p)
		if p.Attempts != 8+2 {
			t.Errorf("%d attempts", p.Attempts)
		}
	})
}

// TestDamagedPlan damages what the tiles share: it is computed again, and the
// tiles that are done stay.
func TestDamagedPlan(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		id := add(t, q, AddOptions{})
		g := newGate(2)
		stop := start(t, q, WorkOptions{Slots: 1, before: g.before})
		<-g.entered
		stop()
		harm(t, q, id, planIndex, flip)
		g.open.Store(true)
		if err := q.Work(t.Context(), WorkOptions{Slots: 1, Drain: true, before: g.before}); err != nil { // a new process' memory
			t.Fatal(err)
		}
		whole(t, q, show(t, q, id))
		if g.count(planIndex) != 2 || g.count(0) != 1 || g.count(1) != 1 {
			t.Errorf("the plan was made %d times, tiles 0 and 1 %d and %d", g.count(planIndex), g.count(0), g.count(1))
		}
	})
}

// TestHopelessTile has a tile that is damaged whenever it is kept.
func TestHopelessTile(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		id := add(t, q, AddOptions{})
		err := q.Work(t.Context(), WorkOptions{Slots: 1, Drain: true, before: func(_ context.Context, k ticket) {
			if k.Index == assemblyIndex {
				harm(t, q, id, 1, flip)
			}
		}})
		if err != nil {
			t.Fatal(err)
		}
		if p := show(t, q, id); p.State != Failed || p.Reason == "" || p.Hint == "" {
			t.Errorf("%+v", p)
		}
	})
}
