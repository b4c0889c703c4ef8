package jobs

import (
	"bytes"
	"context"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"leadline/render"
	"leadline/render/frame"
)

// quick are leases short enough for tests.
var quick = timing{watch: 60 * time.Millisecond, beat: 150 * time.Millisecond, silence: 1500 * time.Millisecond, reap: 150 * time.Millisecond}

// small is a frame of 48 x 32 pixels: six tiles of 16.
func small(t testing.TB, more string) *frame.Frame {
	t.Helper()
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","title":"Small","set":{"kind":"mandelbrot"},
		"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},"iteration":{"limit":300},
		"sampling":{"least":1,"most":2},"sheet":{"width":"48px","height":"32px"}` + more + `}`))
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// printed is what render.Print makes of small.
var printed = sync.OnceValues(func() (*render.Result, error) {
	dir, err := os.MkdirTemp("", "leadline-jobs")
	if err != nil {
		return nil, err
	}
	defer os.RemoveAll(dir)
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","title":"Small","set":{"kind":"mandelbrot"},
		"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},"iteration":{"limit":300},
		"sampling":{"least":1,"most":2},"sheet":{"width":"48px","height":"32px"}}`))
	if err != nil {
		return nil, err
	}
	return render.Print(context.Background(), f, render.PrintOptions{Out: filepath.Join(dir, "a.png"), Audit: 4})
})

// database is a place for a queue.
type database struct{ kind, where string }

// engines runs a test on a fresh queue of each engine.
func engines(t *testing.T, f func(t *testing.T, d database)) {
	t.Helper()
	for _, kind := range []string{"sqlite", "postgres"} {
		t.Run(kind, func(t *testing.T) {
			t.Parallel()
			d := database{kind: kind}
			if kind == "sqlite" {
				d.where = "sqlite:" + filepath.Join(t.TempDir(), "queue.db")
			} else {
				d.where = freshPostgres(t, false)
				if err := Migrate(t.Context(), d.where); err != nil {
					t.Fatal(err)
				}
			}
			f(t, d)
			if kind == "sqlite" {
				sound(t, d)
			}
		})
	}
}

// open opens the queue with short leases.
func (d database) open(t testing.TB) *Queue {
	t.Helper()
	q, err := Open(t.Context(), d.where, Options{})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(q.Close)
	q.time = quick
	return q
}

// sound asks SQLite whether the file is whole.
func sound(t *testing.T, d database) {
	t.Helper()
	q := d.open(t)
	var s string
	if err := one(t.Context(), q.e.read(), `PRAGMA integrity_check`, nil, &s); err != nil || s != "ok" {
		t.Errorf("integrity_check: %q, %v", s, err)
	}
}

// add queues small with tiles of 16 pixels.
func add(t testing.TB, q *Queue, o AddOptions) int64 {
	t.Helper()
	if o.Out == "" {
		o.Out = filepath.Join(t.TempDir(), "small.png")
	}
	o.Tile, o.Audit = 16, 4
	id, err := q.Add(t.Context(), small(t, ""), o)
	if err != nil {
		t.Fatal(err)
	}
	return id
}

// start works in the background until the test or the returned stop ends.
func start(t testing.TB, q *Queue, o WorkOptions) (stop func()) {
	t.Helper()
	ctx, cancel := context.WithCancel(context.Background())
	ended := make(chan error, 1)
	go func() { ended <- q.Work(ctx, o) }()
	stop = sync.OnceFunc(func() {
		cancel()
		if err := <-ended; err != nil && ctx.Err() == nil {
			t.Error(err)
		}
	})
	t.Cleanup(stop)
	return stop
}

