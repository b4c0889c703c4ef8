package render

import (
	"context"
	"encoding/json"
	"fmt"
	"image"
	"os"
	"path/filepath"
	"strings"
	"time"

	"leadline/render/frame"
	"leadline/render/printfile"
)

// Keywords of the texts that a print carries beside its pixels.
const (
	frameKeyword  = "leadline.frame"  // the frozen frame
	originKeyword = "leadline.origin" // release, numerics, part and scale
)

// suspectSuffix ends the names of a print that failed its audit.
const suspectSuffix = ".suspect"

// Origin is the part of the record that is known before the pixels are, and
// so can travel inside the print.
type Origin struct {
	Release  string       `json:"release"`
	Numerics int          `json:"numerics"`
	Pixels   frame.Pixels `json:"pixels"`
}

// PrintOptions says what to print and where. The zero value prints the whole
// sheet at its own scale, without an audit.
type PrintOptions struct {
	Options
	Out   string           // the PNG's path
	Crop  *image.Rectangle // in the lattice at the wanted scale; nil: everything
	Scale int              // k of a scale 1/k; 0: 1
	Audit int              // how many pixels to audit
	Queue *frame.Queued    // how a queue came to the rows; nil without
}

// Result is what came out of a print.
type Result struct {
	File    string        `json:"file"`
	Sidecar string        `json:"sidecar"`
	Width   int           `json:"width"`
	Height  int           `json:"height"`
	Bytes   int64         `json:"bytes"`
	SHA256  string        `json:"sha256"`
	Counts  frame.Counts  `json:"counts"`
	Audit   frame.Audit   `json:"audit"`
	Peak    int64         `json:"peak_bytes"`
	Seconds frame.Seconds `json:"seconds"`
	Clipped int           `json:"ramp_entries_brought_into_gamut"`
}

// SuspectError says that an audit found pixels that are wrong. The print is
// kept under another name.
type SuspectError struct {
	Path   string
	Failed int64
}

// Error says how many samples failed.
func (e *SuspectError) Error() string {
	return fmt.Sprintf("audit: %d of the audited pixels are not what direct iteration gives", e.Failed)
}

// Hint says where the print is and what to do.
func (e *SuspectError) Hint() string {
	return "the print is kept as " + e.Path + " and must not be delivered; render it again, " +
		"and if it fails again report the frame"
}

// Print renders a frame to a PNG and its sidecar. Nothing appears under the
// final names before it is whole; a failed audit gives the names .suspect and
// a *SuspectError.
func Print(ctx context.Context, f *frame.Frame, o PrintOptions) (*Result, error) {
	started := time.Now()
	if err := o.ready(f); err != nil {
		return nil, err
	}
	p, err := NewPlan(ctx, f, o.Options)
	if err != nil {
		return nil, err
	}
	return assemble(ctx, p, o, started, nil)
}

// Rows hands the rows of a print to sink, from the top down, any number of
// whole rows at a time, and says what was computed for them.
type Rows func(ctx context.Context, sink func(rows []byte) error) (Counts, error)

// Assemble is Print for pixels that were computed before, elsewhere or by
// others: rows gives those of the plan's print. Everything else is the same,
// the audit too.
func Assemble(ctx context.Context, p *Plan, o PrintOptions, rows Rows) (*Result, error) {
	if err := o.ready(p.frame); err != nil {
		return nil, err
	}
	return assemble(ctx, p, o, time.Now(), rows)
}

// assemble makes the files; without rows it computes them.
func assemble(ctx context.Context, p *Plan, o PrintOptions, started time.Time, rows Rows) (*Result, error) {
	rect, err := o.Part(p.frame)
	if err != nil {
		return nil, err
	}
	o.Scale = max(o.Scale, 1)
	if rows == nil {
		rows = func(ctx context.Context, sink func([]byte) error) (Counts, error) {
			return p.Bands(ctx, rect, o.Scale, o.Options, sink)
		}
	}
	return (&printer{p: p, o: o, rect: rect, started: started, rows: rows}).print(ctx)
}

