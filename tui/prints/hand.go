package prints

import (
	"context"
	"errors"
	"fmt"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/jobs"
	"leadline/render"
	"leadline/render/words"
	"leadline/tui/kit"
)

// hand is the work on the queue inside this program.
type hand struct {
	cancel   context.CancelFunc
	done     chan struct{}
	err      error // once done is closed
	stopping bool
}

// ended says that a hand has stopped.
type ended struct{ of *hand }

// toggleWork starts or stops the work here.
func (s *Screen) toggleWork() tea.Cmd {
	switch {
	case s.hand == nil:
		return tea.Batch(s.startWork(), kit.Tell(s.workWords()))
	case !s.hand.stopping:
		s.hand.stopping = true
		s.hand.cancel()
	}
	return nil
}

// startWork begins the work here where it is not under way.
func (s *Screen) startWork() tea.Cmd {
	if s.hand != nil {
		return nil
	}
	ctx, cancel := context.WithCancel(context.Background())
	h := &hand{cancel: cancel, done: make(chan struct{})}
	s.hand = h
	q, o := s.q, jobs.WorkOptions{Slots: s.slots}
	go func() {
		defer close(h.done)
		h.err = q.Work(ctx, o)
	}()
	return func() tea.Msg {
		<-h.done
		return ended{h}
	}
}

// ended takes note that the work here has stopped, of itself or when asked to.
func (s *Screen) ended(m ended) tea.Cmd {
	if m.of != s.hand {
		return nil
	}
	s.hand = nil
	m.of.cancel()
	if err := m.of.err; err != nil && !errors.Is(err, context.Canceled) {
		return tea.Batch(kit.Fail(fmt.Errorf("the work here ended: %w", err)), s.again())
	}
	return s.again()
}

// Working says whether this program works on the queue.
func (s *Screen) Working() bool { return s.hand != nil }

// StopWorking ends the work here and waits until what was in hand is back in the
// queue, or the context ends. It is called when the screens are closed, not
// while Update runs.
func (s *Screen) StopWorking(ctx context.Context) {
	h := s.hand
	if h == nil {
		return
	}
	h.cancel()
	select {
	case <-h.done:
		s.hand = nil
	case <-ctx.Done():
	}
}

// Busy says how many tasks this program has in hand, and whether a worker
// elsewhere would go on without it, as last seen.
func (s *Screen) Busy() (running int, elsewhere bool) {
	here := 0
	for i := range s.sight.workers {
		if w := &s.sight.workers[i]; s.here(w) {
			running += w.Running
			here++
		}
	}
	if s.hand == nil {
		running = 0
	}
	for i := range s.sight.prints {
		p := &s.sight.prints[i] // counts who is alive by the queue's own clock
		elsewhere = elsewhere || !p.Over() && p.Release == render.Release && p.Numerics == render.Numerics && p.Progress.Workers > here
	}
	return running, elsewhere
}

// here says whether a worker is this program.
func (s *Screen) here(w *jobs.Worker) bool { return w.PID == s.pid && w.Host == s.host }

// workWords says what the work here is.
func (s *Screen) workWords() string {
	if s.hand.stopping {
		return "stopping the work here"
	}
	return "working here on " + words.Plural(s.slots, "core", "cores")
}
