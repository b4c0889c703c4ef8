package render

import (
	"context"
	"encoding/binary"
	"hash/fnv"
	"image"
	"math/rand/v2"
	"sort"
	"sync"
	"time"

	"leadline/precision"
	"leadline/render/frame"
	"leadline/render/kernel"
)

// auditor holds the pixels that a render will be audited at. They are drawn
// from the frame's own bytes, so that an audit can be repeated, and picked
// before the first pixel is known.
type auditor struct {
	p     *Plan
	rect  image.Rectangle
	k     int
	marks []mark // by row, then column
	row   int    // next row to arrive
	next  int    // first mark not yet passed
}

// mark is one pixel to be audited, the sample of it to iterate directly, and
// its codes as they went into the file.
type mark struct {
	x, y, sample int
	codes        [BytesPerPixel]byte
}

// sampleCost is the estimated time beyond which a sample's direct iteration is
// left out of the audit and counted as skipped.
const sampleCost = 4 * time.Second

func newAuditor(p *Plan, rect image.Rectangle, k, n int, document []byte) *auditor {
	h := fnv.New64a()
	h.Write(document)
	r := rand.New(rand.NewPCG(h.Sum64(), uint64(n)))
	a := &auditor{p: p, rect: rect, k: k, row: rect.Min.Y}
	for range n {
		a.marks = append(a.marks, mark{x: rect.Min.X + r.IntN(rect.Dx()), y: rect.Min.Y + r.IntN(rect.Dy()),
			sample: r.IntN(p.sampler.least)})
	}
	sort.SliceStable(a.marks, func(i, j int) bool { return a.marks[i].y < a.marks[j].y })
	return a
}

// watch notes the codes of marked pixels as rows go by.
func (a *auditor) watch(rows []byte) {
	stride := a.rect.Dx() * BytesPerPixel
	end := a.row + len(rows)/stride
	for ; a.next < len(a.marks) && a.marks[a.next].y < end; a.next++ {
		m := &a.marks[a.next]
		copy(m.codes[:], rows[(m.y-a.row)*stride+(m.x-a.rect.Min.X)*BytesPerPixel:])
	}
	a.row = end
}

// run computes every mark again: its pixel as before, whose codes must be
// those in the file, and one of its samples by direct iteration.
func (a *auditor) run(ctx context.Context, o Options) (frame.Audit, error) {
	r := frame.Audit{Asked: int64(len(a.marks))}
	var mu sync.Mutex
	err := each(ctx, o.workers(), len(a.marks), func(i int) {
		one := a.check(ctx, &a.marks[i])
		mu.Lock()
		defer mu.Unlock()
		r.Checked += one.Checked
		r.Skipped += one.Skipped
		r.Robust += one.Robust
		r.Equal += one.Equal
		r.Within += one.Within
		r.Failed += one.Failed
		o.tell(PhaseAudit, r.Checked+r.Skipped, r.Asked)
	}, nil)
	return r, err
}

// check audits one pixel.
func (a *auditor) check(ctx context.Context, m *mark) frame.Audit {
	var n Counts
	p := a.p
	c := p.colour(m.x, m.y, a.k, &n)
	for j, v := range c {
		if p.Space.Encode(v) != binary.BigEndian.Uint16(m.codes[2*j:]) {
			return frame.Audit{Checked: 1, Failed: 1}
		}
	}
	x, y := p.position(m.x, m.y, a.k, key(m.x, m.y), m.sample)
	f := p.kernel.Sample(x, y)
	if p.exactCost(f) > sampleCost {
		return frame.Audit{Skipped: 1}
	}
	e, err := p.Exact(ctx, x, y)
	if err != nil {
		return frame.Audit{}
	}
	r := frame.Audit{Checked: 1}
	agreement, robust := p.Compare(f, e)
	if robust {
		r.Robust = 1
	}
	switch agreement {
	case Equal:
		r.Equal = 1
	case Within:
		r.Within = 1
	default:
		r.Failed = 1
	}
	return r
}

// exactCost estimates direct iteration from its length and the precision. It
// must be the same everywhere, so it is a formula and no measurement.
func (p *Plan) exactCost(f kernel.Field) time.Duration {
	n := f.N
	if f.State != kernel.Escaped {
		n = p.r.Limit
	}
	bits := int64(precision.BitsFor(p.pixel) + exactGuard)
	return time.Duration(int64(n) * (500 + bits*bits/6000))
}
