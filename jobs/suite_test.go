package jobs

import (
	"context"
	"errors"
	"os"
	"path/filepath"
	"sync"
	"sync/atomic"
	"testing"
	"time"

	"leadline/render"
)

// The tests of this file run on both engines; what they check is this
// project's own contract, except for the pixels, which are render.Print's.

func TestAddWorkDone(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		id := add(t, q, AddOptions{})
		if p := show(t, q, id); p.State != Queued || p.Title != "Small" || p.Tiles != 6 || p.Done != 0 || p.Workers != 0 {
			t.Errorf("added: %+v", p)
		}
		if err := q.Work(t.Context(), WorkOptions{Slots: 2, Drain: true}); err != nil {
			t.Fatal(err)
		}
		p := show(t, q, id)
		if p.State != Done || p.Attempts != 8 || p.Rescued != 0 || p.Reason != "" || p.Bytes == 0 {
			t.Errorf("%+v", p)
		}
		whole(t, q, p)
		if list, err := q.Workers(t.Context()); err != nil || len(list) != 0 {
			t.Errorf("workers left: %v, %v", list, err)
		}
		// The file is render.Print's, byte for byte.
		want := filepath.Join(t.TempDir(), "want.png")
		if _, err := render.Print(t.Context(), small(t, ""), render.PrintOptions{Out: want}); err != nil {
			t.Fatal(err)
		}
		if a, b := must(os.ReadFile(p.File)), must(os.ReadFile(want)); string(a) != string(b) {
			t.Error("the files differ")
		}
	})
}

func TestCropAndScale(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		f := small(t, "")
		part, err := (render.PrintOptions{Scale: 2}).Part(f)
		if err != nil {
			t.Fatal(err)
		}
		part = part.Inset(1)
		dir := t.TempDir()
		id, err := q.Add(t.Context(), f, AddOptions{Out: filepath.Join(dir, "a.png"), Crop: &part, Scale: 2, Tile: 16, Priority: 4})
		if err != nil {
			t.Fatal(err)
		}
		if err := q.Work(t.Context(), WorkOptions{Drain: true}); err != nil {
			t.Fatal(err)
		}
		want, err := render.Print(t.Context(), f, render.PrintOptions{Out: filepath.Join(dir, "b.png"), Crop: &part, Scale: 2})
		if err != nil {
			t.Fatal(err)
		}
		if p := show(t, q, id); p.SHA256 != want.SHA256 || p.Width != 22 || p.Height != 14 {
			t.Errorf("%+v is not %s", p, want.SHA256)
		}
	})
}

// gate holds every task of an index until it is opened, and notes who ran.
type gate struct {
	mu      sync.Mutex
	ran     map[int]int
	entered chan int
	hold    int
	open    atomic.Bool
}

func newGate(hold int) *gate {
	return &gate{ran: map[int]int{}, entered: make(chan int, 100), hold: hold}
}

func (g *gate) before(ctx context.Context, k ticket) {
	g.mu.Lock()
	g.ran[k.Index]++
	g.mu.Unlock()
	if k.Index == g.hold && !g.open.Load() {
		g.entered <- k.Index
		<-ctx.Done()
	}
}

func (g *gate) count(i int) int {
	g.mu.Lock()
	defer g.mu.Unlock()
	return g.ran[i]
}

// TestPauseResumeCancelAgain walks the edges from every working state: in each
// the task is held, the print paused, resumed, cancelled and begun again.
func TestPauseResumeCancelAgain(t *testing.T) {
	t.Parallel()
	for name, at := range map[string]struct {
		index int
		state State
	}{"planning": {planIndex, Planning}, "rendering": {3, Rendering}, "assembling": {assemblyIndex, Assembling}} {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			engines(t, func(t *testing.T, d database) {
				q := d.open(t)
				id := add(t, q, AddOptions{})
				g := newGate(at.index)
				start(t, q, WorkOptions{Slots: 1, before: g.before})
				<-g.entered
				if p := show(t, q, id); p.State != at.state {
					t.Errorf("held in %s", p.State)
				}
				stops(t, q, id, q.Pause)
				if p := show(t, q, id); !p.Paused || p.State.over() {
					t.Errorf("paused: %+v", p)
				}
				if err := q.Resume(t.Context(), id); err != nil {
					t.Fatal(err)
				}
				<-g.entered
				stops(t, q, id, q.Cancel)
				if p := show(t, q, id); p.State != Cancelled || p.Ended.IsZero() {
					t.Errorf("cancelled: %+v", p)
				}
				g.open.Store(true)
				if err := q.Again(t.Context(), id); err != nil {
					t.Fatal(err)
				}
				whole(t, q, until(t, q, id, "done", inState(Done)))
				if n := g.count(0); n != 1 {
					t.Errorf("tile 0 was rendered %d times", n)
				}
				if n := g.count(at.index); n != 3 {
					t.Errorf("the held task ran %d times", n)
				}
			})
		})
	}
}

