package prints

import (
	"context"
	"errors"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/jobs"
	"leadline/tui/cells"
	"leadline/tui/kit"
)

// TestChanges makes every change by keys on a real queue, and asks the queue
// itself what came of it.
func TestChanges(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	q := openQueue(t, filepath.Join(dir, "queue.db"))
	first, second := add(t, q, filepath.Join(dir, "a.png")), add(t, q, filepath.Join(dir, "b.png"))
	d := drive(t, q)
	d.press(" ")
	d.says("is paused")
	if !show(t, q, first).Paused {
		t.Error("space did not pause")
	}
	d.press(" ")
	d.says("goes on")
	if show(t, q, first).Paused {
		t.Error("space did not resume")
	}
	d.press("-", "-", "+", "-") // faster than the queue answers
	d.says("priority 4")
	d.until("settled", func() bool { return len(d.s.todo) == 0 && !d.s.look.asked })
	if got := show(t, q, first).Priority; got != 4 {
		// 2 → 3 → 4 → 3 → 4
		t.Errorf("priority %d, not 4", got)
	}
	if p := d.s.print(); p.ID != first || d.s.at != 1 {
		t.Errorf("the choice went to print %d in place %d", p.ID, d.s.at)
	}
	d.press("-")
	d.says("has priority 4 already")
	d.press("x", "n")
	if d.s.question != nil || show(t, q, first).State == jobs.Cancelled {
		t.Error("n did not leave the print alone")
	}
	d.press("a")
	d.says("nothing to begin again")
	d.press("r")
	d.says("x cancels it first")
	d.press("x", "y")
	d.until("cancelled", func() bool { return d.s.print().State == jobs.Cancelled })
	if s := show(t, q, first).State; s != jobs.Cancelled {
		t.Errorf("x y left the print %s", s)
	}
	d.press(" ")
	d.says("nothing to pause")
	d.press("a")
	d.until("queued", func() bool { return d.s.print().State == jobs.Queued })
	if s := show(t, q, first).State; s != jobs.Queued {
		t.Errorf("a left the print %s", s)
	}
	d.press("x", "y")
	d.until("cancelled", func() bool { return d.s.print().State == jobs.Cancelled })
	d.press("r", "q", "r", "y") // q is no, whatever it does elsewhere
	d.says("is off the list")
	var none *jobs.NoPrintError
	if _, err := q.Show(t.Context(), first); !errors.As(err, &none) {
		t.Errorf("the print is still there: %v", err)
	}
	d.until("the other chosen", func() bool { p := d.s.print(); return len(d.s.sight.prints) == 1 && p.ID == second })
}

// TestNoAnswer holds the queue's answers back: the screen says so, asks nothing
// more meanwhile, goes on taking keys, and recovers.
func TestNoAnswer(t *testing.T) {
	t.Parallel()
	f := scene()
	s := still(t, cells.None, f)
	release := make(chan struct{})
	f.pass = func(ctx context.Context) error {
		select {
		case <-release:
			return nil
		case <-ctx.Done():
			return ctx.Err()
		}
	}
	late := make(chan tea.Msg, 1)
	cmd := s.glance()
	go func() { late <- cmd() }()
	for i := range 13 {
		s.tick(tick{s.beating, at(float64(i + 1))})
		if s.glance() != nil {
			t.Fatal("asks again although an answer is owed")
		}
	}
	if got := s.View(80, 24); !strings.Contains(got, "! no answer from the queue for 13 s; still trying") || !strings.Contains(got, "Undertow") {
		t.Errorf("not said in\n%s", got)
	}
	anew := s.Update(keyMsg("down"))
	if s.print().ID != 9 {
		t.Error("takes no keys")
	}
	close(release)
	s.Update(<-late)
	if got := s.View(80, 24); !strings.Contains(got, "no answer") {
		t.Errorf("an answer to the question before counted in\n%s", got)
	}
	s.Update(anew())
	if got := s.View(80, 24); strings.Contains(got, "no answer") {
		t.Errorf("still said in\n%s", got)
	}
}

// TestLost shows an error of the queue's, and asks again at the next tick.
func TestLost(t *testing.T) {
	t.Parallel()
	f := scene()
	s := still(t, cells.None, f)
	f.pass = func(context.Context) error { return errors.New("connection refused") }
	s.Update(s.glance()())
	s.tick(tick{s.beating, at(5)})
	if got := s.View(80, 24); !strings.Contains(got, "no answer from the queue for 5 s: connection refused") {
		t.Errorf("not said in\n%s", got)
	}
	if !s.look.asked {
		t.Error("not asked again")
	}
}

// TestStale drops an answer from before a change.
func TestStale(t *testing.T) {
	t.Parallel()
	f := scene()
	f.move = func(int) {}
	s := still(t, cells.None, f)
	old := s.glance()().(sight)
	s.key(keyMsg("-"))
	s.Update(old)
	if s.print().Priority != 2 {
		t.Errorf("an old answer took the priority back to %d", s.print().Priority)
	}
}

// TestOrder makes changes one after the other, in the order of the keys.
func TestOrder(t *testing.T) {
	t.Parallel()
	f := scene()
	var got []int
	f.move = func(to int) {
		time.Sleep(time.Duration(5-to) * 5 * time.Millisecond) // the first would end last
		got = append(got, to)
	}
	d := &driver{t: t, s: still(t, cells.None, f), in: make(chan tea.Msg, 100)}
	d.press("-", "-", "-", "+")
	d.until("all made", func() bool { return len(d.s.todo) == 0 })
	if !slices.Equal(got, []int{2, 3, 4, 3}) {
		t.Errorf("moved to %v", got)
	}
}

// TestNoQueue says why there is none, at every key.
func TestNoQueue(t *testing.T) {
	t.Parallel()
	k := desk(t, cells.None)
	k.NoQueue = &jobs.AddressError{What: "a queue cannot be at an address of the kind gopher"}
	s := New(k)
	if c := s.Update(kit.Opened(name)); c != nil {
		t.Error("asks a queue that is not there")
	}
	for _, size := range [][2]int{{40, 10}, {80, 24}} {
		got := joined(strings.Split(s.View(size[0], size[1]), "\n"))
		for _, want := range []string{k.NoQueue.Error(), "anaddressispostgres://USER@HOST/DATABASE"} {
			if !strings.Contains(got, strings.ReplaceAll(want, " ", "")) {
				t.Errorf("%q is not in %s", want, got)
			}
		}
	}
	for _, c := range []tea.Cmd{s.Update(keyMsg("w")), s.Update(keyMsg("x")), s.Ask(), s.Add(small(t), "a.png")} {
		if say, ok := c().(kit.Say); !ok || !say.Bad || !strings.Contains(say.Text, "gopher") {
			t.Errorf("said %v", say)
		}
	}
	if n, elsewhere := s.Busy(); s.Working() || n != 0 || elsewhere {
		t.Error("busy without a queue")
	}
	s.StopWorking(t.Context())
}
