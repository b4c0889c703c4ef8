package render

import (
	"context"
	"math"
	"testing"

	"leadline/render/frame"
	"leadline/render/kernel"
)

// nearShift is what a reference taken from another view may move a sample by,
// in pixels: about what 24 bits of guard leave (see nearBits), and what doubles
// lose at the far end of its reach (nearHeights).
const nearShift = 0x1p-19

// probe is NewProbe, or the test's end.
func probe(t testing.TB, f *frame.Frame) *Plan {
	t.Helper()
	p, err := NewProbe(context.Background(), f, Options{Workers: 2})
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// moved is Moved, or the test's end.
func moved(t testing.TB, f *frame.Frame, m Move) *frame.Frame {
	t.Helper()
	g, err := Moved(f, m)
	if err != nil {
		t.Fatal(err)
	}
	return g
}

// agree holds fields of two plans of one frame against each other on a grid: a
// shift by nearShift changes the smooth count by nearShift/(ln p · distance),
// as in Compare.
func agree(t *testing.T, what string, p, q *Plan) {
	t.Helper()
	escaped := 0
	for j := range 8 {
		for i := range 12 {
			x := (float64(i) + 0.5) * float64(p.Geometry.TrimW) / 12
			y := (float64(j) + 0.5) * float64(p.Geometry.TrimH) / 8
			a, b := p.Field(x, y), q.Field(x, y)
			if a.State != b.State {
				t.Errorf("%s: %v, %v is %v, not %v", what, x, y, b.State, a.State)
				continue
			}
			if a.State != kernel.Escaped {
				continue
			}
			escaped++
			slack := nearShift/float64(p.lnPower()*a.Distance) + float64(a.Smooth*0x1p-44)
			margin := math.Min(a.Smooth-float64(a.N), float64(a.N+1)-a.Smooth)
			if d := math.Abs(a.Smooth - b.Smooth); d > slack {
				t.Errorf("%s: %v, %v: smooth counts %v and %v are %v apart, more than %v", what, x, y, a.Smooth, b.Smooth, d, slack)
			}
			if a.N != b.N && margin > slack {
				t.Errorf("%s: %v, %v: counts %d and %d", what, x, y, a.N, b.N)
			}
			if d := math.Abs(a.Distance - b.Distance); d > nearShift+float64(a.Distance*0x1p-20) {
				t.Errorf("%s: %v, %v: distances %v and %v", what, x, y, a.Distance, b.Distance)
			}
		}
	}
	if escaped == 0 {
		t.Errorf("%s: nothing escaped, nothing was compared", what)
	}
}

// TestNearAgrees renders views around references of other views and holds them
// against references of their own.
func TestNearAgrees(t *testing.T) {
	frames := map[string]*frame.Frame{"cube": testFrame(t, "cube"), "julia-deep": testFrame(t, "julia-deep")}
	names := []string{"cube", "julia-deep", "gull-archipelago", "barnacle-lamp"}
	if !testing.Short() {
		names = append(names, "undertow")
	}
	for _, name := range names[2:] {
		frames[name] = loadShared(t, name)
	}
	for _, name := range names {
		f := frames[name]
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			old := probe(t, f)
			x, y, err := Place(f, frame.Point{Re: old.ref.Re, Im: old.ref.Im})
			if err != nil {
				t.Fatal(err)
			}
			w, h := float64(old.Geometry.TrimW), float64(old.Geometry.TrimH)
			for what, m := range map[string]Move{
				"same":            {X: w / 2, Y: h / 2, Zoom: 1},
				"pan":             {X: 0.9 * w, Y: 0.2 * h, Zoom: 1},
				"pan to the end":  {X: x + 300*h, Y: y - 400*h, Zoom: 1, Turn: 30},
				"three decades":   {X: x + 3e-4*h, Y: y, Zoom: 1e3, Turn: -11},
				"twelve decades":  {X: x, Y: y - 3e-12*h, Zoom: 1e12},
				"two decades out": {X: x, Y: y, Zoom: 0.01},
			} {
				if name == "undertow" && what != "pan" && what != "twelve decades" {
					continue // its own references take long
				}
				g := moved(t, f, m)
				if m.Zoom > 1 {
					g.Iteration.Limit *= 2
				}
				if kernel.Direct(unmade(g, mustResolve(t, g)).pixel) {
					continue // needs no reference
				}
				fresh := probe(t, g)
				q, reused, err := NewProbeNear(context.Background(), g, old, Options{})
				if err != nil {
					t.Fatal(err)
				}
				if !reused {
					if old.ref.Lasts(g.Iteration.Limit, frame.DefaultBailout) {
						t.Errorf("%s: made a reference of its own", what)
					}
					continue
				}
				if !old.Serves(g) || q.ref.Length != old.ref.Length {
					t.Errorf("%s: Serves says otherwise, or the orbit is another", what)
				}
				if m.Zoom > 1 && allAlike(fresh) {
					continue // the middle of a component: nothing to compare
				}
				agree(t, what, fresh, q)
			}
		})
	}
}

