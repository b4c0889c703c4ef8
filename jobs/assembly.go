package jobs

import (
	"context"
	"errors"

	"github.com/riverqueue/river/rivertype"

	"leadline/render"
	"leadline/render/frame"
)

// doAssembly makes PNG and sidecar from the tiles, then drops them.
func (w *worker) doAssembly(ctx context.Context, job *rivertype.JobRow, k ticket, o *order) error {
	p, err := w.plan(ctx, o.id)
	if err != nil {
		return err
	}
	how, err := w.q.queued(ctx, o.id)
	if err != nil {
		return err
	}
	opt := render.PrintOptions{Out: o.out, Scale: o.scale, Audit: o.audit, Queue: how, Options: render.Options{Workers: w.o.Slots}}
	if o.crop {
		opt.Crop = &o.rect
	}
	r, err := render.Assemble(ctx, p, opt, func(ctx context.Context, sink func([]byte) error) (render.Counts, error) {
		return w.q.rows(ctx, o, sink)
	})
	if err != nil {
		return err
	}
	if err := persist(ctx, func() error { return w.deliver(ctx, job, k, r) }); err != nil {
		return err
	}
	w.say("print %d is done: %s", o.id, r.File)
	w.plans.drop(o.id)
	if w.q.spool != nil {
		if err := w.q.spool.dropPrint(o.id); err != nil {
			w.q.log.Warn("clearing the spool", "print", o.id, "error", err) // tidy tries again
		}
	}
	return nil
}

// queued is how the queue came to a print's tiles.
func (q *Queue) queued(ctx context.Context, id int64) (*frame.Queued, error) {
	var n frame.Queued
	var ms int64
	err := one(ctx, q.e.read(), `SELECT p.tiles, p.attempts, p.rescued, count(DISTINCT t.worker),
		cast(coalesce(sum(t.finished - t.started), 0) as bigint)
		FROM leadline_print p LEFT JOIN leadline_tile t ON t.print = p.id AND t.state = 'done' AND t.idx >= 0
		WHERE p.id = ? GROUP BY p.tiles, p.attempts, p.rescued`, []any{id}, &n.Tiles, &n.Attempts, &n.Rescued, &n.Workers, &ms)
	n.Seconds = float64(max(0, ms)) / 1000 // a clock set back may have made it negative
	return &n, err
}

// deliver marks a print done.
func (w *worker) deliver(ctx context.Context, job *rivertype.JobRow, k ticket, r *render.Result) error {
	return w.q.change(ctx, k.Print, func(t tx, o *order) error {
		n, err := t.exec(ctx, `UPDATE leadline_tile SET state = 'done', finished = {now}
			WHERE print = ? AND idx = ? AND try = ? AND worker = ? AND state = 'running'`, k.Print, k.Index, k.Try, w.id)
		if err != nil {
			return err
		}
		if n == 0 {
			return isDone(ctx, t, k, w.id)
		}
		if o.state != Assembling || o.paused {
			return errGone // cancelled or paused while the last lines were written
		}
		if _, err := t.exec(ctx, `UPDATE leadline_print SET state = ?, ended = {now}, file = ?, sidecar = ?, sha256 = ?, bytes = ?
			WHERE id = ?`, string(Done), r.File, r.Sidecar, r.SHA256, r.Bytes, o.id); err != nil {
			return err
		}
		if _, err := t.exec(ctx, `DELETE FROM leadline_payload WHERE print = ?`, o.id); err != nil {
			return err
		}
		return t.complete(ctx, job)
	})
}

// rows hands the print's rows on, a row of tiles at a time. Where a tile is
// damaged the others are still looked at, so that all that are can be rendered
// again together.
func (q *Queue) rows(ctx context.Context, o *order, sink func([]byte) error) (n render.Counts, err error) {
	cut := o.cut()
	columns := cut.Columns()
	bad := &damage{err: errDamaged}
	var band *render.Canvas
	for line := range cut.Lines() {
		list, err := q.finished(ctx, o.id, line*columns, (line+1)*columns-1)
		if err != nil {
			return n, err
		}
		if len(list) != columns {
			return n, errGone // tiles were taken back meanwhile
		}
		r := cut.Line(line)
		if band == nil || band.Rect.Dy() != r.Dy() {
			band = render.NewCanvas(r)
		}
		band.Rect = r
		for _, k := range list {
			c, err := q.paste(ctx, o, band, k)
			switch {
			case errors.Is(err, errDamaged), errors.Is(err, render.ErrPart):
				bad.tickets = append(bad.tickets, k.ticket)
			case err != nil:
				return n, err
			}
			n.Add(c)
		}
		if len(bad.tickets) > 0 {
			continue
		}
		if err := sink(band.Pix); err != nil {
			return n, err
		}
	}
	if len(bad.tickets) > 0 {
		return n, bad
	}
	return n, nil
}

// paste puts one kept tile into its place in the band.
func (q *Queue) paste(ctx context.Context, o *order, band *render.Canvas, k kept) (n render.Counts, err error) {
	if err := ctx.Err(); err != nil {
		return n, err
	}
	b, err := q.payload(ctx, k)
	if err != nil {
		return n, err
	}
	p, err := render.DecodePart(b)
	if err != nil {
		return n, err
	}
	if p.Rect != o.cut().At(k.Index) {
		return n, errDamaged // another tile's bytes
	}
	stride := p.Rect.Dx() * render.BytesPerPixel
	for y := p.Rect.Min.Y; y < p.Rect.Max.Y; y++ {
		copy(band.At(p.Rect.Min.X, y, p.Rect.Dx()), p.Pix[(y-p.Rect.Min.Y)*stride:])
	}
	return p.Counts, nil
}
