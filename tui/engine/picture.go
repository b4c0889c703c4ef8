package engine

import (
	"image"

	"leadline/render/frame"
	"leadline/render/kernel"
	"leadline/render/sheet"
)

// Request asks for the preview of a frame.
type Request struct {
	Frame  *frame.Frame // not changed by anybody
	Size   image.Point  // samples across and down the trim, at least 1 x 1
	Pinned bool         // the frame's iteration limit holds; else one is found
	Focus  image.Point  // the sample around which work begins; zero: the middle
}

// Origin says where a sample of a picture comes from.
type Origin uint8

// Origins, from worst to best.
const (
	Nowhere  Origin = iota // nothing is known
	Carried                // from an earlier picture, moved and scaled
	Coarse                 // a neighbour's, computed in a coarser pass
	Computed               // its own
)

// Picture is what is known of a frame at some moment. It is never changed.
type Picture struct {
	Request
	Geometry sheet.Geometry
	// Fields and From hold sample i, j at j·Size.X + i; its place on the lattice
	// is ((i + ½)·TrimW/Size.X, (j + ½)·TrimH/Size.Y).
	Fields []kernel.Field
	From   []Origin

	Limit     int     // the iteration limit the fields were computed with
	Undecided float64 // share of the computed samples, 0…1
	Inside    float64

	Stage   string  // what runs: "reference", "tables", "pixels", "" once it is whole
	Part    float64 // of the stage, 0…1
	Pass    int     // blocks of Pass x Pass samples are done; 0 before the first
	Whole   bool    // every sample is computed and the limit is settled
	Seconds float64 // spent on pixels so far, by all cores together
	Reused  bool    // an earlier reference served
	Err     error   // the preview could not be made

	// spread says for every sample how wide it stands, in samples of this
	// picture: 1 for its own, the block for a coarse one, the old spacing for one
	// carried over. nil: 1 everywhere.
	spread []uint8
}

// spreadAt is how wide sample k stands.
func (p *Picture) spreadAt(k int) uint8 {
	if p.spread == nil {
		return 1
	}
	return p.spread[k]
}

// At is the lattice point of sample i, j.
func (p *Picture) At(i, j int) (x, y float64) {
	return (float64(i) + 0.5) * float64(p.Geometry.TrimW) / float64(p.Size.X),
		(float64(j) + 0.5) * float64(p.Geometry.TrimH) / float64(p.Size.Y)
}
