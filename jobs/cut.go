package jobs

import (
	"image"

	"leadline/render"
	"leadline/render/sheet"
)

// Sizes of the work.
const (
	defaultSide = 512
	leastSide   = 64
	sharing     = 64 // tiles
	minSide     = 16
	maxSide     = 4096     // 16 megapixels a tile
	bandBytes   = 64 << 20 // of a row of tiles, which assembling holds
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

// tilesOf is how a print is shared out.
func tilesOf(r image.Rectangle, side int) sheet.Tiling {
	return sheet.Tiles(r, side, bandBytes/render.BytesPerPixel)
}

// cut is how an order's print is.
func (o *order) cut() sheet.Tiling { return tilesOf(o.rect, o.side) }
