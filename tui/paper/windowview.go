package paper

import (
	"encoding/binary"
	"fmt"
	"image"
	"math"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/palette"
	"leadline/render"
	"leadline/tui/cells"
)

// onScreen turns a canvas of a space into sRGB of 8 bits, every colour brought
// into what a screen has.
func onScreen(c *render.Canvas, space palette.Space) []cells.RGB {
	out := make([]cells.RGB, c.Rect.Dx()*c.Rect.Dy())
	for i := range out {
		var code [3]uint16
		for j := range code {
			code[j] = binary.BigEndian.Uint16(c.Pix[i*render.BytesPerPixel+2*j:])
		}
		if space != palette.SRGB {
			code, _ = palette.FromCodes(space, code).BakeOne(palette.SRGB)
		}
		out[i] = cells.RGB{R: to8(code[0]), G: to8(code[1]), B: to8(code[2])}
	}
	return out
}

// to8 rounds a 16-bit code to 8 bits.
func to8(v uint16) uint8 { return uint8((uint32(v)*255 + 32767) / 65535) }

// picture is the window's samples. What is not computed, or not sheet, is mat.
func (w *window) picture(s *Screen) cells.Picture {
	r, full := w.rect(s), s.resolve().Sheet.Full()
	out := cells.Picture{W: r.Dx(), H: r.Dy(), Pix: make([]cells.RGB, r.Dx()*r.Dy())}
	fill(out, image.Rect(0, 0, out.W, out.H), s.desk.Style.MatTone)
	for _, p := range pieces(r.Intersect(full)) {
		pix := w.patches[p]
		if pix == nil {
			continue
		}
		from := pieceRect(p).Intersect(full)
		in := from.Intersect(r)
		for y := in.Min.Y; y < in.Max.Y; y++ {
			copy(out.Pix[(y-r.Min.Y)*out.W+in.Min.X-r.Min.X:][:in.Dx()], pix[(y-from.Min.Y)*from.Dx()+in.Min.X-from.Min.X:])
		}
	}
	return out
}

// view draws the window.
func (w *window) view(s *Screen, width, height int) string {
	g := cells.Draw(w.picture(s), w.mesh(s), s.desk.Depth, cells.Options{Light: !s.desk.Style.Dark, ASCII: s.desk.ASCII})
	w.drawTrim(s, g)
	if !w.bare {
		w.drawRule(s, g)
		w.drawMap(s, g)
	}
	return pad(g.Lines(), width, height)
}

// drawTrim draws the trim's line where a bleed is in view.
func (w *window) drawTrim(s *Screen, g *cells.Grid) {
	size, r, per := s.resolve().Sheet, w.rect(s), w.mesh(s).Size()
	if size.Bleed == 0 {
		return
	}
	st := cells.Style{FG: s.desk.Style.LeadTone.Solid(), BG: cells.Under}
	t := size.Trim().Sub(r.Min)
	t = image.Rect(floorTo(t.Min.X, per.X)-1, floorTo(t.Min.Y, per.Y)-1, floorTo(t.Max.X-1, per.X)+2, floorTo(t.Max.Y-1, per.Y)+2)
	g.Box(t, st)
}

func floorTo(v, per int) int { return int(math.Floor(float64(v) / float64(per))) }

// label is how words stand on a picture.
func (s *Screen) label() cells.Style {
	st := s.desk.Style
	return cells.Style{FG: st.InkTone.Solid(), BG: st.MatTone.Solid()}
}

// drawRule draws a length of paper at the lower left, to the pixel.
func (w *window) drawRule(s *Screen, g *cells.Grid) {
	size, per := s.resolve().Sheet, w.mesh(s).Size()
	perMM := float64(size.PPI) / 25.4 / float64(per.X)
	length := roundLength(max(float64(g.Size().X)/4, 3) / perMM)
	n := int(math.Round(length * perMM))
	text := fmt.Sprintf(" %g mm ", length)
	y, st := g.Size().Y-1, s.label()
	if n < 2 || n+len(text) > g.Size().X {
		return
	}
	g.Rule(0, y, n, st)
	g.Set(0, y, cells.Cell{Rune: s.rune('├', '|'), FG: st.FG, BG: st.BG})
	g.Set(n-1, y, cells.Cell{Rune: s.rune('┤', '|'), FG: st.FG, BG: st.BG})
	g.Text(n, y, text, st)
}

