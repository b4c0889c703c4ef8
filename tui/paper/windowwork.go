package paper

import (
	"image"
	"math"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render"
)

// makePlan has the frame's shared part computed.
func (w *window) makePlan() tea.Cmd {
	ctx, f, st := w.ctx, w.frame, w.stage
	return func() tea.Msg {
		p, err := render.NewPlan(ctx, f, render.Options{Progress: func(p render.Progress) {
			st.phase.Store(&p.Phase)
			st.part.Store(1000 * p.Done / max(1, p.Total))
		}})
		return planned{f, p, err}
	}
}

// wait has the screen drawn again while the plan is made.
func (w *window) wait() tea.Cmd {
	f := w.frame
	return tea.Tick(200*time.Millisecond, func(time.Time) tea.Msg { return waited{f} })
}

// compute asks for missing pieces, the nearest to the middle first, as many at
// a time as there are cores.
func (w *window) compute(s *Screen) tea.Cmd {
	var cmds []tea.Cmd
	for len(w.asked) < s.cores {
		at, missing := w.next(s)
		if !missing {
			break
		}
		w.asked[at] = true
		cmds = append(cmds, w.tile(at))
	}
	return tea.Batch(cmds...)
}

// next is the nearest piece to the middle that is neither there nor asked for.
func (w *window) next(s *Screen) (at image.Point, missing bool) {
	r := w.rect(s)
	full := s.resolve().Sheet.Full()
	mid := r.Min.Add(r.Max).Div(2)
	best := math.MaxInt
	for _, p := range pieces(r.Intersect(full)) {
		if w.asked[p] || w.patches[p] != nil {
			continue
		}
		d := p.Mul(patchSide).Add(image.Pt(patchSide/2, patchSide/2)).Sub(mid)
		if n := d.X*d.X + d.Y*d.Y; n < best {
			best, at, missing = n, p, true
		}
	}
	return at, missing
}

// pieces are the places of all pieces that a rectangle touches.
func pieces(r image.Rectangle) []image.Point {
	var all []image.Point
	if r.Empty() {
		return all
	}
	for y := floorDiv(r.Min.Y); y <= floorDiv(r.Max.Y-1); y++ {
		for x := floorDiv(r.Min.X); x <= floorDiv(r.Max.X-1); x++ {
			all = append(all, image.Pt(x, y))
		}
	}
	return all
}

// floorDiv is the piece of a lattice coordinate.
func floorDiv(v int) int { return int(math.Floor(float64(v) / patchSide)) }

// tile computes a piece.
func (w *window) tile(at image.Point) tea.Cmd {
	ctx, f, p := w.ctx, w.frame, w.plan
	return func() tea.Msg {
		r := pieceRect(at).Intersect(p.Geometry.Full())
		c := render.NewCanvas(r)
		if _, err := p.Tile(ctx, c, r, 1); err != nil {
			return tiled{f, at, nil, err}
		}
		return tiled{f, at, onScreen(c, p.Space), nil}
	}
}

func pieceRect(at image.Point) image.Rectangle {
	at = at.Mul(patchSide)
	return image.Rectangle{at, at.Add(image.Pt(patchSide, patchSide))}
}
