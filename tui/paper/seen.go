package paper

import (
	"fmt"
	"math"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render/frame"
	"leadline/render/kernel"
	"leadline/tui/engine"
)

// isUndecided and onEdge are what is looked for in a picture.
func isUndecided(p *engine.Picture, i int) bool {
	return p.From[i] == engine.Computed && p.Fields[i].State == kernel.Undecided
}

// onEdge: the set's edge is nearer than a sample of the preview is wide.
func onEdge(p *engine.Picture, i int) bool {
	f := p.Fields[i]
	return p.From[i] == engine.Computed && f.State == kernel.Escaped && f.Distance*float64(p.Size.X) < float64(p.Geometry.TrimW)
}

// nearest is the place, in shares of the trim, of the sample nearest to the
// middle that is looked for.
func nearest(p *engine.Picture, is func(*engine.Picture, int) bool) (at [2]float64, found bool) {
	best := math.Inf(1)
	for i := range p.Fields {
		if !is(p, i) {
			continue
		}
		u := (float64(i%p.Size.X) + 0.5) / float64(p.Size.X)
		v := (float64(i/p.Size.X) + 0.5) / float64(p.Size.Y)
		if d := (u-0.5)*(u-0.5) + (v-0.5)*(v-0.5); d < best {
			best, at, found = d, [2]float64{u, v}, true
		}
	}
	return at, found
}

// outside is how many of the ramp's entries lie outside the sheet's space. It
// is counted off the loop, for it takes a while.
type outside struct {
	asked string // what is counted now, or was last
	of    string // what n is of
	n     int
	frame *frame.Frame // the last one asked about, and
	key   string       // its colours
}

// counted brings a count back.
type counted struct {
	of string
	n  int
}

// colours is all that the count depends on, as a text.
func (o *outside) colours(f *frame.Frame) string {
	if o.frame == f {
		return o.key
	}
	var b strings.Builder
	fmt.Fprintf(&b, "in %s", f.Sheet.Space)
	if r := f.Ink.Ramp; r != nil {
		fmt.Fprintf(&b, " smooth %v", r.Smooth == nil || *r.Smooth)
		for _, stop := range r.Stops {
			fmt.Fprintf(&b, " %v %s", stop.At, stop.Colour)
		}
	}
	o.frame, o.key = f, b.String()
	return o.key
}

// countOutside has the entries counted where ramp or space are others than last
// time.
func (s *Screen) countOutside() tea.Cmd {
	key := s.outside.colours(s.desk.Frame)
	if key == s.outside.asked {
		return nil
	}
	s.outside.asked = key
	f := s.desk.Frame
	return func() tea.Msg {
		k, err := engine.NewInker(f, nil)
		if err != nil {
			return nil // the frame's rules keep this from happening
		}
		return counted{key, k.OutOfSpace()}
	}
}

func (o *outside) take(c counted) {
	if c.of == o.asked {
		o.of, o.n = c.of, c.n
	}
}

// now is the count for the desk's frame; 0 until it is known.
func (o *outside) now(s *Screen) int {
	if o.of != o.colours(s.desk.Frame) {
		return 0
	}
	return o.n
}
