package tui

import (
	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"leadline/tui/kit"
)

// The program's own keys hold on every screen, but not while text is entered.
var (
	keyScreen = kit.Bind("1…4", "open a screen", "1", "2", "3", "4")
	keyNext   = kit.Bind("tab", "next screen", "tab")
	keyBefore = kit.Bind("shift+tab", "screen before", "shift+tab")
	keyPrint  = kit.Bind("p", "queue a print of the frame", "p")
	keySave   = kit.Bind("ctrl+s", "save the frame", "ctrl+s")
	keyLoad   = kit.Bind("ctrl+o", "open a frame", "ctrl+o")
	keyHelp   = kit.Bind("?", "all keys", "?")
	keyRest   = kit.Bind("ctrl+z", "leave for the shell; fg comes back", "ctrl+z")
	keyQuit   = kit.Bind("q", "quit", "q", "ctrl+c")
)

// own is the program's part of every key map.
func own() kit.Group {
	return kit.Group{Title: "Everywhere", Keys: []key.Binding{keyHelp, keyScreen, keyNext, keyBefore, keyPrint, keySave, keyLoad, keyRest, keyQuit}}
}

// key takes a key. Several typed so fast that they came at once are taken one
// by one, for the first may change what the second means.
func (m *model) key(k tea.KeyMsg) tea.Cmd {
	if k.Type == tea.KeyRunes && len(k.Runes) > 1 && !k.Paste {
		var cmds []tea.Cmd
		for _, r := range k.Runes {
			one := k
			one.Runes = []rune{r}
			cmds = append(cmds, m.oneKey(one), m.follow())
		}
		return tea.Batch(cmds...)
	}
	return m.oneKey(k)
}

func (m *model) oneKey(k tea.KeyMsg) tea.Cmd {
	switch {
	case m.leaving:
		return m.answer(k)
	case m.file.Open():
		return m.file.Update(k)
	case m.helping:
		m.helpKey(k)
		return nil
	case m.small():
		if key.Matches(k, keyQuit) {
			return m.quit()
		}
		return nil
	case k.String() == "ctrl+c":
		return m.quit()
	case m.screen().Typing() || k.Paste:
		return m.screen().Update(k)
	}
	switch {
	case key.Matches(k, keyScreen):
		return m.show(m.screens[int(k.Runes[0]-'1')].Name())
	case key.Matches(k, keyNext):
		return m.show(m.screens[(m.open+1)%len(m.screens)].Name())
	case key.Matches(k, keyBefore):
		return m.show(m.screens[(m.open+len(m.screens)-1)%len(m.screens)].Name())
	case key.Matches(k, keyHelp):
		m.helping, m.helpAt = true, 0
		return nil
	case key.Matches(k, keyPrint):
		return m.askPrint()
	case key.Matches(k, keySave):
		return m.askSave()
	case key.Matches(k, keyLoad):
		return m.askOpen(m.desk.Path)
	case key.Matches(k, keyRest):
		return tea.Suspend
	case key.Matches(k, keyQuit):
		return m.quit()
	}
	return m.screen().Update(k)
}
