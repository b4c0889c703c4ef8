package engine

import (
	"reflect"
	"sync"

	"leadline/palette"
	"leadline/render/frame"
	"leadline/render/ink"
)

// inkKey is all that the baked colours depend on.
type inkKey struct {
	ramp   palette.Ramp
	inside palette.Colour
	edge   palette.Colour
	line   bool
	space  palette.Space
	frozen *frame.Baked // taken in place of the others where it is of the space
}

// baked is an ink for the screen.
type baked struct {
	key     inkKey
	screen  *frame.Baked // in sRGB
	outside int          // ramp entries brought into the sheet's space
}

// bakes keeps the latest inks: a ramp takes some milliseconds to bake, and the
// same one is wanted at every change of the view.
var bakes struct {
	sync.Mutex
	list []*baked
}

// keptBakes is how many inks are kept.
const keptBakes = 8

// bake gives a frame's ink for the screen: baked for the sheet's own space as
// for the print, and each colour brought from there into sRGB.
func bake(r *frame.Resolved) (*baked, error) {
	k := inkKey{ramp: r.Ramp, inside: r.Inside, space: r.Space}
	if r.Edge.Width > 0 {
		k.edge, k.line = r.Edge.Colour, true
	}
	if r.Baked != nil && r.Baked.Space == r.Space.String() {
		k.frozen = r.Baked
	}
	bakes.Lock()
	defer bakes.Unlock()
	for i, b := range bakes.list {
		if reflect.DeepEqual(b.key, k) {
			copy(bakes.list[1:], bakes.list[:i])
			bakes.list[0] = b
			return b, nil
		}
	}
	b := &baked{key: k, screen: k.frozen}
	if k.frozen == nil {
		var err error
		if b.screen, b.outside, err = ink.Freeze(r); err != nil {
			return nil, err
		}
	}
	b.screen = onScreen(b.screen, r.Space)
	bakes.list = append([]*baked{b}, bakes.list[:min(len(bakes.list), keptBakes-1)]...)
	return b, nil
}

// onScreen brings baked colours from the sheet's space into sRGB.
func onScreen(b *frame.Baked, space palette.Space) *frame.Baked {
	if space == palette.SRGB {
		return b
	}
	to := func(code [3]uint16) [3]uint16 {
		c, _ := palette.FromCodes(space, code).BakeOne(palette.SRGB)
		return c
	}
	s := &frame.Baked{Space: palette.SRGB.String(), Inside: to(b.Inside)}
	for i, c := range b.Ramp {
		s.Ramp[i] = to(c)
	}
	first, last := &s.Ramp[0], &s.Ramp[frame.RampSize-1]
	if *first == *last && b.Ramp[0] != b.Ramp[frame.RampSize-1] {
		last[0] ^= 1 // a ramp whose ends differ runs to and fro on the screen too
	}
	if b.Edge != nil {
		e := to(*b.Edge)
		s.Edge = &e
	}
	return s
}
