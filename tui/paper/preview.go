package paper

import (
	"image"
	"math"

	"leadline/tui/cells"
	"leadline/tui/engine"
)

// sheetPicture is the sheet's samples: the preview on the trim, its border
// carried on faintly over the bleed, and around it nothing.
func (s *Screen) sheetPicture(p plate) cells.Picture {
	out := cells.Picture{W: p.grid.Dx(), H: p.grid.Dy(), Pix: make([]cells.RGB, p.grid.Dx()*p.grid.Dy())}
	fill(out, p.grid, s.desk.Style.MatTone)
	pic := s.desk.Picture
	if pic == nil || pic.Err != nil || len(pic.Fields) == 0 {
		return out
	}
	k, err := engine.NewInker(s.desk.Frame, pic)
	if err != nil {
		return out // the frame's rules keep this from happening
	}
	k.Mat = s.desk.Style.MatTone
	shrink(out, p.trim, k.Colours(pic), pic.Size)
	carryOn(out, p.trim, p.full)
	return out
}

// carryOn goes on with the border of a picture beyond it, half faded.
func carryOn(p cells.Picture, trim, full image.Rectangle) {
	trim, full = trim.Intersect(image.Rect(0, 0, p.W, p.H)), full.Intersect(image.Rect(0, 0, p.W, p.H))
	if trim.Empty() {
		return
	}
	for y := full.Min.Y; y < full.Max.Y; y++ {
		for x := full.Min.X; x < full.Max.X; x++ {
			if at := image.Pt(x, y); !at.In(trim) {
				from := p.Pix[min(max(y, trim.Min.Y), trim.Max.Y-1)*p.W+min(max(x, trim.Min.X), trim.Max.X-1)]
				mat := p.Pix[y*p.W+x]
				p.Pix[y*p.W+x] = mean([]cells.RGB{from, mat}, 2, image.Rect(0, 0, 2, 1))
			}
		}
	}
}

func fill(p cells.Picture, r image.Rectangle, c cells.RGB) {
	r = r.Intersect(image.Rect(0, 0, p.W, p.H))
	for y := r.Min.Y; y < r.Max.Y; y++ {
		for x := r.Min.X; x < r.Max.X; x++ {
			p.Pix[y*p.W+x] = c
		}
	}
}

// shrink draws a picture into r; a sample there is the mean of those it covers.
func shrink(out cells.Picture, r image.Rectangle, from []cells.RGB, size image.Point) {
	in := r.Intersect(image.Rect(0, 0, out.W, out.H))
	for y := in.Min.Y; y < in.Max.Y; y++ {
		y0, y1 := span(y-r.Min.Y, r.Dy(), size.Y)
		for x := in.Min.X; x < in.Max.X; x++ {
			x0, x1 := span(x-r.Min.X, r.Dx(), size.X)
			out.Pix[y*out.W+x] = mean(from, size.X, image.Rect(x0, y0, x1, y1))
		}
	}
}

// span is the samples from..to, at least one, of size that lie below i of n.
func span(i, n, size int) (from, to int) {
	from = i * size / n
	return from, max(from+1, (i+1)*size/n)
}

// mean is the mean colour of a rectangle, near enough to linear light: of the
// squares of the codes.
func mean(pix []cells.RGB, width int, r image.Rectangle) cells.RGB {
	var sum [3]float64
	for y := r.Min.Y; y < r.Max.Y; y++ {
		for _, c := range pix[y*width+r.Min.X : y*width+r.Max.X] {
			for i, v := range [3]uint8{c.R, c.G, c.B} {
				sum[i] += float64(v) * float64(v)
			}
		}
	}
	n := float64(r.Dx() * r.Dy())
	to8 := func(v float64) uint8 { return uint8(math.Round(math.Sqrt(v / n))) }
	return cells.RGB{R: to8(sum[0]), G: to8(sum[1]), B: to8(sum[2])}
}
