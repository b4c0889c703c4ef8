package kit

import (
	"image"
	"reflect"
	"slices"

	"leadline/jobs"
	"leadline/render/frame"
	"leadline/tui/cells"
	"leadline/tui/engine"
)

// maxHistory bounds the steps that are kept.
const maxHistory = 500

// Step is a frame as it stood, and what was done to it next.
type Step struct {
	Frame *frame.Frame `json:"frame"`
	What  string       `json:"what"`
}

// Mark is a place with a name.
type Mark struct {
	Name string     `json:"name"`
	View frame.View `json:"view"`
	Set  frame.Set  `json:"set"`
}

// Desk is what all screens work on. It is used by the program's one loop only.
// Frames on it are never changed in place: Change puts a changed copy there.
type Desk struct {
	Frame  *frame.Frame
	Pinned bool   // the iteration limit is the maker's, not found by the engine
	Path   string // of the frame's file; "" until it is saved or opened
	Marks  []Mark

	Picture *engine.Picture // the latest preview of Frame; nil before the first
	Engine  *engine.Engine
	Queue   *jobs.Queue // nil where it could not be opened
	NoQueue error       // why

	Mesh  cells.Mesh
	Depth cells.Depth
	ASCII bool // the terminal shows nothing else
	Style Style
	// View is how many samples the preview has, across and down the trim.
	View image.Point

	past, future []Step
	clean        *frame.Frame // as last saved or opened
}

// NewDesk is a desk with a frame on it.
func NewDesk(f *frame.Frame) *Desk { return &Desk{Frame: f, clean: f} }

// Change puts a changed copy of the frame on the desk; what says what was done,
// in the past tense, for the way back. A change that the frame's rules refuse
// leaves everything as it is. Doing nothing is no step.
func (d *Desk) Change(what string, f func(*frame.Frame) error) error {
	g := d.Frame.Clone()
	if err := f(g); err != nil {
		return err
	}
	return d.Put(what, g)
}

// Put is Change with the new frame at hand.
func (d *Desk) Put(what string, g *frame.Frame) error {
	if err := g.Validate(); err != nil {
		return err
	}
	if reflect.DeepEqual(g, d.Frame) {
		return nil
	}
	d.past = append(d.past, Step{d.Frame, what})
	if len(d.past) > maxHistory {
		d.past = slices.Delete(d.past, 0, len(d.past)-maxHistory)
	}
	d.future = nil
	d.Frame = g
	return nil
}

// Amend is Put without a step of its own: what the program found out (such as
// the iteration limit) belongs to the step before.
func (d *Desk) Amend(g *frame.Frame) { d.Frame = g }

// Back takes the last change back and says what it was; "" where there is none.
func (d *Desk) Back() string { return step(&d.past, &d.future, &d.Frame) }

// Forward does again what Back took back.
func (d *Desk) Forward() string { return step(&d.future, &d.past, &d.Frame) }

// step moves one frame from one side of the present to the other.
func step(from, to *[]Step, now **frame.Frame) string {
	n := len(*from)
	if n == 0 {
		return ""
	}
	s := (*from)[n-1]
	*from = (*from)[:n-1]
	*to = append(*to, Step{*now, s.What})
	*now = s.Frame
	return s.What
}

// Steps is how many changes Back and Forward have before them.
func (d *Desk) Steps() (back, forward int) { return len(d.past), len(d.future) }

// History gives the ways back and forward, for keeping; SetHistory puts them back.
func (d *Desk) History() (past, future []Step) { return d.past, d.future }

// SetHistory is for opening a kept desk.
func (d *Desk) SetHistory(past, future []Step) { d.past, d.future = past, future }

// Opened notes that the frame is what the file at path holds.
func (d *Desk) Opened(path string) { d.Path, d.clean = path, d.Frame }

// Unsaved says whether the frame differs from its file, or has none and was
// changed.
func (d *Desk) Unsaved() bool { return !reflect.DeepEqual(d.Frame, d.clean) }
