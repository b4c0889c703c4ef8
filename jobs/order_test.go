package jobs

import (
	"context"
	"path/filepath"
	"slices"
	"testing"

	"leadline/render"
	"leadline/render/frame"
)

// TestOrder has the more urgent print done first, the moved one too, and no
// more tiles in River than the window takes.
func TestOrder(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		a, b, c := add(t, q, AddOptions{Priority: 3}), add(t, q, AddOptions{Priority: 4}), add(t, q, AddOptions{Priority: 2})
		if err := q.Move(t.Context(), b, 1); err != nil {
			t.Fatal(err)
		}
		var order []int64
		err := q.Work(t.Context(), WorkOptions{Slots: 1, Drain: true, before: func(_ context.Context, k ticket) {
			if k.Index == 5 {
				order = append(order, k.Print)
			}
		}})
		if err != nil {
			t.Fatal(err)
		}
		if want := []int64{b, c, a}; !slices.Equal(order, want) {
			t.Errorf("done in the order %v, not %v", order, want)
		}
	})
}

// TestWindow plans a print of more tiles than stand in River at once.
func TestWindow(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		f := small(t, "")
		id, err := q.Add(t.Context(), f, AddOptions{Out: filepath.Join(t.TempDir(), "a.png"), Tile: 16})
		if err != nil {
			t.Fatal(err)
		}
		// As if the sheet had been 20 times as wide: 120 tiles.
		if _, err := q.e.read().exec(t.Context(), `UPDATE leadline_print SET tiles = 120 WHERE id = ?`, id); err != nil {
			t.Fatal(err)
		}
		stop := start(t, q, WorkOptions{Slots: 1, before: func(ctx context.Context, k ticket) {
			if k.Index == 0 {
				<-ctx.Done()
			}
		}})
		until(t, q, id, "rendering", inState(Rendering))
		var n int
		if err := one(t.Context(), q.e.read(), `SELECT count(*) FROM leadline_tile WHERE print = ? AND idx >= 0`, []any{id}, &n); err != nil || n != minWindow {
			t.Errorf("%d tiles stand in River, not %d; %v", n, minWindow, err)
		}
		stop()
	})
}

// TestFairness has two prints of one priority: the second does not wait for the
// first to end.
func TestFairness(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},
			"view":{"centre":{"re":"1.9","im":"1.5"},"height":"0.5"},"iteration":{"limit":10},
			"sampling":{"least":1,"most":1},"sheet":{"width":"128px","height":"128px"}}`))
		if err != nil {
			t.Fatal(err)
		}
		var ids []int64
		for range 2 {
			id, err := q.Add(t.Context(), f, AddOptions{Out: filepath.Join(t.TempDir(), "a.png"), Tile: 16})
			if err != nil {
				t.Fatal(err)
			}
			ids = append(ids, id)
		}
		var order []int64
		err = q.Work(t.Context(), WorkOptions{Slots: 1, Drain: true, before: func(_ context.Context, k ticket) {
			if k.Index >= 0 {
				order = append(order, k.Print)
			}
		}})
		if err != nil {
			t.Fatal(err)
		}
		last := len(order) - 1
		for order[last] == order[len(order)-1] {
			last--
		}
		if first := slices.Index(order, ids[1]); len(order) != 128 || first > 2*minWindow || last < 64 {
			t.Errorf("%d tiles; the second print began at %d, the last change was at %d", len(order), first, last)
		}
	})
}

// TestPlansBound fills the memory for plans: the one longest unused goes.
func TestPlansBound(t *testing.T) {
	p := newPlans()
	made := map[int64]int{}
	get := func(id int64) {
		if _, err := p.get(t.Context(), id, func(context.Context) (*render.Plan, error) {
			made[id]++
			return new(render.Plan), nil
		}); err != nil {
			t.Fatal(err)
		}
	}
	for id := range int64(maxPlans) {
		get(id)
	}
	get(0)
	get(maxPlans) // 1 goes
	get(0)
	get(1) // 2 goes
	if made[0] != 1 || made[1] != 2 || len(p.ids()) != maxPlans || slices.Contains(p.ids(), 2) {
		t.Errorf("made %v, kept %v", made, p.ids())
	}
}
