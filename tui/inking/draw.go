package inking

import (
	"image"
	"math"
	"strings"

	"leadline/palette"
	"leadline/tui/cells"
	"leadline/tui/engine"
	"leadline/tui/kit"
)

// View draws the screen.
func (s *Screen) View(width, height int) string {
	s.room = image.Pt(width, height)
	l := lay(width, height, len(s.rows()))
	left, right := s.drawPicture(l.picture), s.drawPanel(l)
	lines := make([]string, 0, height)
	for i := range left {
		lines = append(lines, left[i]+right[i])
	}
	lines = append(lines, s.drawUsage(l.usage.Dx(), l.usage.Dy())...)
	lines = append(lines, s.drawBand(l.band.Dx(), l.band.Dy(), false)...)
	lines = append(lines, s.drawBand(l.grey.Dx(), l.grey.Dy(), true)...)
	lines = append(lines, s.drawMarks(l))
	return kit.Block(strings.Join(lines, "\n"), width, height)
}

// mesh is how a picture is drawn: as the maker chose, or in characters.
func (s *Screen) mesh(m cells.Mesh) cells.Mesh {
	if s.desk.ASCII || s.desk.Depth == cells.None && m != cells.Plain {
		return cells.Plain
	}
	return m
}

// drawPicture draws the preview in the ink at hand.
func (s *Screen) drawPicture(area image.Rectangle) []string {
	d, w, h := s.desk, area.Dx(), area.Dy()
	if w < 4 || h < 1 {
		return strings.Split(kit.Block("", max(w, 0), h), "\n")
	}
	p := d.Picture
	if p == nil || p.Err != nil || p.Size.X < 1 || p.Size.Y < 1 {
		return strings.Split(kit.Block(d.Style.Faint.Render(" waiting for the picture"), w, h), "\n")
	}
	pix := s.colours(p)
	if len(pix) < p.Size.X*p.Size.Y {
		return strings.Split(kit.Block(d.Style.Faint.Render(" no picture in this ink"), w, h), "\n")
	}
	mesh := s.mesh(d.Mesh)
	per := mesh.Size()
	grid := image.Pt((w-1)*per.X, h*per.Y) // a cell is left free before the list
	size := fit(grid, per, float64(p.Geometry.TrimW)/float64(p.Geometry.TrimH))
	at := image.Pt((grid.X-size.X)/2, (grid.Y-size.Y)/2)
	out := cells.Picture{W: grid.X, H: grid.Y, Pix: make([]cells.RGB, grid.X*grid.Y)}
	for y := range size.Y {
		for x := range size.X {
			out.Pix[(y+at.Y)*grid.X+x+at.X] = mean(pix, p.Size, image.Rect(
				x*p.Size.X/size.X, y*p.Size.Y/size.Y, (x+1)*p.Size.X/size.X, (y+1)*p.Size.Y/size.Y))
		}
	}
	lines := cells.Render(out, mesh, d.Depth, cells.Options{Light: !d.Style.Dark, ASCII: d.ASCII, Dither: d.Depth == cells.C16,
		Mat: &cells.Mat{Sheet: image.Rectangle{Min: at, Max: at.Add(size)}, Tone: d.Style.MatTone}})
	for i := range lines {
		lines[i] += " "
	}
	return lines
}

// mean is the colour of a part of a picture seen from afar; of an empty part, of
// its first sample. Squares of codes stand in for light.
func mean(pix []cells.RGB, size image.Point, r image.Rectangle) cells.RGB {
	if r.Empty() {
		return pix[r.Min.Y*size.X+r.Min.X]
	}
	var sum [3]int
	for y := r.Min.Y; y < r.Max.Y; y++ {
		for _, c := range pix[y*size.X+r.Min.X : y*size.X+r.Max.X] {
			sum[0] += int(c.R) * int(c.R)
			sum[1] += int(c.G) * int(c.G)
			sum[2] += int(c.B) * int(c.B)
		}
	}
	n := float64(r.Dx() * r.Dy())
	root := func(v int) uint8 { return uint8(math.Sqrt(float64(v)/n) + 0.5) }
	return cells.RGB{R: root(sum[0]), G: root(sum[1]), B: root(sum[2])}
}

// fit is the samples of a trim of an aspect (width over height) within a grid;
// a cell is twice as high as wide, as nearly everywhere.
func fit(grid, per image.Point, aspect float64) image.Point {
	shape := float64(per.Y) / float64(per.X) / 2 // a sample's width over its height
	w, h := float64(grid.X), float64(grid.Y)
	if w*shape > h*aspect {
		w = h * aspect / shape
	} else {
		h = w * shape / aspect
	}
	return image.Pt(min(max(int(w+0.5), 1), grid.X), min(max(int(h+0.5), 1), grid.Y))
}

