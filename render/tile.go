package render

import (
	"context"
	"encoding/binary"
	"image"
	"sync/atomic"
	"time"

	"leadline/palette"
	"leadline/render/ink"
)

// BytesPerPixel is the size of a pixel in rows: R, G, B, 16 bits each, big
// end first.
const BytesPerPixel = 6

// Canvas is where a tile is written: rows of a rectangle of the lattice.
type Canvas struct {
	Rect   image.Rectangle
	Stride int // bytes a row
	Pix    []byte
}

// NewCanvas returns an empty canvas over r.
func NewCanvas(r image.Rectangle) *Canvas {
	return &Canvas{r, r.Dx() * BytesPerPixel, make([]byte, r.Dx()*r.Dy()*BytesPerPixel)}
}

// reset gives a canvas another rectangle and keeps its memory.
func (c *Canvas) reset(r image.Rectangle) {
	c.Rect, c.Stride = r, r.Dx()*BytesPerPixel
	if n := r.Dy() * c.Stride; cap(c.Pix) < n {
		c.Pix = make([]byte, n)
	} else {
		c.Pix = c.Pix[:n]
	}
}

// At returns the bytes of n pixels from x, y on.
func (c *Canvas) At(x, y, n int) []byte {
	i := (y-c.Rect.Min.Y)*c.Stride + (x-c.Rect.Min.X)*BytesPerPixel
	return c.Pix[i : i+n*BytesPerPixel]
}

// Tile computes the pixels of r, part of the lattice at scale 1/k, into dst.
// It is the only way to a print's pixels. It stops within one sample of the
// context's end, with the context's error.
func (p *Plan) Tile(ctx context.Context, dst *Canvas, r image.Rectangle, k int) (Counts, error) {
	var stopped atomic.Bool
	defer context.AfterFunc(ctx, func() { stopped.Store(true) })()
	var n Counts
	row := make([]ink.Light, r.Dx())
	encoder := p.Space.Transfer()
	for y := r.Min.Y; y < r.Max.Y; y++ {
		for i := range row {
			if stopped.Load() {
				return n, ctx.Err()
			}
			row[i] = p.colour(r.Min.X+i, y, k, &n)
		}
		start := time.Now()
		encode(dst.At(r.Min.X, y, r.Dx()), row, encoder)
		n.Encoding += time.Since(start)
	}
	return n, ctx.Err()
}

// encode writes a row of light as 16-bit codes.
func encode(dst []byte, row []ink.Light, t *palette.Transfer) {
	for i := range row {
		for j, v := range row[i] {
			binary.BigEndian.PutUint16(dst[i*BytesPerPixel+2*j:], t.Encode(v))
		}
	}
}
