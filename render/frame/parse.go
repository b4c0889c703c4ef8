package frame

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"
)

// Parse reads a frame: strictly, within the package's limits, and checked by
// Validate. The error is a Faults with everything that was found.
func Parse(data []byte) (*Frame, error) { return read(data, frameOf) }

// read takes a document apart and hands its tree to of; faults found by either
// make the error.
func read[T any](data []byte, of func(*collector, *node) *T) (*T, error) {
	c := &collector{}
	n, ok := readTree(data, c)
	if !ok {
		return nil, c.err()
	}
	v := of(c, n)
	if err := c.err(); err != nil {
		return nil, err
	}
	return v, nil
}

// frameOf is the frame a tree holds; it is of use where c has no faults.
func frameOf(c *collector, n *node) *Frame {
	f := &Frame{}
	if o := c.root(n); o != nil && checkFormat(o, Format) {
		bindFrame(o, f)
		f.check(c)
	}
	return f
}

// UnmarshalJSON is Parse, so that no decoder goes round the rules.
func (f *Frame) UnmarshalJSON(data []byte) error {
	v, err := Parse(data)
	if err == nil {
		*f = *v
	}
	return err
}

// formatPattern takes a format apart: family and version.
var formatPattern = regexp.MustCompile(`^leadline\.(frame|sidecar|ramp)/([1-9][0-9]{0,8})\z`)

// checkFormat holds the document's format against the one wanted. Documents of
// another format are not read further: their other faults would mislead. A
// format that comes to have older versions is brought up to date from here.
func checkFormat(o *object, want string) bool {
	var got string
	before := len(o.c.faults)
	o.text("format", required, &got)
	if len(o.c.faults) > before || got == want {
		return got == want
	}
	family, version, _ := strings.Cut(want, "/")
	m := formatPattern.FindStringSubmatch(got)
	switch {
	case m == nil:
		o.c.addf(o.at("format"), fmt.Sprintf("write %q", want), "%q is no format known here", brief(got))
	case "leadline."+m[1] != family:
		o.c.addf(o.at("format"), "", "this is a %s, not a %s", m[1], strings.TrimPrefix(family, "leadline."))
	default:
		v, _ := strconv.Atoi(m[2])
		o.c.addf(o.at("format"), fmt.Sprintf("this release reads %s up to %s; use a newer release", family, version),
			"%s/%d is newer than this release", family, v)
	}
	return false
}

// bindFrame binds all of a frame but its format.
func bindFrame(o *object, f *Frame) {
	o.text("format", required, &f.Format)
	o.text("title", optional, &f.Title)
	o.text("maker", optional, &f.Maker)
	o.text("rights", optional, &f.Rights)
	bindSet(o.object("set", required), &f.Set)
	bindView(o.object("view", required), &f.View)
	bindIteration(o.object("iteration", required), &f.Iteration)
	bindSampling(o.object("sampling", optional), &f.Sampling)
	bindInk(o.object("ink", optional), &f.Ink)
	bindSheet(o.object("sheet", required), &f.Sheet)
	o.done()
}

func bindSet(o *object, s *Set) {
	o.text("kind", required, (*string)(&s.Kind))
	whole(o, "power", optional, &s.Power)
	if p := o.object("parameter", optional); p != nil {
		s.Parameter = &Point{}
		bindPoint(p, s.Parameter)
	}
	o.nonzero("power")
	o.done()
}

func bindPoint(o *object, p *Point) {
	o.decimal("re", required, &p.Re)
	o.decimal("im", required, &p.Im)
	o.done()
}

func bindView(o *object, v *View) {
	bindPoint(o.object("centre", required), &v.Centre)
	o.decimal("height", required, &v.Height)
	o.parsed("turn", optional, func(s string) (err error) { v.Turn, err = ParseTurn(s); return err })
	o.done()
}

func bindIteration(o *object, it *Iteration) {
	whole(o, "limit", required, &it.Limit)
	o.number("bailout", optional, &it.Bailout)
	o.nonzero("bailout")
	o.done()
}

func bindSampling(o *object, s *Sampling) {
	whole(o, "least", optional, &s.Least)
	whole(o, "most", optional, &s.Most)
	o.maybe("tolerance", &s.Tolerance)
	o.text("filter", optional, (*string)(&s.Filter))
	o.nonzero("least", "most", "filter")
	o.done()
}

func bindSheet(o *object, s *Sheet) {
	o.textual("width", required, &s.Width)
	o.textual("height", required, &s.Height)
	whole(o, "ppi", optional, &s.PPI)
	o.textual("bleed", optional, &s.Bleed)
	o.textual("safe", optional, &s.Safe)
	o.text("space", optional, &s.Space)
	o.nonzero("ppi", "space")
	o.done()
}
