package frame

import (
	"leadline/palette"
)

// RampFormat names the ramp documents this release reads and writes;
// RampSuffix ends the names of their files.
const (
	RampFormat = "leadline.ramp/1"
	RampSuffix = ".ramp.json"
)

// RampFile is a ramp in a document of its own, so that frames can share it. A
// frame that takes it holds a copy: the file decides no pixel of it.
type RampFile struct {
	Name string // for people; may be empty
	Ramp palette.Ramp
}

// rampDocument is a RampFile as it is written, keys in this order.
type rampDocument struct {
	Format string         `json:"format"`
	Name   string         `json:"name,omitempty"`
	Smooth bool           `json:"smooth"`
	Stops  []palette.Stop `json:"stops"`
}

// ParseRamp reads a ramp's document as strictly as Parse reads a frame. An
// absent "smooth" is true. The error is a Faults.
func ParseRamp(data []byte) (*RampFile, error) { return read(data, rampFileOf) }

// LoadRamp reads a ramp's file, at most MaxDocument bytes of it.
func LoadRamp(path string) (*RampFile, error) { return load(path, ParseRamp) }

// Marshal writes the ramp's document in its canonical form. A ramp that
// ParseRamp would not take is not written; the error is then a Faults.
func (r RampFile) Marshal() ([]byte, error) {
	c := &collector{}
	r.check(c)
	if err := c.err(); err != nil {
		return nil, err
	}
	return canonical(rampDocument{RampFormat, r.Name, r.Ramp.Smooth, r.Ramp.Stops})
}

// rampFileOf is the ramp a tree holds; it is of use where c has no faults.
func rampFileOf(c *collector, n *node) *RampFile {
	f := &RampFile{}
	o := c.root(n)
	if o == nil || !checkFormat(o, RampFormat) {
		return f
	}
	var format string
	var r Ramp
	o.text("format", required, &format)
	o.text("name", optional, &f.Name)
	bindRamp(o, &r)
	f.Ramp = r.palette()
	f.check(c)
	return f
}

// check holds the ramp against the rules of a frame's, and against those that
// every ramp must keep to be printed.
func (r RampFile) check(c *collector) {
	c.title("name", r.Name)
	FromPalette(r.Ramp).check(c, "")
	if err := r.Ramp.Validate(); err != nil {
		c.add("stops", err.Error(), hintOf(err))
	}
}

// palette is the ramp as package palette has it, defaults applied.
func (r Ramp) palette() palette.Ramp {
	p := palette.Ramp{Smooth: deref(r.Smooth, true)}
	for _, s := range r.Stops {
		p.Stops = append(p.Stops, palette.Stop(s))
	}
	return p
}

// FromPalette is a ramp as a frame holds it; it shares nothing with p. What is
// the default, smooth, is left out.
func FromPalette(p palette.Ramp) Ramp {
	var r Ramp
	for _, s := range p.Stops {
		r.Stops = append(r.Stops, Stop(s))
	}
	if !p.Smooth {
		r.Smooth = new(false)
	}
	return r
}
