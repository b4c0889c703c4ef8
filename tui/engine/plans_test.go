package engine

import (
	"context"
	"image"
	"math"
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

// TestWindow has a patch be the print's own pixels.
func TestWindow(t *testing.T) {
	d := newDesk(t)
	f := load(t, "gull-archipelago")
	d.finish(t, Request{Frame: f, Size: size(12, 8), Pinned: true})
	rect := image.Rect(1000, 700, 1012, 709)
	p, err := d.Window(t.Context(), f, rect)
	if err != nil {
		t.Fatal(err)
	}
	plan, err := render.NewPlan(t.Context(), f, render.Options{})
	if err != nil {
		t.Fatal(err)
	}
	c := render.NewCanvas(rect)
	n, err := plan.Tile(t.Context(), c, rect, 1)
	if err != nil {
		t.Fatal(err)
	}
	off := 0
	for i, got := range p.Colours {
		for j, v := range []uint8{got.R, got.G, got.B} {
			// The sheet is sRGB: the byte nearest to the 16-bit code.
			code := float64(uint16(c.Pix[i*6+2*j])<<8|uint16(c.Pix[i*6+2*j+1])) / 257
			if math.Abs(float64(v)-code) > 0.5001 {
				off++
			}
		}
	}
	if off > 0 || p.Counts.Pixels != n.Pixels || p.Counts.Samples != n.Samples || p.Rect != rect {
		t.Errorf("%d bytes differ; %+v, the print has %+v", off, p.Counts, n)
	}
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	if _, err := d.Window(ctx, f, rect); err == nil {
		t.Error("a window after the end")
	}
	var none *Engine
	if _, ok := none.Field(1, 1); ok || none.PerSample() != 0 {
		t.Error("no engine knows something")
	}
}
