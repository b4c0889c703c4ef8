package sheet

import "image"

// Tiling cuts a rectangle of the lattice into tiles of one size, numbered row by
// row from its top left corner. Those at its right and lower edges are smaller.
// No pixel depends on it: it only says how the work is shared.
type Tiling struct {
	Rect image.Rectangle // not empty
	Size image.Point     // of a whole tile, at least 1 x 1
}

// Tiles cuts r into squares of side pixels; lower and wider, but not larger,
// where r is so wide that a row of squares would have more than most pixels.
func Tiles(r image.Rectangle, side, most int) Tiling {
	h := max(1, min(side, most/r.Dx(), r.Dy()))
	return Tiling{r, image.Pt(min(r.Dx(), max(side, side*side/h)), h)}
}

// Columns counts the tiles across.
func (t Tiling) Columns() int { return (t.Rect.Dx() + t.Size.X - 1) / t.Size.X }

// Lines counts the rows of tiles.
func (t Tiling) Lines() int { return (t.Rect.Dy() + t.Size.Y - 1) / t.Size.Y }

// Count is the number of tiles.
func (t Tiling) Count() int { return t.Columns() * t.Lines() }

// At is tile i, from 0 up to Count.
func (t Tiling) At(i int) image.Rectangle {
	n := t.Columns()
	at := t.Rect.Min.Add(image.Pt(i%n*t.Size.X, i/n*t.Size.Y))
	return image.Rectangle{at, at.Add(t.Size)}.Intersect(t.Rect)
}

// Line is row of tiles j, from 0 up to Lines, as one rectangle.
func (t Tiling) Line(j int) image.Rectangle {
	r := t.At(j * t.Columns())
	r.Max.X = t.Rect.Max.X
	return r
}
