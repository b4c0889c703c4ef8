package render

import (
	"fmt"
	"math"
	"math/big"
	"strconv"

	"leadline/precision"
	"leadline/render/frame"
)

// Point is the point of the plane at x, y of a frame's unscaled lattice, to
// 2^-24 of a lattice pixel.
func Point(f *frame.Frame, x, y float64) (frame.Point, error) {
	p, err := bare(f)
	if err != nil {
		return frame.Point{}, err
	}
	return p.point(x, y, p.pixel.Ldexp(-pointGuard)), nil
}

// pointGuard is how many bits a point is finer than the pixel, and a height
// than itself. A centre is finer still: views that lie whole samples apart must
// share their samples to far below a pixel.
const (
	pointGuard  = 24
	centreGuard = 44
)

// Place is the inverse of Point: where a point of the plane lies on a frame's
// unscaled lattice, as near as doubles tell. Points far outside the view have
// coordinates far outside the sheet, infinite ones in the end.
func Place(f *frame.Frame, at frame.Point) (x, y float64, err error) {
	p, err := bare(f)
	if err != nil {
		return 0, 0, err
	}
	bits := precision.BitsFor(p.pixel)
	re := new(big.Float).SetPrec(bits+64).Sub(at.Re.Float(bits+64), p.r.Centre.Re.Float(bits+64))
	im := new(big.Float).SetPrec(bits+64).Sub(at.Im.Float(bits+64), p.r.Centre.Im.Float(bits+64))
	u, w := precision.ExtOfBig(re).Quo(p.pixel).Float64(), precision.ExtOfBig(im).Quo(p.pixel).Float64()
	v := p.view()
	return v.MidX + (float64(u*v.Cos) - float64(w*v.Sin)), v.MidY - (float64(u*v.Sin) + float64(w*v.Cos)), nil
}

// Move says how a view changes. X, Y is the point of the unscaled lattice that
// becomes the middle; the height is divided by Zoom, and the picture turned by
// Turn degrees counter-clockwise on the paper.
type Move struct{ X, Y, Zoom, Turn float64 }

// About is the move that magnifies by zoom and turns by degrees about the point
// x, y of a frame's lattice, which stays where it is.
func About(f *frame.Frame, x, y, zoom, degrees float64) (Move, error) {
	g, err := f.Sheet.Geometry()
	if err != nil {
		return Move{}, err
	}
	midX, midY := float64(float64(g.TrimW)/2), float64(float64(g.TrimH)/2)
	// The old middle is seen from x, y at the distance d, in the new picture at
	// d·zoom turned; what is as far from the old middle the other way becomes
	// the new one.
	c, s := turn(degrees)
	dx, dy := (midX-x)/zoom, (midY-y)/zoom
	return Move{x + (float64(c*dx) - float64(s*dy)), y + (float64(s*dx) + float64(c*dy)), zoom, degrees}, nil
}

// Moved is a frame whose view is another part of the plane. Its numbers have as
// many digits as the new view needs: the centre is placed to 2^-44 of the
// view's height. What was frozen for the old view (the ramp's fit) is left out.
func Moved(f *frame.Frame, m Move) (*frame.Frame, error) {
	p, err := bare(f)
	if err != nil {
		return nil, err
	}
	if !(m.Zoom > 0) || math.IsInf(m.Zoom, 0) || math.IsNaN(m.X+m.Y+m.Turn) {
		return nil, fmt.Errorf("no such view: %+v", m)
	}
	g := f.Clone()
	height := p.r.Height.Ext().Quo(precision.ExtOf(m.Zoom))
	g.View.Height = precision.DecimalNear(height.Big(64), height.Ldexp(-pointGuard))
	g.View.Centre = p.point(m.X, m.Y, height.Ldexp(-centreGuard))
	if m.Turn != 0 {
		deg := math.Remainder(p.r.Turn.Degrees()+m.Turn, 360)
		if g.View.Turn, err = frame.ParseTurn(strconv.FormatFloat(math.Round(deg*100)/100+0, 'f', -1, 64) + "deg"); err != nil {
			return nil, err
		}
	}
	g.Ink.Drive.Fitted = nil
	return g, g.Validate()
}

// bare is a plan that places points and nothing else.
func bare(f *frame.Frame) (*Plan, error) {
	r, err := f.Resolve()
	if err != nil {
		return nil, err
	}
	p := &Plan{frame: f, r: r, Geometry: r.Sheet}
	p.pixel = r.Height.Ext().Quo(precision.ExtOf(float64(p.Geometry.TrimH)))
	return p, nil
}

// point is the point at x, y to within tol, with as few digits as that takes.
func (p *Plan) point(x, y float64, tol precision.Ext) frame.Point {
	e := p.exactPoint(x, y, precision.BitsFor(tol)+exactGuard)
	return frame.Point{Re: precision.DecimalNear(e.Re, tol), Im: precision.DecimalNear(e.Im, tol)}
}
