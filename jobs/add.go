package jobs

import (
	"context"
	"fmt"
	"image"
	"os"
	"path/filepath"

	"leadline/render"
	"leadline/render/frame"
	"leadline/render/printfile"
)

// AddOptions say how a frame is to be printed. Out is required; the zero value
// of the others works.
type AddOptions struct {
	Out      string           // the PNG's path; made absolute against this process' folder
	Priority int              // 1 first … 4 last; 0: DefaultPriority
	Scale    int              // k of a scale 1/k; 0: 1
	Crop     *image.Rectangle // in the lattice at that scale; nil: everything
	Audit    int              // how many pixels to audit
	Tile     int              // side of a tile in pixels; 0: 512, less for small prints
	Replace  bool             // another print under that path may be written over
}

// DefaultPriority of a print.
const DefaultPriority = 2

// OptionError refuses a choice that is out of range.
type OptionError struct{ What, Cure string }

func (e *OptionError) Error() string { return e.What }

// Hint says what is allowed.
func (e *OptionError) Hint() string { return e.Cure }

// Add queues a frame and returns the print's number. Whether the frame can be
// printed is found out here; whether Out can be written only by who assembles.
func (q *Queue) Add(ctx context.Context, f *frame.Frame, o AddOptions) (int64, error) {
	if err := o.complete(); err != nil {
		return 0, err
	}
	rect, err := (render.PrintOptions{Crop: o.Crop, Scale: o.Scale}).Part(f)
	if err != nil {
		return 0, err
	}
	if o.Tile == 0 {
		o.Tile = usualSide(rect)
	}
	doc, err := text(f)
	if err != nil {
		return 0, fmt.Errorf("queueing the frame: %w", err)
	}
	if err := q.room(ctx, o); err != nil {
		return 0, err
	}
	crop := 0
	if o.Crop != nil {
		crop = 1
	}
	var id int64
	err = q.e.do(ctx, func(t tx) error {
		err := one(ctx, t, `INSERT INTO leadline_print (title, frame, out, priority, scale, x, y, width, height, crop,
			audit, side, release, numerics, state, tiles, added)
			VALUES (?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, ?, {now}) RETURNING id`,
			[]any{f.Title, doc, o.Out, o.Priority, o.Scale, rect.Min.X, rect.Min.Y, rect.Dx(), rect.Dy(), crop,
				o.Audit, o.Tile, q.release, q.numbers, string(Queued), tilesOf(rect, o.Tile).Count()}, &id)
		if err != nil {
			return err
		}
		return q.fill(ctx, t, id)
	})
	return id, err
}

// TakenError refuses a path where another print is, or will be.
type TakenError struct{ What, Cure string }

func (e *TakenError) Error() string { return e.What }

// Hint says how to get the print all the same.
func (e *TakenError) Hint() string { return e.Cure }

// room refuses a path that is taken, by a file or by another print of the queue,
// unless it may be replaced; and where the adder's disk is the worker's, one that
// cannot be written. A print of days must not find that out at its end.
func (q *Queue) room(ctx context.Context, o AddOptions) error {
	if q.e.local() {
		if err := printfile.Try(o.Out); err != nil {
			return err
		}
	}
	if o.Replace {
		return nil
	}
	if _, err := os.Lstat(o.Out); err == nil {
		return &TakenError{o.Out + " is there already", "--replace writes over it when the new print is done; or give another --out"}
	}
	var id int64
	err := one(ctx, q.e.read(), `SELECT coalesce(max(id), 0) FROM leadline_print WHERE out = ?
		AND state IN ('queued', 'planning', 'rendering', 'assembling')`, []any{o.Out}, &id)
	if err == nil && id > 0 {
		return &TakenError{fmt.Sprintf("print %d of the queue will be %s", id, o.Out), "--replace queues it all the same; or give another --out"}
	}
	return err
}

// complete fills in defaults and refuses what is out of range.
func (o *AddOptions) complete() error {
	if o.Priority == 0 {
		o.Priority = DefaultPriority
	}
	o.Scale = max(o.Scale, 1)
	switch {
	case o.Out == "":
		return &OptionError{"the print has no name", "give the PNG's path"}
	case o.Tile != 0 && (o.Tile < minSide || o.Tile > maxSide):
		return &OptionError{fmt.Sprintf("tiles of %d pixels a side are out of range", o.Tile), fmt.Sprintf("%d to %d", minSide, maxSide)}
	case o.Audit < 0:
		return &OptionError{fmt.Sprintf("an audit of %d pixels cannot be made", o.Audit), "a number of 0 or more"}
	}
	if err := checkPriority(o.Priority); err != nil {
		return err
	}
	out, err := filepath.Abs(o.Out)
	if err != nil {
		return fmt.Errorf("naming the print: %w", err)
	}
	o.Out = out
	return nil
}

func checkPriority(n int) error {
	if n < 1 || n > 4 {
		return &OptionError{fmt.Sprintf("priority %d is out of range", n), "1 (first) to 4 (last)"}
	}
	return nil
}
