package jobs

import "image"

// Sizes of the work.
const (
	defaultSide = 512
	leastSide   = 64
	sharing     = 64 // tiles
	minSide     = 16
	maxSide     = 4096     // 16 megapixels a tile
	bandBytes   = 64 << 20 // of a row of tiles, which assembling holds
	pixelBytes  = 6
)

// usualSide is the side of a print's tiles where none is asked for: the largest
// power of two up to defaultSide that leaves work for a farm, sharing tiles, or
// leastSide for the smallest prints.
func usualSide(r image.Rectangle) int {
	side := defaultSide
	for side > leastSide && r.Dx()*r.Dy() < sharing*side*side {
		side /= 2
	}
	return side
}

// tileSize is the size of a print's tiles: side x side pixels, but lower and
// wider where the print is so wide that a row of tiles would pass bandBytes.
func tileSize(r image.Rectangle, side int) image.Point {
	h := max(1, min(side, bandBytes/(pixelBytes*r.Dx()), r.Dy()))
	return image.Pt(min(r.Dx(), max(side, side*side/h)), h)
}

// grid counts the tiles across and down.
func grid(r image.Rectangle, side int) (columns, lines int) {
	s := tileSize(r, side)
	return (r.Dx() + s.X - 1) / s.X, (r.Dy() + s.Y - 1) / s.Y
}

// tileAt is tile i of a print, row by row.
func tileAt(r image.Rectangle, side, i int) image.Rectangle {
	s := tileSize(r, side)
	columns, _ := grid(r, side)
	at := r.Min.Add(image.Pt(i%columns*s.X, i/columns*s.Y))
	return image.Rectangle{at, at.Add(s)}.Intersect(r)
}
