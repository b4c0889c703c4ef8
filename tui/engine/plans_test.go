package engine

import (
	"testing"

	"leadline/render"
)

// TestOrbitIsLeftToFinish keeps the orbit that is being made when a request
// comes that it will serve, and gives it up for one that it will not.
func TestOrbitIsLeftToFinish(t *testing.T) {
	d := newDesk(t)
	f := load(t, "samphire-star")
	w, h := geometry(t, f)
	first := Request{Frame: f, Size: size(24, 16), Pinned: true}
	d.Show(first)
	d.wait(t, first, func(p *Picture) bool { return p.Stage == render.PhaseReference && p.Part > 0 })
	second := Request{Frame: moved(t, f, render.Move{X: w/2 + 50, Y: h / 2, Zoom: 1.5}), Size: size(24, 16), Pinned: true}
	p, _ := d.finish(t, second)
	if !p.Reused {
		t.Error("the orbit was begun anew")
	}
	holds(t, p, false)
	other := Request{Frame: load(t, "gull-archipelago"), Size: size(24, 16), Pinned: true}
	if p, _ := d.finish(t, other); p.Reused {
		t.Error("an orbit of another place was taken")
	}
}

// TestAheadServes computes an orbit for greater depth in a pause, and a view
// far deeper at the same centre then needs none of its own.
func TestAheadServes(t *testing.T) {
	d := newDesk(t)
	f := load(t, "gull-archipelago")
	w, h := geometry(t, f)
	at := func(zoom float64) Request {
		return Request{Frame: moved(t, f, render.Move{X: w / 2, Y: h / 2, Zoom: zoom}), Size: size(24, 16), Pinned: true}
	}
	d.finish(t, at(1))
	d.finish(t, at(1e8)) // deeper than half of what the first orbit has bits for
	deadline(t, func() bool {
		d.Engine.mu.Lock()
		defer d.Engine.mu.Unlock()
		return d.ahead != nil
	})
	p, _ := d.finish(t, at(1e28))
	if !p.Reused {
		t.Error("no orbit was computed ahead")
	}
	holds(t, p, false)
}
