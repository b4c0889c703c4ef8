package parts

import (
	"context"
	"image"
	"os"
	"path/filepath"
	"time"

	"leadline/render"
	"leadline/render/frame"
)

// Task is one part to be rendered.
type Task struct {
	render.Options
	Dir   string // the folder of parts; made where there is none
	Which Which
	Name  string           // the print's PNG, where the join is given no other
	Crop  *image.Rectangle // as in render.PrintOptions
	Scale int
	Audit int
	// Waiting is called once when another task is found computing what all
	// share; nil: silent.
	Waiting func()
}

// Done is what came of a task.
type Done struct {
	File     string       `json:"file"`
	Part     int          `json:"part"`
	Parts    int          `json:"parts"`
	Rendered bool         `json:"rendered"` // false: it was there already
	Pixels   frame.Pixels `json:"pixels"`
	Bytes    int64        `json:"bytes"`
	Seconds  float64      `json:"seconds"`
}

// Render renders a part of a frame's print into the folder, unless it is there
// already, whole. A folder of another print, or one begun with another number
// of parts or other options, is refused with a *render.MismatchError.
func Render(ctx context.Context, f *frame.Frame, t Task) (*Done, error) {
	start := time.Now()
	print, err := newPrint(f, render.PrintOptions{Crop: t.Crop, Scale: t.Scale, Audit: t.Audit}, t.Name, t.Which.N)
	if err != nil {
		return nil, err
	}
	if err := begin(t.Dir, print); err != nil {
		return nil, err
	}
	id, rect := print.identity(), Stripe(print.rect(), t.Which.I, t.Which.N)
	d := &Done{File: filepath.Join(t.Dir, t.Which.name()), Part: t.Which.I, Parts: t.Which.N,
		Pixels: frame.Pixels{X: rect.Min.X, Y: rect.Min.Y, Width: rect.Dx(), Height: rect.Dy(), Scale: print.Pixels.Scale}}
	if err := d.make(ctx, f, t, id, rect); err != nil {
		return nil, err
	}
	d.Seconds = time.Since(start).Seconds()
	return d, nil
}

// make makes what is not there, or not whole, of the part and of what it
// shares with the others.
func (d *Done) make(ctx context.Context, f *frame.Frame, t Task, id identity, rect image.Rectangle) error {
	err := checkStripe(d.File, t.Which.head(id))
	if absent(err) {
		return d.render(ctx, f, t, id, rect)
	}
	if err != nil {
		return err
	}
	st, err := os.Stat(d.File)
	if err != nil {
		return err
	}
	d.Bytes = st.Size()
	if err = checkShared(t.Dir, id); absent(err) {
		_, err = sharedPlan(ctx, t, f, id)
	}
	return err
}

// render makes the part. Its file is begun first, so that a folder that cannot
// be written is found before anything is computed.
func (d *Done) render(ctx context.Context, f *frame.Frame, t Task, id identity, rect image.Rectangle) error {
	s, err := createStripe(d.File, t.Which.head(id), rect)
	if err != nil {
		return err
	}
	defer s.f.Abort() // does nothing once committed
	p, err := sharedPlan(ctx, t, f, id)
	if err != nil {
		return err
	}
	n, err := p.Bands(ctx, rect, d.Pixels.Scale, t.Options, s.band)
	if err != nil {
		return err
	}
	d.Bytes, err = s.commit(n)
	d.Rendered = err == nil
	return err
}

// head is the beginning of the part's file.
func (w Which) head(id identity) head { return head{id, uint32(w.I), uint32(w.N)} }
