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
		return "y quits, any other key stays. Nothing is being rendered."
	case elsewhere:
		return fmt.Sprintf("y quits, any other key stays. %s back to the queue; other workers go on.", tiles(running))
	}
	return fmt.Sprintf("y quits, any other key stays. %s back to the queue; prints wait for leadline work.", tiles(running))
}

func tiles(n int) string {
	if n == 1 {
		return "1 tile goes"
	}
	return fmt.Sprintf("%d tiles go", n)
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
