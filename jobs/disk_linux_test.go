package jobs

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"
)

// disk mounts an empty file system of a size on a folder of its own.
func disk(t *testing.T, size string) string {
	t.Helper()
	dir := t.TempDir()
	if err := syscall.Mount("tmpfs", dir, "tmpfs", 0, "size="+size); err != nil {
		t.Skipf("the right to mount a small disk (root) is missing: %v", err)
	}
	t.Cleanup(func() {
		if err := syscall.Unmount(dir, syscall.MNT_DETACH); err != nil {
			t.Errorf("unmounting %s: %v", dir, err)
		}
	})
	return dir
}

// fill leaves no page free on a disk but the bytes asked for; empty makes room
// again.
func fill(t *testing.T, dir string, but int) {
	t.Helper()
	f, err := os.Create(filepath.Join(dir, "ballast"))
	if err != nil {
		t.Error(err)
		return
	}
	defer f.Close()
	page := make([]byte, os.Getpagesize())
	var n int64
	for err == nil {
		_, err = f.Write(page)
		n += int64(len(page))
	}
	if !errors.Is(err, syscall.ENOSPC) {
		t.Error(err)
	}
	if err := f.Truncate(n - int64(len(page)) - int64(but)); err != nil {
		t.Error(err)
	}
}

func empty(t *testing.T, dir string) {
	t.Helper()
	if err := os.Remove(filepath.Join(dir, "ballast")); err != nil {
		t.Fatal(err)
	}
}

// TestFullSpoolDisk fills the spool's disk between two tiles.
func TestFullSpoolDisk(t *testing.T) {
	t.Parallel()
	d := onDesk(t)
	dir := disk(t, "1m")
	q := d.spooled(t, filepath.Join(dir, "spool"))
	for at, times := range map[int][]int{planIndex: {2, 1, 1, 1, 1, 1, 1}, 2: {1, 1, 1, 2, 1, 1, 1}} {
		id := add(t, q, AddOptions{})
		r := newCounter(at, func() { fill(t, dir, 0) })
		p := drained(t, q, id, r.before)
		failed(t, p, max(at, 0), "no space left on device", "make room in "+dir)
		if left, err := filepath.Glob(filepath.Join(dir, "spool", "*", "*.part")); err != nil || len(left) > 0 {
			t.Errorf("left behind: %v, %v", left, err)
		}
		empty(t, dir)
		again(t, q, id)
		whole(t, q, drained(t, q, id, r.before))
		r.expect(t, times...)
	}
}

// TestFullOutputDisk fills the disk on which the print is assembled: to the
// last page, and so that it takes the file's beginning.
func TestFullOutputDisk(t *testing.T) {
	t.Parallel()
	d := onDesk(t)
	dir := disk(t, "1m")
	q := d.open(t)
	for _, but := range []int{0, os.Getpagesize()} {
		id := add(t, q, AddOptions{Out: filepath.Join(dir, fmt.Sprintf("%d.png", but))})
		r := newCounter(assemblyIndex, func() { fill(t, dir, but) })
		failed(t, drained(t, q, id, r.before), 6, "no space left on device", "the disk of folder "+dir+" is full")
		for _, e := range list(t, dir) {
			if e != "ballast" && strings.Contains(e, fmt.Sprint(but)) {
				t.Errorf("left behind: %s", e)
			}
		}
		empty(t, dir)
		again(t, q, id)
		whole(t, q, drained(t, q, id, r.before))
		r.expect(t, 1, 1, 1, 1, 1, 1, 1)
	}
}

// list names what is in a folder.
func list(t *testing.T, dir string) (names []string) {
	t.Helper()
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		names = append(names, e.Name())
	}
	return names
}

// TestReadOnly makes the spool's disk, then the print's, read-only while tiles
// are rendered, as a kernel does with a disk that fails.
func TestReadOnly(t *testing.T) {
	t.Parallel()
	d := onDesk(t)
	remount := func(dir string, flags uintptr) {
		if err := syscall.Mount("", dir, "", syscall.MS_REMOUNT|flags, ""); err != nil {
			t.Error(err)
		}
	}
	dir := disk(t, "1m")
	for _, c := range []struct {
		spool, out string
		done, last int
		hint       string
	}{
		{dir, t.TempDir(), 3, 2, "allow writing to the spool's folder"},
		{t.TempDir(), dir, 6, 1, "the folder " + dir},
	} {
		q := d.spooled(t, filepath.Join(c.spool, "spool"))
		id := add(t, q, AddOptions{Out: filepath.Join(c.out, "a.png")})
		r := newCounter(3, func() { remount(dir, syscall.MS_RDONLY) })
		failed(t, drained(t, q, id, r.before), c.done, "read-only file system", c.hint)
		remount(dir, 0)
		again(t, q, id)
		whole(t, q, drained(t, q, id, r.before))
		r.expect(t, 1, 1, 1, 1, c.last, 1, 1)
	}
}

// TestFullDatabaseDisk fills the disk of SQLite's own file in the middle of a
// tile. Nothing can be written down then, a failure neither: the worker keeps
// its result and goes on when there is room.
func TestFullDatabaseDisk(t *testing.T) {
	t.Parallel()
	dir := disk(t, "8m")
	d := database{"sqlite", "sqlite:" + filepath.Join(dir, "queue.db")}
	q := d.spooled(t, filepath.Join(t.TempDir(), "spool"))
	id := add(t, q, AddOptions{})
	full := make(chan struct{})
	r := newCounter(3, func() { fill(t, dir, 0); close(full) })
	start(t, q, WorkOptions{Slots: 1, before: r.before})
	<-full
	time.Sleep(time.Second) // many tries to write
	if p := show(t, q, id); p.State != Rendering || p.Done != 3 {
		t.Errorf("on a full disk: %+v", p)
	}
	if err := q.Pause(t.Context(), id); err == nil || !strings.Contains(err.Error(), "full") || hintOf(err) == "" {
		t.Errorf("pausing on a full disk: %v", err)
	}
	empty(t, dir)
	whole(t, q, until(t, q, id, "done", inState(Done)))
	r.expect(t, 1, 1, 1, 1, 1, 1, 1)
	sound(t, d)
}

// TestKilledOnFullDisk kills a worker whose database cannot be written.
func TestKilledOnFullDisk(t *testing.T) {
	t.Parallel()
	dir := disk(t, "8m")
	d := database{"sqlite", "sqlite:" + filepath.Join(dir, "queue.db")}
	q := d.open(t)
	id := add(t, q, AddOptions{})
	c := spawn(t, d, childHang+"=3", childQuick+"=1")
	c.says("begin 3")
	q.Close() // so that the worker's end leaves the log to be recovered
	fill(t, dir, 0)
	time.Sleep(2 * quick.beat)
	c.signal(syscall.SIGKILL)
	_ = c.cmd.Wait() // killed
	sound(t, d)
	empty(t, dir)
	sound(t, d)
	q = d.open(t)
	if p := show(t, q, id); p.State != Rendering || p.Done != 3 {
		t.Errorf("%+v", p)
	}
	r := newCounter(9, func() {})
	start(t, q, WorkOptions{Slots: 1, before: r.before})
	p := until(t, q, id, "done", inState(Done))
	whole(t, q, p)
	r.expect(t, 0, 0, 0, 0, 1, 1, 1)
	if p.Rescued != 1 {
		t.Errorf("%d rescued", p.Rescued)
	}
}
