package paper

import (
	"image"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/tui/kit"
)

// View draws the screen.
func (s *Screen) View(width, height int) string {
	s.room = image.Pt(width, height)
	switch {
	case s.choosing != nil:
		return s.choosing.view(s, width, height)
	case s.win.open:
		return s.win.view(s, width, height)
	}
	l := s.layout()
	form := s.texts(s.leftRows(l), l.form.Dx(), l.form.Dy())
	switch {
	case !l.facts.Empty():
		right := s.texts(s.factRows(l.facts.Dx(), true), l.facts.Dx(), l.facts.Dy()) + "\n" + kit.Fit("", l.facts.Dx()) + "\n" +
			s.texts(s.findingRows(l.findings.Dx(), l.findings.Dy()), l.findings.Dx(), l.findings.Dy())
		return kit.Beside(form, kit.Block("", 2, height), s.drawSheet(l.sheet.Dx(), l.sheet.Dy()), kit.Block("", 2, height), right)
	case !l.findings.Empty():
		finds := s.texts(s.findingRows(l.findings.Dx(), l.findings.Dy()), l.findings.Dx(), l.findings.Dy())
		if !l.sheet.Empty() {
			finds = s.drawSheet(l.sheet.Dx(), l.sheet.Dy()) + "\n" + kit.Fit("", l.sheet.Dx()) + "\n" + finds
		}
		return kit.Beside(form, kit.Block("", 1, height), finds)
	case l.sheet.Min.X > 0:
		return kit.Beside(form, kit.Block("", l.sheet.Min.X-l.form.Max.X, height), s.drawSheet(l.sheet.Dx(), l.sheet.Dy()))
	case !l.sheet.Empty():
		return s.drawSheet(l.sheet.Dx(), l.sheet.Dy()) + "\n" + kit.Fit("", width) + "\n" + form
	}
	return form
}

// layout shares out the screen as it is.
func (s *Screen) layout() layout {
	width := s.room.X - formWide - 1
	if s.room.X >= roomyFrom {
		width = s.room.X - formRoomy - 1
	}
	return lay(s.room.X, s.room.Y, len(s.findingRows(max(8, width), anyHeight)))
}

// leftRows are the rows of the form, and of all that has no part of its own.
func (s *Screen) leftRows(l layout) []row {
	width, height := l.form.Dx(), l.form.Dy()
	headings := height >= len(fields)+7
	below := func(rows []row, more []row) []row {
		if len(rows)+len(more) < height || headings {
			rows = append(rows, row{"", nothing})
		}
		return append(rows, more...)
	}
	rows := s.formRows(width, headings)
	if l.facts.Empty() {
		if facts := s.factRows(width, true); headings && len(rows)+1+len(facts) > height {
			headings = false
			rows = s.formRows(width, false)
		}
		rows = below(rows, s.factRows(width, headings))
	}
	if l.findings.Empty() {
		rows = below(rows, s.findingRows(width, anyHeight))
	}
	return rows
}

// itemAt is the field or finding at a cell of the screen; nothing where there
// is none.
func (s *Screen) itemAt(x, y int) int {
	l, at := s.layout(), image.Pt(x, y)
	look := func(r image.Rectangle, rows []row) int {
		shown, _ := part(rows, r.Dy(), s.cursor)
		if i := y - r.Min.Y; i < len(shown) {
			return shown[i].item
		}
		return nothing
	}
	switch {
	case at.In(l.form):
		return look(l.form, s.leftRows(l))
	case at.In(l.findings):
		return look(l.findings, s.findingRows(l.findings.Dx(), l.findings.Dy()))
	}
	return nothing
}

// mouse: a click goes to a line, a second one is Enter; the wheel takes the
// next value of the line below the pointer.
func (s *Screen) mouse(msg tea.MouseMsg) tea.Cmd {
	e := tea.MouseEvent(msg)
	switch {
	case s.ask.Open():
		return nil
	case s.choosing != nil:
		return s.choosing.mouse(s, e)
	case s.win.open:
		return s.win.mouse(s, e)
	}
	item := s.itemAt(e.X, e.Y)
	if item == nothing || e.Action != tea.MouseActionPress {
		return nil
	}
	switch e.Button {
	case tea.MouseButtonLeft:
		if item == s.cursor {
			return s.enter()
		}
		s.cursor = item
	case tea.MouseButtonWheelUp:
		s.cursor = item
		return s.step(item, 1)
	case tea.MouseButtonWheelDown:
		s.cursor = item
		return s.step(item, -1)
	}
	return nil
}

// pad makes lines of a block as wide as asked.
func pad(lines []string, width, height int) string {
	return kit.Block(strings.Join(lines, "\n"), width, height)
}
