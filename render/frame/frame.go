package frame

import (
	"leadline/precision"
	"leadline/render/sheet"
)

// Format names the frame documents this release reads and writes.
const Format = "leadline.frame/1"

// Frame is everything that decides the pixels of one picture. An optional
// field at its zero value is absent: it is not written, and Resolve puts the
// default in its place. Pointers mark the optional values whose zero means
// something. A Frame built in Go needs Format, Set.Kind, View.Height,
// Iteration.Limit, Sheet.Width and Sheet.Height; see Validate.
type Frame struct {
	Format    string    `json:"format"`
	Title     string    `json:"title,omitempty"`
	Maker     string    `json:"maker,omitempty"`
	Rights    string    `json:"rights,omitempty"`
	Set       Set       `json:"set"`
	View      View      `json:"view"`
	Iteration Iteration `json:"iteration"`
	Sampling  Sampling  `json:"sampling,omitzero"`
	Ink       Ink       `json:"ink,omitzero"`
	Sheet     Sheet     `json:"sheet"`
}

// Kind is the kind of set.
type Kind string

// The kinds of set: z -> z^power + c with c the point itself, or with c fixed.
const (
	Mandelbrot Kind = "mandelbrot"
	Julia      Kind = "julia"
)

// Set says what is iterated.
type Set struct {
	Kind      Kind   `json:"kind"`
	Power     int    `json:"power,omitempty"`    // 2 or 3; absent: 2
	Parameter *Point `json:"parameter,omitzero"` // c of a Julia set, which needs it
}

// Point is a point of the plane, exactly. The zero value is the origin.
type Point struct {
	Re precision.Decimal `json:"re"`
	Im precision.Decimal `json:"im"`
}

// View is the part of the plane the trim shows. +im is up on the paper before
// the turn.
type View struct {
	Centre Point             `json:"centre"`
	Height precision.Decimal `json:"height"`        // of the trim, in the plane
	Turn   Turn              `json:"turn,omitzero"` // absent: 0deg
}

// Iteration bounds the work at a sample.
type Iteration struct {
	Limit   int     `json:"limit"`            // iterations before a point counts as undecided
	Bailout float64 `json:"bailout,omitzero"` // escape radius; absent: 1000
}

// Filter is the shape a pixel's samples are drawn from.
type Filter string

// The filters.
const (
	Gaussian Filter = "gaussian"
	Box      Filter = "box"
)

// Sampling says how many samples a pixel gets.
type Sampling struct {
	Least     int      `json:"least,omitempty"` // absent: 4, or Most if that is less
	Most      int      `json:"most,omitempty"`  // absent: 32, or Least if that is more
	Tolerance *float64 `json:"tolerance,omitzero"`
	Filter    Filter   `json:"filter,omitempty"`
}

// Sheet is the print: sizes as the trade writes them. Geometry turns it into
// pixels.
type Sheet struct {
	Width  sheet.Length `json:"width"`           // of the trim
	Height sheet.Length `json:"height"`          // of the trim
	PPI    int          `json:"ppi,omitempty"`   // absent: 300
	Bleed  sheet.Length `json:"bleed,omitzero"`  // absent: 0mm
	Safe   sheet.Length `json:"safe,omitzero"`   // absent: 5mm
	Space  string       `json:"space,omitempty"` // CSS name; absent: srgb
}

// Geometry is the sheet in whole pixels, defaults applied. The error is a
// *sheet.SizeError.
func (s Sheet) Geometry() (sheet.Geometry, error) {
	return sheet.New(s.Width, s.Height, or(s.Bleed, sheet.MustLength(DefaultBleed)),
		or(s.Safe, sheet.MustLength(DefaultSafe)), or(s.PPI, DefaultPPI))
}

// or is v, or def where v is the zero value.
func or[T comparable](v, def T) T {
	var zero T
	if v == zero {
		return def
	}
	return v
}
