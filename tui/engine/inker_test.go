package engine

import (
	"math"
	"testing"

	"leadline/palette"
	"leadline/render"
	"leadline/render/frame"
	"leadline/render/ink"
	"leadline/render/kernel"
	"leadline/tui/cells"
)

// painted is a picture computed without the engine.
func painted(t testing.TB, f *frame.Frame, x, y int) *Picture {
	t.Helper()
	g, err := f.Sheet.Geometry()
	if err != nil {
		t.Fatal(err)
	}
	p := blank(Request{Frame: f, Size: size(x, y), Pinned: true}, g)
	plan := probe(t, p)
	for k := range p.Fields {
		p.Fields[k], p.From[k], p.spread[k] = plan.Field(p.At(k%x, k/x)), Computed, 1
	}
	p.Whole = true
	return p
}

// TestColoursAreThePrints shades a picture with ink as the print does, from the
// frozen frame of a print's plan, and takes the sheet's codes to bytes through
// palette's own colours.
func TestColoursAreThePrints(t *testing.T) {
	for _, space := range palette.Spaces() {
		f := load(t, "gull-archipelago")
		f.Sheet.Space = space.String()
		f.Ink.Edge.Width = length(t, "2mm")
		f.Ink.Drive = frame.Drive{Scale: frame.Log, Period: 1.7}
		if space == palette.DisplayP3 {
			f.Ink.Drive = frame.Drive{Fitted: &frame.Fitted{Base: 100, Low: 3, High: 8}}
		}
		f.Ink.Ramp = &frame.Ramp{Stops: []frame.Stop{{At: 0, Colour: palette.MustColour("#203040")}, {At: 1, Colour: palette.MustColour("#d0c0a0")}}}
		plan, err := render.NewPlan(t.Context(), f, render.Options{})
		if err != nil {
			t.Fatal(err)
		}
		frozen := plan.Frame()
		r, err := frozen.Resolve()
		if err != nil {
			t.Fatal(err)
		}
		shader := ink.New(frozen.Ink.Baked, r.Drive, r.Edge, space)
		p := painted(t, f, 60, 40)
		k, err := NewInker(f, p)
		if err != nil {
			t.Fatal(err)
		}
		if k.OutOfSpace() != plan.Clipped {
			t.Errorf("%v: %d entries out of space, the print has %d", space, k.OutOfSpace(), plan.Clipped)
		}
		lines := 0
		for i, got := range k.Colours(p) {
			unit := float64(p.Geometry.TrimH) / 40
			light := shader.Shade(p.Fields[i], unit)
			linear := palette.SRGB.FromXYZ(space.ToXYZ(light))
			for j, v := range []uint8{got.R, got.G, got.B} {
				want := float64(palette.SRGB.Encode(linear[j])) / 257
				// All colours lie within sRGB; the ways there round at 16 bits.
				if math.Abs(float64(v)-want) > 0.51 {
					t.Fatalf("%v: sample %d, channel %d: %d, not %.3f", space, i, j, v, want)
				}
			}
			if d := p.Fields[i].Distance; p.Fields[i].State == kernel.Escaped && d < unit {
				lines++
			}
		}
		if lines == 0 {
			t.Errorf("%v: no sample lies at an edge", space)
		}
	}
}

// TestFit fits by ink.Fit to the picture's counts, near to where the print's
// survey puts the ramp, and leaves a period or a frozen fit alone.
func TestFit(t *testing.T) {
	f := load(t, "gull-archipelago")
	p := painted(t, f, 96, 64)
	k, err := NewInker(f, p)
	if err != nil {
		t.Fatal(err)
	}
	var counts []float64
	for _, v := range p.Fields {
		if v.State == kernel.Escaped {
			counts = append(counts, v.Smooth)
		}
	}
	r, err := f.Resolve()
	if err != nil {
		t.Fatal(err)
	}
	if want := ink.Fit(r.Drive, f.Ink.Drive.Base, counts); *k.Fitted() != want {
		t.Errorf("fitted %+v, ink has %+v", *k.Fitted(), want)
	}
	plan, err := render.NewPlan(t.Context(), f, render.Options{})
	if err != nil {
		t.Fatal(err)
	}
	// Both take some 6,144 points of the trim: their percentiles differ by chance.
	print := plan.Frame().Ink.Drive.Fitted
	if d := math.Abs(k.Fitted().High-print.High) / (print.High - print.Low); d > 0.15 {
		t.Errorf("fitted %+v, the print %+v", *k.Fitted(), *print)
	}
	g := f.Clone()
	g.Ink.Drive.Period = 3
	if k, err = NewInker(g, p); err != nil || k.Fitted() != nil {
		t.Errorf("a period was fitted: %v, %v", k.Fitted(), err)
	}
	if k, err = NewInker(plan.Frame(), p); err != nil || *k.Fitted() != *print {
		t.Error("a frozen fit was fitted anew")
	}
	if k, err = NewInker(f, nil); err != nil || k.Fitted() == nil {
		t.Error("no ink without a picture", err)
	}
}

// TestMat shows the mat where nothing is known, and the inside colour inside.
func TestMat(t *testing.T) {
	f := load(t, "undertow")
	inside := palette.MustColour("#123456")
	f.Ink.Inside = &inside
	p := numbered(t, f, size(3, 1))
	p.From[0] = Nowhere
	p.Fields[1] = kernel.Field{State: kernel.Inside}
	p.Fields[2] = kernel.Field{State: kernel.Undecided}
	k, err := NewInker(f, p)
	if err != nil {
		t.Fatal(err)
	}
	k.Mat = cells.RGB{R: 1, G: 2, B: 3}
	c := k.Colours(p)
	if in := (cells.RGB{R: 0x12, G: 0x34, B: 0x56}); c[0] != k.Mat || c[1] != in || c[2] != in {
		t.Errorf("%v", c)
	}
}

// TestBakeIsKept bakes an ink once, and another anew.
func TestBakeIsKept(t *testing.T) {
	f := load(t, "undertow")
	resolve := func() *frame.Resolved {
		r, err := f.Resolve()
		if err != nil {
			t.Fatal(err)
		}
		return r
	}
	a, err := bake(resolve())
	if err != nil {
		t.Fatal(err)
	}
	f = moved(t, f, render.Move{X: 10, Y: 20, Zoom: 2})
	if b, err := bake(resolve()); err != nil || a != b {
		t.Error("another view was baked anew", err)
	}
	f.Ink.Ramp = &frame.Ramp{Stops: []frame.Stop{{At: 0, Colour: palette.MustColour("red")}, {At: 1, Colour: palette.MustColour("blue")}}}
	b, err := bake(resolve())
	if err != nil || b == a || b.screen.Ramp[0] != [3]uint16{65535, 0, 0} {
		t.Error("another ramp was not baked", err)
	}
	f.Sheet.Space = "prophoto-rgb"
	if c, err := bake(resolve()); err != nil || c == b {
		t.Error("another space was not baked", err)
	}
	if n := len(bakes.list); n > keptBakes {
		t.Errorf("%d inks are kept", n)
	}
}
