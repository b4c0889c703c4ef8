package inking

import (
	"reflect"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/palette"
	"leadline/render/frame"
	"leadline/tui/kit"
)

// run is a row of small changes to one value, which are one step of the history.
type run struct {
	what  string       // which value; "": none
	frame *frame.Frame // as the last of them left it
	goes  bool         // the key at hand was another of them
}

// change changes the frame's ink. what is for the history, in the past tense;
// value, if it is not empty, names the value that is changed by small steps. The
// baked ink is the old one's and goes.
func (s *Screen) change(value, what string, f func(*frame.Ink) error) tea.Cmd {
	d := s.desk
	goesOn := value != "" && s.run.what == value && s.run.frame == d.Frame
	g := d.Frame.Clone()
	if err := f(&g.Ink); err != nil {
		return kit.Fail(err)
	}
	if reflect.DeepEqual(g.Ink, d.Frame.Ink) {
		s.run.goes = goesOn
		return nil
	}
	g.Ink.Baked = nil
	if err := g.Validate(); err != nil {
		return kit.Fail(err)
	}
	if goesOn {
		d.Back()
	}
	before, _ := d.Steps()
	err := d.Change(what, func(h *frame.Frame) error { *h = *g; return nil })
	if after, _ := d.Steps(); err != nil || after == before {
		s.run = run{} // back where the run began
		return kit.Fail(err)
	}
	s.run = run{value, d.Frame, true}
	return nil
}

// try says whether a change would be taken; it is what questions check by.
func (s *Screen) try(f func(*frame.Ink) error) error {
	g := s.desk.Frame.Clone()
	if err := f(&g.Ink); err != nil {
		return err
	}
	g.Ink.Baked = nil
	return g.Validate()
}

// changeRamp changes the ramp.
func (s *Screen) changeRamp(value, what string, f func(palette.Ramp) (palette.Ramp, error)) tea.Cmd {
	r, err := f(s.now().ramp)
	if err != nil {
		return kit.Fail(err)
	}
	return s.change(value, what, func(k *frame.Ink) error {
		k.Ramp = new(frame.FromPalette(r))
		return nil
	})
}

// changeDrive changes what the ramp is laid by; a frozen fit goes.
func (s *Screen) changeDrive(value, what string, f func(*frame.Drive)) tea.Cmd {
	return s.change(value, what, func(k *frame.Ink) error { return driven(k, f) })
}

func driven(k *frame.Ink, f func(*frame.Drive)) error {
	was := k.Drive
	f(&k.Drive)
	if !reflect.DeepEqual(was, k.Drive) {
		k.Drive.Fitted = nil
	}
	return nil
}

// back says what was taken back or done again; the history is everybody's.
func (s *Screen) back(what, way string) tea.Cmd {
	if what == "" {
		return kit.Tell("nothing to " + way)
	}
	s.settle()
	if way == "take back" {
		return kit.Tell("taken back: " + what)
	}
	return kit.Tell("done again: " + what)
}
