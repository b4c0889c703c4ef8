package jobs

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"image"
	"time"

	"leadline/render/frame"
)

// State is where a print stands. Pausing is a flag beside it.
type State string

// The states of a print. DEVELOPERS.md draws the ways between them.
const (
	Queued     State = "queued"
	Planning   State = "planning"
	Rendering  State = "rendering"
	Assembling State = "assembling"
	Done       State = "done"
	Cancelled  State = "cancelled"
	Failed     State = "failed"
)

// over says whether nothing more happens to a print by itself.
func (s State) over() bool { return s == Done || s == Cancelled || s == Failed }

// Print is a queued print as it stands.
type Print struct {
	ID       int64  `json:"id"`
	Title    string `json:"title,omitempty"`
	Out      string `json:"out"` // the path asked for
	State    State  `json:"state"`
	Paused   bool   `json:"paused"`
	Reason   string `json:"reason,omitempty"` // of a failure
	Hint     string `json:"hint,omitempty"`   // its cure
	Priority int    `json:"priority"`         // 1 first, 4 last
	Scale    int    `json:"scale"`
	Width    int    `json:"width"` // of what is printed, in pixels
	Height   int    `json:"height"`
	Release  string `json:"release"` // which alone may work on it
	Numerics int    `json:"numerics"`

	Tiles    int   `json:"tiles"`
	Done     int   `json:"done"`
	Attempts int64 `json:"attempts"` // begun tasks, plan and assembly included
	Rescued  int64 `json:"rescued"`  // taken from workers that fell silent

	Progress `json:"progress"`

	Added   time.Time `json:"added"`
	Began   time.Time `json:"began,omitzero"` // last time that tiles were begun
	Ended   time.Time `json:"ended,omitzero"`
	File    string    `json:"file,omitempty"`
	Sidecar string    `json:"sidecar,omitempty"`
	SHA256  string    `json:"sha256,omitempty"`
	Bytes   int64     `json:"bytes,omitempty"`
}

const printColumns = `id, title, out, priority, scale, width, height, release, numerics, state, paused,
	reason, hint, tiles, attempts, rescued, added, began, ended, file, sidecar, sha256, bytes`

// scan fills a Print from printColumns.
func (p *Print) scan(scan func(...any) error) error {
	var paused int
	var state string
	var added, began, ended int64
	err := scan(&p.ID, &p.Title, &p.Out, &p.Priority, &p.Scale, &p.Width, &p.Height, &p.Release, &p.Numerics, &state,
		&paused, &p.Reason, &p.Hint, &p.Tiles, &p.Attempts, &p.Rescued, &added, &began, &ended, &p.File, &p.Sidecar,
		&p.SHA256, &p.Bytes)
	p.State, p.Paused = State(state), paused != 0
	p.Added, p.Began, p.Ended = moment(added), moment(began), moment(ended)
	return err
}

// moment is a time of the database's; 0 is none.
func moment(ms int64) time.Time {
	if ms == 0 {
		return time.Time{}
	}
	return time.UnixMilli(ms).UTC()
}

// NoPrintError says that a queue holds no such print.
type NoPrintError struct{ ID int64 }

func (e *NoPrintError) Error() string { return fmt.Sprintf("the queue holds no print %d", e.ID) }

// Hint says where the numbers are.
func (e *NoPrintError) Hint() string { return "leadline queue list shows the numbers" }

// List gives every print in the order of work: by priority, then by age.
func (q *Queue) List(ctx context.Context) ([]Print, error) {
	var all []Print
	err := each(ctx, q.e.read(), `SELECT `+printColumns+` FROM leadline_print ORDER BY priority, id`, nil,
		func(scan func(...any) error) error {
			var p Print
			err := p.scan(scan)
			all = append(all, p)
			return err
		})
	if err != nil {
		return nil, err
	}
	return all, q.measure(ctx, all)
}

// Show gives one print; *NoPrintError where there is none.
func (q *Queue) Show(ctx context.Context, id int64) (*Print, error) {
	all := make([]Print, 1)
	err := each(ctx, q.e.read(), `SELECT `+printColumns+` FROM leadline_print WHERE id = ?`, []any{id}, all[0].scan)
	if err != nil {
		return nil, err
	}
	if all[0].ID == 0 {
		return nil, &NoPrintError{id}
	}
	return &all[0], q.measure(ctx, all)
}

// order is what a print was asked to be; no state.
type order struct {
	id                  int64
	frame               string
	out                 string
	scale, audit, side  int
	rect                image.Rectangle // what is printed
	crop                bool            // it is not the whole sheet
	state               State
	paused              bool
	priority            int
	tiles, next, number int
	release             string
}

// load reads an order; in a transaction with {lock} it holds the print until
// the end.
func load(ctx context.Context, c conn, id int64, lock string) (*order, error) {
	o := order{id: id}
	var x, y, w, h, crop, paused int
	var state string
	err := one(ctx, c, `SELECT frame, out, scale, audit, side, x, y, width, height, crop, state, paused, priority, tiles, next, release, numerics
		FROM leadline_print WHERE id = ?`+lock, []any{id}, &o.frame, &o.out, &o.scale, &o.audit, &o.side, &x, &y, &w, &h,
		&crop, &state, &paused, &o.priority, &o.tiles, &o.next, &o.release, &o.number)
	if errors.Is(err, errNoRow) {
		return nil, &NoPrintError{id}
	}
	o.rect = image.Rect(x, y, x+w, y+h)
	o.crop, o.paused, o.state = crop != 0, paused != 0, State(state)
	return &o, err
}

// parse reads the order's frame.
func (o *order) parse() (*frame.Frame, error) { return frame.Parse([]byte(o.frame)) }

// text is a frame as it is kept.
func text(f *frame.Frame) (string, error) {
	b, err := f.Marshal()
	if err == nil && !json.Valid(b) {
		err = errors.New("the frame has no JSON form")
	}
	return string(b), err
}
