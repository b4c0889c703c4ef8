package render

import (
	"context"
	"math"
	"testing"

	"leadline/render/frame"
)

// TestCutOrbit: an orbit cut off at its limit serves no higher one, for pixels
// that go on past its end as one would lose what tells them apart.
func TestCutOrbit(t *testing.T) {
	f := loadShared(t, "undertow")
	f.Iteration.Limit = 3000
	old := probe(t, f)
	if old.ref.Lasts(3001, frame.DefaultBailout) || !old.ref.Lasts(3000, frame.DefaultBailout) {
		t.Fatal("the orbit is not cut off at 3000")
	}
	if _, ok := old.WithLimit(3001); ok {
		t.Error("another limit beyond the orbit's end")
	}
	g := f.Clone()
	g.Iteration.Limit = 73000
	p, reused, err := NewProbeNear(context.Background(), g, old, Options{})
	if err != nil || reused {
		t.Fatal(reused, err)
	}
	agree(t, "a new orbit", probe(t, g), p)
	cut := unmade(g, mustResolve(t, g))
	cut.takeReference(old)
	if err := cut.iterate(context.Background(), Options{}); err != nil {
		t.Fatal(err)
	}
	wrong := 0
	for i := range 100 {
		x, y := float64(i)*17, float64(i)*11
		if cut.Field(x, y).N != p.Field(x, y).N {
			wrong++
		}
	}
	if wrong < 50 {
		t.Errorf("%d of 100 samples are wrong around an orbit cut off: the rule guards against nothing", wrong)
	}
}

// TestWithLimit gives the fields of a plan made with that limit.
func TestWithLimit(t *testing.T) {
	for _, name := range []string{"whole", "double", "julia"} {
		f := testFrame(t, name)
		p := probe(t, f)
		for _, limit := range []int{50, 700, 20000} {
			g := f.Clone()
			g.Iteration.Limit = limit
			q, ok := p.WithLimit(limit)
			if !ok {
				t.Errorf("%s: no limit of %d", name, limit)
				continue
			}
			if q.Frame().Iteration.Limit != limit || p.Frame().Iteration.Limit != f.Iteration.Limit {
				t.Errorf("%s: the frames' limits", name)
			}
			fresh := probe(t, g)
			for i := range 200 {
				x, y := float64(i%20)*2.5, float64(i/20)*3.25
				a, b := fresh.Field(x, y), q.Field(x, y)
				if a.State != b.State || a.N != b.N || math.Abs(a.Smooth-b.Smooth)*a.Distance > nearShift {
					t.Errorf("%s, %d: %v, %v: %+v, not %+v", name, limit, x, y, b, a)
				}
			}
		}
	}
}

// TestAhead serves every depth on the way down, and a zoom's worth beyond.
func TestAhead(t *testing.T) {
	f := testFrame(t, "deep")
	w, h := 24.0, 16.0
	p, err := Ahead(context.Background(), f, 24, Options{})
	if err != nil {
		t.Fatal(err)
	}
	for _, zoom := range []float64{1, 1e6, 1e24, 1e35} {
		g := moved(t, f, Move{X: w, Y: h, Zoom: zoom})
		q, reused, err := NewProbeNear(context.Background(), g, p, Options{})
		if err != nil || !reused {
			t.Fatalf("zoom %g: %v, %v", zoom, reused, err)
		}
		agree(t, "ahead", probe(t, g), q)
	}
	if p.Serves(moved(t, f, Move{X: w, Y: h, Zoom: 1e37})) {
		t.Error("serves deeper than it has bits for")
	}
	if _, err := Ahead(context.Background(), f, frame.MaxDepth, Options{}); err == nil {
		t.Error("a view deeper than a frame may be")
	}
}

// TestLeapsShared takes an earlier plan's tables where they serve, and only
// there.
func TestLeapsShared(t *testing.T) {
	f := testFrame(t, "double")
	old := probe(t, f)
	shares := func(m Move) bool {
		q, _, err := NewProbeNear(context.Background(), moved(t, f, m), old, Options{})
		if err != nil {
			t.Fatal(err)
		}
		return &q.leaps.tables[0] == &old.leaps.tables[0]
	}
	if !shares(Move{X: 24.5, Y: 16, Zoom: 1}) || shares(Move{X: 400, Y: 16, Zoom: 1}) || shares(Move{X: 24, Y: 16, Zoom: 4}) {
		t.Error("tables are shared where they do not serve, or not where they do")
	}
}
