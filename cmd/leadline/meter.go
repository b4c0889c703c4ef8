package main

import (
	"encoding/json"
	"fmt"
	"io"
	"os"
	"strings"
	"sync"
	"time"

	"github.com/spf13/cobra"
	"golang.org/x/term"

	"leadline/render"
)

var progressKinds = []string{"auto", "bar", "json", "none"}

// progressFlag adds --progress to a command.
func progressFlag(c *cobra.Command, kind *string) {
	c.Flags().StringVar(kind, "progress", "auto", "show progress on standard error, in this `FORM`: auto, bar, json or none")
	completeFlag(c, "progress", progressKinds...)
}

// meter shows progress: a line that is written over on a terminal, or lines of
// JSON. It is safe for any number of goroutines.
type meter struct {
	w     io.Writer
	kind  string
	plain bool // the terminal shows no more than ASCII
	done  chan struct{}

	mu     sync.Mutex
	phase  string
	began  time.Time
	last   time.Time
	shown  bool
	latest render.Progress
}

// newMeter chooses the form; auto is a bar on a terminal and nothing else.
func newMeter(w io.Writer, kind string) (*meter, error) {
	switch kind {
	case "bar", "json", "none":
	case "auto":
		kind = "none"
		if isTerminal(w) && os.Getenv("TERM") != "dumb" {
			kind = "bar"
		}
	default:
		return nil, usage(fmt.Errorf("--progress %q is not known", kind), "one of "+strings.Join(progressKinds, ", "))
	}
	m := &meter{w: w, kind: kind, plain: !speaksUTF8(), done: make(chan struct{})}
	if kind == "bar" {
		go m.tick()
	}
	return m, nil
}

// tick redraws the bar every second: a deep tile may take minutes, and the
// time must be seen to pass.
func (m *meter) tick() {
	t := time.NewTicker(time.Second)
	defer t.Stop()
	for {
		select {
		case <-m.done:
			return
		case now := <-t.C:
			m.mu.Lock()
			if m.shown && now.Sub(m.last) >= time.Second {
				m.bar(m.latest, now.Sub(m.began))
			}
			m.mu.Unlock()
		}
	}
}

func isTerminal(w io.Writer) bool {
	f, ok := w.(*os.File)
	return ok && term.IsTerminal(int(f.Fd()))
}

// speaksUTF8 asks the locale, in the order POSIX gives its variables (XBD 8.2).
func speaksUTF8() bool {
	for _, name := range []string{"LC_ALL", "LC_CTYPE", "LANG"} {
		if v := strings.ToLower(os.Getenv(name)); v != "" {
			return strings.Contains(v, "utf-8") || strings.Contains(v, "utf8")
		}
	}
	return false
}

// interval is the least time between two signs of life.
const interval = 150 * time.Millisecond

// tell takes progress from the renderer.
func (m *meter) tell(p render.Progress) {
	if m.kind == "none" {
		return
	}
	m.mu.Lock()
	defer m.mu.Unlock()
	now := time.Now()
	if p.Phase != m.phase {
		m.phase, m.began, m.last = p.Phase, now, time.Time{}
	} else if p.Done < m.latest.Done {
		return // told out of order by another goroutine
	}
	m.latest = p
	if now.Sub(m.last) < interval && p.Done < p.Total {
		return
	}
	m.last = now
	if m.kind == "json" {
		m.line(p, now.Sub(m.began))
		return
	}
	m.bar(p, now.Sub(m.began))
}

// rate is units a second and the seconds left; left is negative while unknown.
func rate(p render.Progress, spent time.Duration) (perSecond, left float64) {
	if spent < interval || p.Done == 0 {
		return 0, -1
	}
	perSecond = float64(p.Done) / spent.Seconds()
	return perSecond, float64(p.Total-p.Done) / perSecond
}

// line writes one line of JSON.
func (m *meter) line(p render.Progress, spent time.Duration) {
	v := struct {
		Phase     string   `json:"phase"`
		Done      int64    `json:"done"`
		Total     int64    `json:"total"`
		Seconds   float64  `json:"seconds"`
		PerSecond float64  `json:"per_second"`
		Left      *float64 `json:"left_seconds"`
	}{Phase: p.Phase, Done: p.Done, Total: p.Total, Seconds: spent.Seconds()}
	perSecond, left := rate(p, spent)
	v.PerSecond = perSecond
	if left >= 0 {
		v.Left = &left
	}
	b, err := json.Marshal(v)
	if err == nil {
		fmt.Fprintf(m.w, "%s\n", b)
	}
}

// bar writes the line over.
func (m *meter) bar(p render.Progress, spent time.Duration) {
	fmt.Fprintf(m.w, "\r%s\x1b[K", barLine(p, spent, m.columns(), m.plain))
	m.shown = true
}

// columns is the terminal's width now, 80 where nobody knows.
func (m *meter) columns() int {
	if f, ok := m.w.(*os.File); ok {
		if w, _, err := term.GetSize(int(f.Fd())); err == nil && w > 0 {
			return w
		}
	}
	return 80
}

// end takes the bar away. It is called once.
func (m *meter) end() {
	close(m.done)
	m.mu.Lock()
	defer m.mu.Unlock()
	if m.shown {
		fmt.Fprint(m.w, "\r\x1b[K")
		m.shown = false
	}
}
