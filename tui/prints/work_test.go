package prints

import (
	"context"
	"errors"
	"image"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
	"time"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/ansi"

	"leadline/jobs"
	"leadline/render"
	"leadline/tui/cells"
)

// TestPrintHere queues the desk's frame and makes it with the screen's own work.
// The hash must be that of render.Print, and nothing runs once it is stopped.
func TestPrintHere(t *testing.T) {
	dir := inFolder(t)
	q := openQueue(t, filepath.Join(dir, "queue.db"))
	d := drive(t, q)
	if d.s.Working() {
		t.Error("works unasked")
	}
	d.press("n")
	if !d.s.Typing() || !strings.Contains(d.s.View(80, 24), "print to small-reef.png") {
		t.Fatalf("no proposal in\n%s", d.s.View(80, 24))
	}
	d.press("enter")
	d.says("working here on")
	if a := d.got[0].(Added); a.Out != filepath.Join(dir, "small-reef.png") || d.s.chosen != a.ID || !d.s.Working() {
		t.Errorf("%+v, chosen %d", a, d.s.chosen)
	}
	d.says("is done")
	d.until("shown done", func() bool { p := d.s.print(); return p != nil && p.State == jobs.Done && whole(d.s.sight.picture.img) })
	want, err := render.Print(t.Context(), small(t), render.PrintOptions{Out: filepath.Join(t.TempDir(), "a.png"), Audit: auditPixels})
	if err != nil {
		t.Fatal(err)
	}
	if p := d.s.print(); p.SHA256 != want.SHA256 || p.File != filepath.Join(dir, "small-reef.png") {
		t.Errorf("made %s with hash %s, not %s", p.File, p.SHA256, want.SHA256)
	}
	if !strings.Contains(strings.ReplaceAll(d.s.View(200, 60), "\n", ""), want.SHA256) {
		t.Error("the hash is not shown")
	}
	d.s.StopWorking(t.Context())
	if d.s.Working() {
		t.Error("still works")
	}
	for end := time.Now().Add(5 * time.Second); ; time.Sleep(10 * time.Millisecond) {
		stacks := make([]byte, 1<<20)
		stacks = stacks[:runtime.Stack(stacks, true)]
		if !strings.Contains(string(stacks), "startWork") && !strings.Contains(string(stacks), "jobs.(*worker)") {
			break
		}
		if time.Now().After(end) {
			t.Fatalf("goroutines are left:\n%s", stacks)
		}
	}
	if w, err := q.Workers(t.Context()); err != nil || len(w) != 0 {
		t.Errorf("the lease is left: %v, %v", w, err)
	}
}

// whole says whether every pixel of a thumbnail is there.
func whole(img *image.NRGBA) bool {
	for i := 3; img != nil && i < len(img.Pix); i += 4 {
		if img.Pix[i] != 255 {
			return false
		}
	}
	return img != nil
}

// TestWorkKey starts and stops the work by its key.
func TestWorkKey(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	q := openQueue(t, filepath.Join(dir, "queue.db"))
	id := add(t, q, filepath.Join(dir, "a.png"))
	d := drive(t, q)
	if got := ansi.Strip(d.s.Status()); !strings.Contains(got, "not working here; w works on") {
		t.Errorf("status %q", got)
	}
	d.press("w")
	d.says("working here on")
	d.until("done", func() bool { return d.s.print().State == jobs.Done })
	if got := ansi.Strip(d.s.Status()); !strings.HasPrefix(got, "working here on") {
		t.Errorf("status %q", got)
	}
	d.press("w", "w") // the second finds it stopping
	if d.s.hand != nil && ansi.Strip(d.s.Status()) != "stopping the work here" {
		t.Errorf("status %q", d.s.Status())
	}
	d.until("stopped", func() bool { return !d.s.Working() && len(d.s.sight.workers) == 0 })
	if show(t, q, id).SHA256 == "" {
		t.Error("the print is not done")
	}
}

// TestWorkFails says why the work here ended.
func TestWorkFails(t *testing.T) {
	t.Parallel()
	f := scene()
	f.work = errors.New("no locks on this file system")
	d := &driver{t: t, s: still(t, cells.None, f), in: make(chan tea.Msg, 100)}
	d.press("w")
	d.says("the work here ended: no locks on this file system")
	if d.s.Working() {
		t.Error("still works")
	}
}

