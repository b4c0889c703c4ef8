package jobs

import (
	"context"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
)

// counter counts how often each task began, and does something once as one
// begins.
type counter struct {
	mu   sync.Mutex
	ran  map[int]int
	at   int // the task
	once func()
}

func newCounter(at int, once func()) *counter {
	return &counter{ran: map[int]int{}, at: at, once: sync.OnceFunc(once)}
}

func (c *counter) before(_ context.Context, k ticket) {
	c.mu.Lock()
	c.ran[k.Index]++
	c.mu.Unlock()
	if k.Index == c.at {
		c.once()
	}
}

func (c *counter) count(i int) int {
	c.mu.Lock()
	defer c.mu.Unlock()
	return c.ran[i]
}

// expect checks how often tasks began, the plan first.
func (c *counter) expect(t *testing.T, times ...int) {
	t.Helper()
	for i, want := range times {
		if n := c.count(planIndex + i); n != want {
			t.Errorf("%s began %d times, not %d", ticket{1, planIndex + i, 0}, n, want)
		}
	}
}

// spooled opens a queue whose tiles are kept in a folder.
func (d database) spooled(t testing.TB, dir string) *Queue {
	t.Helper()
	return d.with(t, Options{Spool: dir})
}

// onDesk is a fresh SQLite queue's place, for what is the same on both engines.
func onDesk(t *testing.T) database {
	t.Helper()
	return database{"sqlite", filepath.Join(t.TempDir(), "queue.db")}
}

// with opens a queue with options and short leases.
func (d database) with(t testing.TB, o Options) *Queue {
	t.Helper()
	q, err := Open(t.Context(), d.where, o)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(q.Close)
	q.time = quick
	return q
}

// drained works until nothing is left, one task at a time, and shows a print.
func drained(t testing.TB, q *Queue, id int64, before func(context.Context, ticket)) *Print {
	t.Helper()
	if err := q.Work(t.Context(), WorkOptions{Slots: 1, Drain: true, before: before}); err != nil {
		t.Fatal(err)
	}
	return show(t, q, id)
}

// failed checks that a print tells why it failed, and what helps.
func failed(t testing.TB, p *Print, done int, reason, hint string) {
	t.Helper()
	if p.State != Failed || p.Done != done || !strings.Contains(p.Reason, reason) || !strings.Contains(p.Hint, hint) {
		t.Errorf("%s with %d tiles, reason %q, hint %q; expected %d tiles, %q, %q", p.State, p.Done, p.Reason, p.Hint, done, reason, hint)
	}
}

// again is Again that must succeed.
func again(t testing.TB, q *Queue, id int64) {
	t.Helper()
	if err := q.Again(t.Context(), id); err != nil {
		t.Fatal(err)
	}
}

// TestSpoolAway takes the spool's folder away and leaves nothing, or an empty
// one as a disk does that is not mounted: the print fails, takes nothing for
// lost, and goes on with what is kept.
func TestSpoolAway(t *testing.T) {
	t.Parallel()
	d := onDesk(t)
	dir := filepath.Join(t.TempDir(), "spool")
	q := d.spooled(t, dir)
	for _, c := range []struct {
		at, done int
		empty    bool
		times    []int // that the plan and the tiles begin
	}{
		{3, 3, false, []int{1, 1, 1, 1, 2, 1, 1}},
		{3, 3, true, []int{1, 1, 1, 1, 2, 1, 1}},
		{assemblyIndex, 6, false, []int{1, 1, 1, 1, 1, 1, 1}},
		{assemblyIndex, 6, true, []int{1, 1, 1, 1, 1, 1, 1}},
	} {
		id := add(t, q, AddOptions{})
		r := newCounter(c.at, func() {
			if err := os.Rename(dir, dir+".away"); err != nil {
				t.Error(err)
			}
			if !c.empty {
				return
			}
			if err := os.Mkdir(dir, 0o700); err != nil {
				t.Error(err)
			}
		})
		failed(t, drained(t, q, id, r.before), c.done, dir, "not be mounted")
		again(t, q, id)
		failed(t, drained(t, q, id, nil), c.done, dir, "not be mounted") // still away
		if err := os.Remove(dir); err != nil && !errors.Is(err, fs.ErrNotExist) {
			t.Error(err) // something was put into it
		}
		if err := os.Rename(dir+".away", dir); err != nil {
			t.Fatal(err)
		}
		again(t, q, id)
		whole(t, q, drained(t, q, id, r.before))
		r.expect(t, c.times...)
	}
}

// TestSpoolLost loses the spool for good: with the empty folder that the hint
// asks for the print is computed anew.
func TestSpoolLost(t *testing.T) {
	t.Parallel()
	d := onDesk(t)
	dir := filepath.Join(t.TempDir(), "spool")
	q := d.spooled(t, dir)
	id := add(t, q, AddOptions{})
	r := newCounter(assemblyIndex, func() {
		if err := os.RemoveAll(dir); err != nil {
			t.Error(err)
		}
	})
	p := drained(t, q, id, r.before)
	folder := filepath.Join(dir, "1")
	failed(t, p, 6, "no such file", "empty folder "+folder)
	if err := os.MkdirAll(folder, 0o700); err != nil {
		t.Fatal(err)
	}
	again(t, q, id)
	whole(t, q, drained(t, q, id, r.before))
	r.expect(t, 2, 2, 2, 2, 2, 2, 2)
}

// TestOtherSpool has a worker that was given another folder than the others: it
// spoils nothing.
func TestOtherSpool(t *testing.T) {
	t.Parallel()
	d := database{"postgres", freshPostgres(t, false)}
	if err := Migrate(t.Context(), d.where); err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	q, other := d.spooled(t, filepath.Join(dir, "spool")), d.spooled(t, filepath.Join(dir, "other"))
	id := add(t, q, AddOptions{})
	r := newGate(3)
	stop := start(t, q, WorkOptions{Slots: 1, before: r.before})
	<-r.entered
	stop()
	failed(t, drained(t, other, id, nil), 3, filepath.Join(dir, "other"), "another folder")
	r.open.Store(true)
	again(t, q, id)
	whole(t, q, drained(t, q, id, r.before))
	if r.count(planIndex) != 1 || r.count(0) != 1 {
		t.Errorf("the plan began %d times, tile 0 %d times", r.count(planIndex), r.count(0))
	}
}

// TestOutputAway takes the print's folder away while tiles are rendered.
func TestOutputAway(t *testing.T) {
	t.Parallel()
	d := onDesk(t)
	q := d.open(t)
	dir := filepath.Join(t.TempDir(), "out")
	if err := os.Mkdir(dir, 0o700); err != nil {
		t.Fatal(err)
	}
	id := add(t, q, AddOptions{Out: filepath.Join(dir, "a.png")})
	r := newCounter(3, func() {
		if err := os.Remove(dir); err != nil {
			t.Error(err)
		}
	})
	failed(t, drained(t, q, id, r.before), 6, dir, "make the folder "+dir)
	if err := os.Mkdir(dir, 0o700); err != nil {
		t.Fatal(err)
	}
	again(t, q, id)
	whole(t, q, drained(t, q, id, r.before))
	r.expect(t, 1, 1, 1, 1, 1, 1, 1)
}
