package paper

import (
	"context"
	"fmt"
	"image"
	"math"
	"sync/atomic"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render"
	"leadline/render/frame"
	"leadline/render/words"
	"leadline/tui/cells"
)

// patchSide is the side of the pieces that the window's pixels are computed in.
const patchSide = 32

// mostPatches bounds the pieces that are kept: 4 megapixels.
const mostPatches = 4096

// window is the view of the sheet's own pixels, one of the screen's samples for
// each. Pieces that were computed stay, for as long as the frame does.
type window struct {
	open, used bool
	bare       bool    // without map and rule
	u, v       float64 // its middle, in shares of the trim

	frame   *frame.Frame // whose pixels the pieces are
	plan    *render.Plan
	stage   *stage
	patches map[image.Point][]cells.RGB
	asked   map[image.Point]bool
	err     error

	ctx    context.Context // of the work under way
	cancel context.CancelFunc
}

// stage is how far a plan is; it is written by the work and read by the screen.
type stage struct {
	phase atomic.Pointer[string]
	part  atomic.Int64 // of a thousand
}

// Messages of the work.
type (
	planned struct {
		frame *frame.Frame
		plan  *render.Plan
		err   error
	}
	tiled struct {
		frame *frame.Frame
		at    image.Point
		pix   []cells.RGB
		err   error
	}
	waited struct{ frame *frame.Frame }
)

// show opens the window at a spot of the trim.
func (w *window) show(s *Screen, u, v float64) tea.Cmd {
	w.open, w.used = true, true
	w.u, w.v = w.clamp(s, u, v)
	return w.refresh(s)
}

// shut closes the window and stops its work; what was computed is kept.
func (w *window) shut() {
	w.open = false
	w.rest()
}

// rest stops the work.
func (w *window) rest() {
	if w.cancel != nil {
		w.cancel()
		w.cancel = nil
	}
	w.asked = nil
	w.stage = nil
}

// move goes by a part of the window.
func (w *window) move(s *Screen, dx, dy float64) tea.Cmd {
	g, r := s.resolve().Sheet, w.rect(s)
	step := func(part float64, pixels, trim int) float64 { return math.Round(part*float64(pixels)) / float64(trim) }
	return w.show(s, w.u+step(dx, r.Dx(), g.TrimW), w.v+step(dy, r.Dy(), g.TrimH))
}

// clamp keeps the middle where the window shows nothing but sheet, as far as it
// is small enough.
func (w *window) clamp(s *Screen, u, v float64) (float64, float64) {
	g, size := s.resolve().Sheet, w.size(s)
	full := g.Full()
	in := func(share float64, trim, size, from, to int) float64 {
		half := float64(size) / 2
		least, most := float64(from)+half, float64(to)-half
		if least > most {
			return 0.5
		}
		return min(max(share*float64(trim), least), most) / float64(trim)
	}
	return in(u, g.TrimW, size.X, full.Min.X, full.Max.X), in(v, g.TrimH, size.Y, full.Min.Y, full.Max.Y)
}

// mesh is how the window is drawn: in halves of cells, whose samples are square
// and have each a colour of their own.
func (w *window) mesh(s *Screen) cells.Mesh {
	if s.desk.Depth == cells.None || s.desk.Mesh == cells.Plain {
		return s.desk.Mesh
	}
	return cells.Half
}

// size is the window's pixels across and down.
func (w *window) size(s *Screen) image.Point {
	per := w.mesh(s).Size()
	return image.Pt(max(1, s.room.X*per.X), max(1, s.room.Y*per.Y))
}

// rect is what the window shows, in pixels of the lattice; it may reach beyond
// a small sheet.
func (w *window) rect(s *Screen) image.Rectangle {
	g, size := s.resolve().Sheet, w.size(s)
	at := image.Pt(int(math.Round(w.u*float64(g.TrimW)-float64(size.X)/2)), int(math.Round(w.v*float64(g.TrimH)-float64(size.Y)/2)))
	return image.Rectangle{at, at.Add(size)}
}

// refresh has what is missing computed, and begins anew where the frame is
// another.
func (w *window) refresh(s *Screen) tea.Cmd {
	if w.frame != s.desk.Frame {
		w.rest()
		w.frame, w.plan, w.err = s.desk.Frame, nil, nil
		w.patches = map[image.Point][]cells.RGB{}
		w.u, w.v = w.clamp(s, w.u, w.v)
	}
	if !w.open || w.err != nil || s.room.X < 1 || s.room.Y < 1 {
		return nil
	}
	if w.cancel == nil {
		w.ctx, w.cancel = context.WithCancel(context.Background())
		w.asked = map[image.Point]bool{}
	}
	switch {
	case w.plan != nil:
		return w.compute(s)
	case w.stage == nil:
		w.stage = &stage{}
		return tea.Batch(w.makePlan(), w.wait())
	}
	return nil
}

// take takes what the work brings back, and asks for more.
func (w *window) take(s *Screen, msg tea.Msg) tea.Cmd {
	switch msg := msg.(type) {
	case waited:
		if msg.frame == w.frame && w.plan == nil && w.stage != nil {
			return w.wait()
		}
		return nil
	case planned:
		if msg.frame != w.frame || (msg.err != nil && w.ctx.Err() != nil) {
			return nil // of work that was stopped
		}
		w.plan, w.err = msg.plan, msg.err
	case tiled:
		if msg.frame != w.frame {
			return nil
		}
		delete(w.asked, msg.at)
		if msg.err != nil {
			return nil
		}
		if len(w.patches) >= mostPatches {
			w.patches = map[image.Point][]cells.RGB{}
		}
		w.patches[msg.at] = msg.pix
	}
	return w.refresh(s)
}

// status says where the window is and how far its pixels are.
func (w *window) status(s *Screen) string {
	st, g, r := s.desk.Style, s.resolve().Sheet, w.rect(s)
	part := func(label, value string) string { return st.Faint.Render(label+" ") + st.Text.Render(value) }
	text := part("1:1 at", fmt.Sprintf("%.1f, %.1f mm", w.u*mm(g, g.TrimW), w.v*mm(g, g.TrimH)))
	switch done, all := w.progress(s); {
	case w.err != nil:
		return st.Bad.Render(w.err.Error())
	case w.plan == nil:
		text += "  " + st.Lead.Render(w.stage.words())
	case done < all:
		text += "  " + st.Lead.Render("pixels "+words.Percent(float64(done)/float64(all)))
	}
	return text + "  " + part("shows", fmt.Sprintf("%.1f%s%.1f mm", mm(g, r.Dx()), s.glyph(" × ", " x "), mm(g, r.Dy()))) +
		"  " + part("of", s.sides(s.desk.Frame.Sheet.Width, s.desk.Frame.Sheet.Height))
}

// words says what is computed before the first pixel.
func (s *stage) words() string {
	if s == nil {
		return "waiting"
	}
	phase := s.phase.Load()
	if phase == nil {
		return "reference"
	}
	return fmt.Sprintf("%s %.0f %%", *phase, float64(s.part.Load())/10)
}

// progress is how many of the pieces in view are there, and how many there are.
func (w *window) progress(s *Screen) (done, all int) {
	list := pieces(w.rect(s).Intersect(s.resolve().Sheet.Full()))
	for _, p := range list {
		if w.patches[p] != nil {
			done++
		}
	}
	return done, len(list)
}