// mapRect is where the map lies, in cells, its frame included; empty where it
// would cover too much.
func (w *window) mapRect(s *Screen) image.Rectangle {
	cols, rows := s.room.X, s.room.Y
	h := max(4, rows/4)
	size := s.resolve().Sheet
	full := size.Full()
	wide := int(math.Round(float64((h-2)*cellAspect)*float64(full.Dx())/float64(full.Dy()))) + 2
	if most := max(12, cols/4); wide > most {
		wide = most
		h = max(3, int(math.Round(float64(wide-2)*float64(full.Dy())/float64(full.Dx())/cellAspect))+2)
	}
	wide = max(4, wide)
	if wide*3 > cols || h*2 > rows {
		return image.Rectangle{}
	}
	return image.Rect(cols-wide, 0, cols, h)
}

// drawMap draws the sheet at the upper right, with the window in it.
func (w *window) drawMap(s *Screen, g *cells.Grid) {
	r := w.mapRect(s)
	if r.Empty() {
		return
	}
	in, mesh := r.Inset(1), w.mesh(s)
	p := lie(s.resolve().Sheet, mesh, in.Dx(), in.Dy(), around{})
	small := cells.Draw(s.sheetPicture(p), mesh, s.desk.Depth, cells.Options{Light: !s.desk.Style.Dark, ASCII: s.desk.ASCII})
	for y := range in.Dy() {
		for x := range in.Dx() {
			g.Set(in.Min.X+x, in.Min.Y+y, small.At(x, y))
		}
	}
	g.Box(r, s.label())
	size, full := s.resolve().Sheet, w.rect(s)
	x1, y1 := p.cell(float64(full.Min.X)/float64(size.TrimW), float64(full.Min.Y)/float64(size.TrimH))
	x2, y2 := p.cell(float64(full.Max.X)/float64(size.TrimW), float64(full.Max.Y)/float64(size.TrimH))
	at := image.Rect(x1, y1, x2+1, y2+1).Add(in.Min).Intersect(in)
	st := cells.Style{FG: s.desk.Style.LeadTone.Solid(), BG: cells.Under, Attr: cells.Bold}
	if at.Dx() < 2 || at.Dy() < 2 {
		x, y := p.cell(w.u, w.v)
		g.Set(in.Min.X+x, in.Min.Y+y, cells.Cell{Rune: s.rune('┼', '+'), FG: st.FG, BG: st.BG, Attr: st.Attr})
		return
	}
	g.Box(at, st)
}

// mouse: a click makes that spot the middle, on the map it goes there; the
// wheel goes up and down.
func (w *window) mouse(s *Screen, e tea.MouseEvent) tea.Cmd {
	if e.Action != tea.MouseActionPress {
		return nil
	}
	switch e.Button {
	case tea.MouseButtonWheelUp:
		return w.move(s, 0, -1.0/4)
	case tea.MouseButtonWheelDown:
		return w.move(s, 0, 1.0/4)
	case tea.MouseButtonLeft:
		size, per := s.resolve().Sheet, w.mesh(s).Size()
		if m := w.mapRect(s); !w.bare && image.Pt(e.X, e.Y).In(m) {
			in := m.Inset(1)
			p := lie(size, w.mesh(s), in.Dx(), in.Dy(), around{})
			x, y := float64((e.X-in.Min.X)*per.X)+float64(per.X)/2, float64((e.Y-in.Min.Y)*per.Y)+float64(per.Y)/2
			return w.show(s, (x-float64(p.trim.Min.X))/float64(p.trim.Dx()), (y-float64(p.trim.Min.Y))/float64(p.trim.Dy()))
		}
		at := w.rect(s).Min.Add(image.Pt(e.X*per.X+per.X/2, e.Y*per.Y+per.Y/2))
		return w.show(s, float64(at.X)/float64(size.TrimW), float64(at.Y)/float64(size.TrimH))
	}
	return nil
}
