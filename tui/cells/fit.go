package cells

import (
	"math"
	"math/bits"
)

// samples are the colours of one cell in reading order; a mesh fills as many as
// it has.
type samples [6]RGB

// same tells whether the first n samples have one colour.
func (s *samples) same(n int) bool {
	for _, c := range s[1:n] {
		if c != s[0] {
			return false
		}
	}
	return true
}

// weights4 and weights6 have, for each mask, n/(k(n-k)) with k samples of n in the
// mask; 0 where a set is empty.
var weights4, weights6 = weights(4), weights(6)

func weights(n int) (w [32]float32) {
	for mask := range 1 << (n - 1) {
		if k := bits.OnesCount8(uint8(mask)); k > 0 {
			w[mask] = float32(n) / float32(k*(n-k))
		}
	}
	return w
}

// fit parts n samples (4 or 6) into two sets with the least sum of squared
// distances to the means of the sets, and gives the mask of the first set with
// both means. The ground has the larger set, so that seams between characters, as
// some fonts leave them, show least; of two equal sets it has the last sample.
//
// With the samples taken from their common mean, S the sum of the first set and k
// its number, the error is a constant less |S|²·n/(k(n-k)); the largest such gain
// wins. The last sample stays out of the first set, so that 2^(n-1) partings cover
// all. Gains are compared in their upper 18 bits and equal ones go to the smaller
// mask: a choice that rounding could sway is always made alike.
func (t *labTables) fit(s *samples, n int) (mask uint8, fg, bg RGB) {
	var p [6]lab
	var mean lab
	for i, c := range s[:n] {
		if i > 0 && c == s[i-1] {
			p[i] = p[i-1]
		} else {
			p[i] = t.lab(c)
		}
		mean = mean.plus(p[i])
	}
	mean = mean.times(1 / float32(n))
	for i := range n {
		p[i] = p[i].minus(mean)
	}
	mask, sum := part(&p, n)
	k := bits.OnesCount8(mask)
	if k == 0 {
		one := t.rgb(mean)
		return 0, one, one
	}
	first := t.rgb(mean.plus(sum.times(1 / float32(k))))
	rest := t.rgb(mean.minus(sum.times(1 / float32(n-k))))
	if k > n-k {
		return mask ^ (1<<n - 1), rest, first
	}
	return mask, first, rest
}

// part finds the mask of largest gain, and the sum of the samples in it. Sums over
// subsets of the first three samples and of the next two are made once and combined.
func part(p *[6]lab, n int) (mask uint8, sum lab) {
	low := [8]lab{1: p[0], 2: p[1], 4: p[2]}
	low[3] = low[1].plus(low[2])
	low[5], low[6], low[7] = low[1].plus(low[4]), low[2].plus(low[4]), low[3].plus(low[4])
	if n == 4 {
		m := 31 - gains(&low, lab{}, &weights4, 0)&31
		return uint8(m), low[m&7]
	}
	high := [4]lab{1: p[3], 2: p[4], 3: p[3].plus(p[4])}
	var best uint32
	for j, h := range high {
		best = max(best, gains(&low, h, &weights6, uint32(j)<<3))
	}
	m := 31 - best&31
	return uint8(m), low[m&7].plus(high[m>>3&3])
}

// gains gives the largest gain, its upper bits over the complement of its mask, of
// the eight sums of low, each with high added. from is the mask of high.
func gains(low *[8]lab, high lab, weights *[32]float32, from uint32) (best uint32) {
	for i, s := range low {
		m := from | uint32(i)
		gain := s.plus(high).squared() * weights[m&31]
		best = max(best, math.Float32bits(gain)&^31|(31-m))
	}
	return best
}
