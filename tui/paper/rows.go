package paper

import (
	"strings"

	"github.com/charmbracelet/lipgloss"
	"github.com/charmbracelet/x/ansi"

	"leadline/tui/kit"
)

// row is a line of a part; item is the field or finding that it belongs to, or
// -1.
type row struct {
	text string // styled, unless it is under the cursor
	item int
}

// nothing is the item of rows that the cursor passes by.
const nothing = -1

// labelWide is the cells of a line's mark and label.
const labelWide = 12

// formRows are the fields, with headings where there is room for them.
func (s *Screen) formRows(width int, headings bool) []row {
	var rows []row
	group := ""
	for i := range fields {
		f := &fields[i]
		if headings && f.group != group {
			if group != "" {
				rows = append(rows, row{"", nothing})
			}
			rows = append(rows, row{s.heading(f.group), nothing})
			group = f.group
		}
		value, aside := f.shown(s)
		rows = append(rows, s.line(i, f.label, value, aside, width))
	}
	return rows
}

func (s *Screen) heading(text string) string { return s.desk.Style.Lead.Render(" " + text) }

// line is a label, its value and an aside that gives way first. Under the
// cursor it is one colour, and marked where there is no colour.
func (s *Screen) line(item int, label, value, aside string, width int) row {
	st := s.desk.Style
	room := width - labelWide
	value = ansi.Truncate(value, room, s.glyph("…", "~"))
	if left := room - ansi.StringWidth(value) - 2; value == "" {
		aside = ansi.Truncate(aside, room, s.glyph("…", "~"))
	} else if ansi.StringWidth(aside) > left {
		aside = ""
	}
	gap := ""
	if value != "" && aside != "" {
		gap = "  "
	}
	if item == s.cursor {
		return row{st.Chosen.Render(kit.Fit(kit.Fit(s.glyph("▸ ", "> ")+label, labelWide)+value+gap+aside, width)), item}
	}
	return row{st.Faint.Render(kit.Fit("  "+label, labelWide)) + st.Text.Render(value) + gap + st.Faint.Render(aside), item}
}

// factRows are the consequences.
func (s *Screen) factRows(width int, heading bool) []row {
	var rows []row
	if heading {
		rows = append(rows, row{s.heading("Comes to"), nothing})
	}
	for _, f := range s.facts() {
		rows = append(rows, s.line(nothing, f.label, f.value, f.aside, width))
	}
	return rows
}

// findingRows are the findings, wrapped, with their cures; where that takes more
// than height, the cure is left to the one under the cursor.
func (s *Screen) findingRows(width, height int) []row {
	rows := s.findingsWith(width, true)
	if len(rows) > height {
		rows = s.findingsWith(width, false)
	}
	return rows
}

// anyHeight is a height that everything fits in.
const anyHeight = 1 << 20

func (s *Screen) findingsWith(width int, cures bool) []row {
	st := s.desk.Style
	list := s.findings()
	rows := []row{{s.heading(title(list)), nothing}}
	if len(list) == 0 {
		rows = append(rows, row{st.Good.Render("  nothing stands against this print"), nothing})
	}
	for i, f := range list {
		item := len(fields) + i
		rows = append(rows, s.findingLines(item, f, width, cures || item == s.cursor)...)
	}
	if p := s.desk.Picture; p == nil || !p.Whole {
		rows = append(rows, row{st.Faint.Render("  the picture is not finished yet"), nothing})
	}
	return rows
}

// findingLines is one finding: its level's mark and figure, and the cure.
func (s *Screen) findingLines(item int, f finding, width int, cure bool) []row {
	st := s.desk.Style
	mark, style := s.glyph("·", "."), st.Text
	switch f.level {
	case care:
		mark, style = s.glyph("▲", "!"), st.Warn
	case fault:
		mark, style = s.glyph("■", "X"), st.Bad
	}
	cursor := " "
	if item == s.cursor {
		cursor = s.glyph("▸", ">")
	}
	var rows []row
	add := func(text, lead string, style lipgloss.Style) {
		for i, l := range strings.Split(ansi.Wrap(text, max(8, width-4), ""), "\n") {
			if i > 0 {
				lead = "   "
			}
			if item == s.cursor {
				style = st.Chosen
			}
			rows = append(rows, row{style.Render(kit.Fit(lead+l, width)), item})
		}
	}
	add(f.figure, cursor+mark+" ", style)
	if cure {
		add(f.cure, " "+s.glyph("→", ">")+" ", st.Faint)
	}
	return rows
}

// part is the rows that a part of the screen shows, the cursor's among them;
// from is how many are above.
func part(rows []row, height, cursor int) (shown []row, from int) {
	first, last := -1, -1
	for i, r := range rows {
		if r.item == cursor {
			if first < 0 {
				first = i
			}
			last = i
		}
	}
	most := max(0, len(rows)-height)
	if last >= height {
		from = min(most, min(first, last-height+1+min(2, most)))
	}
	return rows[from:min(len(rows), from+height)], from
}

// texts is a part as a block of lines.
func (s *Screen) texts(rows []row, width, height int) string {
	shown, from := part(rows, height, s.cursor)
	lines := make([]string, len(shown))
	for i, r := range shown {
		lines[i] = r.text
	}
	block := kit.Block(strings.Join(lines, "\n"), width, height)
	return s.marked(block, width, from > 0, from+height < len(rows))
}

// marked puts arrows at the right of a block that has more above or below.
func (s *Screen) marked(block string, width int, above, below bool) string {
	lines := strings.Split(block, "\n")
	put := func(i int, arrow string) {
		if width > labelWide && i >= 0 {
			lines[i] = ansi.Truncate(lines[i], width-1, "") + s.desk.Style.Faint.Render(arrow)
		}
	}
	if above {
		put(0, s.glyph("↑", "^"))
	}
	if below {
		put(len(lines)-1, s.glyph("↓", "v"))
	}
	return strings.Join(lines, "\n")
}