// stops changes a print and sees the held task stop within a second.
func stops(t *testing.T, q *Queue, id int64, change func(context.Context, int64) error) {
	t.Helper()
	from := time.Now()
	if err := change(t.Context(), id); err != nil {
		t.Fatal(err)
	}
	for {
		var n int
		if err := one(t.Context(), q.e.read(), `SELECT count(*) FROM leadline_tile WHERE print = ? AND state = 'running'`, []any{id}, &n); err != nil {
			t.Fatal(err)
		}
		if n == 0 {
			return
		}
		if time.Since(from) > time.Second {
			t.Fatalf("still running after %v", time.Since(from))
		}
		time.Sleep(5 * time.Millisecond)
	}
}

// TestRefusedEdges tries what a state does not allow, and what it allows twice.
func TestRefusedEdges(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		ctx := t.Context()
		done := add(t, q, AddOptions{})
		if err := q.Work(ctx, WorkOptions{Drain: true}); err != nil {
			t.Fatal(err)
		}
		cancelled, failed, waiting := add(t, q, AddOptions{}), add(t, q, AddOptions{}), add(t, q, AddOptions{})
		if err := q.Cancel(ctx, cancelled); err != nil {
			t.Fatal(err)
		}
		if err := q.e.do(ctx, func(t tx) error { return fail(ctx, t, failed, "a reason", "a cure") }); err != nil {
			t.Fatal(err)
		}
		pause, resume, cancel, again := q.Pause, q.Resume, q.Cancel, q.Again
		move := func(ctx context.Context, id int64) error { return q.Move(ctx, id, 3) }
		for _, c := range []struct {
			name string
			id   int64
			f    func(context.Context, int64) error
			ok   bool
		}{
			{"pause done", done, pause, false}, {"resume done", done, resume, false}, {"cancel done", done, cancel, false},
			{"again done", done, again, false}, {"move done", done, move, false},
			{"pause cancelled", cancelled, pause, false}, {"resume cancelled", cancelled, resume, false},
			{"move cancelled", cancelled, move, false}, {"cancel cancelled", cancelled, cancel, true},
			{"pause failed", failed, pause, false}, {"resume failed", failed, resume, false},
			{"cancel failed", failed, cancel, false}, {"move failed", failed, move, false},
			{"again queued", waiting, again, false}, {"resume queued", waiting, resume, true},
			{"pause queued", waiting, pause, true}, {"pause paused", waiting, pause, true}, {"move paused", waiting, move, true},
			{"again paused", waiting, again, false}, {"resume paused", waiting, resume, true},
			{"pause nothing", 99, pause, false}, {"again nothing", 99, again, false},
		} {
			err := c.f(ctx, c.id)
			if (err == nil) != c.ok {
				t.Errorf("%s: %v", c.name, err)
			}
			if err != nil && hintOf(err) == "" {
				t.Errorf("%s: no hint with %v", c.name, err)
			}
		}
		if p := show(t, q, failed); p.Reason != "a reason" || p.Hint != "a cure" {
			t.Errorf("%+v", p)
		}
		if p := show(t, q, done); p.State != Done {
			t.Errorf("done became %s", p.State)
		}
		var none *NoPrintError
		if _, err := q.Show(ctx, 99); !errors.As(err, &none) {
			t.Errorf("print 99: %v", err)
		}
		for _, id := range []int64{cancelled, failed} {
			if err := q.Again(ctx, id); err != nil {
				t.Fatal(err)
			}
		}
		if err := q.Work(ctx, WorkOptions{Drain: true}); err != nil {
			t.Fatal(err)
		}
		for _, id := range []int64{cancelled, failed, waiting} {
			whole(t, q, show(t, q, id))
		}
	})
}
