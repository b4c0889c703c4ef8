package inking

import (
	"slices"

	"leadline/palette"
	"leadline/render/frame"
	"leadline/render/ink"
	"leadline/tui/cells"
	"leadline/tui/engine"
)

// look is what is drawn of a frame's ink.
type look struct {
	frame    *frame.Frame
	resolved *frame.Resolved
	ramp     palette.Ramp // as it can be drawn
	curve    *palette.Curve
	outside  []bool  // which of the baked entries the sheet's space does not hold
	most     float64 // how far outside they are at most, ΔE00
}

// cache keeps what View and the key map ask for again and again. Frames and
// pictures are never changed, so a pointer stands for what it points to.
type cache struct {
	looks    [2]*look // the frame on the desk; the locker's proposal
	rows     []row
	rowsOf   *frame.Frame
	rowsFree bool

	inker      *engine.Inker // nil where the ink cannot be drawn
	inkFrame   *frame.Frame
	inkPicture *engine.Picture

	usage        []float64
	usageFrame   *frame.Frame
	usagePicture *engine.Picture
	usageWidth   int

	pix        []cells.RGB
	pixFrame   *frame.Frame
	pixPicture *engine.Picture

	name     string
	nameOf   palette.Colour
	hasNames bool
}

// now is the look of the frame on the desk.
func (s *Screen) now() *look { return s.lookAt(0, s.desk.Frame) }

// shown is the look of what is drawn: with the locker open, the ramp under its
// cursor.
func (s *Screen) shown() *look {
	if s.locker != nil && s.locker.proposal != nil {
		return s.lookAt(1, s.locker.proposal)
	}
	return s.now()
}

func (s *Screen) lookAt(slot int, f *frame.Frame) *look {
	if l := s.cache.looks[slot]; l != nil && l.frame == f {
		return l
	}
	r, err := f.Resolve()
	if err != nil {
		panic("inking: a frame on the desk breaks its rules: " + err.Error()) // Desk.Put holds them
	}
	l := &look{frame: f, resolved: r, ramp: r.Ramp, outside: make([]bool, frame.RampSize)}
	l.curve = l.ramp.Curve()
	for i := range l.outside {
		c := l.curve.At(float64(i) / (frame.RampSize - 1))
		_, in := c.In(r.Space)
		if l.outside[i] = !in; !in && i%8 == 0 {
			l.most = max(l.most, beyond(c, r.Space))
		}
	}
	s.cache.looks[slot] = l
	return l
}

// drawable is the frame with a ramp that can be drawn.
func (l *look) drawable() *frame.Frame {
	if len(l.ramp.Stops) == len(l.resolved.Ramp.Stops) {
		return l.frame
	}
	f := l.frame.Clone()
	f.Ink.Ramp, f.Ink.Baked = new(frame.FromPalette(l.ramp)), nil
	return f
}

// out is how many of the baked entries lie outside the sheet's space.
func (l *look) out() (n int) {
	for _, o := range l.outside {
		if o {
			n++
		}
	}
	return n
}

// usage is how much of the picture falls on each of width parts of the ramp, as
// shares of the fullest part; nil where there is no picture.
func (s *Screen) usage(l *look, width int) []float64 {
	c := &s.cache
	if c.usageFrame == l.frame && c.usagePicture == s.desk.Picture && c.usageWidth == width {
		return c.usage
	}
	c.usageFrame, c.usagePicture, c.usageWidth, c.usage = l.frame, s.desk.Picture, width, nil
	all := counts(s.desk.Picture)
	if len(all) == 0 || width < 1 {
		return nil
	}
	shader := s.placer(l)
	bins := make([]float64, width)
	for _, v := range all {
		bins[min(int(shader.Place(v)*float64(width)), width-1)]++
	}
	bins = softened(bins)
	if top := slices.Max(bins); top > 0 {
		for i := range bins {
			bins[i] /= top
		}
	}
	c.usage = bins
	return bins
}

// softened takes the noise of a few thousand samples off a count by parts.
func softened(bins []float64) []float64 {
	out := make([]float64, len(bins))
	for i := range bins {
		before, after := bins[max(i-1, 0)], bins[min(i+1, len(bins)-1)]
		out[i] = (before + 2*bins[i] + after) / 4
	}
	return out
}

// inker colours the desk's picture in the ink of a look.
func (s *Screen) inker(l *look) *engine.Inker {
	if c := &s.cache; c.inkFrame != l.frame || c.inkPicture != s.desk.Picture {
		c.inkFrame, c.inkPicture, c.inker = l.frame, s.desk.Picture, nil
		if k, err := engine.NewInker(l.drawable(), s.desk.Picture); err == nil {
			k.Mat = s.desk.Style.MatTone
			c.inker = k
		}
	}
	return s.cache.inker
}

// fitted is where the ramp of a look without a period lies over the desk's
// picture.
func (s *Screen) fitted(l *look) frame.Fitted {
	if k := s.inker(l); k != nil && k.Fitted() != nil {
		return *k.Fitted()
	}
	return frame.Fitted{High: 1}
}

// placer tells where on the ramp a count falls. It needs no colours but the two
// that decide whether the ramp goes round or to and fro.
func (s *Screen) placer(l *look) *ink.Shader {
	d := l.resolved.Drive
	if d.Period == 0 {
		d.Fitted = new(s.fitted(l))
	}
	b := &frame.Baked{Space: l.resolved.Space.String()}
	if !l.ramp.Cyclic() {
		b.Ramp[0][0] = 1
	}
	return ink.New(b, d, frame.ResolvedEdge{}, l.resolved.Space)
}
