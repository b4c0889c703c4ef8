package jobs

import (
	"context"
	"os"
	"path/filepath"
	"strings"
	"sync/atomic"
	"testing"
)

// TestPanickingTile has a tile that always panics; the print goes on when it
// no longer does.
func TestPanickingTile(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		id := add(t, q, AddOptions{})
		var sound atomic.Bool
		var tries, first atomic.Int32
		start(t, q, WorkOptions{Slots: 1, before: func(_ context.Context, k ticket) {
			if k.Index == 0 {
				first.Add(1)
			}
			if k.Index == 4 && !sound.Load() {
				tries.Add(1)
				panic("no such tile")
			}
		}})
		p := until(t, q, id, "failed", inState(Failed))
		if !strings.Contains(p.Reason, "tile 4 of print") || !strings.Contains(p.Reason, "no such tile") || p.Hint == "" || tries.Load() != maxFaults {
			t.Errorf("%d tries, reason %q, hint %q", tries.Load(), p.Reason, p.Hint)
		}
		sound.Store(true)
		if err := q.Again(t.Context(), id); err != nil {
			t.Fatal(err)
		}
		whole(t, q, until(t, q, id, "done", inState(Done)))
		if first.Load() != 1 {
			t.Errorf("tile 0 was rendered %d times", first.Load())
		}
	})
}

// TestFailures has prints that cannot be made, each with its reason and cure.
func TestFailures(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		ctx := t.Context()
		gone := filepath.Join(t.TempDir(), "gone")
		if err := os.Mkdir(gone, 0o700); err != nil {
			t.Fatal(err)
		}
		folder, broken := add(t, q, AddOptions{Out: filepath.Join(gone, "a.png")}), add(t, q, AddOptions{})
		if _, err := q.e.read().exec(ctx, `UPDATE leadline_print SET frame = '{"format":"leadline.frame/1"}' WHERE id = ?`, broken); err != nil {
			t.Fatal(err)
		}
		// The folder goes while tiles are rendered.
		if err := q.Work(ctx, WorkOptions{Slots: 1, Drain: true, before: func(_ context.Context, k ticket) {
			if k.Print == folder && k.Index == 1 {
				_ = os.RemoveAll(gone)
			}
		}}); err != nil {
			t.Fatal(err)
		}
		for id, want := range map[int64]string{folder: "gone", broken: "set"} {
			if p := show(t, q, id); p.State != Failed || !strings.Contains(p.Reason, want) || p.Hint == "" {
				t.Errorf("%+v", p)
			}
		}
		for limit, what := range map[Limits]string{{Pixels: 1535}: "1536 pixels", {Iterations: 299}: "300 iterations", {Memory: 1000}: "memory"} {
			id := add(t, q, AddOptions{})
			if err := q.Work(ctx, WorkOptions{Slots: 1, Drain: true, Limits: limit}); err != nil {
				t.Fatal(err)
			}
			if p := show(t, q, id); p.State != Failed || !strings.Contains(p.Reason, what) || p.Hint == "" || p.Done != 0 {
				t.Errorf("%+v: %+v", limit, p)
			}
		}
		// With the folder made, the print goes on from its tiles.
		if err := os.Mkdir(gone, 0o700); err != nil {
			t.Fatal(err)
		}
		before := show(t, q, folder)
		if err := q.Again(ctx, folder); err != nil {
			t.Fatal(err)
		}
		if err := q.Work(ctx, WorkOptions{Drain: true, Limits: Limits{Pixels: 1536, Iterations: 300}}); err != nil {
			t.Fatal(err)
		}
		p := show(t, q, folder)
		whole(t, q, p)
		if p.Attempts != before.Attempts+1 {
			t.Errorf("%d attempts, %d before", p.Attempts, before.Attempts)
		}
	})
}
