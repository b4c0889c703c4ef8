package engine

import (
	"sync"

	"leadline/palette"
	"leadline/render/frame"
	"leadline/render/ink"
	"leadline/render/kernel"
	"leadline/tui/cells"
)

// Inker colours pictures with a frame's ink. It may be used by one goroutine at
// a time.
type Inker struct {
	Mat cells.RGB // where nothing is known; the zero value is black

	shader  *ink.Shader
	fitted  *frame.Fitted
	outside int
}

// NewInker makes the ink of f ready for pictures like p. Where the drive has no
// period and was not fitted by a print, it is fitted to p by the function that
// fits a print, to the counts of p's grid in place of the print's own survey:
// the percentiles then differ by what one choice of points over the trim
// differs from another. With a period, or fitted, colours are the print's.
func NewInker(f *frame.Frame, p *Picture) (*Inker, error) {
	r, err := f.Resolve()
	if err != nil {
		return nil, err
	}
	b, err := bake(r)
	if err != nil {
		return nil, err
	}
	k := &Inker{outside: b.outside, fitted: r.Drive.Fitted}
	if r.Drive.Period == 0 && k.fitted == nil {
		fitted := ink.Fit(r.Drive, f.Ink.Drive.Base, p.sounding())
		k.fitted, r.Drive.Fitted = &fitted, &fitted
	}
	k.shader = ink.New(b.screen, r.Drive, r.Edge, palette.SRGB)
	return k, nil
}

// soundings is about how many counts a fit takes, as many as a print's survey.
const soundings = 6144

// sounding gives the smooth counts of samples spread evenly over the picture,
// guesses among them where there is no better, so that the fit is steady while
// the picture gets finer. A nil picture has none.
func (p *Picture) sounding() []float64 {
	if p == nil {
		return nil
	}
	n := len(p.Fields)
	take := min(n, soundings)
	counts := make([]float64, 0, take)
	for i := range take {
		k := i * n / take
		if p.From[k] != Nowhere && p.Fields[k].State == kernel.Escaped {
			counts = append(counts, p.Fields[k].Smooth)
		}
	}
	return counts
}

// Fitted is where the ramp lies, as found or as frozen; nil where the drive has
// a period.
func (k *Inker) Fitted() *frame.Fitted { return k.fitted }

// OutOfSpace is how many entries of the baked ramp lay outside the sheet's
// space and were brought in; 0 for a frozen ink.
func (k *Inker) OutOfSpace() int { return k.outside }

// Colours shades every sample as the print would at the picture's scale, so
// that a line along the edge has its width on paper, in sRGB.
func (k *Inker) Colours(p *Picture) []cells.RGB {
	out := make([]cells.RGB, len(p.Fields))
	_, unit := p.steps()
	e := encoder()
	for i := range out {
		if p.From[i] == Nowhere {
			out[i] = k.Mat
			continue
		}
		c := k.shader.Shade(p.Fields[i], unit)
		out[i] = cells.RGB{R: e.byte(c[0]), G: e.byte(c[1]), B: e.byte(c[2])}
	}
	return out
}

// bytes8 turns light into sRGB bytes.
type bytes8 struct {
	transfer *palette.Transfer
	of       [1 << 16]uint8 // the byte nearest to a 16-bit code
}

// encoder is made at first use.
var encoder = sync.OnceValue(func() *bytes8 {
	e := &bytes8{transfer: palette.SRGB.Transfer()}
	for c := range e.of {
		e.of[c] = uint8((c*255 + 32767) / 65535)
	}
	return e
})

func (e *bytes8) byte(light float64) uint8 { return e.of[e.transfer.Encode(light)] }