// TestOthers sees what another process would do through a queue of its own, and
// does not begin to work where that one does.
func TestOthers(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	where := filepath.Join(dir, "queue.db")
	d := drive(t, openQueue(t, where))
	other := openQueue(t, where)
	id := add(t, other, filepath.Join(dir, "theirs.png"))
	d.until("seen", func() bool { return len(d.s.sight.prints) == 1 })
	if err := other.Pause(t.Context(), id); err != nil {
		t.Fatal(err)
	}
	d.until("paused", func() bool { return d.s.print().Paused })
	ctx, cancel := context.WithCancel(t.Context())
	ended := make(chan error, 1)
	go func() { ended <- other.Work(ctx, jobs.WorkOptions{Slots: 1, Name: "elsewhere"}) }()
	d.until("worked", func() bool { return len(d.s.sight.workers) == 1 })
	d.run(d.s.Add(small(t), filepath.Join(dir, "ours.png")))
	d.says("is queued: ")
	d.until("made", func() bool { p := d.s.print(); return p != nil && p.ID != id && p.State == jobs.Done })
	if d.s.Working() {
		t.Error("works although another does")
	}
	if d.s.print().Out != filepath.Join(dir, "ours.png") {
		t.Errorf("chose %+v", d.s.print())
	}
	cancel()
	<-ended
}

// TestFailure makes a print that cannot be written, and shows why and the cure
// in full, however narrow the screen.
func TestFailure(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	q := openQueue(t, filepath.Join(dir, "queue.db"))
	folder := filepath.Join(dir, "gone tomorrow")
	if err := os.Mkdir(folder, 0o700); err != nil {
		t.Fatal(err)
	}
	id := add(t, q, filepath.Join(folder, "a.png"))
	if err := os.RemoveAll(folder); err != nil {
		t.Fatal(err)
	}
	d := drive(t, q)
	d.press("w")
	d.says("failed: ")
	p := show(t, q, id)
	if p.Reason == "" || p.Hint == "" {
		t.Fatalf("no reason or hint: %+v", p)
	}
	for _, w := range []int{44, 80, 200} {
		d.until("shown", func() bool { return d.s.print().State == jobs.Failed })
		text := joined(d.s.facts(d.s.print(), w))
		for _, want := range []string{p.Reason, p.Hint, "! failed"} {
			if !strings.Contains(text, strings.ReplaceAll(want, " ", "")) {
				t.Errorf("at %d cells %q is not in\n%s", w, want, text)
			}
		}
	}
	d.press("w")
	d.until("stopped", func() bool { return !d.s.Working() })
}

// joined is what lines say, without the breaks and spaces.
func joined(lines []string) string {
	return strings.NewReplacer(" ", "", "\n", "").Replace(ansi.Strip(strings.Join(lines, "\n")))
}

// TestInTheWay asks before a print replaces a file or another print's.
func TestInTheWay(t *testing.T) {
	dir := inFolder(t)
	q := openQueue(t, filepath.Join(dir, "queue.db"))
	d := drive(t, q)
	if err := os.WriteFile(filepath.Join(dir, "small-reef.png"), []byte("mine"), 0o600); err != nil {
		t.Fatal(err)
	}
	d.press("n", "enter")
	d.until("asked", func() bool { return d.s.question != nil })
	if got := joined(strings.Split(d.s.View(80, 24), "\n")); !strings.Contains(got, "small-reef.pngistherealready.Printoverit?") {
		t.Errorf("not asked in %s", got)
	}
	d.press("n")
	if all, err := q.List(t.Context()); err != nil || len(all) != 0 {
		t.Fatalf("queued all the same: %v, %v", all, err)
	}
	add(t, q, filepath.Join(dir, "other.png"))
	d.press("n", "ctrl+u", "./other.png", "enter")
	d.until("asked", func() bool { return d.s.question != nil })
	if want := "Print 1 of the queue will be " + filepath.Join(dir, "other.png") + ". Print over it?"; d.s.question.text != want {
		t.Errorf("asked %q", d.s.question.text)
	}
	d.press("y")
	d.until("queued", func() bool { return len(d.s.sight.prints) == 2 })
	d.press("n", "ctrl+u", "no/such/a.png", "enter")
	d.says("no such file")
	d.s.StopWorking(t.Context())
}
