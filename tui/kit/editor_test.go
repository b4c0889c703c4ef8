package kit

import (
	"errors"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/lipgloss"
	"github.com/charmbracelet/x/ansi"
)

// TestEditor: what is typed takes the proposal's place, an arrow keeps it; a
// complaint keeps Enter from being taken, esc leaves; every width is kept.
func TestEditor(t *testing.T) {
	var got string
	odd := errors.New("odd")
	check := func(s string) error {
		if len(s)%2 == 1 {
			return odd
		}
		return nil
	}
	done := func(s string) tea.Cmd { got = s; return nil }
	typed := func(e *Editor, s string) {
		for _, r := range s {
			e.Update(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune{r}})
		}
	}
	var e Editor
	e.Ask("name", "proposal", check, done)
	typed(&e, "abc")
	e.Update(tea.KeyMsg{Type: tea.KeyEnter})
	if !e.Open() || got != "" {
		t.Errorf("a text that is complained of was taken: %q", got)
	}
	typed(&e, "d")
	e.Update(tea.KeyMsg{Type: tea.KeyEnter})
	if e.Open() || got != "abcd" {
		t.Errorf("open %v, %q", e.Open(), got)
	}
	e.Ask("name", "proposal", check, done)
	e.Update(tea.KeyMsg{Type: tea.KeyRight})
	typed(&e, "s!")
	e.Update(tea.KeyMsg{Type: tea.KeyEnter})
	if got != "proposals!" {
		t.Errorf("%q", got)
	}
	e.Ask("name", "proposal", check, done)
	e.Update(tea.KeyMsg{Type: tea.KeyEsc})
	if e.Open() || got != "proposals!" {
		t.Error("esc took the text")
	}
	st := NewStyle(lipgloss.NewRenderer(nil), true)
	for _, text := range []string{"", "odd", strings.Repeat("9", 3000)} {
		e.Ask("go to", text, check, done)
		for _, w := range []int{40, 80, 200} {
			if n := ansi.StringWidth(e.View(st, w)); n != w {
				t.Errorf("%d cells of %d", n, w)
			}
		}
	}
}
