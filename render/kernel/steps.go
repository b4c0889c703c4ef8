package kernel

import (
	"math"

	"leadline/precision"
	"leadline/render/formula"
	"leadline/render/orbit"
)

// loops are the inner loops of one formula.
type loops interface {
	// steps iterates δ against the reference until something happens, the
	// segment ends, limit is reached or a block's worth of steps is done.
	steps(l *lane, k *Kernel, limit int) event
	// direct iterates z itself for a block at most.
	direct(d *directLane, k *Kernel, limit int) event
	// interior reports whether c is known by a formula to lie inside.
	interior(re, im float64) bool
}

// loopsFor returns the inner loops of a map.
func loopsFor(m formula.Map) loops {
	switch m.(type) {
	case formula.Square:
		return squareLoops{}
	case formula.Cube:
		return cubeLoops{}
	}
	panic("kernel: a formula without inner loops")
}

// Names lists the inner loops in use on this machine.
func Names() []string { return []string{"plain Go"} }

// block is how many iterations an inner loop does at most before it returns:
// the gate's measure cannot leave the range of doubles meanwhile.
const block = 64

// square is re² + im².
func square(re, im float64) float64 { return math.FMA(re, re, float64(im*im)) }

// span returns how many steps may be done now, and the reference from here on.
func (l *lane) span(k *Kernel, limit int) (int, []orbit.Z) {
	n := min(l.seg.End-l.m, limit-l.n, block)
	return n, k.cfg.Reference.Points[l.m : l.m+n+1]
}

// leapAt reports whether a leap holds at offset at from the segment's first.
func (s *segment) leapAt(at int, d2 float64) bool {
	if at < 0 || at&(1<<orbit.ShortestLeap-1) != 0 {
		return false
	}
	q := at >> orbit.ShortestLeap
	return q < len(s.key) && precision.KeyOf(d2) < s.key[q]
}
