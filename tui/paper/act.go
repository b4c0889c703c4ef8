package paper

import (
	"fmt"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/tui/kit"
)

// moveCursor goes up or down the lines, fields first and findings behind them.
func (s *Screen) moveCursor(by int) tea.Cmd {
	s.cursor += by
	s.clampCursor()
	return nil
}

// toFindings goes to the first finding, and from there back to the form.
func (s *Screen) toFindings() tea.Cmd {
	switch {
	case s.cursor >= len(fields):
		s.cursor = 0
	case len(s.findings()) == 0:
		return kit.Tell("there are no findings")
	default:
		s.cursor = len(fields)
	}
	return nil
}

// enter writes a field, or goes where a finding points.
func (s *Screen) enter() tea.Cmd {
	if s.cursor >= len(fields) {
		return s.jump()
	}
	f := &fields[s.cursor]
	if f.read == nil {
		return s.step(s.cursor, 1)
	}
	return s.write(f, f.text(s))
}

// paste writes what is pasted into the field under the cursor.
func (s *Screen) paste(text string) tea.Cmd {
	if s.win.open || s.cursor >= len(fields) || fields[s.cursor].read == nil {
		return nil
	}
	return s.write(&fields[s.cursor], strings.Join(strings.Fields(text), " "))
}

// write asks for a field's text and takes what the frame's rules take.
func (s *Screen) write(f *field, text string) tea.Cmd {
	check := func(t string) error {
		e, err := f.read(s, t)
		if err == nil && e.frame != nil {
			err = s.try(e.frame)
		}
		return err
	}
	return s.ask.Ask(f.label, text, check, func(t string) tea.Cmd {
		e, err := f.read(s, t)
		if err != nil {
			return kit.Fail(err)
		}
		return s.apply(f, e)
	})
}

// apply does what a field's edit says.
func (s *Screen) apply(f *field, e edit) tea.Cmd {
	if e.frame != nil {
		return s.change(f.done, e.frame)
	}
	if !e.distance.IsZero() {
		s.distance = e.distance
		s.clampCursor()
	}
	return nil
}

// step takes a field's next value, or the one before.
func (s *Screen) step(at, by int) tea.Cmd {
	if at >= len(fields) || fields[at].next == nil {
		return nil
	}
	return s.apply(&fields[at], fields[at].next(s, by))
}

// turnSheet swaps the sides.
func (s *Screen) turnSheet() tea.Cmd { return s.apply(&fields[atTurn], swapSides()) }

// jump goes where the finding under the cursor points.
func (s *Screen) jump() tea.Cmd {
	list := s.findings()
	at := s.cursor - len(fields)
	if at >= len(list) {
		return nil
	}
	if f := list[at]; f.screen != "" {
		return func() tea.Msg { return kit.Go(f.screen) }
	}
	s.cursor = list[at].field
	return nil
}

// openWindow shows the sheet's own pixels: where the finding under the cursor
// can be seen, else where the window was last.
func (s *Screen) openWindow() tea.Cmd {
	if list := s.findings(); s.cursor >= len(fields) && s.cursor-len(fields) < len(list) {
		if f := list[s.cursor-len(fields)]; f.placed {
			return s.win.show(s, f.u, f.v)
		}
	}
	return s.win.show(s, s.win.u, s.win.v)
}

// back says what a step undid or did again.
func (s *Screen) back(what string) tea.Cmd {
	s.clampCursor()
	if what == "" {
		return kit.Tell("there is no step that way")
	}
	back, forward := s.desk.Steps()
	return kit.Tell(fmt.Sprintf("step: %s (%d back, %d forward)", what, back, forward))
}

// Status says what the line under the cursor is for, or what is asked.
func (s *Screen) Status() string {
	st := s.desk.Style
	switch {
	case s.ask.Open():
		return s.ask.View(st, s.room.X)
	case s.choosing != nil:
		return st.Faint.Render(s.choosing.status())
	case s.win.open:
		return s.win.status(s)
	case s.cursor < len(fields):
		return st.Faint.Render(fields[s.cursor].help)
	}
	if list := s.findings(); s.cursor-len(fields) < len(list) {
		f := list[s.cursor-len(fields)]
		text := f.cure + "; enter goes there"
		if f.placed {
			text += ", w shows it 1:1"
		}
		return st.Text.Render(text)
	}
	return ""
}

// glyph is the first text, or the second where the terminal shows ASCII alone.
func (s *Screen) glyph(text, ascii string) string {
	if s.desk.ASCII {
		return ascii
	}
	return text
}