// show is Show that must succeed.
func show(t testing.TB, q *Queue, id int64) *Print {
	t.Helper()
	p, err := q.Show(t.Context(), id)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// until waits for a print to become what ok asks for.
func until(t testing.TB, q *Queue, id int64, what string, ok func(*Print) bool) *Print {
	t.Helper()
	wait := 5 * time.Millisecond
	for end := time.Now().Add(time.Minute); ; time.Sleep(wait) {
		wait = min(wait*5/4, 100*time.Millisecond) // looking costs as much as a small tile
		p := show(t, q, id)
		if ok(p) {
			return p
		}
		if time.Now().After(end) {
			t.Fatalf("print %d never was %s: %+v\n%s", id, what, p, dump(t, q))
		}
	}
}

func inState(s State) func(*Print) bool { return func(p *Print) bool { return p.State == s } }

// dump lists the tasks, for a failure's report.
func dump(t testing.TB, q *Queue) string {
	var b strings.Builder
	err := each(t.Context(), q.e.read(), `SELECT t.print, t.idx, t.state, t.try, t.faults, coalesce(cast(j.state as text), 'none') FROM leadline_tile t
		LEFT JOIN river_job j ON j.id = t.job ORDER BY t.print, t.idx`, nil,
		func(scan func(...any) error) error {
			var a, c, d, e any
			var s, j string
			err := scan(&a, &c, &s, &d, &e, &j)
			fmt.Fprintln(&b, a, c, s, d, e, j)
			return err
		})
	if err != nil {
		return err.Error()
	}
	return b.String()
}

// whole checks a finished print: its hash is that of render.Print, each tile
// is counted once, and nothing is left of its payloads.
func whole(t *testing.T, q *Queue, p *Print) {
	t.Helper()
	want, err := printed()
	if err != nil {
		t.Fatal(err)
	}
	if p.SHA256 != want.SHA256 {
		t.Errorf("hash %s is not render's %s", p.SHA256, want.SHA256)
	}
	if n, pixels := tally(t, q, p.ID); p.Tiles != 6 || p.Done != 6 || n != 6 || pixels != 48*32 {
		t.Errorf("%d, %d of %d tiles, %d pixels", n, p.Done, p.Tiles, pixels)
	}
	if v, err := render.Gather(p.File); err != nil || !bytes.Equal(must(v.Frame.Marshal()), must(frameOf(t, p.Sidecar).Marshal())) {
		t.Errorf("print and sidecar do not hold the same frame: %v", err)
	}
	var n int
	if err := one(t.Context(), q.e.read(), `SELECT count(*) FROM leadline_payload WHERE print = ?`, []any{p.ID}, &n); err != nil || n != 0 {
		t.Errorf("%d payloads are left, %v", n, err)
	}
	if q.spool != nil {
		dir := filepath.Join(q.spool.dir, fmt.Sprint(p.ID))
		for range 100 { // the folder goes after the print is marked done
			if _, err := os.Stat(dir); os.IsNotExist(err) {
				return
			}
			time.Sleep(10 * time.Millisecond)
		}
		t.Errorf("the spool keeps %s", dir)
	}
}

// tally counts a print's finished tiles and their pixels.
func tally(t *testing.T, q *Queue, id int64) (n int, pixels int64) {
	t.Helper()
	err := one(t.Context(), q.e.read(), `SELECT count(*), cast(sum(pixels) as bigint) FROM leadline_tile
		WHERE print = ? AND idx >= 0 AND state = 'done'`, []any{id}, &n, &pixels)
	if err != nil {
		t.Fatal(err)
	}
	return n, pixels
}

func must(b []byte, err error) []byte {
	if err != nil {
		panic(err)
	}
	return b
}

func frameOf(t *testing.T, path string) *frame.Frame {
	t.Helper()
	d, err := frame.Load(path)
	if err != nil {
		t.Fatal(err)
	}
	return d.Frame
}

// runOf is what a sidecar says of the queue.
func runOf(t *testing.T, doc []byte) *frame.Queued {
	t.Helper()
	s, err := frame.ParseSidecar(doc)
	if err != nil {
		t.Fatal(err)
	}
	return s.Run.Queue
}
