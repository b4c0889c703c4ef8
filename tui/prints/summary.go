package prints

import (
	"context"
	"errors"
	"fmt"
	"strings"
	"time"

	"github.com/charmbracelet/x/ansi"

	"leadline/render/words"
)

// lostAfter is how long the queue may keep silent before that is said.
const lostAfter = 3 * time.Second

// lost says since when the queue has not answered; "" while it does.
func (s *Screen) lost() string {
	silent := s.now.Sub(s.look.since)
	if !s.open || s.look.since.IsZero() || silent <= lostAfter {
		return ""
	}
	text := "no answer from the queue for " + words.Span(silent.Seconds())
	if err := s.look.err; err != nil && !errors.Is(err, context.DeadlineExceeded) {
		return text + ": " + clean(err.Error())
	}
	return text + "; still trying"
}

// summary is the first line: prints by state, the workers, the whole queue's time.
func (s *Screen) summary(width int) string {
	st := s.desk.Style
	if l := s.lost(); l != "" {
		return row{{"! ", st.Warn}, {l, st.Warn}}.render(width, nil)
	}
	if !s.look.first {
		return ""
	}
	o := overall(s.sight.prints)
	counts := o.counts()
	crew := counts
	if n := len(s.sight.workers); n > 0 {
		crew += "   " + words.Plural(n, "worker", "workers")
	}
	if o.rate > 0 {
		crew += ", " + words.Amount(o.rate, "px/s")
	}
	times := o.time(len(s.sight.workers))
	for _, left := range []string{crew, counts, ""} {
		for _, right := range times {
			gap := width - ansi.StringWidth(left) - ansi.StringWidth(right)
			if gap >= 3 || left == "" && gap >= 0 {
				return row{{left + strings.Repeat(" ", gap), st.Text}, {right, st.Strong}}.render(width, nil)
			}
		}
	}
	return row{{times[len(times)-1], st.Strong}}.render(width, nil)
}

// Status says who works on the queue.
func (s *Screen) Status() string {
	st := s.desk.Style
	running, _ := s.Busy()
	n := 0
	for i := range s.sight.workers {
		if !s.here(&s.sight.workers[i]) {
			n++
		}
	}
	switch {
	case s.q == nil:
		return st.Warn.Render("no queue")
	case s.hand != nil && running > 0:
		return st.Good.Render(fmt.Sprintf("%s, %s in hand", s.workWords(), words.Plural(running, "task", "tasks")))
	case s.hand != nil:
		return st.Good.Render(s.workWords())
	case n > 0:
		return st.Text.Render(fmt.Sprintf("not working here; %s elsewhere", words.Plural(n, "worker", "workers")))
	case s.editor.Open():
		return st.Text.Render("nobody works on the queue: the print is made here at once, on " + words.Plural(s.slots, "core", "cores"))
	case s.look.first:
		return st.Text.Render(fmt.Sprintf("not working here; w works on %s", words.Plural(s.slots, "core", "cores")))
	}
	return ""
}
