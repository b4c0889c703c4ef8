package prints

import (
	"image"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"leadline/jobs"
	"leadline/tui/kit"
)

var (
	keyUp    = kit.Bind("↑", "print above", "up")
	keyDown  = kit.Bind("↓", "print below", "down")
	keyFirst = kit.Bind("home", "first print", "home")
	keyLast  = kit.Bind("end", "last print", "end")
	keyBack  = kit.Bind("pgup", "facts or workers: page up", "pgup")
	keyOn    = kit.Bind("pgdn", "facts or workers: page down", "pgdown")
	keyEnter = kit.Bind("enter", "all about the print", "enter")
	keyList  = kit.Bind("esc", "back to the list", "esc")
	keyCrew  = kit.Bind("v", "workers", "v")

	keyPause  = kit.Bind("space", "pause", " ")
	keyCancel = kit.Bind("x", "cancel", "x")
	keyAnew   = kit.Bind("a", "again", "a")
	keySooner = kit.Bind("+", "sooner", "+", "=", "shift+up")
	keyLater  = kit.Bind("-", "later", "-", "shift+down")
	keyRemove = kit.Bind("r", "off the list", "r", "delete")
	keyFolder = kit.Bind("o", "open folder", "o")

	keyWork = kit.Bind("w", "work here", "w")
	keyNew  = kit.Bind("n", "queue this frame", "n", "insert")

	keyYes = kit.Bind("y", "yes", "y")
	keyNo  = kit.Bind("n", "no", "n", "esc")
)

// question is a question that y answers with yes and any other key with no.
type question struct {
	text string
	does string // what yes does
	yes  func() tea.Cmd
}

// Keys is the key map; while something is asked, its answers.
func (s *Screen) Keys() []kit.Group {
	if q := s.question; q != nil {
		yes := keyYes
		yes.SetHelp("y", q.does)
		return []kit.Group{{Title: "Answer", Keys: []key.Binding{yes, keyNo}}}
	}
	work, pause := keyWork, keyPause
	if s.hand != nil {
		work.SetHelp("w", "stop working")
	}
	if p := s.print(); p != nil && p.Paused {
		pause.SetHelp("space", "go on")
	}
	return []kit.Group{
		{Title: "The queue", Keys: []key.Binding{work, keyCrew}},
		{Title: "The chosen print", Keys: []key.Binding{pause, keyCancel, keyAnew, keySooner, keyLater, keyFolder, keyRemove, keyNew}},
		{Title: "Looking", Keys: []key.Binding{keyUp, keyDown, keyFirst, keyLast, keyEnter, keyList, keyBack, keyOn}},
	}
}

// ask puts a question, which the next key answers.
func (s *Screen) ask(q *question) tea.Cmd {
	s.question = q
	return nil
}

func (s *Screen) key(k tea.KeyMsg) tea.Cmd {
	switch {
	case s.editor.Open():
		return s.editor.Update(k)
	case s.q == nil:
		return s.none()
	case s.question != nil:
		q := s.question
		s.question = nil
		if key.Matches(k, keyYes) {
			return q.yes()
		}
		return nil
	}
	if cmd, ok := s.looking(k); ok {
		return cmd
	}
	switch {
	case key.Matches(k, keyWork):
		return s.toggleWork()
	case key.Matches(k, keyNew):
		return s.Ask()
	}
	if p := s.print(); p != nil {
		return s.printKey(k, p)
	}
	return nil
}

// looking obeys the keys that change nothing in the queue.
func (s *Screen) looking(k tea.KeyMsg) (cmd tea.Cmd, ok bool) {
	page := max(1, s.drawn.page-1)
	switch {
	case key.Matches(k, keyUp):
		return s.choose(s.at - 1), true
	case key.Matches(k, keyDown):
		return s.choose(s.at + 1), true
	case key.Matches(k, keyFirst):
		return s.choose(0), true
	case key.Matches(k, keyLast):
		return s.choose(len(s.sight.prints) - 1), true
	case key.Matches(k, keyBack):
		s.below -= page
	case key.Matches(k, keyOn):
		s.below += page
	case key.Matches(k, keyEnter):
		s.show(panePrint)
	case key.Matches(k, keyList):
		s.show(paneList)
	case key.Matches(k, keyCrew) && s.pane == paneCrew:
		s.show(paneList)
	case key.Matches(k, keyCrew):
		s.show(paneCrew)
	default:
		return nil, false
	}
	return nil, true
}

func (s *Screen) show(p pane) { s.pane, s.below = p, 0 }

// printKey obeys the keys for the chosen print.
func (s *Screen) printKey(k tea.KeyMsg, p *jobs.Print) tea.Cmd {
	switch {
	case key.Matches(k, keyPause):
		return s.pause(p)
	case key.Matches(k, keyCancel):
		return s.cancel(p)
	case key.Matches(k, keyAnew):
		return s.anew(p)
	case key.Matches(k, keySooner):
		return s.move(p, -1)
	case key.Matches(k, keyLater):
		return s.move(p, 1)
	case key.Matches(k, keyRemove):
		return s.remove(p)
	case key.Matches(k, keyFolder):
		return s.openFolder(p)
	}
	return nil
}

// none says why there is no queue.
func (s *Screen) none() tea.Cmd {
	if s.desk.NoQueue == nil {
		return kit.Fail(errNoQueue)
	}
	return kit.Fail(s.desk.NoQueue)
}

// mouse chooses by a click and scrolls by the wheel.
func (s *Screen) mouse(e tea.MouseEvent) tea.Cmd {
	if e.Action != tea.MouseActionPress || s.editor.Open() || s.question != nil {
		return nil
	}
	switch e.Button {
	case tea.MouseButtonLeft:
		if i, ok := s.drawn.row(e.X, e.Y); ok {
			return s.choose(i)
		}
	case tea.MouseButtonWheelUp:
		s.wheel(image.Pt(e.X, e.Y), -wheelLines)
	case tea.MouseButtonWheelDown:
		s.wheel(image.Pt(e.X, e.Y), wheelLines)
	}
	return nil
}

// wheel scrolls what is at a point.
func (s *Screen) wheel(at image.Point, by int) {
	switch {
	case at.In(s.drawn.crew):
		if s.pane != paneCrew {
			s.show(paneCrew)
		}
		s.below += by
	case at.In(s.drawn.print):
		if s.pane == paneCrew {
			s.show(panePrint)
		}
		s.below += by
	default:
		s.top += by
	}
}

// wheelLines is how far one step of the wheel goes.
const wheelLines = 3
