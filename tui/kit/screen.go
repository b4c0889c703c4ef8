package kit

import (
	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"leadline/tui/engine"
)

// Screen is one of the program's screens. Update and View run in the program's
// one loop: they do no I/O, read no clock and never take long.
type Screen interface {
	// Name is the word on the screen's tab.
	Name() string
	// Update takes a message; every screen gets every message but keys and the
	// mouse, which only the open screen gets, with mouse positions counted from
	// its own top left cell.
	Update(tea.Msg) tea.Cmd
	// View draws the screen: exactly height lines, none wider than width cells.
	View(width, height int) string
	// Status is one line below the screen; it is cut where it is too long.
	Status() string
	// Keys is the key map: what help shows and what the screen obeys.
	Keys() []Group
	// Typing says that keys are text now: the program's own keys do not hold.
	Typing() bool
}

// Group is a part of a key map under a title. The first bindings are those
// shown at the foot of the screen.
type Group struct {
	Title string
	Keys  []key.Binding
}

// Bind makes a binding: keys as the framework names them, the text shown for
// them, and what they do.
func Bind(shown, does string, keys ...string) key.Binding {
	return key.NewBinding(key.WithKeys(keys...), key.WithHelp(shown, does))
}

// Messages that every screen gets.
type (
	// Opened says that the screen with this name is now the open one.
	Opened string
	// Changed says that the frame on the desk is another one.
	Changed struct{}
	// Drawn says that the desk has a newer picture of the frame.
	Drawn struct{ Picture *engine.Picture }
	// Say shows a line in place of the status until the next key.
	Say struct {
		Text string
		Bad  bool
	}
	// Go opens another screen.
	Go string
)

// Tell is a command that says something.
func Tell(text string) tea.Cmd { return func() tea.Msg { return Say{Text: text} } }

// Fail is a command that shows an error, with its hint where it has one.
func Fail(err error) tea.Cmd {
	if err == nil {
		return nil
	}
	text := err.Error()
	if h, ok := Hint(err); ok {
		text += " — " + h
	}
	return func() tea.Msg { return Say{Text: text, Bad: true} }
}