func mustResolve(t testing.TB, f *frame.Frame) *frame.Resolved {
	t.Helper()
	r, err := f.Resolve()
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// allAlike reports whether no sample of a coarse grid escapes.
func allAlike(p *Plan) bool {
	for j := range 8 {
		for i := range 12 {
			if p.Field((float64(i)+0.5)*float64(p.Geometry.TrimW)/12, (float64(j)+0.5)*float64(p.Geometry.TrimH)/8).State == kernel.Escaped {
				return false
			}
		}
	}
	return true
}

// TestNearExactly holds samples around a reference of another view against
// direct iteration at full precision.
func TestNearExactly(t *testing.T) {
	f := loadShared(t, "barnacle-lamp")
	old := probe(t, f)
	x, y, err := Place(f, frame.Point{Re: old.ref.Re, Im: old.ref.Im})
	if err != nil {
		t.Fatal(err)
	}
	h := float64(old.Geometry.TrimH)
	for _, m := range []Move{{X: x + 40*h, Y: y, Zoom: 1}, {X: x + 2e-3*h, Y: y + 1e-3*h, Zoom: 300, Turn: 45}} {
		g := moved(t, f, m)
		p, reused, err := NewProbeNear(context.Background(), g, old, Options{})
		if err != nil || !reused {
			t.Fatal(reused, err)
		}
		for i := range 24 {
			px, py := float64(i)*h/20, float64(i*i%23)*h/23
			field := p.Field(px, py)
			e, err := p.Exact(context.Background(), px, py)
			if err != nil {
				t.Fatal(err)
			}
			if e.Escaped != (field.State == kernel.Escaped) {
				t.Errorf("%v, %v is %v, by direct iteration escaped: %v", px, py, field.State, e.Escaped)
			} else if d := math.Abs(field.Smooth-e.Smooth) * p.lnPower() * e.Distance; e.Escaped && d > nearShift {
				t.Errorf("%v, %v lies %v px off", px, py, d)
			}
		}
	}
}

// TestNearRefuses makes a new reference where the old one would not do.
func TestNearRefuses(t *testing.T) {
	f := loadShared(t, "barnacle-lamp")
	old := probe(t, f)
	x, y, err := Place(f, frame.Point{Re: old.ref.Re, Im: old.ref.Im})
	if err != nil {
		t.Fatal(err)
	}
	h := float64(old.Geometry.TrimH)
	at := func(m Move, change func(*frame.Frame)) *frame.Frame {
		g := moved(t, f, m)
		if change != nil {
			change(g)
		}
		return g
	}
	here := Move{X: x, Y: y, Zoom: 1}
	for what, g := range map[string]*frame.Frame{
		"another bailout": at(here, func(g *frame.Frame) { g.Iteration.Bailout = 100 }),
		"another power":   at(here, func(g *frame.Frame) { g.Set.Power = 3 }),
		"a Julia set": at(here, func(g *frame.Frame) {
			g.Set = frame.Set{Kind: frame.Julia, Parameter: &frame.Point{Re: mustDecimal(t, "-0.1"), Im: mustDecimal(t, "0.7")}}
		}),
		"too deep": at(Move{X: x, Y: y, Zoom: 0x1p42}, nil),
		"too far":  at(Move{X: x + 520*h, Y: y, Zoom: 1}, nil),
	} {
		if old.Serves(g) {
			t.Errorf("%s: serves", what)
		}
		if _, reused, err := NewProbeNear(context.Background(), g, old, Options{}); err != nil || reused {
			t.Errorf("%s: reused %v, %v", what, reused, err)
		}
	}
	if !old.Serves(at(here, nil)) || !old.Serves(at(Move{X: x, Y: y, Zoom: 0x1p38}, nil)) || !old.Serves(at(Move{X: x + 500*h, Y: y, Zoom: 1}, nil)) {
		t.Error("does not serve what it should")
	}
	var none *Plan
	if none.Serves(f) || !none.Serves(testFrame(t, "whole")) {
		t.Error("no plan serves what needs no reference, and nothing else")
	}
	if !Reaches(f, at(here, nil)) || Reaches(f, at(Move{X: x, Y: y, Zoom: 0x1p42}, nil)) || Reaches(testFrame(t, "whole"), f) {
		t.Error("Reaches")
	}
}
