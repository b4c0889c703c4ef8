package inking

import (
	"image"

	tea "github.com/charmbracelet/bubbletea"
)

// mouse obeys the mouse; whatever it does a key does too.
func (s *Screen) mouse(e tea.MouseMsg) tea.Cmd {
	if s.ask.Open() {
		return nil
	}
	l, at := lay(s.room.X, s.room.Y, len(s.rows())), image.Pt(e.X, e.Y)
	switch {
	case s.locker != nil:
		return s.lockerMouse(e, l)
	case e.Action == tea.MouseActionRelease:
		s.drag, s.run = place{}, run{}
	case e.Action == tea.MouseActionMotion && s.drag.kind == aStop:
		return s.moveStop(s.drag.stop, l.placeAt(e.X))
	case e.Action == tea.MouseActionMotion && s.drag.kind == mixer:
		return s.slideTo(s.drag.stop, s.trackValue(s.drag.stop, e.X, l))
	case e.Button == tea.MouseButtonWheelUp:
		return s.line(-1)
	case e.Button == tea.MouseButtonWheelDown:
		return s.line(1)
	case e.Action != tea.MouseActionPress || e.Button != tea.MouseButtonLeft:
	case at.In(l.band) || at.In(l.grey) || at.In(l.marks):
		return s.grasp(s.stopNear(l, e.X))
	case s.mixerShown(l) && at.In(s.mixerArea(l)):
		return s.mixerPress(e, l)
	case at.In(l.list):
		if lines := s.lines(l.list.Dy()); e.Y < len(lines) && lines[e.Y] >= 0 {
			s.run, s.mixing = run{}, false
			return s.goTo(s.rows()[lines[e.Y]].place)
		}
	}
	return nil
}

// stopNear is the stop whose mark is nearest to a column.
func (s *Screen) stopNear(l layout, x int) int {
	best, least := 0, 1<<30
	for i, stop := range s.now().ramp.Stops {
		if d := max(l.column(stop.At)-x, x-l.column(stop.At)); d < least {
			best, least = i, d
		}
	}
	return best
}

// grasp takes a stop in hand, for dragging if it is not an end.
func (s *Screen) grasp(i int) tea.Cmd {
	s.run = run{}
	s.hold(place{aStop, i})
	if i > 0 && i < len(s.now().ramp.Stops)-1 {
		s.drag = place{aStop, i}
	}
	return nil
}

// mixerArea is where the mixer is drawn: its own place, or the list's.
func (s *Screen) mixerArea(l layout) image.Rectangle {
	if !l.hidden() {
		return l.mixer
	}
	return l.list
}

func (s *Screen) mixerShown(l layout) bool { return !l.hidden() || s.mixing }

// mixerPress takes hold of a slider where its track is pressed.
func (s *Screen) mixerPress(e tea.MouseMsg, l layout) tea.Cmd {
	area := s.mixerArea(l)
	i := e.Y - area.Min.Y - 1
	if i < 0 || i >= len(sliders) {
		return nil
	}
	s.run, s.mixing, s.slider = run{}, true, i
	if from := track(area.Dx()); e.X < area.Min.X+from.X || e.X >= area.Min.X+from.X+from.Y {
		return nil
	}
	s.drag = place{mixer, i}
	return s.slideTo(i, s.trackValue(i, e.X, l))
}

// trackValue is the value of a slider at a column of the screen; the track's
// ends are the slider's.
func (s *Screen) trackValue(i, x int, l layout) float64 {
	area := s.mixerArea(l)
	from := track(area.Dx())
	n := max(from.Y-1, 1)
	share := float64(min(max(x-area.Min.X-from.X, 0), n)) / float64(n)
	if i == sliderH && share == 1 {
		return sliders[i].most - sliders[i].fine
	}
	return share * sliders[i].most
}

// lockerMouse tries the ramp that is clicked on, and takes it at the second
// click.
func (s *Screen) lockerMouse(e tea.MouseMsg, l layout) tea.Cmd {
	k := s.locker
	switch {
	case e.Button == tea.MouseButtonWheelUp:
		s.tryOn(k.at - 1)
	case e.Button == tea.MouseButtonWheelDown:
		s.tryOn(k.at + 1)
	case e.Action == tea.MouseActionPress && e.Button == tea.MouseButtonLeft && e.X >= l.list.Min.X && e.Y >= 1 && e.Y < l.picture.Max.Y:
		from, to := window(len(k.entries), l.picture.Dy()-1-noteHeight(l.picture.Dy()), k.at)
		i := from + e.Y - 1
		if i >= to {
			return nil
		}
		if i == k.at && k.proposal != nil {
			return s.take()
		}
		s.tryOn(i)
	}
	return nil
}