// ready refuses early what cannot be printed, or not there.
func (o PrintOptions) ready(f *frame.Frame) error {
	if _, err := o.Part(f); err != nil {
		return err
	}
	for _, path := range []string{o.Out, SidecarPath(o.Out)} {
		if err := printfile.Try(path); err != nil {
			return err
		}
	}
	return nil
}

// Part is the rectangle to print, in the lattice at the wanted scale. What cannot be printed is refused here,
// before the reference orbit, which may take long.
func (o PrintOptions) Part(f *frame.Frame) (image.Rectangle, error) {
	r, err := f.Resolve()
	if err != nil {
		return image.Rectangle{}, err
	}
	if err := checkScale(r.Sheet, max(o.Scale, 1)); err != nil {
		return image.Rectangle{}, err
	}
	full := r.Sheet.Scaled(max(o.Scale, 1)).Full()
	if o.Crop == nil {
		return full, nil
	}
	if o.Crop.Empty() || !o.Crop.In(full) {
		return *o.Crop, fmt.Errorf("nothing to print: %v lies outside the sheet", *o.Crop)
	}
	return *o.Crop, nil
}

// printer is one print under way.
type printer struct {
	p        *Plan
	o        PrintOptions
	rect     image.Rectangle
	started  time.Time
	document []byte // the frozen frame
	rows     Rows
}

// print renders, audits and puts the files in place.
func (q *printer) print(ctx context.Context) (*Result, error) {
	var err error
	if q.document, err = q.p.frame.Marshal(); err != nil {
		return nil, fmt.Errorf("freezing the frame: %w", err)
	}
	info, err := q.info()
	if err != nil {
		return nil, err
	}
	w, err := printfile.Create(q.o.Out, info, q.o.workers())
	if err != nil {
		return nil, err
	}
	defer w.Abort() // does nothing once committed
	var hash printfile.Hasher
	a := newAuditor(q.p, q.rect, q.o.Scale, q.o.Audit, q.document)
	counts, err := q.pixels(ctx, w, &hash, a)
	if err != nil {
		return nil, err
	}
	start := time.Now()
	audit, err := a.run(ctx, q.o.Options)
	if err != nil {
		return nil, fmt.Errorf("audit: %w", err)
	}
	q.p.clock(PhaseAudit, start)
	return q.finish(w, hash.Hex(), counts, audit)
}

// pixels renders the rows into the file.
func (q *printer) pixels(ctx context.Context, w *printfile.Writer, hash *printfile.Hasher, a *auditor) (Counts, error) {
	start := time.Now()
	var file time.Duration
	counts, err := q.rows(ctx, func(rows []byte) error {
		begin := time.Now()
		defer func() { file += time.Since(begin) }()
		hash.Write(rows)
		a.watch(rows)
		return w.WriteRows(rows)
	})
	if err != nil {
		return counts, err
	}
	encoding := counts.Encoding.Seconds() / float64(q.o.workers())
	q.p.Seconds[PhaseColour] += encoding
	q.p.Seconds[PhaseFile] += file.Seconds()
	q.p.Seconds[PhasePixels] += time.Since(start).Seconds() - encoding
	return counts, nil
}

// finish puts file and sidecar in place, under names that tell of a failed
// audit.
func (q *printer) finish(w *printfile.Writer, hash string, n Counts, audit frame.Audit) (*Result, error) {
	out := q.o.Out
	if audit.Failed > 0 {
		out += suspectSuffix
	}
	start := time.Now()
	q.o.tell(PhaseFile, 0, 1)
	size, err := w.CommitAs(out)
	if err != nil {
		return nil, err
	}
	q.p.clock(PhaseFile, start)
	q.o.tell(PhaseFile, 1, 1)
	s := q.sidecar(filepath.Base(out), hash, n, audit)
	r := &Result{File: out, Sidecar: SidecarPath(q.o.Out), Width: q.rect.Dx(), Height: q.rect.Dy(), Bytes: size,
		SHA256: hash, Counts: s.Record.Counts, Audit: audit, Peak: s.Run.Peak, Seconds: s.Run.Seconds, Clipped: q.p.Clipped}
	if audit.Failed > 0 {
		r.Sidecar += suspectSuffix
	}
	doc, err := s.Marshal()
	if err != nil {
		return nil, fmt.Errorf("writing the sidecar: %w", err)
	}
	if err := printfile.WriteFile(r.Sidecar, doc); err != nil {
		return nil, err
	}
	if audit.Failed > 0 {
		return r, &SuspectError{out, audit.Failed}
	}
	return r, nil
}

