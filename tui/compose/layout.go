package compose

import (
	"image"
	"math"

	"leadline/tui/cells"
)

// Widths of the sounding line, in cells, and the least screens that have it.
const (
	leadWide   = 10
	leadNarrow = 6
	wideFrom   = 90
	narrowFrom = 50
)

// cellAspect is a cell's height over its width, as nearly every terminal has it.
const cellAspect = 2

// layout is where things stand on the screen.
type layout struct {
	lead int             // cells of the sounding line
	area image.Rectangle // cells of the view
	grid image.Point     // samples of the view
	at   image.Point     // first sample of the trim in the view
	size image.Point     // samples of the trim
	mesh cells.Mesh
}

// lay fits a trim of an aspect (width over height) into a screen.
func lay(room image.Point, mesh cells.Mesh, aspect float64) layout {
	l := layout{mesh: mesh}
	switch {
	case room.X >= wideFrom:
		l.lead = leadWide
	case room.X >= narrowFrom:
		l.lead = leadNarrow
	}
	l.area = image.Rect(l.lead, 0, room.X, room.Y)
	per := mesh.Size()
	l.grid = image.Pt(l.area.Dx()*per.X, l.area.Dy()*per.Y)
	// A sample's width over its height on the screen.
	shape := float64(per.Y) / float64(per.X) / cellAspect
	w, h := float64(l.grid.X), float64(l.grid.Y)
	if w*shape > h*aspect {
		w = h * aspect / shape
	} else {
		h = w * shape / aspect
	}
	l.size = image.Pt(max(1, min(l.grid.X, int(math.Round(w)))), max(1, min(l.grid.Y, int(math.Round(h)))))
	l.at = image.Pt((l.grid.X-l.size.X)/2, (l.grid.Y-l.size.Y)/2)
	return l
}

// share is where a cell of the screen lies on the trim, from 0,0 at its top
// left to 1,1; in says whether it lies on the trim at all.
func (l layout) share(x, y int) (u, v float64, in bool) {
	per := l.mesh.Size()
	u = (float64((x-l.area.Min.X)*per.X-l.at.X) + float64(per.X)/2) / float64(l.size.X)
	v = (float64((y-l.area.Min.Y)*per.Y-l.at.Y) + float64(per.Y)/2) / float64(l.size.Y)
	return u, v, u >= 0 && u <= 1 && v >= 0 && v <= 1
}

// cell is the inverse of share.
func (l layout) cell(u, v float64) (x, y int) {
	per := l.mesh.Size()
	x = l.area.Min.X + int(math.Floor((u*float64(l.size.X)+float64(l.at.X))/float64(per.X)))
	y = l.area.Min.Y + int(math.Floor((v*float64(l.size.Y)+float64(l.at.Y))/float64(per.Y)))
	return min(max(x, l.area.Min.X), l.area.Max.X-1), min(max(y, l.area.Min.Y), l.area.Max.Y-1)
}
