package inking

import (
	"image"
	"slices"
)

// layout is where the parts of the screen stand, in cells; an empty rectangle
// is a part that there is no room for.
type layout struct {
	picture image.Rectangle
	list    image.Rectangle
	mixer   image.Rectangle
	usage   image.Rectangle // how much of the picture is where on the ramp
	band    image.Rectangle
	grey    image.Rectangle // the band's lightness
	marks   image.Rectangle
}

const mixerHeight = 5

// lay divides a screen: the ramp along its foot, above it the picture on the
// left, a list of n lines and the mixer on the right.
func lay(w, h, n int) layout {
	var l layout
	foot := h
	strip := func(rows int) image.Rectangle {
		r := image.Rect(0, foot-rows, w, foot)
		foot -= rows
		return r
	}
	l.marks = strip(1)
	if h >= 16 {
		l.grey = strip(1)
	}
	switch {
	case h >= 45:
		l.band = strip(4)
	case h >= 30:
		l.band = strip(3)
	case h >= 9:
		l.band = strip(2)
	default:
		l.band = strip(1)
	}
	switch {
	case h >= 40:
		l.usage = strip(2)
	case h >= 18:
		l.usage = strip(1)
	}
	panel := panelWidth(w)
	l.picture = image.Rect(0, 0, w-panel, foot)
	l.list = image.Rect(w-panel, 0, w, foot)
	if foot >= mixerHeight+7 {
		top := min(foot-mixerHeight, n+len(breaks)+1)
		l.list.Max.Y = top
		l.mixer = image.Rect(w-panel, top, w, top+mixerHeight)
	}
	return l
}

// panelWidth is the cells of list and mixer. A narrow screen has more use for
// them than for the picture.
func panelWidth(w int) int {
	switch {
	case w < 60:
		return max(min(w, 27), w/2)
	case w < 100:
		return 38
	case w < 140:
		return 44
	}
	return 54
}

// hidden says that the mixer has no room of its own: while it is used it stands
// in the list's place.
func (l layout) hidden() bool { return l.mixer.Empty() }

// column is the cell of the band in which a place of the ramp lies.
func (l layout) column(at float64) int {
	return min(max(int(at*float64(l.band.Dx()-1)+0.5), 0), l.band.Dx()-1)
}

// placeAt is the inverse of column.
func (l layout) placeAt(x int) float64 {
	if l.band.Dx() < 2 {
		return 0
	}
	return min(max(float64(x)/float64(l.band.Dx()-1), 0), 1)
}

// breaks are the lines of the list that a blank one stands before where there
// is room.
var breaks = []kind{scale, inside}

// lines is what stands in h lines of the list: numbers of rows, -1 for a blank.
func (s *Screen) lines(h int) []int {
	rows := s.rows()
	var out []int
	if h < len(rows)+len(breaks) {
		from, to := window(len(rows), h, indexOf(rows, s.at))
		for i := from; i < to; i++ {
			out = append(out, i)
		}
		return out
	}
	for i, r := range rows {
		if slices.Contains(breaks, r.kind) {
			out = append(out, -1)
		}
		out = append(out, i)
	}
	return out
}

// window is which of n lines are shown in rows of them so that line at is seen,
// in the middle where it can be.
func window(n, rows, at int) (from, to int) {
	from = min(max(at-rows/2, 0), max(0, n-rows))
	return from, min(n, from+rows)
}
