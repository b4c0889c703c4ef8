package sheet

import (
	"fmt"
	"image"
)

// Limits of a sheet. The sides keep every lattice coordinate well inside 32
// bits and a PNG's side; the area is what one file can reasonably hold
// (20 gigapixels are 120 GB of 16-bit samples before compression).
const (
	MaxSide   = 400_000        // pixels, bleed included
	MaxPixels = 20_000_000_000 // pixels, bleed included
	MaxPPI    = 4_800
	MaxScale  = 4_096 // the k of a scale 1/k
)

// Geometry is a sheet in whole pixels. The zero value is an empty sheet; New
// makes a useful one.
type Geometry struct {
	TrimW, TrimH int // the trimmed print, pixels
	Bleed        int // printed beyond the trim on each side, pixels
	Margin       int // the safe area's distance from the trim, pixels
	PPI          int // pixels an inch of the unscaled sheet
	Scale        int // k of a lattice at scale 1/k; 1 for the sheet itself

	// PixelsPerMetre is what a PNG's pHYs chunk takes: this lattice's
	// ppi / 0.0254 rounded to the nearest, halves up (300 -> 11811).
	PixelsPerMetre uint32
}

// SizeError says that a sheet cannot be made: a side is empty, or a limit is
// passed.
type SizeError struct {
	What  string // what is wrong, with its number
	Limit string // the limit and the way back
}

// Error says what is wrong.
func (e *SizeError) Error() string { return e.What }

// Hint says what is allowed.
func (e *SizeError) Hint() string { return e.Limit }

// Default values of a sheet.
const (
	DefaultPPI = 300
	// DefaultSafe is a print shop's usual safe margin, millimetres.
	DefaultSafe = "5mm"
)

// New gives the geometry of a sheet: trim size, bleed and safe margin at ppi.
// Zero lengths for bleed and safe mean none. The error is a *SizeError.
func New(width, height, bleed, safe Length, ppi int) (Geometry, error) {
	if ppi < 1 || ppi > MaxPPI {
		return Geometry{}, &SizeError{fmt.Sprintf("%d ppi is out of range", ppi),
			fmt.Sprintf("ppi is a whole number from 1 to %d; 300 is usual in the hand", MaxPPI)}
	}
	g := Geometry{
		TrimW: width.Pixels(ppi), TrimH: height.Pixels(ppi),
		Bleed: bleed.Pixels(ppi), Margin: safe.Pixels(ppi),
		PPI: ppi, Scale: 1, PixelsPerMetre: pixelsPerMetre(ppi, 1),
	}
	return g, g.check()
}

// check holds a geometry against the limits.
func (g Geometry) check() error {
	if g.TrimW < 1 || g.TrimH < 1 {
		return &SizeError{fmt.Sprintf("a trim of %d x %d pixels is empty", g.TrimW, g.TrimH),
			"width and height must each be at least one pixel"}
	}
	w, h := g.TrimW+2*g.Bleed, g.TrimH+2*g.Bleed
	if w > MaxSide || h > MaxSide {
		return &SizeError{fmt.Sprintf("%d x %d pixels with bleed: a side is too long", w, h),
			fmt.Sprintf("a side holds at most %d pixels; lower the ppi or the size", MaxSide)}
	}
	if w*h > MaxPixels {
		return &SizeError{fmt.Sprintf("%d x %d pixels with bleed are too many", w, h),
			fmt.Sprintf("a sheet holds at most %d pixels; lower the ppi or the size", MaxPixels)}
	}
	return nil
}

// pixelsPerMetre is round(ppi / k / 0.0254), halves up, at least 1.
func pixelsPerMetre(ppi, k int) uint32 {
	num, den := uint64(ppi)*10_000, uint64(k)*254
	return uint32(max(1, (2*num+den)/(2*den)))
}

// Trim is the trimmed print: (0,0) to (TrimW,TrimH).
func (g Geometry) Trim() image.Rectangle { return image.Rect(0, 0, g.TrimW, g.TrimH) }

// Full is everything printed, trim and bleed; its Min is (-Bleed,-Bleed).
func (g Geometry) Full() image.Rectangle { return g.Trim().Inset(-g.Bleed) }

// Safe is the part of the trim that a careless cut leaves whole. It is empty
// where the margins meet.
func (g Geometry) Safe() image.Rectangle {
	if 2*g.Margin >= min(g.TrimW, g.TrimH) {
		return image.Rectangle{}
	}
	return g.Trim().Inset(g.Margin)
}

// Scaled is the geometry of the same sheet at scale 1/k of g. Pixel (x,y) of
// it covers the k x k pixels of g that begin at (k*x,k*y); trim, bleed and
// margin are divided by k and rounded up, so the last row and column may reach
// up to k-1 pixels beyond g's. It panics where k is below 1.
func (g Geometry) Scaled(k int) Geometry {
	if k < 1 {
		panic("sheet: scale 1/k needs k of 1 or more")
	}
	s := g
	s.TrimW, s.TrimH = ceilDiv(g.TrimW, k), ceilDiv(g.TrimH, k)
	s.Bleed, s.Margin = ceilDiv(g.Bleed, k), ceilDiv(g.Margin, k)
	s.Scale = g.Scale * k
	s.PixelsPerMetre = pixelsPerMetre(g.PPI, s.Scale)
	return s
}

// ceilDiv is a/k rounded up, for a >= 0 and k >= 1; it cannot overflow.
func ceilDiv(a, k int) int {
	q := a / k
	if a%k != 0 {
		q++
	}
	return q
}
