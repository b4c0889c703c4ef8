package render

import (
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"image"
	"io"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"leadline/render/frame"
	"leadline/render/printfile"
)

// Evidence is what a print can be verified from.
type Evidence struct {
	Frame  *frame.Frame
	Origin Origin
	SHA256 string        // of the pixels as rendered; empty when only the PNG is at hand
	Record *frame.Record // nil when only the PNG is at hand
	File   string        // the PNG; empty when only the sidecar is at hand
	Source string        // what the evidence was read from
}

// MismatchError says in words what is not as it should be.
type MismatchError struct {
	What string
	Cure string
}

// Error says what differs.
func (e *MismatchError) Error() string { return "does not match: " + e.What }

// Hint says what can be done.
func (e *MismatchError) Hint() string { return e.Cure }

// Gather reads the evidence of a sidecar, or of a PNG alone: the frame travels
// inside it, and a sidecar beside it adds the hash.
func Gather(path string) (*Evidence, error) {
	name, suspect := strings.CutSuffix(path, suspectSuffix)
	if strings.HasSuffix(strings.ToLower(name), ".json") {
		return gatherSidecar(path)
	}
	e, err := gatherPNG(path)
	if err != nil {
		return nil, err
	}
	side := SidecarPath(name)
	if suspect {
		side += suspectSuffix
	}
	if s, err := gatherSidecar(side); err == nil && filepath.Base(s.File) == filepath.Base(path) {
		e.SHA256, e.Record, e.Source = s.SHA256, s.Record, path+" and "+side
	} else if err != nil && !errors.Is(err, os.ErrNotExist) {
		return nil, err
	}
	return e, nil
}

func gatherSidecar(path string) (*Evidence, error) {
	d, err := frame.Load(path)
	if err != nil {
		return nil, err
	}
	if d.Sidecar == nil {
		return nil, &MismatchError{path + " is a frame without a record of a print",
			"verify the sidecar or the PNG that a render made"}
	}
	r := d.Sidecar.Record
	e := &Evidence{Frame: d.Frame, SHA256: r.SHA256, Record: &r, Source: path,
		Origin: Origin{r.Release, r.Numerics, r.Pixels}}
	if file := filepath.Join(filepath.Dir(path), filepath.Base(r.File)); exists(file) {
		e.File = file
	}
	return e, nil
}

func exists(path string) bool {
	_, err := os.Stat(path)
	return err == nil
}

func gatherPNG(path string) (*Evidence, error) {
	r, err := printfile.Open(path)
	if err != nil {
		return nil, err
	}
	defer r.Close()
	e := &Evidence{File: path, Source: path}
	for _, t := range r.Info().Texts {
		switch t.Keyword {
		case frameKeyword:
			if e.Frame, err = frame.Parse([]byte(t.Value)); err != nil {
				return nil, fmt.Errorf("the frame inside %s: %w", path, err)
			}
		case originKeyword:
			if err = json.Unmarshal([]byte(t.Value), &e.Origin); err != nil {
				return nil, fmt.Errorf("the origin inside %s: %w", path, err)
			}
		}
	}
	if e.Frame == nil || e.Origin.Numerics == 0 {
		return nil, &MismatchError{path + " carries no frame: it is not a print of ours, or its texts were stripped",
			"verify the sidecar instead, if it was kept"}
	}
	return e, nil
}

// Verdict is the outcome of a verification that found nothing wrong.
type Verdict struct {
	Source  string `json:"source"`
	Pixels  int64  `json:"pixels"`          // rendered again and compared
	Tiles   int    `json:"tiles,omitempty"` // of those asked for; fewer where the print has no more
	Whole   bool   `json:"whole"`
	SHA256  string `json:"sha256,omitempty"`
	Against string `json:"against"` // "file and record", "file" or "record"
}

// Verify renders a print again and compares: the whole, or sample tiles of it
// where sample > 0, drawn by seed. A difference is a *MismatchError.
func Verify(ctx context.Context, e *Evidence, sample int, seed uint64, o Options) (*Verdict, error) {
	if err := e.check(sample); err != nil {
		return nil, err
	}
	p, err := NewPlan(ctx, e.Frame, o)
	if err != nil {
		return nil, err
	}
	v := &verifier{p: p, e: e, o: o, rect: e.rect()}
	if k := e.Origin.Pixels.Scale; checkScale(p.Geometry, k) != nil || !v.rect.In(p.Geometry.Scaled(k).Full()) || v.rect.Empty() {
		return nil, &MismatchError{"the part recorded does not lie on the frame's sheet", "the record was altered"}
	}
	if sample > 0 {
		return v.tiles(ctx, sample, seed)
	}
	return v.whole(ctx)
}

func (e *Evidence) rect() image.Rectangle {
	r := e.Origin.Pixels
	return image.Rect(r.X, r.Y, r.X+r.Width, r.Y+r.Height)
}

// check says what can be said before any pixel is rendered.
func (e *Evidence) check(sample int) error {
	if e.Origin.Numerics != Numerics {
		return &MismatchError{fmt.Sprintf("numerics: the print was made with %d (release %s), this is %d (release %s)",
			e.Origin.Numerics, e.Origin.Release, Numerics, Release),
			"the pixels need not agree; verify with release " + e.Origin.Release}
	}
	if e.File == "" && sample > 0 {
		return &MismatchError{"there is no PNG beside the sidecar to take tiles from",
			"put the PNG beside it, or verify the whole against the recorded hash"}
	}
	return nil
}

