package inking

import (
	"fmt"
	"image"
	"strings"

	"github.com/charmbracelet/lipgloss"
	"github.com/charmbracelet/x/ansi"

	"leadline/palette"
	"leadline/tui/cells"
	"leadline/tui/kit"
)

// drawPanel draws the right side: the list and the mixer, or the locker.
func (s *Screen) drawPanel(l layout) []string {
	w := l.list.Dx()
	if s.locker != nil {
		return s.drawLocker(w, l.picture.Dy())
	}
	if l.hidden() {
		if s.mixing {
			return pad(s.drawMixer(w), w, l.list.Dy())
		}
		return s.drawList(w, l.list.Dy())
	}
	return append(s.drawList(w, l.list.Dy()), pad(s.drawMixer(w), w, l.picture.Dy()-l.list.Dy())...)
}

func pad(lines []string, w, h int) []string {
	return strings.Split(kit.Block(strings.Join(lines, "\n"), w, h), "\n")
}

// drawList draws as many of the list's lines as there is room for.
func (s *Screen) drawList(w, h int) []string {
	rows, lines := s.rows(), s.lines(h)
	at := indexOf(rows, s.at)
	var out []string
	for y, i := range lines {
		more := ""
		switch {
		case i < 0:
			out = append(out, "")
			continue
		case y == 0 && i > 0:
			more = "↑"
		case y == len(lines)-1 && i < len(rows)-1:
			more = "↓"
		}
		out = append(out, s.drawRow(rows[i], i == at, more, w))
	}
	return pad(out, w, h)
}

// labelWidth is the cells of a line's label with the mark before it.
const labelWidth = 10

// drawRow draws one line of the list.
func (s *Screen) drawRow(r row, at bool, more string, w int) string {
	st := s.desk.Style
	text, label, mark := st.Text, st.Faint, more
	if at {
		text, label, mark = st.Chosen, st.Chosen, "▸"
		if s.mixing {
			mark = "·"
		}
	}
	if s.desk.ASCII {
		mark = strings.NewReplacer("▸", ">", "·", "-", "↑", "^", "↓", "v").Replace(mark)
	}
	line := label.Render(kit.Fit(kit.Fit(mark, 1)+" "+r.label, labelWidth))
	if !r.kind.hasColour() {
		value := r.value
		if at && r.step != nil && !s.mixing {
			value = s.arrows(value)
		}
		return line + text.Render(kit.Fit(value, w-labelWidth))
	}
	c := s.colourOf(r.place)
	wide := pick(w < 30, 2, 3)
	line += text.Render(kit.Fit(r.value, 6)) + s.swatch(c, wide)
	tail := " " + c.Hex()
	if w >= 46 {
		tail += " " + lch(c)
	}
	room := w - labelWidth - 6 - wide
	if beyond(c, s.now().resolved.Space) > 0 {
		return line + text.Render(kit.Fit(tail, room-2)) + s.bad(at).Render("! ")
	}
	return line + text.Render(kit.Fit(tail, room))
}

func (s *Screen) bad(at bool) lipgloss.Style {
	if at {
		return s.desk.Style.Chosen
	}
	return s.desk.Style.Warn
}

func (s *Screen) arrows(value string) string {
	if s.desk.ASCII {
		return "< " + value + " >"
	}
	return "‹ " + value + " ›"
}

// colourOf is the colour of a line.
func (s *Screen) colourOf(p place) palette.Colour {
	switch p.kind {
	case inside:
		return s.now().resolved.Inside
	case edgeColour:
		return s.now().resolved.Edge.Colour
	}
	return s.now().ramp.Stops[p.stop].Colour
}

// lch is a colour's OKLCH numbers in short.
func lch(c palette.Colour) string {
	l, chroma, h := c.OKLCH()
	return fmt.Sprintf("%.3f %.3f %5.1f", l, chroma, h)
}

// drawMixer draws the colour in hand, its sliders and what the space holds.
func (s *Screen) drawMixer(w int) []string {
	st, c := s.desk.Style, s.colour()
	head := " " + st.Strong.Render(s.handWords()) + " " + s.swatch(c, 4) + " " + st.Text.Render(c.Hex())
	if like := " like " + s.keyword(c); ansi.StringWidth(head+like) < w {
		head += st.Faint.Render(like)
	}
	out := []string{head}
	for i := range sliders {
		out = append(out, s.drawSlider(i, w))
	}
	space := s.now().resolved.Space
	note := fmt.Sprintf(" %s holds C up to %.3f", space, s.mixed().limit(space))
	if len(note)+len(" here") < w {
		note += " here"
	}
	note = st.Faint.Render(note)
	if text := s.warning(); text != "" {
		note = st.Warn.Render(" " + text)
	}
	return append(out, note)
}

