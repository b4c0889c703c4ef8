package engine

import (
	"context"
	"runtime"
	"sync"
	"sync/atomic"
	"time"

	"leadline/render"
	"leadline/render/frame"
	"leadline/render/kernel"
)

// keptPictures is how many whole pictures are kept to carry over from.
const keptPictures = 12

// Engine makes previews. All its methods may be called from any goroutine; none
// but Window and Close waits for work.
type Engine struct {
	send   func(*Picture)
	ctx    context.Context
	stop   context.CancelFunc
	wake   chan struct{}
	wg     sync.WaitGroup
	sent   time.Time // of the last picture; the loop's own
	paths  paths     // the loop's own
	making *making   // the loop's own: an orbit not done yet

	perSample atomic.Int64 // nanoseconds, all cores at work

	mu      sync.Mutex
	next    *Request // asked for and not begun
	cancel  context.CancelFunc
	plan    *render.Plan // the latest made
	reading *render.Plan // plan, while it is of what was asked for last
	ahead   *render.Plan // one with bits for greater depth
	kept    []*Picture   // whole pictures, the latest last, and one that is not
}

// New starts an engine. send gets the pictures, one after another, from a
// goroutine of the engine's: one as soon as a request is taken up, with what is
// known already, one at the end of every pass, and some twenty a second between.
// A picture of an earlier request may come after Show.
func New(send func(*Picture)) *Engine {
	e := &Engine{send: send, wake: make(chan struct{}, 1)}
	e.ctx, e.stop = context.WithCancel(context.Background())
	e.wg.Go(e.loop)
	return e
}

// Show asks for the preview of a frame in place of the one in hand. It returns
// at once; the latest request wins.
func (e *Engine) Show(r Request) {
	e.mu.Lock()
	e.next, e.reading = &r, nil
	if e.cancel != nil {
		e.cancel()
	}
	e.mu.Unlock()
	select {
	case e.wake <- struct{}{}:
	default:
	}
}

// Close ends all work and waits for it; nothing is sent afterwards. It must not
// be called by what send waits for.
func (e *Engine) Close() {
	e.stop()
	e.wg.Wait()
}

// loop does one request after another.
func (e *Engine) loop() {
	for {
		select {
		case <-e.ctx.Done():
			return
		case <-e.wake:
		}
		for {
			e.mu.Lock()
			r := e.next
			if r == nil || e.ctx.Err() != nil {
				e.mu.Unlock()
				break
			}
			ctx, cancel := context.WithCancel(e.ctx)
			e.next, e.cancel = nil, cancel
			e.mu.Unlock()
			e.show(ctx, *r)
			cancel()
		}
	}
}

// show makes one preview, from the first guess to the work ahead of time.
func (e *Engine) show(ctx context.Context, r Request) {
	g, err := r.Frame.Sheet.Geometry()
	if err == nil {
		err = r.Frame.Validate()
	}
	if err != nil || r.Size.X < 1 || r.Size.Y < 1 {
		e.emit(&Picture{Request: r, Geometry: g, Err: cause(err)})
		return
	}
	w := e.begin(r, g)
	if err := w.paint(ctx); err != nil {
		if ctx.Err() == nil {
			p := w.grid.snapshot()
			p.Stage, p.Err = "", err
			e.emit(p)
			return
		}
		e.keep(w.grid.snapshot())
		return
	}
	p := w.grid.snapshot()
	p.Stage, p.Part, p.Whole, p.Pass = "", 1, true, 1
	e.keep(p)
	e.emit(p)
	e.lookAhead(ctx, w)
}

// cause is the error of a request that cannot be met.
func cause(err error) error {
	if err != nil {
		return err
	}
	return errNoSamples
}

// emit sends a picture.
func (e *Engine) emit(p *Picture) {
	if e.ctx.Err() != nil {
		return
	}
	e.sent = time.Now()
	e.send(p)
}

// keep remembers a picture to carry over from. Of those that are not whole only
// the latest is of use.
func (e *Engine) keep(p *Picture) {
	e.mu.Lock()
	defer e.mu.Unlock()
	n := len(e.kept)
	if n > 0 && !e.kept[n-1].Whole {
		n--
	}
	kept := append([]*Picture(nil), e.kept[max(0, n-keptPictures+1):n]...)
	e.kept = append(kept, p)
}

// pictures are those kept.
func (e *Engine) pictures() []*Picture {
	e.mu.Lock()
	defer e.mu.Unlock()
	return e.kept
}

// adopt makes a plan the one whose reference is tried first.
func (e *Engine) adopt(p *render.Plan) {
	e.mu.Lock()
	defer e.mu.Unlock()
	e.plan = p
}

// read has Field use a plan, unless something else has been asked for.
func (e *Engine) read(ctx context.Context, p *render.Plan) {
	e.mu.Lock()
	defer e.mu.Unlock()
	if ctx.Err() == nil && e.next == nil {
		e.reading = p
	}
}

// Field is the field at a point of the unscaled lattice of the frame that was
// asked for last. Not ok until the plan for it is made. It takes as long as one
// sample.
func (e *Engine) Field(x, y float64) (f kernel.Field, ok bool) {
	if e == nil {
		return f, false
	}
	e.mu.Lock()
	p := e.reading
	e.mu.Unlock()
	if p == nil {
		return f, false
	}
	return p.Field(x, y), true
}

// PerSample is how long a sample took lately where all cores work, so that as
// many samples take that many times as long by the clock; 0 before the first.
func (e *Engine) PerSample() time.Duration {
	if e == nil {
		return 0
	}
	return time.Duration(e.perSample.Load())
}

// workers is how many goroutines compute.
func workers() int { return runtime.GOMAXPROCS(0) }

// withLimit is a frame with another iteration limit.
func withLimit(f *frame.Frame, limit int) *frame.Frame {
	if f.Iteration.Limit == limit {
		return f
	}
	g := f.Clone()
	g.Iteration.Limit = limit
	return g
}
