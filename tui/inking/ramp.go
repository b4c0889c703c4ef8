package inking

import (
	"fmt"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/palette"
	"leadline/render/frame"
	"leadline/tui/kit"
)

// setRamp is changeRamp for an ink at hand.
func (s *Screen) setRamp(k *frame.Ink, f func(palette.Ramp) (palette.Ramp, error)) error {
	r, err := f(s.now().ramp)
	if err == nil {
		k.Ramp = new(frame.FromPalette(r))
	}
	return err
}

// nameOf is a ramp's name where the house or the locker has it.
func (s *Screen) nameOf(r palette.Ramp) string {
	for _, n := range palette.Ramps() {
		if sameRamp(n.Ramp, r) {
			return n.Name
		}
	}
	for _, e := range s.named {
		if e.err == nil && sameRamp(e.ramp, r) {
			return e.name
		}
	}
	return fmt.Sprintf("own, %d stops", len(r.Stops))
}

// nextRamp takes the house's ramp before or after the one at hand.
func (s *Screen) nextRamp(by int) tea.Cmd {
	all := palette.Ramps()
	at := -1
	for i, n := range all {
		if sameRamp(n.Ramp, s.now().ramp) {
			at = i
		}
	}
	if at < 0 {
		return s.openLocker() // an own ramp is not lost to a slip of the hand
	}
	return s.takeRamp("ramp", all[(at+by+len(all))%len(all)].Ramp)
}

// takeRamp puts another ramp in place of the one at hand.
func (s *Screen) takeRamp(value string, r palette.Ramp) tea.Cmd {
	return s.changeRamp(value, "another ramp taken", func(palette.Ramp) (palette.Ramp, error) { return r, nil })
}

func (s *Screen) moveStop(i int, at float64) tea.Cmd {
	return s.changeRamp(fmt.Sprint("place of stop ", i), "stop moved", func(r palette.Ramp) (palette.Ramp, error) {
		return moved(r, i, at)
	})
}

// typePlace is a stop's place as text; it must lie between its neighbours.
func (s *Screen) typePlace(k *frame.Ink, i int, text string) error {
	at, err := number(text)
	if err != nil {
		return err
	}
	r := s.now().ramp
	if i > 0 && i < len(r.Stops)-1 {
		if low, high := r.Stops[i-1].At, r.Stops[i+1].At; at <= low || at >= high {
			return &refusal{fmt.Sprintf("%v is beyond a neighbour", at), fmt.Sprintf("between %v and %v", low, high)}
		}
	}
	return s.setRamp(k, func(r palette.Ramp) (palette.Ramp, error) { return moved(r, i, at) })
}

// addStop adds a stop after the one in hand.
func (s *Screen) addStop() tea.Cmd {
	var n int
	cmd := s.changeRamp("", "stop added", func(r palette.Ramp) (out palette.Ramp, err error) {
		out, n, err = split(r, s.stop())
		return out, err
	})
	if cmd == nil {
		s.hold(place{aStop, n})
	}
	return cmd
}

// removeStop takes the stop in hand out.
func (s *Screen) removeStop() tea.Cmd {
	return s.changeRamp("", "stop removed", func(r palette.Ramp) (palette.Ramp, error) { return without(r, s.stop()) })
}

// otherStop takes the stop before or after in hand.
func (s *Screen) otherStop(by int) tea.Cmd {
	n := len(s.now().ramp.Stops)
	i := s.stop()
	if s.hand.kind == aStop {
		i = min(max(i+by, 0), n-1)
	}
	s.hold(place{aStop, i})
	return nil
}

// stop is the number of the stop in hand, or of the one that was last.
func (s *Screen) stop() int { return min(s.hand.stop, len(s.now().ramp.Stops)-1) }

// reverse runs the ramp the other way; the same stop stays in hand.
func (s *Screen) reverse() tea.Cmd {
	last := len(s.now().ramp.Stops) - 1
	cmd := s.changeRamp("", "ramp reversed", func(r palette.Ramp) (palette.Ramp, error) { return reversed(r), nil })
	for _, p := range []*place{&s.at, &s.hand} {
		p.stop = max(last-p.stop, 0)
	}
	return cmd
}

func (s *Screen) toggleSmooth() tea.Cmd {
	return s.changeRamp("", "way between stops changed", func(r palette.Ramp) (palette.Ramp, error) {
		r.Smooth = !r.Smooth
		return r, nil
	})
}

// toggleEnds makes the ends meet; where they do, it ties or unties them.
func (s *Screen) toggleEnds() tea.Cmd {
	r := s.now().ramp
	if r.Cyclic() {
		s.free = !s.free
		return nil
	}
	s.free = false
	return s.changeRamp("", "ends made to meet", func(r palette.Ramp) (palette.Ramp, error) {
		return recoloured(r, len(r.Stops)-1, r.Stops[0].Colour, false), nil
	})
}

func (s *Screen) setScale(by int) tea.Cmd {
	v := s.now().resolved
	return s.change("scale", "scale changed", func(k *frame.Ink) error {
		rescale(k, v, nextScale(v.Drive.Scale, by), s.desk.Picture)
		return nil
	})
}

// toggleLaid changes between a fitted ramp and one with a period.
func (s *Screen) toggleLaid() tea.Cmd {
	v := s.now().resolved
	if v.Drive.Period != 0 {
		return s.changeDrive("", "ramp fitted", fitAgain)
	}
	if s.desk.Picture == nil && v.Drive.Fitted == nil {
		return kit.Tell("the picture is not there yet to say how far the ramp goes")
	}
	f := s.fitted(s.now())
	return s.changeDrive("", "ramp repeated", func(d *frame.Drive) { repeat(d, f) })
}
