package engine

import (
	"image"
	"math"
	"math/rand/v2"
	"testing"

	"leadline/render"
	"leadline/render/frame"
	"leadline/render/kernel"
)

// numbered is a picture whose samples say which they are.
func numbered(t testing.TB, f *frame.Frame, s image.Point) *Picture {
	t.Helper()
	g, err := f.Sheet.Geometry()
	if err != nil {
		t.Fatal(err)
	}
	p := blank(Request{Frame: f, Size: s, Pinned: true}, g)
	for k := range p.Fields {
		p.Fields[k] = kernel.Field{N: k, Smooth: float64(k), Distance: 1}
		p.From[k], p.spread[k] = Computed, 1
	}
	p.Whole = true
	return p
}

// TestCarryGeometry places samples of moved views by render.Point and
// render.Place, and has Carry find the sample that lies there.
func TestCarryGeometry(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for _, name := range shared {
		f := load(t, name)
		w, h := geometry(t, f)
		old := numbered(t, f, size(150, 100))
		for _, m := range []render.Move{{X: w / 2, Y: h / 2, Zoom: 1, Turn: 35}, {X: 0.6 * w, Y: 0.4 * h, Zoom: 1.7, Turn: -120},
			{X: 0.1 * w, Y: 0.2 * h, Zoom: 0.6, Turn: 3.5}, {X: 0.3 * w, Y: 0.3 * h, Zoom: 1e4, Turn: 90}} {
			g := moved(t, f, m)
			if name == "barnacle-lamp" { // another sheet besides
				g.Sheet.Width, g.Sheet.Height = length(t, "200mm"), length(t, "150mm")
			}
			p := Carry([]*Picture{old}, Request{Frame: g, Size: size(96, 64)})
			inside, checked := 0, 0
			for range 150 {
				k := r.IntN(len(p.Fields))
				x, y := p.At(k%p.Size.X, k/p.Size.X)
				at, err := render.Point(g, x, y)
				if err != nil {
					t.Fatal(err)
				}
				ox, oy, err := render.Place(f, at)
				if err != nil {
					t.Fatal(err)
				}
				col, row := ox/w*150, oy/h*100
				if math.Abs(col-math.Round(col)) < 1e-5 || math.Abs(row-math.Round(row)) < 1e-5 {
					continue // between two samples
				}
				checked++
				if col < 0 || row < 0 || col >= 150 || row >= 100 {
					if p.From[k] != Nowhere {
						t.Fatalf("%s %+v: sample %d lies outside but is %v", name, m, k, p.From[k])
					}
					continue
				}
				inside++
				if p.From[k] != Carried || p.Fields[k].N != int(row)*150+int(col) {
					t.Fatalf("%s %+v: sample %d is %v %d, not %d", name, m, k, p.From[k], p.Fields[k].N, int(row)*150+int(col))
				}
				ratio := pixelOf(old).Quo(pixelOf(p)).Float64()
				if math.Abs(p.Fields[k].Distance/ratio-1) > 1e-12 {
					t.Fatalf("%s %+v: a distance of 1 became %v, not %v", name, m, p.Fields[k].Distance, ratio)
				}
			}
			if inside < 20 || checked < 100 {
				t.Errorf("%s %+v: only %d samples inside of %d", name, m, inside, checked)
			}
		}
	}
}

// TestCarryChoice takes from the picture whose spacing suits: the nearest that
// is not coarser, whatever the order, and falls back to others outside it.
func TestCarryChoice(t *testing.T) {
	f := load(t, "undertow")
	w, h := geometry(t, f)
	at := func(zoom float64) *frame.Frame { return moved(t, f, render.Move{X: w / 2, Y: h / 2, Zoom: zoom}) }
	mark := func(zoom float64, n int) *Picture {
		p := numbered(t, at(zoom), size(60, 40))
		for k := range p.Fields {
			p.Fields[k].N = n
		}
		return p
	}
	wide, near, deep := mark(0.25, 1), mark(1.5, 2), mark(16, 3)
	r := Request{Frame: at(1), Size: size(60, 40), Pinned: true}
	for _, old := range [][]*Picture{{wide, near, deep}, {deep, near, wide}, {nil, near, {Err: errNoSamples}, wide, deep}} {
		p := Carry(old, r)
		if n := p.Fields[20*60+30].N; n != 2 {
			t.Errorf("the middle is of picture %d", n)
		}
		if n := p.Fields[0].N; n != 1 {
			t.Errorf("the corner is of picture %d", n)
		}
		if p.spread[20*60+30] != 1 || p.spread[0] != 4 {
			t.Errorf("spreads %d and %d", p.spread[20*60+30], p.spread[0])
		}
	}
	for what, change := range map[string]func(*frame.Frame){
		"another power":   func(g *frame.Frame) { g.Set.Power = 3 },
		"another bailout": func(g *frame.Frame) { g.Iteration.Bailout = 50 },
		"a Julia set": func(g *frame.Frame) {
			g.Set = frame.Set{Kind: frame.Julia, Parameter: &frame.Point{Re: decimal(t, "0.1")}}
		},
	} {
		g := at(1)
		change(g)
		for k, o := range Carry([]*Picture{near}, Request{Frame: g, Size: size(60, 40)}).From {
			if o != Nowhere {
				t.Fatalf("%s: sample %d came from a picture of another set", what, k)
			}
		}
	}
	if Carry(nil, Request{Frame: f}) != nil {
		t.Error("a picture without samples")
	}
}