// SidecarPath is the sidecar's path for a print's.
func SidecarPath(png string) string {
	return strings.TrimSuffix(png, filepath.Ext(png)) + ".sidecar.json"
}

// pixelsRecord says what part of which lattice is printed.
func (q *printer) pixelsRecord() frame.Pixels {
	return frame.Pixels{X: q.rect.Min.X, Y: q.rect.Min.Y, Width: q.rect.Dx(), Height: q.rect.Dy(), Scale: q.o.Scale}
}

// info is what the PNG says beside its pixels. It holds nothing that differs
// between two runs of the same frame.
func (q *printer) info() (printfile.Info, error) {
	origin, err := json.Marshal(Origin{Release, Numerics, q.pixelsRecord()})
	if err != nil {
		return printfile.Info{}, err
	}
	var id printfile.Hasher
	id.Write(q.document)
	id.Write(origin)
	sum := id.Sum()
	f := q.p.frame
	xmp, err := printfile.Credit{Title: f.Title, Maker: f.Maker, Rights: f.Rights, Hash: sum[:]}.XMP()
	if err != nil {
		return printfile.Info{}, err
	}
	return printfile.Info{Width: q.rect.Dx(), Height: q.rect.Dy(),
		PixelsPerMetre: q.p.Geometry.Scaled(q.o.Scale).PixelsPerMetre,
		ICCName:        q.p.Space.Name(), ICC: q.p.Space.ICC(), XMP: xmp,
		Texts: []printfile.Text{{Keyword: frameKeyword, Value: string(q.document)},
			{Keyword: originKeyword, Value: string(origin)}}}, nil
}

// sidecar joins the frozen frame with the record and the run.
func (q *printer) sidecar(file, hash string, n Counts, audit frame.Audit) *frame.Sidecar {
	g := q.p.Geometry.Scaled(q.o.Scale)
	host, _ := os.Hostname() // a name nobody needs; absent if unknown
	sec := q.p.Seconds
	return &frame.Sidecar{Format: frame.SidecarFormat, Frame: *q.p.frame,
		Record: frame.Record{Release: Release, Numerics: Numerics, File: file, Pixels: q.pixelsRecord(),
			SHA256: hash, Reference: q.p.reference(),
			Geometry: frame.Geometry{TrimWidth: g.TrimW, TrimHeight: g.TrimH, Bleed: g.Bleed},
			Counts:   n.record(), Audit: audit},
		Run: &frame.Run{Started: q.started.UTC().Truncate(time.Second), Host: host, Workers: q.o.workers(), Peak: peakMemory(),
			Queue: q.o.Queue, Seconds: frame.Seconds{Reference: sec[PhaseReference], Tables: sec[PhaseTables],
				Pixels: sec[PhasePixels] + sec[PhaseSurvey], Colour: sec[PhaseColour], File: sec[PhaseFile],
				Audit: sec[PhaseAudit], Total: time.Since(q.started).Seconds()}}}
}

// reference is the record's word on the orbit that was used.
func (p *Plan) reference() frame.Reference {
	if p.ref == nil {
		return frame.Reference{Kind: frame.NoReference}
	}
	return frame.Reference{Kind: frame.ReferenceKind(p.ref.Kind), Re: &p.ref.Re, Im: &p.ref.Im,
		Period: int64(p.ref.Period), Length: int64(p.ref.Length), Bits: int64(p.ref.Bits)}
}
