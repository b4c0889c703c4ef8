package frame

import (
	"bytes"
	"encoding/json"
)

// Marshal writes the frame in its canonical form. A frame that Parse would not
// take is not written; the error is then the Faults of Validate.
func (f *Frame) Marshal() ([]byte, error) {
	if err := f.Validate(); err != nil {
		return nil, err
	}
	return canonical(f)
}

// canonical is v as JSON: keys in the order of the Go types, two spaces of
// indent, no HTML escapes, the shortest numbers that read back the same, one
// newline at the end.
func canonical(v any) ([]byte, error) {
	var b bytes.Buffer
	enc := json.NewEncoder(&b)
	enc.SetEscapeHTML(false)
	enc.SetIndent("", "  ")
	if err := enc.Encode(v); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}

// Frozen reports whether the frame holds everything rendering fills in: the
// baked ink and, where there is no period, the fitted numbers.
func (f *Frame) Frozen() bool {
	d := f.Ink.Drive
	return f.Ink.Baked != nil && (d.Period != 0 || d.Fitted != nil)
}

// Clone is a copy that shares nothing with f that either could change.
func (f *Frame) Clone() *Frame {
	g := *f
	g.Set.Parameter = copied(f.Set.Parameter)
	g.Sampling.Tolerance = copied(f.Sampling.Tolerance)
	if r := copied(f.Ink.Ramp); r != nil {
		r.Stops = append([]Stop(nil), r.Stops...)
		r.Smooth = copied(r.Smooth)
		g.Ink.Ramp = r
	}
	d := &g.Ink.Drive
	d.Base, d.Offset = copied(d.Base), copied(d.Offset)
	d.Fit, d.Fitted = copied(d.Fit), copied(d.Fitted)
	g.Ink.Inside, g.Ink.Edge = copied(f.Ink.Inside), copied(f.Ink.Edge)
	if b := copied(f.Ink.Baked); b != nil {
		b.Edge = copied(b.Edge)
		g.Ink.Baked = b
	}
	return &g
}

// copied is a new pointer to the same value, nil for nil.
func copied[T any](p *T) *T {
	if p == nil {
		return nil
	}
	return new(*p)
}
