package paper

import (
	"fmt"
	"image"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render/sheet"
	"leadline/tui/cells"
	"leadline/tui/kit"
)

// chooser is the list of known sizes, series by series.
type chooser struct {
	series []string
	sizes  [][]sheet.Size
	row    int // series
	at     int // size in it
}

// openChooser shows the sizes, at the sheet's own if it has a name.
func (s *Screen) openChooser() tea.Cmd {
	c := &chooser{}
	sh := s.desk.Frame.Sheet
	name := sheet.Name(sh.Width, sh.Height)
	for _, z := range sheet.Sizes() {
		n := len(c.series) - 1
		if n < 0 || c.series[n] != z.Series {
			c.series, c.sizes = append(c.series, z.Series), append(c.sizes, nil)
			n++
		}
		if z.Name == name {
			c.row, c.at = n, len(c.sizes[n])
		}
		c.sizes[n] = append(c.sizes[n], z)
	}
	s.choosing = c
	return nil
}

// key obeys the arrows, Enter and Esc.
func (c *chooser) key(s *Screen, k tea.KeyMsg) tea.Cmd {
	switch k.String() {
	case "left":
		c.turn(-1)
	case "right", "tab":
		c.turn(1)
	case "up":
		c.at = max(0, c.at-1)
	case "down":
		c.at = min(len(c.sizes[c.row])-1, c.at+1)
	case "esc", "c", "ctrl+c":
		s.choosing = nil
	case "enter":
		return c.take(s)
	}
	return nil
}

// turn goes to the next series, round at the ends.
func (c *chooser) turn(by int) {
	c.row = (c.row + by + len(c.series)) % len(c.series)
	c.at = min(c.at, len(c.sizes[c.row])-1)
}

// take makes the size under the cursor the sheet's.
func (c *chooser) take(s *Screen) tea.Cmd {
	s.choosing = nil
	return s.apply(&fields[atSize], s.take(c.sizes[c.row][c.at]))
}

func (c *chooser) status() string {
	z := c.sizes[c.row][c.at]
	return fmt.Sprintf("%s: %s. ↑ ↓ sizes, ← → series; it lies or stands as the sheet does", z.Name, z.Standard)
}

// Columns of the chooser.
const (
	seriesWide = 11
	sizesWide  = 36
	drawnFrom  = 72 // cells of the screen, from which sizes are drawn too
)

// view draws the chooser.
func (c *chooser) view(s *Screen, width, height int) string {
	st := s.desk.Style
	var series, sizes []string
	for i, name := range c.series {
		text := kit.Fit(" "+name, seriesWide)
		if i == c.row {
			series = append(series, st.Chosen.Render(kit.Fit(s.glyph("▸", ">")+name, seriesWide)))
			continue
		}
		series = append(series, st.Faint.Render(text))
	}
	wide := sizesWide
	if width < drawnFrom {
		wide = width - seriesWide - 1
	}
	for i, z := range c.sizes[c.row] {
		text := fmt.Sprintf(" %-13s %s", z.Name, s.chooserSides(z))
		if i == c.at {
			sizes = append(sizes, st.Chosen.Render(kit.Fit(s.glyph("▸", ">")+text[1:], wide)))
			continue
		}
		sizes = append(sizes, st.Text.Render(kit.Fit(text, wide)))
	}
	blocks := []string{kit.Block(strings.Join(scrolled(series, c.row, height), "\n"), seriesWide+1, height),
		kit.Block(strings.Join(scrolled(sizes, c.at, height), "\n"), wide, height)}
	if width >= drawnFrom {
		blocks = append(blocks, c.outlines(s, width-seriesWide-1-wide, height))
	}
	return kit.Beside(blocks...)
}

// chooserSides is a size in the unit of its standard; in millimetres where its
// name says that already.
func (s *Screen) chooserSides(z sheet.Size) string {
	if !strings.HasPrefix(z.Series, "Art") {
		return s.sides(z.Width, z.Height)
	}
	return fmt.Sprintf("%g%s%g mm", z.Width.MM(1), s.glyph(" × ", " x "), z.Height.MM(1))
}

// scrolled is the part of lines that shows line at.
func scrolled(lines []string, at, height int) []string {
	from := max(0, min(at-height/2, len(lines)-height))
	return lines[from:min(len(lines), from+height)]
}

// outlines draws the series to scale, the size under the cursor in front.
func (c *chooser) outlines(s *Screen, width, height int) string {
	g := cells.NewGrid(width, height, s.desk.Depth)
	g.ASCII = s.desk.ASCII
	largest := 0.0
	for _, z := range c.sizes[c.row] {
		largest = max(largest, z.Height.MM(1))
	}
	// Cells are twice as high as wide; the sheets lie or stand as the sheet does.
	scale := min(float64(height-1)/largest, float64(width-2)/largest/2)
	draw := func(z sheet.Size, st cells.Style) {
		w, h := z.Width.MM(1), z.Height.MM(1)
		if s.lies() {
			w, h = h, w
		}
		r := image.Rect(1, 0, 1+max(2, int(2*w*scale+0.5)), max(2, int(h*scale+0.5)))
		g.Box(r, st)
	}
	for _, z := range c.sizes[c.row] {
		draw(z, cells.Style{FG: s.desk.Style.FaintTone.Solid()})
	}
	draw(c.sizes[c.row][c.at], cells.Style{FG: s.desk.Style.LeadTone.Solid(), Attr: cells.Bold})
	return strings.Join(g.Lines(), "\n")
}

// mouse chooses by a click, and takes at a second one.
func (c *chooser) mouse(s *Screen, e tea.MouseEvent) tea.Cmd {
	height := s.room.Y
	switch {
	case e.Button == tea.MouseButtonWheelUp:
		c.at = max(0, c.at-1)
	case e.Button == tea.MouseButtonWheelDown:
		c.at = min(len(c.sizes[c.row])-1, c.at+1)
	case e.Action != tea.MouseActionPress || e.Button != tea.MouseButtonLeft:
	case e.X < seriesWide:
		if i := e.Y + max(0, min(c.row-height/2, len(c.series)-height)); i < len(c.series) {
			c.turn(i - c.row)
		}
	default:
		i := e.Y + max(0, min(c.at-height/2, len(c.sizes[c.row])-height))
		if i == c.at {
			return c.take(s)
		}
		if i < len(c.sizes[c.row]) {
			c.at = i
		}
	}
	return nil
}