// keyword is the CSS name of what a colour looks like.
func (s *Screen) keyword(c palette.Colour) string {
	if k := &s.cache; !k.hasNames || !k.nameOf.Equal(c) {
		k.name, _ = palette.NearestKeyword(c)
		k.nameOf, k.hasNames = c, true
	}
	return s.cache.name
}

// sliderAround is what a slider has beside its track: mark, letter and value.
const sliderAround = 11

// drawSlider draws one slider: what its colour would be all along, as far as
// the sheet's space holds it, dots beyond.
func (s *Screen) drawSlider(i, w int) string {
	st, m, space := s.desk.Style, sliders[i], s.now().resolved.Space
	mark, name := " ", st.Faint
	if s.mixing && s.slider == i {
		mark, name = "▸", st.Lead
	}
	inGamut, dot, handle := '─', '·', '◆'
	if s.desk.ASCII {
		mark = strings.ReplaceAll(mark, "▸", ">")
		inGamut, dot, handle = '-', '.', '#'
	}
	coloured := s.desk.Depth != cells.None && !s.desk.ASCII
	if coloured {
		inGamut = ' '
	}
	n, now := max(w-sliderAround, 1), s.mixed()
	g := cells.NewGrid(n, 1, s.desk.Depth)
	for x := range n {
		c := now.at(i, (float64(x)+0.5)/float64(n)*m.most)
		cell := cells.Cell{Rune: dot, FG: s.desk.Style.FaintTone.Solid()}
		if _, in := c.In(space); in {
			cell = cells.Cell{Rune: inGamut}
			if coloured {
				cell.BG = rgb(c).Solid()
			}
		}
		if x == trackCell(now.v[i], m.most, n) {
			cell.Rune, cell.FG, cell.Attr = handle, cells.Against, cells.Bold
		}
		g.Set(x, 0, cell)
	}
	value := fmt.Sprintf(m.form, now.v[i])
	return " " + name.Render(mark+m.name) + " " + g.Lines()[0] + " " + st.Text.Render(kit.Fit(value, 6))
}

// trackCell is the cell of a track of n in which a value lies.
func trackCell(v, most float64, n int) int { return min(max(int(v/most*float64(n)), 0), n-1) }

// track is the part of a slider's line that can be clicked, from the panel's
// left edge.
func track(w int) image.Point { return image.Pt(4, max(w-sliderAround, 1)) }

// drawLocker draws the paint locker.
func (s *Screen) drawLocker(w, h int) []string {
	l, st := s.locker, s.desk.Style
	out := []string{" " + st.Strong.Render("Paint locker")}
	note := noteHeight(h)
	from, to := window(len(l.entries), h-1-note, l.at)
	for i := from; i < to; i++ {
		out = append(out, s.drawEntry(l.entries[i], i == l.at, w))
	}
	if note > 0 {
		out = pad(out, w, min(h-note, len(out)+1))
		text, style := s.entryNote()
		lines := strings.Split(ansi.Wordwrap(text, w-2, ""), "\n")
		for i := range lines {
			lines[i] = " " + style.Render(strings.TrimSpace(lines[i]))
		}
		out = append(out, pad(lines, w, note)...)
	}
	return pad(out, w, h)
}

// noteHeight is the lines below the locker's list for what is said of a ramp.
func noteHeight(h int) int {
	switch {
	case h >= 12:
		return 3
	case h >= 8:
		return 2
	}
	return 0
}

// drawEntry is one line of the locker: the ramp in small, and its name.
func (s *Screen) drawEntry(e entry, at bool, w int) string {
	st, text, mark := s.desk.Style, s.desk.Style.Text, " "
	if at {
		text, mark = st.Chosen, pick(s.desk.ASCII, ">", "▸")
	}
	n := max(w/3, 6)
	strip := strings.Repeat(" ", n)
	if e.err == nil {
		mesh := s.mesh(cells.Quadrant)
		p := cells.NewPicture(n, 1, mesh)
		curve := e.ramp.Curve()
		for i := range p.Pix {
			p.Pix[i] = rgb(curve.At((float64(i%p.W) + 0.5) / float64(p.W)))
		}
		strip = cells.Render(p, mesh, s.desk.Depth, cells.Options{Light: !st.Dark, ASCII: s.desk.ASCII, Dither: true, Range: cells.Range{High: 255}})[0]
	} else if !at {
		text = st.Bad
	}
	return text.Render(mark+" ") + strip + text.Render(kit.Fit(" "+e.name, w-n-2))
}

// entryNote says what the ramp under the cursor is good for, or what is wrong
// with its file.
func (s *Screen) entryNote() (string, lipgloss.Style) {
	e := s.locker.entries[s.locker.at]
	if e.err == nil {
		return e.note, s.desk.Style.Faint
	}
	text := e.err.Error()
	if h, ok := kit.Hint(e.err); ok {
		text += " (" + h + ")"
	}
	return strings.ReplaceAll(text, "\n", " "), s.desk.Style.Bad
}
