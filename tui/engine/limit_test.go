package engine

import (
	"testing"

	"leadline/render/frame"
	"leadline/render/kernel"
)

// TestNeeded: eight times the spread above the lowest count, a quarter above the
// highest at least, no less than 1000, rounded up to two digits.
func TestNeeded(t *testing.T) {
	run := func(from, to, step int) (c []int) {
		for n := from; n <= to; n += step {
			c = append(c, n)
		}
		return c
	}
	for _, c := range []struct {
		counts []int
		limit  int
		top    int
	}{
		{nil, 0, 0},
		{[]int{7}, 1000, 7},
		{run(20, 5020, 1), 40000, 5015},      // 20 + 8·4,995 = 39,980
		{run(60000, 60500, 1), 76000, 60500}, // 64,000; a quarter above is 75,625
		{[]int{70000, 70000, 70000}, 88000, 70000},
		{[]int{20_000_000, 90_000_000}, 100_000_000, 90_000_000},
	} {
		limit, top := needed(c.counts)
		if top != c.top && c.top != 0 {
			t.Errorf("%d counts: the top is %d, not %d", len(c.counts), top, c.top)
		}
		if limit != c.limit {
			t.Errorf("%d counts: the limit is %d, not %d", len(c.counts), limit, c.limit)
		}
	}
	for n, want := range map[int]int{1: 1, 99: 99, 100: 100, 101: 110, 12345: 13000, 99001: 100000, 1e8: 1e8} {
		if got := roundUp(n); got != want {
			t.Errorf("%d rounds up to %d, not %d", n, got, want)
		}
	}
}

// TestLimitFindsItself starts far too low and far too high, and ends near where
// the counts are. The numbers come from the frames: their makers' limits, and
// the highest counts of a picture.
func TestLimitFindsItself(t *testing.T) {
	for _, c := range []struct {
		name  string
		begin int
		least int // undecided samples remain below
		most  int
	}{
		{"undertow", 3000, 40000, 300000},
		{"barnacle-lamp", 200, 5000, 40000},
		{"gull-archipelago", 300, 3000, 300000},
		{"gull-archipelago", 50_000_000, 3000, 300000},
		{"barnacle-lamp", 9_000_000, 5000, 40000},
		{"", 100_000_000, 500, 30000},
		{"", 10, 500, 30000},
	} {
		d := newDesk(t)
		var f *frame.Frame
		if c.name == "" {
			f = wholeSet(t)
		} else {
			f = load(t, c.name)
		}
		f.Iteration.Limit = c.begin
		p, _ := d.finish(t, Request{Frame: f, Size: size(60, 40)})
		t.Logf("%s: %d became %d, undecided %.4f, inside %.4f", c.name, c.begin, p.Limit, p.Undecided, p.Inside)
		if p.Limit < c.least || p.Limit > c.most {
			t.Errorf("%s: the limit went from %d to %d, not into %d…%d", c.name, c.begin, p.Limit, c.least, c.most)
		}
		if p.Limit != roundUp(p.Limit) {
			t.Errorf("%s: %d is not round", c.name, p.Limit)
		}
		if p.Undecided > 0.02 {
			t.Errorf("%s: a share of %v is undecided", c.name, p.Undecided)
		}
		holds(t, p, false)
		// What was found holds for the next view of the same set.
		g := f.Clone()
		g.View.Height = decimal(t, g.View.Height.String())
		q, _ := d.finish(t, Request{Frame: g, Size: size(60, 40)})
		if q.Limit != p.Limit || q.Seconds != 0 {
			t.Errorf("%s: the same view again has the limit %d after %v s", c.name, q.Limit, q.Seconds)
		}
		d.Close()
	}
}

// TestPinned leaves the limit alone, however many samples are undecided.
func TestPinned(t *testing.T) {
	d := newDesk(t)
	f := load(t, "barnacle-lamp")
	f.Iteration.Limit = 300
	p, _ := d.finish(t, Request{Frame: f, Size: size(30, 20), Pinned: true})
	if p.Limit != 300 || p.Undecided != 1 {
		t.Errorf("limit %d, undecided %v", p.Limit, p.Undecided)
	}
	for _, f := range p.Fields {
		if f.State != kernel.Undecided {
			t.Fatal("something was decided within 300 iterations")
		}
	}
}
