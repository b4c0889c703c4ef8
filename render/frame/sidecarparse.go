package frame

import (
	"fmt"
	"strings"
)

// ParseSidecar reads a sidecar as strictly as Parse reads a frame. The error is
// a Faults with everything that was found.
func ParseSidecar(data []byte) (*Sidecar, error) { return read(data, sidecarOf) }

// sidecarOf is the sidecar a tree holds; it is of use where c has no faults.
func sidecarOf(c *collector, n *node) *Sidecar {
	s := &Sidecar{}
	if o := c.root(n); o != nil && checkFormat(o, SidecarFormat) {
		bindSidecar(o, s)
		s.check(c)
	}
	return s
}

// UnmarshalJSON is ParseSidecar, so that no decoder goes round the rules.
func (s *Sidecar) UnmarshalJSON(data []byte) error {
	v, err := ParseSidecar(data)
	if err == nil {
		*s = *v
	}
	return err
}

// bindSidecar binds the whole document.
func bindSidecar(o *object, s *Sidecar) {
	o.text("format", required, &s.Format)
	if f := o.object("frame", required); f != nil {
		f.path, o.c.prefix = "", f.path
		if checkFormat(f, Format) {
			bindFrame(f, &s.Frame)
		}
		o.c.prefix = ""
	}
	bindRecord(o.object("record", required), &s.Record)
	if r := o.object("run", optional); r != nil {
		s.Run = &Run{}
		bindRun(r, s.Run)
	}
	o.done()
}

func bindRecord(o *object, r *Record) {
	o.text("release", required, &r.Release)
	whole(o, "numerics", required, &r.Numerics)
	o.text("file", required, &r.File)
	p := o.object("pixels", required)
	whole(p, "x", required, &r.Pixels.X)
	whole(p, "y", required, &r.Pixels.Y)
	whole(p, "width", required, &r.Pixels.Width)
	whole(p, "height", required, &r.Pixels.Height)
	whole(p, "scale", required, &r.Pixels.Scale)
	p.done()
	o.text("sha256", required, &r.SHA256)
	bindReference(o.object("reference", required), &r.Reference)
	g := o.object("geometry", required)
	whole(g, "trim_width", required, &r.Geometry.TrimWidth)
	whole(g, "trim_height", required, &r.Geometry.TrimHeight)
	whole(g, "bleed", required, &r.Geometry.Bleed)
	g.done()
	bindCounts(o.object("counts", required), &r.Counts)
	bindAudit(o.object("audit", required), &r.Audit)
	o.done()
}

func bindReference(o *object, r *Reference) {
	o.text("kind", required, (*string)(&r.Kind))
	o.maybeDecimal("re", &r.Re)
	o.maybeDecimal("im", &r.Im)
	whole(o, "period", optional, &r.Period)
	whole(o, "length", optional, &r.Length)
	whole(o, "bits", optional, &r.Bits)
	o.nonzero("period", "length", "bits")
	o.done()
}

// counts is a table of keys and where their whole numbers go.
type counts []struct {
	key string
	to  *int64
}

func (n *Counts) table() counts {
	return counts{{"pixels", &n.Pixels}, {"samples", &n.Samples}, {"escaped", &n.Escaped},
		{"inside", &n.Inside}, {"undecided", &n.Undecided}}
}

func (a *Audit) table() counts {
	return counts{{"asked", &a.Asked}, {"checked", &a.Checked}, {"skipped", &a.Skipped}, {"robust", &a.Robust},
		{"equal", &a.Equal}, {"within", &a.Within}, {"failed", &a.Failed}}
}

func (q *Queued) table() counts {
	return counts{{"workers", &q.Workers}, {"tiles", &q.Tiles}, {"attempts", &q.Attempts}, {"rescued", &q.Rescued}}
}

func (t counts) bind(o *object) {
	for _, e := range t {
		whole(o, e.key, required, e.to)
	}
	o.done()
}

func (t counts) check(c *collector, path string) {
	for _, e := range t {
		c.whole64(join(path, e.key), *e.to, 0)
	}
}

func bindCounts(o *object, n *Counts) { n.table().bind(o) }
func bindAudit(o *object, a *Audit)   { a.table().bind(o) }

// seconds is the table of a run's times.
func (s *Seconds) table() []struct {
	key string
	to  *float64
} {
	return []struct {
		key string
		to  *float64
	}{{"reference", &s.Reference}, {"tables", &s.Tables}, {"pixels", &s.Pixels}, {"colour", &s.Colour},
		{"file", &s.File}, {"audit", &s.Audit}, {"total", &s.Total}}
}

func bindRun(o *object, r *Run) {
	o.parsed("started", required, func(s string) error {
		if err := r.Started.UnmarshalText([]byte(s)); err != nil || strings.Contains(s, ",") {
			return &limitError{fmt.Sprintf("%q is not a time", brief(s)), "write it by RFC 3339, such as 2026-05-04T10:11:12Z"}
		}
		return nil
	})
	o.text("host", optional, &r.Host)
	s := o.object("seconds", required)
	for _, e := range r.Seconds.table() {
		s.number(e.key, required, e.to)
	}
	s.done()
	whole(o, "workers", required, &r.Workers)
	whole(o, "peak_bytes", required, &r.Peak)
	if q := o.object("queue", optional); q != nil {
		r.Queue = &Queued{}
		for _, e := range r.Queue.table() {
			whole(q, e.key, required, e.to)
		}
		q.number("seconds", required, &r.Queue.Seconds)
		q.done()
	}
	o.done()
}