// colours are the picture's samples in the ink shown. Fields are only looked up.
func (s *Screen) colours(p *engine.Picture) []cells.RGB {
	c, f := &s.cache, s.shown().frame
	if c.pixFrame == f && c.pixPicture == p {
		return c.pix
	}
	c.pixFrame, c.pixPicture, c.pix = f, p, nil
	if k := s.inker(s.shown()); k != nil {
		c.pix = k.Colours(p)
	}
	return c.pix
}

// drawBand draws the ramp shown, each cell two parts of it, or its lightness.
func (s *Screen) drawBand(w, h int, grey bool) []string {
	if w < 1 || h < 1 {
		return nil
	}
	mesh := s.mesh(cells.Quadrant)
	p := cells.NewPicture(w, h, mesh)
	l := s.shown()
	for x := range p.W {
		at := 0.0
		if p.W > 1 {
			at = float64(x) / float64(p.W-1)
		}
		c := rgb(l.curve.At(at))
		if grey {
			c = rgb(lightness(l.curve.At(at)))
		}
		for y := range p.H {
			p.Pix[y*p.W+x] = c
		}
	}
	return cells.Render(p, mesh, s.desk.Depth, cells.Options{Light: !s.desk.Style.Dark, ASCII: s.desk.ASCII, Dither: true,
		Range: cells.Range{High: 255}})
}

// rgb is a colour for the terminal.
func rgb(c palette.Colour) cells.RGB {
	r, g, b := c.Screen().RGB255()
	return cells.RGB{R: r, G: g, B: b}
}

// lightness is the grey of a colour's lightness.
func lightness(c palette.Colour) palette.Colour {
	l, _, _ := c.OKLab()
	return palette.FromOKLab(l, 0, 0)
}

// drawUsage draws how much of the picture lies where on the ramp.
func (s *Screen) drawUsage(w, h int) []string {
	if w < 1 || h < 1 {
		return nil
	}
	steps := []rune(" ▁▂▃▄▅▆▇█")
	if s.desk.ASCII {
		steps = []rune(" .:-=+*%#")
	}
	out := make([][]rune, h)
	for y := range out {
		out[y] = []rune(strings.Repeat(" ", w))
	}
	full := len(steps) - 1
	for x, share := range s.usage(s.shown(), w) {
		high := int(share*float64(h*full) + 0.5)
		if share > 0 {
			high = max(high, 1)
		}
		for y := range h {
			out[h-1-y][x] = steps[min(max(high-y*full, 0), full)]
		}
	}
	lines := make([]string, h)
	for y := range lines {
		lines[y] = s.desk.Style.Faint.Render(string(out[y]))
	}
	return lines
}

// drawMarks draws the stops below the ramp and, where the sheet's space does
// not hold the colours, a wavy line.
func (s *Screen) drawMarks(l layout) string {
	w := l.marks.Dx()
	st, v := s.desk.Style, s.shown()
	stop, held, beyond := '│', '▲', '~'
	if s.desk.ASCII {
		stop, held = '|', '^'
	}
	line := []rune(strings.Repeat(" ", w))
	for i, out := range v.outside {
		if out {
			line[i*(w-1)/(len(v.outside)-1)] = beyond
		}
	}
	for _, p := range v.ramp.Stops {
		line[l.column(p.At)] = stop
	}
	at := -1
	if s.locker == nil && s.hand.kind == aStop {
		at = l.column(v.ramp.Stops[s.stop()].At)
		line[at] = held
	}
	var b strings.Builder
	for i := 0; i < w; {
		j := i + 1
		for j < w && line[j] == line[i] && j != at && i != at {
			j++
		}
		part := string(line[i:j])
		switch {
		case i == at:
			part = st.Lead.Render(part)
		case line[i] == beyond:
			part = st.Warn.Render(part)
		case line[i] == stop:
			part = st.Text.Render(part)
		}
		b.WriteString(part)
		i = j
	}
	return b.String()
}

// swatch is n cells of a colour.
func (s *Screen) swatch(c palette.Colour, n int) string {
	if s.desk.Depth == cells.None || s.desk.ASCII {
		return s.drawnPlain(c, n)
	}
	g := cells.NewGrid(n, 1, s.desk.Depth)
	g.Fill(image.Rect(0, 0, n, 1), cells.Cell{Rune: ' ', BG: rgb(c).Solid()})
	return g.Lines()[0]
}

// drawnPlain is a swatch for terminals without colour: its lightness as ink.
func (s *Screen) drawnPlain(c palette.Colour, n int) string {
	p := cells.NewPicture(n, 1, cells.Plain)
	for i := range p.Pix {
		p.Pix[i] = rgb(c)
	}
	return cells.Render(p, cells.Plain, cells.None, cells.Options{Light: !s.desk.Style.Dark, ASCII: s.desk.ASCII, Range: cells.Range{High: 255}})[0]
}
