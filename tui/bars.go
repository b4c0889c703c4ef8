package tui

import (
	"path/filepath"
	"strings"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/ansi"

	"leadline/tui/kit"
)

// tabs is the first line: the screens, and what is on the desk.
func (m *model) tabs() string {
	s := m.desk.Style
	var b strings.Builder
	for i, sc := range m.screens {
		text := " " + string(rune('1'+i)) + " " + sc.Name() + " "
		if i == m.open {
			b.WriteString(s.Tab.Render(text))
		} else {
			b.WriteString(s.Bar.Render(text))
		}
	}
	left := b.String()
	name := m.desk.Frame.Title
	if m.desk.Path != "" {
		name = filepath.Base(m.desk.Path)
	}
	if name == "" {
		name = "no name yet"
	}
	if m.desk.Unsaved() {
		name += " (not saved)"
	}
	room := m.width - ansi.StringWidth(left) - 1
	if room < 8 {
		return left + s.Bar.Render(strings.Repeat(" ", max(0, m.width-ansi.StringWidth(left))))
	}
	name = ansi.Truncate(name, room-1, "…")
	return left + s.Bar.Render(strings.Repeat(" ", room-ansi.StringWidth(name))+name+" ")
}

// tabAt opens the screen whose tab is at a column.
func (m *model) tabAt(x int) tea.Cmd {
	at := 0
	for _, sc := range m.screens {
		if at += len(sc.Name()) + 4; x < at {
			return m.show(sc.Name())
		}
	}
	return nil
}

// status is the line above the keys: what was said, or how things stand.
func (m *model) status() string {
	s := m.desk.Style
	switch {
	case m.leaving:
		return s.Warn.Render(kit.Fit(m.leaveWords(), m.width))
	case m.file.Open() && m.said.Text == "":
		return m.file.View(s, m.width)
	case m.said.Text != "" && m.said.Bad:
		return s.Bad.Render(kit.Fit(m.said.Text, m.width))
	case m.said.Text != "":
		return s.Good.Render(kit.Fit(m.said.Text, m.width))
	}
	return kit.Fit(m.screen().Status(), m.width)
}

// foot is the last line: the first keys of the screen's map that fit.
func (m *model) foot() string {
	s := m.desk.Style
	end := " ? all keys  q quit"
	if m.leaving {
		return s.Bar.Render(kit.Fit(" y quit   any other key stay", m.width))
	}
	if m.screen().Typing() || m.file.Open() {
		end = " enter take it  esc leave it"
	}
	var b strings.Builder
	room := m.width - len(end) - 1
	if !m.screen().Typing() && !m.file.Open() {
		for _, g := range m.screen().Keys() {
			for _, k := range g.Keys {
				text := " " + k.Help().Key + " " + k.Help().Desc + " "
				if n := ansi.StringWidth(text); n > room {
					continue
				} else {
					room -= n
				}
				b.WriteString(text)
			}
		}
	}
	line := b.String()
	fill := max(0, m.width-ansi.StringWidth(line)-len(end))
	return s.Bar.Render(ansi.Truncate(line+strings.Repeat(" ", fill)+end, m.width, ""))
}
