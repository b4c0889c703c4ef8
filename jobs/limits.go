package jobs

import (
	"fmt"

	"leadline/precision"
	"leadline/render"
	"leadline/render/frame"
	"leadline/render/kernel"
)

// Limits are what a worker's owner lets a print claim. 0 is no limit.
type Limits struct {
	Pixels     int64 // of the print
	Iterations int   // iteration.limit
	Memory     int64 // bytes, as estimated before the work
}

// LimitError says that a print claims more than a worker's owner allows.
type LimitError struct {
	What        string // of the print
	Asked, Most int64
}

func (e *LimitError) Error() string {
	return fmt.Sprintf("the print asks for %d %s, and this worker's owner allows %d", e.Asked, e.What, e.Most)
}

// Hint says who can change it.
func (e *LimitError) Hint() string {
	return "make the print smaller, or begin it again where the workers' limits are higher"
}

// check refuses a print that claims too much, before anything is computed.
func (l Limits) check(f *frame.Frame, o *order, slots int) error {
	r, err := f.Resolve()
	if err != nil {
		return err
	}
	pixels := int64(o.rect.Dx()) * int64(o.rect.Dy())
	switch need := memory(r, o, slots); {
	case l.Pixels > 0 && pixels > l.Pixels:
		return &LimitError{"pixels", pixels, l.Pixels}
	case l.Iterations > 0 && r.Limit > l.Iterations:
		return &LimitError{"iterations a sample", int64(r.Limit), int64(l.Iterations)}
	case l.Memory > 0 && need > l.Memory:
		return &LimitError{"bytes of memory", need, l.Memory}
	}
	return nil
}

// Bytes an iteration of the reference takes at most: its point as doubles (16),
// a leap of 48 and its radius of 8 for every four iterations, and as much again
// for all longer leaps together.
const iterationBytes = 16 + 2*(48+8)/4

// Memory estimates what a print of the whole sheet takes in a worker of so many
// slots, in bytes.
func Memory(r *frame.Resolved, slots int) int64 {
	full := r.Sheet.Full()
	return memory(r, &order{rect: full, side: usualSide(full)}, slots)
}

// memory estimates what a print takes in a worker: the reference and its
// tables if it runs to the limit (a Julia set has two), the tiles in hand with
// their compressed copies, and one row of tiles.
func memory(r *frame.Resolved, o *order, slots int) int64 {
	size := o.cut().Size
	n := int64(slots)*3*render.BytesPerPixel*int64(size.X)*int64(size.Y) + render.BytesPerPixel*int64(o.rect.Dx())*int64(size.Y)
	if pixel := r.Height.Ext().Quo(precision.ExtOf(float64(r.Sheet.TrimH))); kernel.Direct(pixel) {
		return n
	}
	orbits := int64(1)
	if r.Kind == frame.Julia {
		orbits = 2
	}
	return n + orbits*iterationBytes*int64(r.Limit)
}
