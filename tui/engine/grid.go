package engine

import (
	"image"
	"math"
	"slices"
	"sync"
	"time"

	"leadline/render/kernel"
)

// grid is the picture in hand; workers write to it, snapshots are taken of it.
type grid struct {
	mu    sync.Mutex
	pic   Picture // its slices are the grid's own
	busy  time.Duration
	taken int // samples computed
	dirty bool
}

// newGrid begins with what is known.
func newGrid(p *Picture) *grid {
	g := &grid{pic: *p}
	g.pic.Fields, g.pic.From, g.pic.spread = slices.Clone(p.Fields), slices.Clone(p.From), slices.Clone(p.spread)
	return g
}

// snapshot is the picture as it stands, for good.
func (g *grid) snapshot() *Picture {
	g.mu.Lock()
	defer g.mu.Unlock()
	p := g.pic
	p.Fields, p.From, p.spread = slices.Clone(p.Fields), slices.Clone(p.From), slices.Clone(p.spread)
	p.Seconds = g.busy.Seconds()
	p.share()
	g.dirty = false
	return &p
}

// share counts how computed samples ended.
func (p *Picture) share() {
	var n, undecided, inside int
	for k, o := range p.From {
		if o != Computed {
			continue
		}
		n++
		switch p.Fields[k].State {
		case kernel.Undecided:
			undecided++
		case kernel.Inside:
			inside++
		}
	}
	if n > 0 {
		p.Undecided, p.Inside = float64(undecided)/float64(n), float64(inside)/float64(n)
	}
}

// result is a computed sample.
type result struct {
	at    int32
	field kernel.Field
}

// put stores computed samples, and shows each in the block around it, where
// nothing there is known better.
func (g *grid) put(rs []result, block int, took time.Duration) {
	g.mu.Lock()
	defer g.mu.Unlock()
	p := &g.pic
	for _, r := range rs {
		if block > 1 {
			p.spill(int(r.at), r.field, block)
		}
		p.Fields[r.at], p.From[r.at], p.spread[r.at] = r.field, Computed, 1
	}
	g.busy += took
	g.taken += len(rs)
	g.dirty = true
}

// spill shows a sample in its block. A sample of the right frame that stands
// for a block beats a carried one that stood for as much or more: of two wrong
// places the nearer is the better guess. So a picture that was moved or
// magnified a little never gets coarser before it gets finer, and one magnified
// eightfold gives way to the first pass.
func (p *Picture) spill(at int, f kernel.Field, block int) {
	x0, x1 := blockRange(at%p.Size.X, p.Size.X, block)
	y0, y1 := blockRange(at/p.Size.X, p.Size.Y, block)
	for y := y0; y < y1; y++ {
		for k := y*p.Size.X + x0; k < y*p.Size.X+x1; k++ {
			if o := p.From[k]; o == Computed || o == Carried && int(p.spread[k]) < block {
				continue
			}
			p.Fields[k], p.From[k], p.spread[k] = f, Coarse, uint8(block)
		}
	}
}

// anchor is the place of a block's sample within the block: 3, 3, 1, 0 for
// blocks of 8, 4, 2, 1, so that every pass contains the one before and samples
// lie in the middle of their blocks.
func anchor(block int) int { return 3 & (block - 1) }

// blockRange is the stretch of samples for which the one at i stands: those it
// is nearest to, and all as far as the border where there is no other.
func blockRange(i, n, block int) (from, to int) {
	from, to = i-(block-1)/2, i+block/2+1
	if i < block {
		from = 0
	}
	if i+block >= n {
		to = n
	}
	return from, to
}

// paths keeps the order in which samples are taken, for the latest size.
type paths struct {
	size, focus image.Point
	order       []int32
}

// from is every sample of a size by its distance from the focus.
func (s *paths) from(size, focus image.Point) []int32 {
	if s.size == size && s.focus == focus && s.order != nil {
		return s.order
	}
	s.size, s.focus = size, focus
	x, y := float64(size.X-1)/2, float64(size.Y-1)/2
	if focus != (image.Point{}) {
		x, y = float64(focus.X), float64(focus.Y)
	}
	type far struct {
		at int32
		d  float64
	}
	all := make([]far, size.X*size.Y)
	for k := range all {
		dx, dy := float64(k%size.X)-x, float64(k/size.X)-y
		// Samples that come one after another should be near one another, so
		// rings are a sample wide.
		all[k] = far{int32(k), math.Floor(math.Sqrt(dx*dx + dy*dy))}
	}
	slices.SortStableFunc(all, func(a, b far) int { return int(a.d) - int(b.d) })
	s.order = make([]int32, len(all))
	for i, f := range all {
		s.order[i] = f.at
	}
	return s.order
}
