package tui

import (
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/tui/kit"
)

// helpLines is the open screen's key map and the program's own, as text.
func (m *model) helpLines() []string {
	s := m.desk.Style
	lines := []string{s.Strong.Render("Keys of " + m.screen().Name()), ""}
	for _, g := range append(m.screen().Keys(), own()) {
		lines = append(lines, s.Lead.Render(g.Title))
		for _, k := range g.Keys {
			lines = append(lines, "  "+s.Strong.Render(kit.Fit(k.Help().Key, 14))+s.Text.Render(k.Help().Desc))
		}
		lines = append(lines, "")
	}
	return lines[:len(lines)-1]
}

// helpView shows as much of help as fits; in two columns where there is room.
func (m *model) helpView() string {
	lines := m.helpLines()
	rows := m.height - 1
	columns := max(1, m.width/58)
	if columns > 1 && len(lines) > rows {
		per := rows
		var blocks []string
		for i := 0; i < columns && i*per < len(lines); i++ {
			blocks = append(blocks, kit.Block(strings.Join(lines[i*per:min(len(lines), (i+1)*per)], "\n"), m.width/columns, rows))
		}
		if len(lines) <= columns*per {
			return kit.Block(kit.Beside(blocks...), m.width, rows) + "\n" + m.helpFoot(false)
		}
	}
	m.helpAt = max(0, min(m.helpAt, len(lines)-rows))
	shown := lines[m.helpAt:min(len(lines), m.helpAt+rows)]
	return kit.Block(strings.Join(shown, "\n"), m.width, rows) + "\n" + m.helpFoot(len(lines) > rows)
}

func (m *model) helpFoot(more bool) string {
	text := " esc goes back"
	if more {
		text = " ↑ ↓ scroll   esc goes back"
	}
	return m.desk.Style.Bar.Render(kit.Fit(text, m.width))
}

func (m *model) helpKey(k tea.KeyMsg) {
	switch k.String() {
	case "up", "pgup":
		m.helpAt = max(0, m.helpAt-max(1, m.height/2))
	case "down", "pgdown":
		m.helpAt += max(1, m.height/2)
	default:
		m.helping = false
	}
}