// verifier is one verification under way.
type verifier struct {
	p    *Plan
	e    *Evidence
	o    Options
	rect image.Rectangle
}

// whole renders everything again, comparing rows with the file as they come
// and the hash with the record at the end.
func (v *verifier) whole(ctx context.Context) (*Verdict, error) {
	d := &Verdict{Source: v.e.Source, Pixels: int64(v.rect.Dx()) * int64(v.rect.Dy()), Whole: true, Against: "record"}
	var file *printfile.Reader
	if v.e.File != "" {
		var err error
		if file, err = v.open(); err != nil {
			return nil, err
		}
		defer file.Close()
		d.Against = "file"
		if v.e.SHA256 != "" {
			d.Against = "file and record"
		}
	}
	diff := differ{rect: v.rect}
	var again, stored printfile.Hasher
	var have []byte
	counts, err := v.p.Bands(ctx, v.rect, v.e.Origin.Pixels.Scale, v.o, func(rows []byte) error {
		again.Write(rows)
		if file == nil {
			return nil
		}
		have = slices.Grow(have[:0], len(rows))[:len(rows)]
		if err := readRows(file, have); err != nil {
			return err
		}
		stored.Write(have)
		diff.compare(have, rows)
		return nil
	})
	if err != nil {
		return nil, err
	}
	d.SHA256 = again.Hex()
	if err := v.judge(&diff, d.SHA256, stored.Hex(), file != nil); err != nil {
		return nil, err
	}
	return d, v.record(counts)
}

// record holds the rest of the record against the fresh render.
func (v *verifier) record(n Counts) error {
	r := v.e.Record
	if r == nil {
		return nil
	}
	what := ""
	switch ref := v.p.reference(); {
	case r.Counts != n.record():
		what = "counts"
	case r.Reference.Kind != ref.Kind || r.Reference.Period != ref.Period || r.Reference.Length != ref.Length || r.Reference.Bits != ref.Bits:
		what = "reference"
	default:
		return nil
	}
	return &MismatchError{"record: the pixels are right, but the " + what + " recorded are not those of a fresh render",
		"the sidecar was altered"}
}

// judge puts the differences into words.
func (v *verifier) judge(diff *differ, again, stored string, file bool) error {
	if err := v.altered(diff, stored); err != nil {
		return err
	}
	if v.e.SHA256 != "" && v.e.SHA256 != again {
		what := "pixels: the hash of a fresh render is not the recorded one"
		if file {
			what = "record: the pixels are right, but their hash is not the recorded one"
		}
		return &MismatchError{what, "the sidecar was altered, or belongs to another print"}
	}
	return nil
}

// altered says how many pixels of the file differ, nil if none does. stored is
// the hash of the file's pixels, "" if only part of them was read.
func (v *verifier) altered(diff *differ, stored string) error {
	if diff.pixels == 0 {
		return nil
	}
	what := fmt.Sprintf("pixels: %d of %d differ from a fresh render, the first at %d,%d",
		diff.pixels, int64(diff.rect.Dx())*int64(diff.rect.Dy()), diff.first.X, diff.first.Y)
	cure := "the file was altered after it was rendered: render it again"
	if stored != "" && v.e.SHA256 == stored {
		cure = "the file is as recorded: either the frame was altered since, or this machine or the one that made it computes wrongly"
	}
	return &MismatchError{what, cure}
}

// open opens the PNG and holds its size against the record.
func (v *verifier) open() (*printfile.Reader, error) {
	r, err := printfile.Open(v.e.File)
	if err != nil {
		return nil, err
	}
	if i := r.Info(); i.Width != v.rect.Dx() || i.Height != v.rect.Dy() {
		r.Close()
		return nil, &MismatchError{fmt.Sprintf("size: the file has %d x %d pixels, the record %d x %d",
			i.Width, i.Height, v.rect.Dx(), v.rect.Dy()), "the file was altered, or belongs to another print"}
	}
	return r, nil
}

// readRows fills dst, whole rows, from the file.
func readRows(r *printfile.Reader, dst []byte) error {
	stride := r.Info().Width * BytesPerPixel
	for len(dst) > 0 {
		n, err := r.ReadRows(dst)
		dst = dst[n*stride:]
		if len(dst) > 0 && err != nil {
			if err == io.EOF {
				err = io.ErrUnexpectedEOF
			}
			return fmt.Errorf("reading the print: %w", err)
		}
	}
	return nil
}

// differ counts pixels that differ, row by row.
type differ struct {
	rect   image.Rectangle
	row    int
	pixels int64
	first  image.Point
}

func (d *differ) compare(a, b []byte) {
	stride := d.rect.Dx() * BytesPerPixel
	for ; len(a) > 0; a, b, d.row = a[stride:], b[stride:], d.row+1 {
		if bytes.Equal(a[:stride], b[:stride]) {
			continue
		}
		for x := range d.rect.Dx() {
			i := x * BytesPerPixel
			if bytes.Equal(a[i:i+BytesPerPixel], b[i:i+BytesPerPixel]) {
				continue
			}
			if d.pixels == 0 {
				d.first = image.Pt(d.rect.Min.X+x, d.rect.Min.Y+d.row)
			}
			d.pixels++
		}
	}
}
