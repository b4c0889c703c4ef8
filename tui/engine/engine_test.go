package engine

import (
	"image"
	"runtime"
	"testing"
	"time"

	"leadline/render"
	"leadline/render/kernel"
)

// TestWholeIsThePrint holds whole pictures against render.NewProbe at the same
// points: bit for bit around a reference of their own, and after a pan and a
// zoom around the same one.
func TestWholeIsThePrint(t *testing.T) {
	names := shared
	if testing.Short() {
		names = shared[:2]
	}
	for _, name := range names {
		t.Run(name, func(t *testing.T) {
			d := newDesk(t)
			f := load(t, name)
			w, h := geometry(t, f)
			p, _ := d.finish(t, Request{Frame: f, Size: size(42, 28), Pinned: true})
			if p.Reused || p.Limit != f.Iteration.Limit {
				t.Errorf("reused %v, limit %d", p.Reused, p.Limit)
			}
			holds(t, p, true)
			m := render.Move{X: 0.52 * w, Y: 0.49 * h, Zoom: 2.5, Turn: 10}
			if name == "undertow" || name == "samphire-star" {
				m = render.Move{X: 0.9 * w, Y: 0.49 * h, Zoom: 1}
			}
			q, _ := d.finish(t, Request{Frame: moved(t, f, m), Size: size(42, 28), Pinned: true})
			if !q.Reused {
				t.Error("the reference did not serve a view beside it")
			}
			holds(t, q, false)
		})
	}
}

// TestPasses sees every pass end, in order, each with all samples of its blocks
// computed and the others shown by a neighbour.
func TestPasses(t *testing.T) {
	d := newDesk(t)
	r := Request{Frame: load(t, "gull-archipelago"), Size: size(61, 43), Pinned: true}
	_, all := d.finish(t, r)
	next, seconds := 8, 0.0
	for _, p := range all {
		if p.Pass == 0 || p.Stage == "" {
			continue
		}
		if p.Pass == next/2 {
			next = p.Pass
		}
		if p.Pass != next {
			t.Fatalf("pass %d follows %d", p.Pass, next)
		}
		a := anchor(p.Pass)
		for k, o := range p.From {
			x, y := k%p.Size.X, k/p.Size.X
			if x%p.Pass == a && y%p.Pass == a && o != Computed {
				t.Fatalf("pass %d is done without sample %d, %d", p.Pass, x, y)
			}
			if o == Nowhere {
				t.Fatalf("pass %d leaves a hole at %d, %d", p.Pass, x, y)
			}
		}
		if p.Seconds < seconds {
			t.Error("time runs backwards")
		}
		seconds = p.Seconds
	}
	if next != 1 || seconds <= 0 {
		t.Errorf("the last pass seen is %d, after %v s", next, seconds)
	}
	if d.PerSample() <= 0 || d.PerSample() > time.Second {
		t.Errorf("a sample takes %v", d.PerSample())
	}
}

// TestSmall makes pictures of sizes without a single coarse block.
func TestSmall(t *testing.T) {
	d := newDesk(t)
	f := load(t, "gull-archipelago")
	for _, s := range []image.Point{{X: 1, Y: 1}, {X: 3, Y: 1}, {X: 2, Y: 9}} {
		p, _ := d.finish(t, Request{Frame: f, Size: s, Pinned: true})
		holds(t, p, true)
	}
	d.Show(Request{Frame: f, Size: image.Point{}})
	p, _ := d.wait(t, Request{Frame: f}, func(p *Picture) bool { return true })
	if p.Err == nil {
		t.Error("a picture without samples")
	}
	g := f.Clone()
	g.Iteration.Limit = 0
	d.Show(Request{Frame: g, Size: size(4, 4)})
	if p, _ = d.wait(t, Request{Frame: g, Size: size(4, 4)}, func(p *Picture) bool { return true }); p.Err == nil {
		t.Error("a frame that is none")
	}
}

