package compose

import (
	"strings"

	tea "github.com/charmbracelet/bubbletea"
)

// item is a choice of a menu.
type item struct {
	key, text string
	do        func() tea.Cmd
}

// menu is a line of choices at the foot of the screen.
type menu struct {
	title string
	items []item
}

// choose takes a key while a menu is open; any other key closes it.
func (s *Screen) choose(k tea.KeyMsg) tea.Cmd {
	m := s.menu
	s.menu = nil
	for _, it := range m.items {
		if k.String() == it.key {
			return it.do()
		}
	}
	return nil
}

// line is the menu in one line.
func (m *menu) line(s *Screen) string {
	st := s.desk.Style
	parts := []string{st.Lead.Render(m.title)}
	for _, it := range m.items {
		parts = append(parts, st.Strong.Render(it.key)+" "+st.Text.Render(it.text))
	}
	return strings.Join(parts, "  ")
}
