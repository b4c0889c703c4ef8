package tui

import (
	"fmt"

	tea "github.com/charmbracelet/bubbletea"
)

// quit leaves at once, or asks once where work runs here.
func (m *model) quit() tea.Cmd {
	if m.leaving || !m.prints.Working() {
		return m.end()
	}
	m.leaving = true
	return nil
}

// leaveWords says what goes on without the program, and what does not.
func (m *model) leaveWords() string {
	running, elsewhere := m.prints.Busy()
	switch {
	case running == 0:
		return "Quit? Nothing is being rendered. y quits, any other key stays."
	case elsewhere:
		return fmt.Sprintf("Quit? %d tiles in hand here go back; other workers go on. Finished tiles are kept. y quits, any other key stays.", running)
	}
	return fmt.Sprintf("Quit? %d tiles in hand go back and the prints wait; leadline work goes on. Finished tiles are kept. y quits, any other key stays.", running)
}

// answer takes the key after the question.
func (m *model) answer(k tea.KeyMsg) tea.Cmd {
	m.leaving = false
	if s := k.String(); s == "y" || s == "ctrl+c" {
		return m.end()
	}
	return nil
}

// end keeps the session, then quits.
func (m *model) end() tea.Cmd {
	m.session.dirty = true
	return tea.Sequence(m.session.save(m), tea.Quit)
}