// TestNothingGetsCoarser: a coarse sample takes the place of a carried one only
// if that stood for as much.
func TestNothingGetsCoarser(t *testing.T) {
	f := load(t, "undertow")
	w, h := geometry(t, f)
	for _, c := range []struct {
		zoom float64
		gone int // the coarsest block that leaves carried samples alone
	}{{1.4, 1}, {3, 2}, {6, 4}, {20, 8}} {
		p := Carry([]*Picture{numbered(t, f, size(64, 48))}, Request{Frame: moved(t, f, render.Move{X: w / 2, Y: h / 2, Zoom: c.zoom}), Size: size(64, 48), Pinned: true})
		for _, block := range []int{8, 4, 2} {
			g := newGrid(p)
			g.put([]result{{at: 27*64 + 27, field: kernel.Field{N: -1}}}, block, 0)
			neighbour := g.pic.From[27*64+28]
			if want := int(p.spread[27*64+28]) >= block; (neighbour == Coarse) != want {
				t.Errorf("zoom %v, block %d: a carried sample of spread %d became %v", c.zoom, block, p.spread[27*64+28], neighbour)
			}
			if g.pic.From[27*64+27] != Computed {
				t.Error("the sample itself is not computed")
			}
		}
	}
}

// TestBlocksCover has the blocks of every pass cover every sample, whatever the
// size, and each pass contain the one before.
func TestBlocksCover(t *testing.T) {
	for n := 1; n < 60; n++ {
		for _, block := range []int{8, 4, 2, 1} {
			covered := make([]int, n)
			some := false
			for i := anchor(block); i < n; i += block {
				some = true
				from, to := blockRange(i, n, block)
				if i < from || i >= to {
					t.Fatalf("%d lies outside its block %d…%d", i, from, to)
				}
				for k := max(from, 0); k < min(to, n); k++ {
					covered[k]++
				}
				if block > 1 && anchor(block/2) != i%(block/2) {
					t.Fatalf("%d is missing from the pass of %d", i, block/2)
				}
				if from < 0 || to > n {
					t.Fatalf("block %d…%d of %d", from, to, n)
				}
			}
			for k, c := range covered {
				if some && c == 0 {
					t.Fatalf("size %d, block %d: nothing covers %d", n, block, k)
				}
			}
		}
	}
}

// TestDoubtful: carried samples that a higher limit may decide give way early.
func TestDoubtful(t *testing.T) {
	f := load(t, "undertow")
	old := numbered(t, f, size(20, 20))
	for k := range old.Fields {
		old.Fields[k] = kernel.Field{State: kernel.Undecided}
	}
	if p := Carry([]*Picture{old}, Request{Frame: f, Size: size(20, 20)}); p.spread[5] != doubtful {
		t.Errorf("spread %d where the limit finds itself", p.spread[5])
	}
	if p := Carry([]*Picture{old}, Request{Frame: f, Size: size(20, 20), Pinned: true}); p.spread[5] != 1 {
		t.Errorf("spread %d where the limit holds", p.spread[5])
	}
	old = numbered(t, f, size(20, 20))
	old.Fields[5].N = f.Iteration.Limit + 1
	if p := Carry([]*Picture{old}, Request{Frame: f, Size: size(20, 20), Pinned: true}); p.Fields[5].State != kernel.Undecided {
		t.Error("a count above the limit was carried over")
	}
}

// TestPaths takes every sample once, from the focus outwards.
func TestPaths(t *testing.T) {
	var s paths
	for _, focus := range []image.Point{{}, {X: 3, Y: 17}, {X: 29, Y: 1}} {
		order := s.from(size(30, 20), focus)
		x, y := 14.5, 9.5
		if focus != (image.Point{}) {
			x, y = float64(focus.X), float64(focus.Y)
		}
		seen := make([]bool, 600)
		last := 0.0
		for _, k := range order {
			d := math.Hypot(float64(k%30)-x, float64(k/30)-y)
			if seen[k] || d < last-1 {
				t.Fatalf("focus %v: sample %d, %v away, comes after %v, or again", focus, k, d, last)
			}
			seen[k], last = true, max(last, d)
		}
		if len(order) != 600 {
			t.Errorf("%d samples", len(order))
		}
	}
}
