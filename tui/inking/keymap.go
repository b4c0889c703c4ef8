package inking

import (
	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"leadline/tui/kit"
)

// action is a key and what it does.
type action struct {
	key key.Binding
	do  func() tea.Cmd
}

// actions are the keys that hold now.
func (s *Screen) actions() []action {
	switch {
	case s.locker != nil:
		return s.lockerActions()
	case s.mixing:
		return append(s.mixerActions(), s.rampActions()...)
	}
	return append(s.listActions(), s.rampActions()...)
}

func (s *Screen) listActions() []action {
	step := func(by int, fine bool) func() tea.Cmd { return func() tea.Cmd { return s.step(by, fine) } }
	line := func(by int) func() tea.Cmd { return func() tea.Cmd { return s.line(by) } }
	return []action{
		{kit.Bind("↑", "line above", "up"), line(-1)},
		{kit.Bind("↓", "line below", "down"), line(1)},
		{kit.Bind("←", "less; moves a stop", "left"), step(-1, false)},
		{kit.Bind("→", "more; moves a stop", "right"), step(1, false)},
		{kit.Bind("shift+←", "a little less", "shift+left"), step(-1, true)},
		{kit.Bind("shift+→", "a little more", "shift+right"), step(1, true)},
		{kit.Bind("enter", "mix the colour, type the value", "enter", " "), s.enter},
		{kit.Bind("e", "type the value or place", "e"), s.askValue},
		{kit.Bind("home", "first line", "home"), line(-1 << 20)},
		{kit.Bind("end", "last line", "end"), line(1 << 20)},
	}
}

func (s *Screen) mixerActions() []action {
	slide := func(by int, fine bool) func() tea.Cmd { return func() tea.Cmd { return s.slide(by, fine) } }
	which := func(by int) func() tea.Cmd {
		return func() tea.Cmd { s.slider = min(max(s.slider+by, 0), len(sliders)-1); return nil }
	}
	return []action{
		{kit.Bind("↑", "slider above", "up"), which(-1)},
		{kit.Bind("↓", "slider below", "down"), which(1)},
		{kit.Bind("←", "slide down", "left"), slide(-1, false)},
		{kit.Bind("→", "slide up", "right"), slide(1, false)},
		{kit.Bind("shift+←", "a little down", "shift+left"), slide(-1, true)},
		{kit.Bind("shift+→", "a little up", "shift+right"), slide(1, true)},
		{kit.Bind("home", "slider's lower end", "home"), func() tea.Cmd { return s.slideEnd(false) }},
		{kit.Bind("end", "as far as the space goes", "end"), func() tea.Cmd { return s.slideEnd(true) }},
		{kit.Bind("enter", "back to the list", "enter", "esc", "m"), func() tea.Cmd { s.mixing = false; return nil }},
	}
}

func (s *Screen) rampActions() []action {
	return []action{
		{kit.Bind("m", "mix the colour in hand", "m"), func() tea.Cmd { s.mixing = true; return nil }},
		{kit.Bind("c", "type its colour", "c"), func() tea.Cmd { return s.askColour(s.colour().String()) }},
		{kit.Bind("[", "stop before", "["), func() tea.Cmd { return s.otherStop(-1) }},
		{kit.Bind("]", "stop after", "]"), func() tea.Cmd { return s.otherStop(1) }},
		{kit.Bind("a", "add a stop after this", "a"), s.addStop},
		{kit.Bind("d", "remove the stop", "d", "delete"), s.removeStop},
		{kit.Bind("r", "reverse the ramp", "r"), s.reverse},
		{kit.Bind("k", "paint locker: other ramps", "k"), s.openLocker},
		{kit.Bind("s", "save the ramp", "s"), s.askSave},
		{kit.Bind("u", "step back", "u", "backspace"), func() tea.Cmd { return s.back(s.desk.Back(), "take back") }},
		{kit.Bind("U", "step forward", "U"), func() tea.Cmd { return s.back(s.desk.Forward(), "do again") }},
	}
}

// Keys is the key map for help and the foot line, what holds now first.
func (s *Screen) Keys() []kit.Group {
	list, mixer := bindings("List", s.listActions()), bindings("Mixer", s.mixerActions())
	ramp, store := bindings("Ramp and colour", s.rampActions()), bindings("Paint locker", s.lockerActions())
	mouse := kit.Group{Title: "Mouse", Keys: []key.Binding{
		kit.Bind("click", "a line, a stop, a slider"), kit.Bind("drag", "a stop along the ramp, a slider"), kit.Bind("wheel", "through the list")}}
	switch {
	case s.locker != nil:
		return []kit.Group{store, list, mixer, ramp, mouse}
	case s.mixing:
		return []kit.Group{mixer, ramp, list, store, mouse}
	}
	return []kit.Group{list, ramp, mixer, store, mouse}
}

func bindings(title string, all []action) kit.Group {
	g := kit.Group{Title: title}
	for _, a := range all {
		g.Keys = append(g.Keys, a.key)
	}
	return g
}

// line moves the cursor of the list; a colour's line takes the colour in hand.
func (s *Screen) line(by int) tea.Cmd {
	rows := s.rows()
	return s.goTo(rows[min(max(indexOf(rows, s.at)+by, 0), len(rows)-1)].place)
}

func (s *Screen) goTo(p place) tea.Cmd {
	s.at = p
	if p.kind.hasColour() {
		s.hold(p)
	}
	return nil
}

// step is what the arrows do on the line.
func (s *Screen) step(by int, fine bool) tea.Cmd {
	rows := s.rows()
	if r := rows[indexOf(rows, s.at)]; r.step != nil {
		return r.step(by, fine)
	}
	return nil
}

// enter does what the line is for.
func (s *Screen) enter() tea.Cmd {
	switch {
	case s.at.kind == theRamp:
		return s.openLocker()
	case s.at.kind.hasColour():
		s.hold(s.at)
		s.mixing = true
		return nil
	}
	rows := s.rows()
	if rows[indexOf(rows, s.at)].typed != nil {
		return s.askValue()
	}
	return s.step(1, false)
}
