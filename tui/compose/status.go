package compose

import (
	"fmt"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render/words"
	"leadline/tui/cells"
	"leadline/tui/kit"
)

// Status says where the view is and what runs.
func (s *Screen) Status() string {
	switch {
	case s.ask.Open():
		return s.ask.View(s.desk.Style, s.room.X)
	case s.menu != nil:
		return s.menu.line(s)
	case s.search != nil:
		return s.search.line(s)
	}
	st, d := s.desk.Style, s.desk
	part := func(label, value string) string { return st.Faint.Render(label+" ") + st.Text.Render(value) }
	digits := 10
	if s.room.X >= 120 {
		digits = 18
	}
	parts := []string{part("depth", fmt.Sprintf("%.2f", depth(d.Frame.View)))}
	if what := s.running(); what != "" {
		parts = append(parts, st.Lead.Render(what))
	}
	if s.under.text != "" {
		parts = append(parts, st.Warn.Render(s.under.text))
	}
	parts = append(parts, part("at", words.Digits(d.Frame.View.Centre.Re.String(), digits)+" "+words.Digits(d.Frame.View.Centre.Im.String(), digits)+"i"))
	limit := words.Count(int64(d.Frame.Iteration.Limit))
	if d.Pinned {
		limit += " pinned"
	}
	parts = append(parts, part("limit", limit))
	if p := d.Picture; p != nil && (p.Whole || p.Pass > 0) {
		parts = append(parts, part("undecided", words.Percent(p.Undecided)), part("inside", words.Percent(p.Inside)))
	}
	if t := d.Frame.View.Turn.Degrees(); t != 0 {
		parts = append(parts, part("turn", fmt.Sprintf("%g°", t)))
	}
	return strings.Join(parts, "  ")
}

// running says what the engine is at.
func (s *Screen) running() string {
	p := s.desk.Picture
	switch {
	case p == nil:
		return "waiting for the picture"
	case p.Err != nil:
		return "no picture"
	case p.Whole:
		return ""
	case p.Stage == "reference":
		return fmt.Sprintf("reference orbit %.0f %%", 100*p.Part)
	case p.Pass > 1:
		return fmt.Sprintf("picture 1/%d", p.Pass)
	}
	return "picture"
}

// toggleGuides shows or hides bleed, safe area and rule.
func (s *Screen) toggleGuides() tea.Cmd {
	s.guides = !s.guides
	return nil
}

// nextMesh takes the next finer way to draw cells, round to the coarsest.
func (s *Screen) nextMesh() tea.Cmd {
	if s.desk.Depth == cells.None || s.desk.ASCII {
		return kit.Tell("this terminal has plain characters only")
	}
	all := cells.Meshes()
	for i, m := range all {
		if m == s.desk.Mesh {
			s.desk.Mesh = all[(i+1)%len(all)]
			break
		}
	}
	s.relay()
	return kit.Tell("cells: " + s.desk.Mesh.String())
}
