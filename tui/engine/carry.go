package engine

import (
	"image"
	"math"
	"slices"

	"leadline/precision"
	"leadline/render"
	"leadline/render/frame"
	"leadline/render/kernel"
	"leadline/render/sheet"
)

// Carry is the best guess at a frame from earlier pictures. Each sample is the
// nearest one of the picture whose spacing is nearest to the new one and not
// coarser, else of the nearest coarser one; distances are put in the new
// frame's pixels. From is Carried or Nowhere. It costs one placement at full
// precision for each picture needed and nothing but doubles a sample. nil where the request
// cannot be met.
func Carry(old []*Picture, r Request) *Picture {
	g, err := r.Frame.Sheet.Geometry()
	if err != nil || r.Size.X < 1 || r.Size.Y < 1 {
		return nil
	}
	p := blank(r, g)
	p.carry(links(old, p))
	return p
}

// blank is a picture of which nothing is known.
func blank(r Request, g sheet.Geometry) *Picture {
	n := r.Size.X * r.Size.Y
	return &Picture{Request: r, Geometry: g, Limit: r.Frame.Iteration.Limit,
		Fields: make([]kernel.Field, n), From: make([]Origin, n), spread: make([]uint8, n)}
}

// link leads from samples of a new picture to those of an old one:
// column = xi·i + xj·j + x0 and row = yi·i + yj·j + y0, rounded down.
type link struct {
	old                    *Picture
	xi, xj, x0, yi, yj, y0 float64
	grow                   float64 // new pixels to one old pixel
	wide                   float64 // the old spacing in new samples
	shift                  image.Point
	exact                  bool // the samples of both lie at the same points, shifted
	placed, useless        bool // the rest is known; it could not be
}

// farthest bounds the ratio of two pictures' spacings, beyond which one is a
// sample of the other.
const farthest = 1 << 20

// samePoint is how near two lattice points are, in pixels, to be taken for one:
// less than doubles and references leave uncertain at the far end of a
// reference's reach.
const samePoint = 0x1p-20

// links are the pictures that may say something of p, the best first, not placed
// yet.
func links(old []*Picture, p *Picture) []link {
	var ls []link
	pixel := pixelOf(p)
	pw, ph := p.steps()
	for i := len(old) - 1; i >= 0; i-- {
		o := old[i]
		if o == nil || o.Err != nil || len(o.Fields) == 0 || !sameSet(o.Frame, p.Frame) {
			continue
		}
		l := link{old: o, grow: pixelOf(o).Quo(pixel).Float64()}
		ow, oh := o.steps()
		l.wide = l.grow * math.Sqrt(ow*oh/(pw*ph))
		if l.wide > 1.0/farthest && l.wide < farthest {
			ls = append(ls, l)
		}
	}
	slices.SortStableFunc(ls, func(a, b link) int {
		switch {
		case a.rank() < b.rank():
			return -1
		case a.rank() > b.rank():
			return 1
		}
		return 0
	})
	return ls
}

// rank orders links: the same spacing first, then ever finer ones, then ever
// coarser ones. A finer picture covers less but says more.
func (l *link) rank() float64 {
	if l.wide <= 1+1e-9 {
		return 1 - l.wide
	}
	return l.wide
}

// place finds where one picture lies in the other, once; it reports whether it
// could.
func (l *link) place(p *Picture) bool {
	if l.placed {
		return !l.useless
	}
	l.placed = true
	// Where the new middle lies on the old lattice; the rest is a turn and a
	// scale about it.
	o := l.old
	x, y, err := render.Place(o.Frame, p.Frame.View.Centre)
	if err != nil {
		l.useless = true
		return false
	}
	ow, oh := o.steps()
	pw, ph := p.steps()
	sin, cos := math.Sincos((o.Frame.View.Turn.Degrees() - p.Frame.View.Turn.Degrees()) * (math.Pi / 180))
	k := 1 / l.grow
	midX, midY := float64(p.Geometry.TrimW)/2, float64(p.Geometry.TrimH)/2
	// u = (i+½)pw - midX, w = midY - (j+½)ph; x + k(u·cos - w·sin), y - k(u·sin + w·cos)
	l.xi, l.xj = k*pw*cos/ow, k*ph*sin/ow
	l.yi, l.yj = -k*pw*sin/oh, k*ph*cos/oh
	u, w := pw/2-midX, midY-ph/2
	l.x0 = (x + k*(u*cos-w*sin)) / ow
	l.y0 = (y - k*(u*sin+w*cos)) / oh
	l.align(p, x-midX, y-midY)
	return true
}

// align notes that the lattices are the same but for a shift of dx, dy pixels
// by whole samples.
func (l *link) align(p *Picture, dx, dy float64) {
	o := l.old
	if o.Size != p.Size || o.Geometry.TrimW != p.Geometry.TrimW || o.Geometry.TrimH != p.Geometry.TrimH ||
		o.Frame.View.Height.Cmp(p.Frame.View.Height) != 0 || o.Frame.View.Turn.Degrees() != p.Frame.View.Turn.Degrees() {
		return
	}
	pw, ph := p.steps()
	sx, sy := math.Round(dx/pw), math.Round(dy/ph)
	if math.Abs(sx) < farthest && math.Abs(sy) < farthest {
		l.shift = image.Pt(int(sx), int(sy))
		l.exact = math.Abs(dx-sx*pw) <= samePoint && math.Abs(dy-sy*ph) <= samePoint
	}
}

