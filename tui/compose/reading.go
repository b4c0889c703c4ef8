package compose

import (
	"context"
	"fmt"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render/kernel"
	"leadline/render/orbit"
	"leadline/render/words"
)

// reading is what lies under the plumb: the sample, and the period of the atom
// that the spot belongs to.
type reading struct {
	text string
	gen  int
	stop context.CancelFunc
}

// Messages of readings.
type (
	readTick   struct{ gen int }
	periodRead struct {
		gen  int
		text string
	}
)

// settleTime is how long the plumb must rest before its period is looked for.
const settleTime = 250 * time.Millisecond

// underShare is the radius looked at, as a share of the trim's height.
const underShare = 1.0 / 40

// longestReading bounds the iterations of a reading, which comes unasked.
const longestReading = 200_000

// pointed begins a new reading, once the plumb rests.
func (s *Screen) pointed() tea.Cmd {
	if s.under.stop != nil {
		s.under.stop()
	}
	s.under = reading{gen: s.under.gen + 1, text: s.sample()}
	gen := s.under.gen
	return tea.Tick(settleTime, func(time.Time) tea.Msg { return readTick{gen} })
}

// sample says what the preview has under the plumb.
func (s *Screen) sample() string {
	p := s.desk.Picture
	if p == nil || p.Err != nil || !s.plumb.on {
		return ""
	}
	i := min(int(s.plumb.u*float64(p.Size.X)), p.Size.X-1)
	j := min(int(s.plumb.v*float64(p.Size.Y)), p.Size.Y-1)
	switch f := p.Fields[j*p.Size.X+i]; f.State {
	case kernel.Escaped:
		return "n " + words.Count(int64(f.N))
	case kernel.Inside:
		return "inside"
	}
	return "undecided"
}

// read looks for the period under the resting plumb.
func (s *Screen) read(t readTick) tea.Cmd {
	if t.gen != s.under.gen || !s.plumb.on {
		return nil
	}
	x, y := s.spot()
	target, err := targetAt(s.desk.Frame, x, y, underShare, nil)
	if err != nil {
		return nil // the frame's own rules keep this from happening
	}
	target.Limit = min(target.Limit, longestReading)
	ctx, cancel := context.WithCancel(context.Background())
	s.under.stop = cancel
	text := s.under.text
	return func() tea.Msg {
		defer cancel()
		n, ok, err := orbit.PeriodAt(ctx, target)
		if err != nil || !ok {
			return periodRead{t.gen, text}
		}
		return periodRead{t.gen, text + fmt.Sprintf(", near period %s", words.Count(int64(n)))}
	}
}

// take shows a period that was found, if the plumb is still there.
func (r *reading) take(m periodRead) {
	if m.gen == r.gen {
		r.text = m.text
	}
}
