package compose

import (
	"errors"
	"fmt"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/precision"
	"leadline/render/frame"
	"leadline/tui/kit"
)

// maxMarks is how many marks have a letter in the menu.
const maxMarks = 26

// askMark keeps the place under a name. A name that is there already moves.
func (s *Screen) askMark() tea.Cmd {
	name := fmt.Sprintf("mark %d", len(s.desk.Marks)+1)
	check := func(t string) error {
		if strings.TrimSpace(t) == "" {
			return errors.New("a mark needs a name")
		}
		return nil
	}
	return s.ask.Ask("mark as", name, check, func(t string) tea.Cmd {
		f := s.desk.Frame
		m := kit.Mark{Name: strings.TrimSpace(t), View: f.View, Set: f.Set}
		for i := range s.desk.Marks {
			if s.desk.Marks[i].Name == m.Name {
				s.desk.Marks[i] = m
				return kit.Tell("moved the mark " + m.Name)
			}
		}
		if len(s.desk.Marks) == maxMarks {
			return kit.Fail(fmt.Errorf("there are %d marks; give one of them this place by its name", maxMarks))
		}
		s.desk.Marks = append(s.desk.Marks, m)
		return kit.Tell("marked " + m.Name)
	})
}

// openMarks lists the marks to choose from.
func (s *Screen) openMarks() tea.Cmd {
	if len(s.desk.Marks) == 0 {
		return kit.Tell("there are no marks yet; m makes one")
	}
	m := &menu{title: "go to"}
	for i, k := range s.desk.Marks {
		m.items = append(m.items, item{string(rune('a' + i)), k.Name, func() tea.Cmd {
			return kit.Fail(s.desk.Change("went to "+k.Name, func(f *frame.Frame) error {
				f.View, f.Set, f.Ink.Drive.Fitted = k.View, k.Set, nil
				return nil
			}))
		}})
	}
	s.menu = m
	return nil
}

// depth is how deep a view is.
func depth(v frame.View) float64 { return precision.Depth(v.Height) }