// steps are the distances between samples in lattice pixels.
func (p *Picture) steps() (w, h float64) {
	return float64(p.Geometry.TrimW) / float64(p.Size.X), float64(p.Geometry.TrimH) / float64(p.Size.Y)
}

// pixelOf is a picture's lattice spacing in the plane.
func pixelOf(p *Picture) precision.Ext {
	return p.Frame.View.Height.Ext().Quo(precision.ExtOf(float64(p.Geometry.TrimH)))
}

// doubtful is the least spread given to a carried sample that may be undecided
// only for want of iterations: passes of blocks up to it take its place.
const doubtful = 4

// carry fills a blank picture from one picture after another, until none of the
// rest could say anything better.
func (p *Picture) carry(ls []link) {
	best := make([]float64, len(p.Fields))
	for k := range best {
		best[k] = math.Inf(1)
	}
	for n := range ls {
		l := &ls[n]
		if l.wide >= slices.Max(best) || slices.Max(best) <= 1 {
			return // nor can those after it be better
		}
		if !l.place(p) {
			continue
		}
		for j := range p.Size.Y {
			for i := range p.Size.X {
				if k := j*p.Size.X + i; max(1, l.wide) < best[k] {
					p.fetch(l, i, j, &best[k])
				}
			}
		}
	}
}

// fetch takes one sample from a picture, if that knows it better than those
// before.
func (p *Picture) fetch(l *link, i, j int, best *float64) {
	o, x, y := l.old, float64(i), float64(j)
	fx, fy := l.xi*x+l.xj*y+l.x0, l.yi*x+l.yj*y+l.y0
	if !(fx >= 0 && fy >= 0 && fx < float64(o.Size.X) && fy < float64(o.Size.Y)) {
		return
	}
	k := int(fy)*o.Size.X + int(fx)
	if o.From[k] == Nowhere {
		return
	}
	s := max(1, float64(o.spreadAt(k))*l.wide)
	f := o.Fields[k]
	if f.State == kernel.Undecided && (!p.Pinned || o.Limit < p.Limit) {
		s = max(s, doubtful)
	}
	if s >= *best {
		return
	}
	*best = s
	if p.Pinned {
		f = clamped(f, p.Limit)
	}
	f.Distance *= l.grow
	at := j*p.Size.X + i
	p.Fields[at], p.From[at], p.spread[at] = f, Carried, uint8(min(255, math.Ceil(s-1e-6)))
}

// keepExact takes over as computed what an earlier picture computed at the very
// same lattice points, as far as it holds for p's limit.
func (p *Picture) keepExact(ls []link) {
	for n := range ls {
		l := &ls[n]
		if l.old.Frame.View.Height.Cmp(p.Frame.View.Height) == 0 && l.place(p) && l.exact {
			for j := range p.Size.Y {
				for i := range p.Size.X {
					p.keepSample(l, i, j)
				}
			}
		}
	}
}

func (p *Picture) keepSample(l *link, i, j int) {
	at := image.Pt(i, j).Add(l.shift)
	if !at.In(image.Rectangle{Max: p.Size}) {
		return
	}
	from, to := at.Y*p.Size.X+at.X, j*p.Size.X+i
	if l.old.From[from] != Computed || p.From[to] == Computed {
		return
	}
	f := l.old.Fields[from]
	if f.State == kernel.Undecided && l.old.Limit < p.Limit {
		return
	}
	p.Fields[to], p.From[to], p.spread[to] = clamped(f, p.Limit), Computed, 1
}

// clamped is a field as it is with a limit that may be lower than the one it
// was computed with. What is proved inside stays so.
func clamped(f kernel.Field, limit int) kernel.Field {
	if f.State == kernel.Escaped && f.N > limit {
		return kernel.Field{State: kernel.Undecided}
	}
	return f
}

// sameSet reports whether the same points have the same fields in both frames,
// but for the limit.
func sameSet(f, g *frame.Frame) bool {
	a, b := f.Set, g.Set
	if a.Kind != b.Kind || power(a) != power(b) || bailout(f) != bailout(g) || (a.Parameter == nil) != (b.Parameter == nil) {
		return false
	}
	return a.Parameter == nil || a.Parameter.Re.Cmp(b.Parameter.Re) == 0 && a.Parameter.Im.Cmp(b.Parameter.Im) == 0
}

func power(s frame.Set) int {
	if s.Power == 0 {
		return frame.DefaultPower
	}
	return s.Power
}

func bailout(f *frame.Frame) float64 {
	if f.Iteration.Bailout == 0 {
		return frame.DefaultBailout
	}
	return f.Iteration.Bailout
}
