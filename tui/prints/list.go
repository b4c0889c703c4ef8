package prints

import (
	"fmt"
	"image"
	"path/filepath"
	"strings"

	"github.com/charmbracelet/lipgloss"

	"leadline/jobs"
	"leadline/render/words"
	"leadline/tui/cells"
	"leadline/tui/kit"
)

// column is a column of the list. The one of width 0 gets what is left.
type column struct {
	head  string
	width int
	right bool
	cell  func(s kit.Style, p *jobs.Print, width int) []span
}

// columns are those that a list of some width has room for.
func columns(width, digits int) []column {
	all := []column{
		{"", digits, true, func(s kit.Style, p *jobs.Print, _ int) []span { return []span{{fmt.Sprint(p.ID), s.Faint}} }},
		{"state", 12, false, func(s kit.Style, p *jobs.Print, _ int) []span {
			return []span{{stateSign(p) + " " + p.Word(), stateStyle(s, p)}}
		}},
		{"print", 0, false, nameCell},
	}
	bar := 6
	switch {
	case width >= 150:
		bar = 20
	case width >= 116:
		bar = 14
	case width >= 76:
		bar = 10
	}
	all = append(all, column{"tiles", bar, false, func(s kit.Style, p *jobs.Print, w int) []span { return tileBar(s, p, w) }},
		column{"", 5, true, text(func(p *jobs.Print) string { return percent(share(p)) })})
	if width >= 104 {
		all = append(all, column{"rate", 12, true, text(rateWords)})
	}
	if width >= 60 {
		all = append(all, column{"time left", 18, true, text(leftShort)})
	}
	priority := text(func(p *jobs.Print) string { return fmt.Sprint(p.Priority) })
	switch {
	case width >= 90:
		all = append(all, column{"prio", 5, true, priority})
	case width >= 70:
		all = append(all, column{"pr", 2, true, priority})
	}
	return all
}

// text is a column of plain words.
func text(f func(*jobs.Print) string) func(kit.Style, *jobs.Print, int) []span {
	return func(s kit.Style, p *jobs.Print, _ int) []span { return []span{{f(p), s.Text}} }
}

func rateWords(p *jobs.Print) string {
	if p.Rate <= 0 || p.Paused || p.Over() {
		return ""
	}
	return words.Amount(p.Rate, "px/s")
}

// nameCell is the title, and the file's name behind it where there is room.
func nameCell(s kit.Style, p *jobs.Print, width int) []span {
	r := []span{{title(p), s.Text}}
	file := clean(filepath.Base(p.Out))
	if room := width - row(r).width() - 2; file != r[0].text && room >= len(file) {
		r = append(r, span{"  " + file, s.Faint})
	}
	return r
}

// tileBar is a sounding line: heavy as far as the tiles are done.
func tileBar(s kit.Style, p *jobs.Print, width int) []span {
	halves := int(share(p) * float64(2*width))
	done := strings.Repeat("━", halves/2)
	if halves%2 == 1 {
		done += "╸"
	}
	return []span{{done, stateStyle(s, p)}, {strings.Repeat("─", width-(halves+1)/2), s.Faint}}
}

// list draws the prints into a block whose first line is line y of the screen.
func (s *Screen) list(width, height, y int) []string {
	all := s.sight.prints
	if len(all) == 0 {
		return s.empty(width)
	}
	cols := columns(width, max(2, len(fmt.Sprint(largest(all)))))
	headed := height >= 5
	if headed {
		height, y = height-1, y+1
	}
	s.scroll(len(all), height)
	shown := min(len(all)-s.top, height)
	s.drawn.list = image.Rect(0, y, width, y+shown)
	var lines []string
	if headed {
		lines = append(lines, s.heads(cols, width, s.top, len(all)-s.top-shown))
	}
	for i := range shown {
		lines = append(lines, s.row(cols, &all[s.top+i], width, s.top+i == s.at))
	}
	return lines
}

// largest is the greatest number of a print.
func largest(all []jobs.Print) (n int64) {
	for i := range all {
		n = max(n, all[i].ID)
	}
	return n
}

// scroll brings the first line shown into range, and the chosen print into sight
// where it was just chosen.
func (s *Screen) scroll(n, height int) {
	if s.follow {
		s.top = max(s.at-height+1, min(s.top, s.at))
		s.follow = false
	}
	s.top = max(0, min(s.top, n-height))
}

// heads names the columns, and says how many prints are above and below.
func (s *Screen) heads(cols []column, width, above, below int) string {
	st := s.desk.Style
	r := row{{"  ", st.Faint}}
	for i, c := range cols {
		head := c.head
		if c.width == 0 {
			if above > 0 {
				head += fmt.Sprintf(" ↑%d", above)
			}
			if below > 0 {
				head += fmt.Sprintf(" ↓%d", below)
			}
		}
		if i > 0 {
			r = append(r, span{" ", st.Faint})
		}
		r = append(r, cell(widthOf(cols, i, width), c.right, span{head, st.Faint})...)
	}
	return r.render(width, nil)
}

// widthOf is the width of a column, which for one of them is what is left.
func widthOf(cols []column, i, width int) int {
	if cols[i].width > 0 {
		return cols[i].width
	}
	rest := width - 1 - len(cols) // the mark, and a space before each column
	for _, c := range cols {
		rest -= c.width
	}
	return max(4, rest)
}

// row is a print's line. A failed print has its reason in place of the columns
// behind its name.
func (s *Screen) row(cols []column, p *jobs.Print, width int, chosen bool) string {
	st := s.desk.Style
	mark, ground := " ", lipgloss.TerminalColor(nil)
	if chosen {
		mark = "▌"
	}
	bold := chosen && s.desk.Depth < cells.C256
	if chosen && !bold { // the ground would leave too little contrast among 16 colours
		ground = st.Chosen.GetBackground()
		st.Faint = st.Text // which is for the terminal's own ground
	}
	r := row{{mark, st.Lead}}
	for i, c := range cols {
		r = append(r, span{" ", st.Text})
		if c.width != 0 && i > nameAt && p.State == jobs.Failed {
			r = append(r, span{clean(p.Reason), st.Bad})
			break
		}
		w := widthOf(cols, i, width)
		r = append(r, cell(w, c.right, c.cell(st, p, w)...)...)
	}
	for i := range r {
		r[i].style = r[i].style.Bold(bold)
	}
	return r.render(width, ground)
}

// nameAt is the place of the name among the columns.
const nameAt = 2

// empty is what stands in place of a list without prints.
func (s *Screen) empty(width int) []string {
	st := s.desk.Style
	if !s.look.first {
		return []string{"", st.Faint.Render("  asking the queue…")}
	}
	lines := []string{"", st.Strong.Render("  The queue is empty.")}
	for _, l := range wrap("n queues a print of the frame on the desk; it is made here, or by any leadline work on this queue.", width-4, "") {
		lines = append(lines, st.Text.Render("  "+l))
	}
	return lines
}
