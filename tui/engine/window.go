package engine

import (
	"context"
	"encoding/binary"
	"image"
	"sync"
	"sync/atomic"

	"leadline/palette"
	"leadline/render"
	"leadline/render/frame"
	"leadline/tui/cells"
)

// Patch is a part of the sheet, pixel for pixel.
type Patch struct {
	Rect    image.Rectangle // of the unscaled lattice
	Colours []cells.RGB     // row by row, in sRGB
	Counts  render.Counts
	Fitted  *frame.Fitted // nil where the drive has a period
}

// Window renders pixels of the sheet as the print will have them, sampling and
// all, and brings them into sRGB. The reference may be the preview's, the ink's
// fit is the print's own survey unless f has one. A nil engine makes its own. It takes its time: rect is cut
// to the sheet, and work ends with the context.
func (e *Engine) Window(ctx context.Context, f *frame.Frame, rect image.Rectangle) (*Patch, error) {
	var old *render.Plan
	if e != nil {
		old = e.current()
	}
	plan, err := render.NewPlanNear(ctx, f, old, render.Options{})
	if err != nil {
		return nil, err
	}
	rect = rect.Intersect(plan.Geometry.Full())
	p := &Patch{Rect: rect, Colours: make([]cells.RGB, rect.Dx()*rect.Dy()), Fitted: plan.Frame().Ink.Drive.Fitted}
	ctx, cancel := context.WithCancelCause(ctx)
	defer cancel(nil)
	var next atomic.Int64
	var mu sync.Mutex
	var wg sync.WaitGroup
	for range workers() {
		wg.Go(func() {
			for {
				y := rect.Min.Y + int(next.Add(1)) - 1
				if y >= rect.Max.Y {
					return
				}
				n, err := p.row(ctx, plan, y)
				if err != nil {
					cancel(err)
					return
				}
				mu.Lock()
				p.Counts.Add(n)
				mu.Unlock()
			}
		})
	}
	wg.Wait()
	return p, context.Cause(ctx)
}

// row renders one row of the patch.
func (p *Patch) row(ctx context.Context, plan *render.Plan, y int) (render.Counts, error) {
	c := render.NewCanvas(image.Rect(p.Rect.Min.X, y, p.Rect.Max.X, y+1))
	n, err := plan.Tile(ctx, c, c.Rect, 1)
	if err != nil {
		return n, err
	}
	out := p.Colours[(y-p.Rect.Min.Y)*p.Rect.Dx():]
	for i := range p.Rect.Dx() {
		var code [3]uint16
		for j := range code {
			code[j] = binary.BigEndian.Uint16(c.Pix[i*render.BytesPerPixel+2*j:])
		}
		if plan.Space != palette.SRGB {
			code, _ = palette.FromCodes(plan.Space, code).BakeOne(palette.SRGB)
		}
		e := encoder()
		out[i] = cells.RGB{R: e.of[code[0]], G: e.of[code[1]], B: e.of[code[2]]}
	}
	return n, nil
}
