package prints

import (
	"fmt"
	"image"
	"strings"

	"leadline/tui/kit"
)

// layout is where View put what the mouse can point at.
type layout struct {
	list, print, crew image.Rectangle
	top               int // place in the list of its first line
	page              int // lines of what pgup and pgdn scroll
}

// row is the place in the list of the print at a point.
func (l layout) row(x, y int) (int, bool) {
	return l.top + y - l.list.Min.Y, image.Pt(x, y).In(l.list)
}

// Sizes from which the screen is parted.
const (
	wideWidth, wideHeight = 116, 18 // list and workers beside the print
	tallHeight            = 15      // list over the print, or the workers
)

// View draws the screen: exactly height lines, none wider than width cells.
func (s *Screen) View(width, height int) string {
	if width < 1 || height < 1 {
		return ""
	}
	s.drawn = layout{}
	foot := s.prompt(width)
	foot = foot[:min(len(foot), height)]
	room := height - len(foot)
	var lines []string
	switch {
	case s.q == nil:
		lines = s.without(width)
	case room > 0:
		lines = append([]string{s.summary(width)}, s.body(width, room-1)...)
	}
	s.drawn.top = s.top
	out := kit.Block(strings.Join(lines, "\n"), width, room)
	if len(foot) > 0 && room > 0 {
		out += "\n"
	}
	return out + kit.Block(strings.Join(foot, "\n"), width, len(foot))
}

// body is what stands below the summary.
func (s *Screen) body(width, height int) []string {
	st := s.desk.Style
	switch {
	case width >= wideWidth && height >= wideHeight:
		return s.wide(width, height)
	case len(s.sight.prints) == 0 && s.pane != paneCrew:
		return s.empty(width)
	case height >= tallHeight:
		upper := max(5, min(len(s.sight.prints)+1, height*2/5))
		list := s.list(width, upper, 1)
		lines := append(fill(list, upper), rule(st, s.lowerTitle(), width))
		return append(lines, s.lower(image.Rect(0, 2+upper, width, 1+height))...)
	case s.pane == paneList:
		return s.list(width, height, 1)
	}
	return append([]string{rule(st, s.lowerTitle(), width)}, s.lower(image.Rect(0, 2, width, 1+height))...)
}

// wide has the list over the workers at the left and the print at the right.
// One of the two is scrolled, by the same number.
func (s *Screen) wide(width, height int) []string {
	st := s.desk.Style
	left := width * 11 / 20
	right := width - left - 3
	crew := s.crew(left)
	lower := min(len(crew), max(4, height/3))
	upper := height - lower - 1
	s.drawn.crew = image.Rect(0, 2+upper, left, 1+height)
	s.drawn.print = image.Rect(left+3, 2, width, 1+height)
	other := 0
	crewAt, printAt := &other, &s.below
	s.drawn.page = height - 1
	if s.pane == paneCrew {
		crewAt, printAt = printAt, crewAt
		s.drawn.page = lower
	}
	lines := append(fill(s.list(left, upper, 1), upper), rule(st, "Workers", left))
	lines = fill(append(lines, window(st, crew, lower, crewAt)...), height)
	pane := fill(append([]string{rule(st, s.printTitle(), right)}, s.printPane(right, height-1, printAt)...), height)
	bar := " " + st.Faint.Render("│") + " "
	for i := range lines {
		lines[i] = kit.Fit(lines[i], left) + bar + pane[i]
	}
	return lines
}

// fill makes lines up to a height.
func fill(lines []string, height int) []string {
	for len(lines) < height {
		lines = append(lines, "")
	}
	return lines[:height]
}

// lower is the pane that shares the screen with the list, or takes its place.
func (s *Screen) lower(r image.Rectangle) []string {
	s.drawn.page = r.Dy()
	if s.pane == paneCrew {
		s.drawn.crew = r
		return window(s.desk.Style, s.crew(r.Dx()), r.Dy(), &s.below)
	}
	s.drawn.print = r
	return s.printPane(r.Dx(), r.Dy(), &s.below)
}

func (s *Screen) lowerTitle() string {
	if s.pane == paneCrew {
		return "Workers"
	}
	return s.printTitle()
}

func (s *Screen) printTitle() string {
	p := s.print()
	if p == nil {
		return ""
	}
	return fmt.Sprintf("%d  %s", p.ID, title(p))
}

// prompt is what is asked, at the foot of the screen.
func (s *Screen) prompt(width int) []string {
	st := s.desk.Style
	switch {
	case s.editor.Open():
		return []string{s.editor.View(st, width)}
	case s.question != nil:
		var lines []string
		for _, l := range wrap(s.question.text+"  y "+s.question.does+", n no", width, "") {
			lines = append(lines, st.Warn.Render(l))
		}
		return lines
	}
	return nil
}

// without says why there is no queue.
func (s *Screen) without(width int) []string {
	st := s.desk.Style
	err := s.desk.NoQueue
	if err == nil {
		err = errNoQueue
	}
	lines := []string{"", st.Strong.Render("  The queue could not be opened.")}
	for _, l := range wrap(err.Error(), width-4, "/") {
		lines = append(lines, st.Bad.Render("  "+l))
	}
	if h, ok := kit.Hint(err); ok {
		for _, l := range wrap(h, width-4, "/") {
			lines = append(lines, st.Warn.Render("  "+l))
		}
	}
	return lines
}
