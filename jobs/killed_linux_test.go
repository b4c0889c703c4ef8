package jobs

import (
	"context"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"
)

// TestKilledWorker kills a worker in the middle of a tile, under the leases
// that are used outside the tests.
func TestKilledWorker(t *testing.T) {
	if testing.Short() {
		t.Skip("left out by -short: it waits for a lease of ten seconds")
	}
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		q.time = usual
		id := add(t, q, AddOptions{})
		c := spawn(t, d, childHang+"=3")
		c.says("begin 3")
		c.signal(syscall.SIGKILL)
		killed := time.Now()
		again := make(chan time.Duration, 1)
		start(t, q, WorkOptions{Slots: 1, before: func(_ context.Context, k ticket) {
			if k.Index == 3 {
				again <- time.Since(killed)
			}
		}})
		p := until(t, q, id, "done", inState(Done))
		whole(t, q, p)
		if after := <-again; after > 15*time.Second {
			t.Errorf("the tile ran again after %v", after)
		} else {
			t.Logf("the tile ran again after %v", after)
		}
		if p.Rescued != 1 || p.Attempts != 6+2+1 {
			t.Errorf("%d rescued, %d attempts", p.Rescued, p.Attempts)
		}
	})
}

// freeze stops a process at a moment when it holds no lock in the queue: one
// stopped inside a transaction on SQLite holds up every other for as long.
func (p *process) freeze(q *Queue) {
	p.t.Helper()
	for range 100 {
		p.signal(syscall.SIGSTOP)
		ctx, cancel := context.WithTimeout(p.t.Context(), 2*time.Second)
		err := q.e.do(ctx, func(tx) error { return nil })
		cancel()
		if err == nil {
			return
		}
		p.signal(syscall.SIGCONT)
		time.Sleep(10 * time.Millisecond)
	}
	p.t.Fatal("the worker holds a lock whenever it is stopped")
}

// TestStoppedWorker stops a worker in a tile and lets it go on when the tile
// has been done by another.
func TestStoppedWorker(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		id := add(t, q, AddOptions{})
		c := spawn(t, d, childHang+"=3", childQuick+"=1")
		c.says("begin 3")
		c.freeze(q)
		stop := start(t, q, WorkOptions{Slots: 1})
		p := until(t, q, id, "done", inState(Done))
		stop()
		c.signal(syscall.SIGCONT)
		c.says("stopped 3") // its lease is gone
		if err := c.cmd.Wait(); err != nil {
			t.Errorf("the late worker: %v", err)
		}
		after := show(t, q, id)
		whole(t, q, after)
		if after.Attempts != p.Attempts || after.Ended != p.Ended || p.Rescued != 1 {
			t.Errorf("the late worker changed the print: %+v, then %+v", p, after)
		}
	})
}

// TestDeadlyTile has a tile that ends its process three times.
func TestDeadlyTile(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		id := add(t, q, AddOptions{})
		for range maxFaults {
			c := spawn(t, d, childHang+"=2", childQuick+"=1")
			c.says("begin 2")
			c.signal(syscall.SIGKILL)
		}
		start(t, q, WorkOptions{Slots: 1, before: func(_ context.Context, k ticket) {
			if k.Index == 2 {
				t.Error("the tile ran once more")
			}
		}})
		p := until(t, q, id, "failed", inState(Failed))
		if !strings.Contains(p.Reason, "tile 2") || p.Hint == "" {
			t.Errorf("reason %q, hint %q", p.Reason, p.Hint)
		}
	})
}

// TestTwoProcesses has one process add and watch while another works, without
// any setting.
func TestTwoProcesses(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		first := add(t, q, AddOptions{})
		a, b := spawn(t, d), spawn(t, d)
		ids := []int64{first}
		for range 5 {
			ids = append(ids, add(t, q, AddOptions{}))
			if _, err := q.List(t.Context()); err != nil {
				t.Fatal(err)
			}
		}
		for _, id := range ids {
			whole(t, q, until(t, q, id, "done", inState(Done)))
		}
		for _, p := range []*process{a, b} {
			for p.lines.Scan() {
			}
			if err := p.cmd.Wait(); err != nil { // a busy error would have ended it or stood on stderr
				t.Error(err)
			}
		}
	})
}

// TestDeskFiles looks at the modes of everything a queue leaves in its folder.
func TestDeskFiles(t *testing.T) {
	state := t.TempDir()
	t.Setenv("XDG_STATE_HOME", state)
	q := database{where: ""}.open(t)
	id := add(t, q, AddOptions{})
	start(t, q, WorkOptions{Slots: 1, before: func(ctx context.Context, k ticket) {
		if k.Index == 5 {
			<-ctx.Done()
		}
	}})
	until(t, q, id, "nearly done", func(p *Print) bool { return p.Done == 5 })
	files := 0
	err := filepath.WalkDir(filepath.Join(state, "leadline"), func(path string, e os.DirEntry, err error) error {
		if err != nil {
			return err
		}
		st, err := e.Info()
		if err != nil {
			return nil // a temporary file that is gone by now
		}
		want := os.FileMode(0o600)
		if e.IsDir() {
			want = 0o700
		} else {
			files++
		}
		if st.Mode().Perm() != want {
			t.Errorf("%s has mode %v", path, st.Mode())
		}
		return nil
	})
	if err != nil || files < 6 {
		t.Errorf("%d files, %v", files, err)
	}
}
