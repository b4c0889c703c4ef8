package render

import (
	"context"
	"image"
	"sync"
	"sync/atomic"

	"leadline/render/sheet"
)

// Sizes of the work: tiles of tileSide pixels square, in bands as high as a
// tile; lower and wider where a band would pass bandBytes.
const (
	tileSide  = 64
	bandBytes = 24 << 20
)

// band is a stripe of the picture under way.
type band struct {
	canvas *Canvas
	left   atomic.Int64 // tiles not yet done
	done   chan struct{}
}

// job is one tile of a band.
type job struct {
	band *band
	rect image.Rectangle
}

// Bands renders r, part of the lattice at scale 1/k, over all workers and
// hands its rows to sink from the top down, a band at a time. Memory holds a
// few bands, whatever the height. sink must not keep the rows.
func (p *Plan) Bands(ctx context.Context, r image.Rectangle, k int, o Options, sink func(rows []byte) error) (Counts, error) {
	ctx, cancel := context.WithCancelCause(ctx)
	defer cancel(nil)
	w := &bandWork{p: p, k: k, o: o, total: int64(r.Dx()) * int64(r.Dy()), fail: cancel}
	o.tell(PhasePixels, 0, w.total)
	cut := sheet.Tiles(r, tileSide, bandBytes/BytesPerPixel)
	tiles := cut.Columns()
	flight := max(3, 2+(2*o.workers()+tiles-1)/tiles)

	jobs, order := make(chan job), make(chan *band, flight)
	free := make(chan *Canvas, flight)
	for range flight {
		free <- new(Canvas)
	}
	var wg sync.WaitGroup
	for range o.workers() {
		wg.Go(func() { w.work(ctx, jobs) })
	}
	wg.Go(func() { feed(ctx, cut, free, order, jobs) })
	err := drain(ctx, order, free, sink)
	if err != nil {
		cancel(err)
	}
	wg.Wait()
	if err == nil {
		err = context.Cause(ctx)
	}
	return w.counts, err
}

// feed hands out bands and their tiles, as canvases come free.
func feed(ctx context.Context, cut sheet.Tiling, free <-chan *Canvas, order chan<- *band, jobs chan<- job) {
	defer close(jobs)
	defer close(order)
	columns := cut.Columns()
	for line := range cut.Lines() {
		var c *Canvas
		select {
		case c = <-free:
		case <-ctx.Done():
			return
		}
		c.reset(cut.Line(line))
		b := &band{canvas: c, done: make(chan struct{})}
		b.left.Store(int64(columns))
		order <- b // never blocks: no more bands than canvases
		for i := range columns {
			select {
			case jobs <- job{b, cut.At(line*columns + i)}:
			case <-ctx.Done():
				return
			}
		}
	}
}

// drain passes finished bands on in their order.
func drain(ctx context.Context, order <-chan *band, free chan<- *Canvas, sink func([]byte) error) error {
	for b := range order {
		select {
		case <-b.done:
		case <-ctx.Done():
			return context.Cause(ctx)
		}
		if err := sink(b.canvas.Pix); err != nil {
			return err
		}
		free <- b.canvas
	}
	return nil
}

// bandWork is what the workers share.
type bandWork struct {
	p     *Plan
	k     int
	o     Options
	total int64
	fail  context.CancelCauseFunc

	mu     sync.Mutex
	counts Counts
}

// work computes tiles until there are no more.
func (w *bandWork) work(ctx context.Context, jobs <-chan job) {
	for j := range jobs {
		n, err := w.p.Tile(ctx, j.band.canvas, j.rect, w.k)
		w.mu.Lock()
		w.counts.Add(n)
		done := w.counts.Pixels
		w.mu.Unlock()
		if err != nil {
			w.fail(err)
			return
		}
		w.o.tell(PhasePixels, done, w.total)
		if j.band.left.Add(-1) == 0 {
			close(j.band.done)
		}
	}
}
