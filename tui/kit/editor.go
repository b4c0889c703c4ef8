package kit

import (
	"github.com/charmbracelet/bubbles/cursor"
	"github.com/charmbracelet/bubbles/textinput"
	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/ansi"
)

// Editor asks for one line of text. It takes keys while it is Open.
type Editor struct {
	Label string
	in    textinput.Model
	open  bool
	fresh bool // nothing was typed yet: the proposal gives way to what is
	done  func(string) tea.Cmd
	check func(string) error
	fault error
}

// Ask opens the editor. done gets what was entered; check, if set, is asked at
// every key, and Enter is only taken where it has no complaint.
func (e *Editor) Ask(label, text string, check func(string) error, done func(string) tea.Cmd) tea.Cmd {
	e.Label, e.check, e.done, e.open = label, check, done, true
	e.in = textinput.New()
	e.in.Prompt = ""
	e.in.CharLimit = 0                       // a place may have thousands of digits
	e.in.Cursor.SetMode(cursor.CursorStatic) // nothing blinks
	e.in.SetValue(text)
	e.in.CursorEnd()
	e.fresh = text != ""
	e.judge()
	return e.in.Focus()
}

// Open says whether the editor takes keys.
func (e *Editor) Open() bool { return e.open }

// Close leaves without an answer.
func (e *Editor) Close() { e.open = false }

// Update takes a key or a paste.
func (e *Editor) Update(msg tea.Msg) tea.Cmd {
	if k, ok := msg.(tea.KeyMsg); ok {
		switch k.Type {
		case tea.KeyEsc, tea.KeyCtrlC:
			e.open = false
			return nil
		case tea.KeyEnter:
			if e.fault != nil {
				return nil
			}
			e.open = false
			return e.done(e.in.Value())
		}
	}
	if k, ok := msg.(tea.KeyMsg); ok {
		if e.fresh && k.Type == tea.KeyRunes && !k.Alt {
			e.in.SetValue("")
		}
		e.fresh = false
	}
	var cmd tea.Cmd
	e.in, cmd = e.in.Update(msg)
	e.judge()
	return cmd
}

func (e *Editor) judge() {
	e.fault = nil
	if e.check != nil {
		e.fault = e.check(e.in.Value())
	}
}

// View is the editor in one line of width cells.
func (e *Editor) View(s Style, width int) string {
	label := s.Lead.Render(e.Label) + " "
	tail := ""
	if e.fault != nil {
		text := e.fault.Error()
		if h, ok := Hint(e.fault); ok {
			text += ": " + h
		}
		tail = "  " + s.Warn.Render(text)
	} else if aside := "  typing replaces it, an arrow keeps it"; e.fresh && width > ansi.StringWidth(e.Label+e.in.Value()+aside)+4 {
		tail = s.Faint.Render(aside)
	}
	room := ansi.StringWidth(e.in.Value()) + 1
	e.in.Width = max(8, min(room, width-ansi.StringWidth(e.Label)-3-min(ansi.StringWidth(tail), width/2)))
	e.in.SetCursor(e.in.Position()) // lays the text out in that width
	return Fit(label+e.in.View()+tail, width)
}
