package tui

import (
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render/frame"
	"leadline/tui/engine"
	"leadline/tui/kit"
	"leadline/tui/paper"
	"leadline/tui/prints"
)

// model is the whole program as the framework sees it.
type model struct {
	desk    *kit.Desk
	screens []kit.Screen
	paper   *paper.Screen
	prints  *prints.Screen
	open    int

	width, height int
	said          kit.Say // in place of the status, until the next key
	helping       bool
	helpAt        int // first line of help shown
	leaving       bool

	asked   engine.Request    // what the engine was asked for last
	recent  []*engine.Picture // whole pictures, the latest last
	session *session
	file    kit.Editor // asks for a file's name
	load    func(path string) (*frame.Frame, error)
}

// Least size of a terminal that can be worked in.
const (
	leastWidth  = 40
	leastHeight = 10
)

// around is how many lines the program has of its own: tabs, status, keys.
const around = 3

func (m *model) Init() tea.Cmd {
	return tea.Batch(tea.SetWindowTitle("leadline"), m.all(kit.Opened(m.screen().Name())), m.session.tick())
}

func (m *model) screen() kit.Screen { return m.screens[m.open] }

// all hands a message to every screen.
func (m *model) all(msg tea.Msg) tea.Cmd {
	var cmds []tea.Cmd
	for _, s := range m.screens {
		cmds = append(cmds, s.Update(msg))
	}
	return tea.Batch(cmds...)
}

func (m *model) Update(msg tea.Msg) (tea.Model, tea.Cmd) {
	cmd := m.route(msg)
	return m, tea.Batch(cmd, m.follow())
}

// route hands a message to whom it concerns.
func (m *model) route(msg tea.Msg) tea.Cmd {
	switch msg := msg.(type) {
	case tea.WindowSizeMsg:
		m.width, m.height = msg.Width, msg.Height
		return m.all(tea.WindowSizeMsg{Width: msg.Width, Height: max(0, msg.Height-around)})
	case tea.KeyMsg:
		m.said, m.session.dirty = kit.Say{}, true
		return m.key(msg)
	case tea.MouseMsg:
		m.session.dirty = true
		if msg.Action == tea.MouseActionPress {
			m.said = kit.Say{}
		}
		return m.mouse(msg)
	case kit.Say:
		m.said = msg
		return nil
	case kit.Go:
		return m.show(string(msg))
	case kit.Drawn:
		return m.drawn(msg.Picture)
	case saveTick:
		return m.session.save(m)
	case sessionSaved:
		return m.session.wrote(msg.err)
	case saved, opened, notOpened:
		return m.filed(msg)
	case tea.ResumeMsg:
		return tea.Batch(tea.ClearScreen, m.all(msg))
	}
	return m.all(msg)
}

// mouse moves positions into the screen's own cells.
func (m *model) mouse(msg tea.MouseMsg) tea.Cmd {
	if m.helping || m.leaving || m.small() {
		return nil
	}
	e := tea.MouseEvent(msg)
	if e.Y == 0 {
		if e.Action == tea.MouseActionPress && e.Button == tea.MouseButtonLeft {
			return m.tabAt(e.X)
		}
		return nil
	}
	if e.Y--; e.Y >= m.height-around {
		return nil
	}
	return m.screen().Update(tea.MouseMsg(e))
}

// show opens the screen with a name.
func (m *model) show(name string) tea.Cmd {
	for i, s := range m.screens {
		if s.Name() == name && i != m.open {
			m.open = i
			return m.all(kit.Opened(name))
		}
	}
	return nil
}

func (m *model) small() bool { return m.width < leastWidth || m.height < leastHeight }

func (m *model) View() string {
	if m.desk.ASCII {
		return inASCII(m.view())
	}
	return m.view()
}

func (m *model) view() string {
	switch {
	case m.width == 0:
		return ""
	case m.small():
		return tooSmall(m.width, m.height)
	case m.helping:
		return m.helpView()
	}
	return strings.Join([]string{m.tabs(), m.screen().View(m.width, m.height-around), m.status(), m.foot()}, "\n")
}

// tooSmall says politely what is missing.
func tooSmall(width, height int) string {
	text := kit.Block("leadline needs\n40 x 10 cells;\nthis is too small", width, height)
	return text
}