// TestExactShift keeps what lies at the same points: after a pan by whole
// samples, which this frame's decimals can say exactly, only what came into
// view is computed, and it is right.
func TestExactShift(t *testing.T) {
	d := newDesk(t)
	f := wholeSet(t)
	f.Iteration.Limit = 400
	// 33 x 26 samples over 330 x 260 pixels 0.01 apart.
	f.Sheet.Width, f.Sheet.Height = length(t, "330px"), length(t, "260px")
	r := Request{Frame: f, Size: size(33, 26), Pinned: true}
	first, _ := d.finish(t, r)
	g := f.Clone()
	g.View.Centre.Re = decimal(t, "-0.3") // three samples to the right
	d.Show(Request{Frame: g, Size: r.Size, Pinned: true})
	p, _ := d.wait(t, Request{Frame: g, Size: r.Size, Pinned: true}, func(p *Picture) bool { return true })
	for k, o := range p.From {
		x, y := k%33, k/33
		if x+3 < 33 != (o == Computed) {
			t.Fatalf("%d, %d came from %d", x, y, o)
		}
		if o == Computed && p.Fields[k] != first.Fields[k+3] {
			t.Fatalf("%d, %d is another's", x, y)
		}
	}
	p, _ = d.wait(t, Request{Frame: g, Size: r.Size, Pinned: true}, func(p *Picture) bool { return p.Whole })
	holds(t, p, false)
	// Back again everything is known, and by a lower limit too.
	g = f.Clone()
	g.Iteration.Limit = 30
	p, all := d.finish(t, Request{Frame: g, Size: r.Size, Pinned: true})
	if p.Seconds != 0 || len(all) > 3 {
		t.Errorf("%v s of work and %d pictures for what was known", p.Seconds, len(all))
	}
	holds(t, p, false)
	g = f.Clone()
	g.Iteration.Limit = 4000
	p, _ = d.finish(t, Request{Frame: g, Size: r.Size, Pinned: true})
	holds(t, p, false)
	if deadline(t, func() bool { _, ok := d.Field(100, 100); return ok }) {
		got, _ := d.Field(100.5, 31.25)
		if want := probe(t, p).Field(100.5, 31.25); got != want {
			t.Errorf("under the pointer: %+v, not %+v", got, want)
		}
	}
}

// deadline waits for something to come true.
func deadline(t *testing.T, ok func() bool) bool {
	t.Helper()
	for range 600 {
		if ok() {
			return true
		}
		time.Sleep(5 * time.Millisecond)
	}
	t.Error("it did not come true")
	return false
}

// TestLatestWins shows many frames at once: the last is made whole, none sent
// after it is of another, and no goroutine is left when the engine is closed.
func TestLatestWins(t *testing.T) {
	before := runtime.NumGoroutine()
	d := newDesk(t)
	f := load(t, "undertow")
	w, h := geometry(t, f)
	var last Request
	for i := range 12 {
		last = Request{Frame: moved(t, f, render.Move{X: w/2 + float64(i), Y: h / 2, Zoom: 1 + float64(i)*0.1}), Size: size(60, 40), Pinned: true}
		start := time.Now()
		d.Show(last)
		if took := time.Since(start); took > 5*time.Millisecond {
			t.Errorf("Show took %v", took)
		}
		time.Sleep(time.Duration(i) * 3 * time.Millisecond)
	}
	p, _ := d.wait(t, last, func(p *Picture) bool { return p.Whole })
	holds(t, p, false)
	if rest := d.take(); len(rest) > 0 {
		t.Errorf("%d pictures after the last", len(rest))
	}
	d.Show(Request{Frame: load(t, "samphire-star"), Size: size(60, 40)})
	time.Sleep(20 * time.Millisecond)
	d.Close()
	d.take()
	deadline(t, func() bool { return runtime.NumGoroutine() <= before })
	d.Show(last)
	time.Sleep(20 * time.Millisecond)
	if len(d.take()) > 0 {
		t.Error("something was sent after Close")
	}
}

// TestShowIsQuick asks for the deepest frame again and again while its
// reference is being made: Show never waits.
func TestShowIsQuick(t *testing.T) {
	d := newDesk(t)
	f := load(t, "samphire-star")
	w, h := geometry(t, f)
	slow := 0
	for i := range 20 {
		r := Request{Frame: moved(t, f, render.Move{X: w/2 + float64(i), Y: h / 2, Zoom: 1}), Size: size(60, 40)}
		start := time.Now()
		d.Show(r)
		if time.Since(start) > 5*time.Millisecond {
			slow++ // a busy machine may take the thread away, but not often
		}
		time.Sleep(2 * time.Millisecond)
	}
	if slow > 2 {
		t.Errorf("Show took more than 5 ms %d times of 20", slow)
	}
}

// TestUndecidedCounts gives the shares of a picture's samples.
func TestUndecidedCounts(t *testing.T) {
	d := newDesk(t)
	p, _ := d.finish(t, Request{Frame: wholeSet(t), Size: size(40, 28), Pinned: true})
	var inside, undecided int
	for _, f := range p.Fields {
		switch f.State {
		case kernel.Inside:
			inside++
		case kernel.Undecided:
			undecided++
		}
	}
	n := float64(len(p.Fields))
	if p.Inside != float64(inside)/n || p.Undecided != float64(undecided)/n || inside == 0 {
		t.Errorf("inside %v, undecided %v", p.Inside, p.Undecided)
	}
}
