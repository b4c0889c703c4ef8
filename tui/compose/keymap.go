package compose

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

// Steps of the keys.
const (
	panStep   = 1.0 / 8 // of the trim's side
	zoomStep  = 1.5
	turnStep  = 5
	plungeBy  = 10
	fineSteps = 1 // samples
)

// actions is the key map: what the screen obeys, and what help shows.
func (s *Screen) actions() []action {
	pan := func(dx, dy float64) func() tea.Cmd { return func() tea.Cmd { return s.arrow(dx, dy) } }
	fine := func(dx, dy int) func() tea.Cmd { return func() tea.Cmd { return s.nudge(dx, dy) } }
	zoom := func(by float64) func() tea.Cmd { return func() tea.Cmd { return s.zoom(by) } }
	return []action{
		{"Most used", kit.Bind("← ↑ ↓ →", "move", "left"), pan(-panStep, 0)},
		{"Most used", also("right"), pan(panStep, 0)},
		{"Most used", also("up"), pan(0, -panStep)},
		{"Most used", also("down"), pan(0, panStep)},
		{"Most used", kit.Bind("+", "nearer", "+", "="), zoom(zoomStep)},
		{"Most used", kit.Bind("-", "farther", "-", "_"), zoom(1 / zoomStep)},
		{"Most used", kit.Bind("f", "find …", "f"), s.openFind},
		{"Most used", kit.Bind("u", "step back", "u", "backspace"), func() tea.Cmd { return s.back(s.desk.Back()) }},
		{"Most used", kit.Bind("g", "go to a place or depth", "g"), func() tea.Cmd { return s.askPlace("") }},
		{"Move", kit.Bind("shift+arrow", "move by one sample", "shift+left"), fine(-fineSteps, 0)},
		{"Move", also("shift+right"), fine(fineSteps, 0)},
		{"Move", also("shift+up"), fine(0, -fineSteps)},
		{"Move", also("shift+down"), fine(0, fineSteps)},
		{"Move", kit.Bind("pgdn", "ten times nearer", "pgdown"), zoom(plungeBy)},
		{"Move", kit.Bind("pgup", "ten times farther", "pgup"), zoom(1.0 / plungeBy)},
		{"Move", kit.Bind("t T", "turn left, right by 5°", "t"), func() tea.Cmd { return s.turn(turnStep) }},
		{"Move", also("T"), func() tea.Cmd { return s.turn(-turnStep) }},
		{"Move", kit.Bind("U", "step forward again", "U"), func() tea.Cmd { return s.back(s.desk.Forward()) }},
		{"Move", kit.Bind("0", "the whole set", "0"), s.reset},
		{"Plumb and box", kit.Bind("x", "plumb on or off; arrows move it", "x"), s.togglePlumb},
		{"Plumb and box", kit.Bind("space", "a box's corner, at the plumb", " "), s.corner},
		{"Plumb and box", kit.Bind("enter", "zoom into the box", "enter"), s.enterBox},
		{"Plumb and box", kit.Bind("esc", "stop a search, drop box and plumb", "esc"), s.escape},
		{"Marks", kit.Bind("m", "mark this place", "m"), s.askMark},
		{"Marks", kit.Bind("'", "go to a mark", "'"), s.openMarks},
		{"Picture", kit.Bind("l", "iteration limit", "l"), s.askLimit},
		{"Picture", kit.Bind("o", "bleed, safe area and rule", "o"), s.toggleGuides},
		{"Picture", kit.Bind("v", "finer or coarser cells", "v"), s.nextMesh},
	}
}

// also is a key that the entry above it in help speaks for.
func also(name string) key.Binding { return key.NewBinding(key.WithKeys(name)) }

// Keys is the key map for help and the foot line.
func (s *Screen) Keys() []kit.Group {
	var groups []kit.Group
	for _, a := range s.actions() {
		if n := len(groups); n == 0 || groups[n-1].Title != a.group {
			groups = append(groups, kit.Group{Title: a.group})
		}
		if a.key.Help().Key != "" {
			g := &groups[len(groups)-1]
			g.Keys = append(g.Keys, a.key)
		}
	}
	groups = append(groups, kit.Group{Title: "Mouse", Keys: []key.Binding{
		kit.Bind("click", "set the plumb"), kit.Bind("drag", "a box to zoom into"),
		kit.Bind("right drag", "move the picture"), kit.Bind("wheel", "nearer and farther, at the pointer")}})
	return groups
}
