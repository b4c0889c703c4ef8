package jobs

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"regexp"
	"syscall"
	"testing"
	"time"
)

// TestStoppedInTransaction stops a worker inside a transaction, for longer than
// others wait for it. On SQLite they go on as soon as it does, or is killed; on
// PostgreSQL as soon as the server has given it up. Nobody ends or loses a tile.
func TestStoppedInTransaction(t *testing.T) {
	t.Parallel()
	for name, signal := range map[string]syscall.Signal{"goes on": syscall.SIGCONT, "killed": syscall.SIGKILL} {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			if signal == syscall.SIGCONT {
				engines(t, func(t *testing.T, d database) { stopInTransaction(t, d, signal) })
				return
			}
			d := onDesk(t) // PostgreSQL hears of it at once, as of any connection that ends
			stopInTransaction(t, d, signal)
			sound(t, d)
		})
	}
}

// stopInTransaction is TestStoppedInTransaction; the long form uses the times
// that are used outside the tests.
func stopInTransaction(t *testing.T, d database, signal syscall.Signal) {
	child, hold, busy := d, 2500*time.Millisecond, 300*time.Millisecond
	if os.Getenv(tortureVariable) != "" {
		hold, busy = 15*time.Second, busyTime
	} else if d.kind == "postgres" {
		child.where += "&idle_in_transaction_session_timeout=1s"
	}
	worker, q := d.with(t, Options{busy: busy}), d.open(t)
	id := add(t, q, AddOptions{})
	entered, leave := make(chan struct{}), make(chan struct{})
	r := newCounter(0, func() { close(entered); <-leave })
	ended := make(chan error, 1)
	ctx, cancel := context.WithCancel(t.Context())
	go func() { ended <- worker.Work(ctx, WorkOptions{Slots: 1, before: r.before}) }()
	defer func() { cancel(); <-ended }()
	<-entered
	c := spawn(t, child, childHold+"=3", childQuick+"=1")
	c.says("holding")
	c.stopped()
	stopped := time.Now()
	close(leave) // tile 0 ends while the child holds the queue
	if d.kind == "sqlite" {
		time.Sleep(hold)
		if p := show(t, q, id); p.State != Rendering || p.Done != 2 {
			t.Errorf("while a worker holds the queue: %+v", p)
		}
	} else {
		until(t, q, id, "done", inState(Done))
	}
	select {
	case err := <-ended:
		t.Fatalf("the worker ended: %v", err)
	default:
	}
	c.signal(signal)
	went := time.Now()
	p := until(t, q, id, "done", inState(Done))
	t.Logf("done %v after the stop, %v after the signal", time.Since(stopped), time.Since(went))
	whole(t, q, p)
	if signal == syscall.SIGCONT {
		if err := c.cmd.Wait(); err != nil {
			t.Errorf("the worker that was stopped: %v", err)
		}
		whole(t, q, show(t, q, id))
	}
	if n := r.count(0); n != 1 {
		t.Errorf("tile 0 began %d times", n)
	}
}

// TestStartWhileHeld starts a worker on SQLite while another holds the queue
// for longer than it waits at a time.
func TestStartWhileHeld(t *testing.T) {
	t.Parallel()
	d := database{"sqlite", t.TempDir() + "/queue.db"}
	q := d.open(t)
	id := add(t, q, AddOptions{})
	c := spawn(t, d, childHold+"=1", childQuick+"=1")
	c.says("holding")
	c.stopped()
	start(t, d.with(t, Options{busy: 100 * time.Millisecond}), WorkOptions{Slots: 1})
	time.Sleep(time.Second)
	if p := show(t, q, id); p.Done != 1 || p.Workers > 1 {
		t.Errorf("while a worker holds the queue: %+v", p)
	}
	c.signal(syscall.SIGKILL)
	whole(t, q, until(t, q, id, "done", inState(Done)))
	sound(t, d)
}

// TestOpenedTwice opens a queue's file twice in one process: SQLite's lock on it
// must outlast that. Without it another process that closes the file may take
// itself for the last and remove the log that is still written ("How To Corrupt
// An SQLite Database File", 2.2). Locks are read as proc_locks(5) has them.
func TestOpenedTwice(t *testing.T) {
	t.Parallel()
	d := database{"sqlite", filepath.Join(t.TempDir(), "queue.db")}
	for range 2 {
		d.open(t)
		st, err := os.Stat(d.where)
		if err != nil {
			t.Fatal(err)
		}
		lock := regexp.MustCompile(fmt.Sprintf(`POSIX +ADVISORY +READ +%d [0-9a-f:]+:%d `, os.Getpid(), st.Sys().(*syscall.Stat_t).Ino))
		if b := must(os.ReadFile("/proc/locks")); !lock.Match(b) {
			t.Errorf("no lock of %d:\n%s", st.Sys().(*syscall.Stat_t).Ino, b)
		}
	}
}
