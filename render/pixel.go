package render

import (
	"math"
	"time"

	"leadline/render/frame"
	"leadline/render/ink"
	"leadline/render/kernel"
)

// Counts says what was computed and how it ended.
type Counts struct {
	Pixels, Samples, Escaped, Inside, Undecided int64

	Encoding time.Duration // spent on turning light into codes
}

// Add adds d to c.
func (c *Counts) Add(d Counts) {
	c.Pixels += d.Pixels
	c.Samples += d.Samples
	c.Escaped += d.Escaped
	c.Inside += d.Inside
	c.Undecided += d.Undecided
	c.Encoding += d.Encoding
}

// record is the counts as a sidecar keeps them.
func (c Counts) record() frame.Counts {
	return frame.Counts{Pixels: c.Pixels, Samples: c.Samples, Escaped: c.Escaped, Inside: c.Inside, Undecided: c.Undecided}
}

func (c *Counts) note(s kernel.State) {
	c.Samples++
	switch s {
	case kernel.Escaped:
		c.Escaped++
	case kernel.Inside:
		c.Inside++
	default:
		c.Undecided++
	}
}

// position returns sample i of pixel x, y of the lattice at scale 1/k, in
// coordinates of the unscaled lattice.
func (p *Plan) position(x, y, k int, key uint64, i int) (sx, sy float64) {
	ox, oy := p.sampler.at(key, i)
	return float64((float64(x) + 0.5 + ox) * float64(k)), float64((float64(y) + 0.5 + oy) * float64(k))
}

// colour computes pixel x, y of the lattice at scale 1/k: the mean of its
// samples in linear light. It takes the least number of samples, and twice as
// many again and again up to the most, until the mean's standard error, judged
// on the square root of light (near enough to what the eye makes of it, and
// exact), is within the tolerance in every channel.
func (p *Plan) colour(x, y, k int, n *Counts) ink.Light {
	s := &p.sampler
	h := key(x, y)
	var m tally
	for want := s.least; ; want = min(2*want, s.most) {
		for i := m.n; i < want; i++ {
			f := p.kernel.Sample(p.position(x, y, k, h, i))
			n.note(f.State)
			m.add(p.shader.Shade(f, float64(k)))
		}
		if want == s.most || m.settled(s.tolerance) {
			break
		}
	}
	n.Pixels++
	return m.mean()
}

// tally sums a pixel's samples in their order.
type tally struct {
	n                int
	light, root, sqr ink.Light // sums of light, of its root, of the root's square
}

func (t *tally) add(c ink.Light) {
	t.n++
	for j, v := range c {
		r := math.Sqrt(math.Max(v, 0))
		t.light[j] += v
		t.root[j] += r
		t.sqr[j] += float64(r * r)
	}
}

// settled reports whether the standard error of the mean root is at most tol
// in every channel. One sample tells nothing of its error.
func (t *tally) settled(tol float64) bool {
	if t.n < 2 {
		return false
	}
	n := float64(t.n)
	most := float64(float64(tol*tol) * float64(n*(n-1)))
	for j := range t.root {
		spread := t.sqr[j] - float64(t.root[j]*t.root[j])/n
		if spread > most {
			return false
		}
	}
	return true
}

func (t *tally) mean() ink.Light {
	n := float64(t.n)
	return ink.Light{t.light[0] / n, t.light[1] / n, t.light[2] / n}
}
