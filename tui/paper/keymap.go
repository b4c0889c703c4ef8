package paper

import (
	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"leadline/tui/kit"
)

// action is a key and what it does.
type action struct {
	group string
	key   key.Binding
	do    func() tea.Cmd
}

// actions is the key map of the form.
func (s *Screen) actions() []action {
	move := func(by int) func() tea.Cmd { return func() tea.Cmd { return s.moveCursor(by) } }
	step := func(by int) func() tea.Cmd { return func() tea.Cmd { return s.step(s.cursor, by) } }
	return []action{
		{"Sheet", kit.Bind("enter", "write, or go", "enter"), s.enter},
		{"Sheet", kit.Bind("← →", "next value", "right"), step(1)},
		{"Sheet", kit.Bind("←", "value before", "left"), step(-1)},
		{"Sheet", kit.Bind("c", "choose size", "c"), s.openChooser},
		{"Sheet", kit.Bind("t", "turn the sheet: swap its sides", "t"), s.turnSheet},
		{"Sheet", kit.Bind("w", "window 1:1", "w"), s.openWindow},
		{"Sheet", kit.Bind("f", "to the findings and back", "f"), s.toFindings},
		{"Sheet", kit.Bind("u", "step back", "u", "backspace"), func() tea.Cmd { return s.back(s.desk.Back()) }},
		{"Sheet", kit.Bind("U", "step forward", "U"), func() tea.Cmd { return s.back(s.desk.Forward()) }},
		{"Lines", kit.Bind("↑", "line above", "up"), move(-1)},
		{"Lines", kit.Bind("↓", "line below", "down"), move(1)},
		{"Lines", kit.Bind("home", "first line", "home"), move(-1 << 20)},
		{"Lines", kit.Bind("end", "last line", "end"), move(1 << 20)},
	}
}

// windowActions is the key map of the 1:1 window.
func (s *Screen) windowActions() []action {
	move := func(dx, dy float64) func() tea.Cmd { return func() tea.Cmd { return s.win.move(s, dx, dy) } }
	const part, fine = 1.0 / 2, 1.0 / 16
	return []action{
		{"Window", kit.Bind("esc", "back to the sheet", "esc", "w", "enter"), func() tea.Cmd { s.win.shut(); return nil }},
		{"Window", kit.Bind("← → ↑ ↓", "move by half a window", "right"), move(part, 0)},
		{"Window", kit.Bind("←", "left", "left"), move(-part, 0)},
		{"Window", kit.Bind("↑", "up", "up"), move(0, -part)},
		{"Window", kit.Bind("↓", "down", "down"), move(0, part)},
		{"Window", kit.Bind("shift+→", "a little to the right", "shift+right"), move(fine, 0)},
		{"Window", kit.Bind("shift+←", "a little to the left", "shift+left"), move(-fine, 0)},
		{"Window", kit.Bind("shift+↑", "a little up", "shift+up"), move(0, -fine)},
		{"Window", kit.Bind("shift+↓", "a little down", "shift+down"), move(0, fine)},
		{"Window", kit.Bind("m", "map and rule", "m"), func() tea.Cmd { s.win.bare = !s.win.bare; return nil }},
		{"Window", kit.Bind("c", "to the middle of the sheet", "c"), func() tea.Cmd { return s.win.show(s, 0.5, 0.5) }},
	}
}

// Keys is the key map for help and the foot line. Beside the sheet stands what
// becomes of the view when its shape changes.
func (s *Screen) Keys() []kit.Group {
	if s.win.open {
		return groups(s.windowActions(), kit.Group{Title: "Mouse", Keys: []key.Binding{
			kit.Bind("click", "that spot becomes the middle"), kit.Bind("click map", "go there"), kit.Bind("wheel", "up and down")}})
	}
	return groups(s.actions(),
		kit.Group{Title: "Shape", Keys: []key.Binding{
			kit.Bind("trim", "the view's height stays, its width follows the trim")}},
		kit.Group{Title: "Mouse", Keys: []key.Binding{
			kit.Bind("click", "to a line; again: enter"), kit.Bind("wheel", "next value of the line below the pointer")}})
}

func groups(list []action, more ...kit.Group) []kit.Group {
	var out []kit.Group
	for _, a := range list {
		if n := len(out); n == 0 || out[n-1].Title != a.group {
			out = append(out, kit.Group{Title: a.group})
		}
		g := &out[len(out)-1]
		g.Keys = append(g.Keys, a.key)
	}
	return append(out, more...)
}
