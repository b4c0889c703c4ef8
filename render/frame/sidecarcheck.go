package frame

import (
	"fmt"
	"math"
	"regexp"
	"strings"

	"leadline/render/sheet"
)

// Limits of a record beyond those of a frame.
const (
	MaxFileName = 255 // bytes
	MaxWhole    = 1 << 53
	maxSeconds  = 1e12
)

// Validate holds the sidecar against every rule a document must keep. The
// error is a Faults with everything that was found.
func (s *Sidecar) Validate() error {
	c := &collector{}
	s.check(c)
	return c.err()
}

// check is Validate into a collector.
func (s *Sidecar) check(c *collector) {
	if s.Format != SidecarFormat {
		c.addf("format", fmt.Sprintf("write %q", SidecarFormat), "%q is not the format of this release", brief(s.Format))
	}
	c.prefix = "frame"
	s.Frame.check(c)
	c.prefix = ""
	s.checkFrozen(c)
	s.Record.check(c)
	if s.Run != nil {
		s.Run.check(c)
	}
}

// checkFrozen asks for what rendering fills in.
func (s *Sidecar) checkFrozen(c *collector) {
	if s.Frame.Ink.Baked == nil {
		c.add("frame.ink.baked", "is required in a sidecar", "")
	}
	if d := s.Frame.Ink.Drive; d.Period == 0 && d.Fitted == nil {
		c.add("frame.ink.drive.fitted", "is required in a sidecar where there is no period", "")
	}
}

// sha256Pattern is a SHA-256 as the record writes it.
var sha256Pattern = regexp.MustCompile(`^[0-9a-f]{64}\z`)

func (r *Record) check(c *collector) {
	c.name("record.release", r.Release)
	c.whole("record.numerics", r.Numerics, 1, math.MaxInt32)
	c.fileName("record.file", r.File)
	c.whole("record.pixels.x", r.Pixels.X, -sheet.MaxSide, sheet.MaxSide)
	c.whole("record.pixels.y", r.Pixels.Y, -sheet.MaxSide, sheet.MaxSide)
	c.whole("record.pixels.width", r.Pixels.Width, 1, sheet.MaxSide)
	c.whole("record.pixels.height", r.Pixels.Height, 1, sheet.MaxSide)
	c.whole("record.pixels.scale", r.Pixels.Scale, 1, sheet.MaxScale)
	if !sha256Pattern.MatchString(r.SHA256) {
		c.add("record.sha256", "is not a SHA-256", "64 hexadecimal digits in small letters")
	}
	r.Reference.check(c)
	c.whole("record.geometry.trim_width", r.Geometry.TrimWidth, 1, sheet.MaxSide)
	c.whole("record.geometry.trim_height", r.Geometry.TrimHeight, 1, sheet.MaxSide)
	c.whole("record.geometry.bleed", r.Geometry.Bleed, 0, sheet.MaxSide)
	r.Counts.table().check(c, "record.counts")
	r.Audit.table().check(c, "record.audit")
}

func (r *Reference) check(c *collector) {
	const path = "record.reference."
	c.oneOf(path+"kind", string(r.Kind), string(NoReference), string(Centre), string(Nucleus))
	c.whole64(path+"period", r.Period, 0)
	c.whole64(path+"length", r.Length, 0)
	c.whole64(path+"bits", r.Bits, 0)
	if r.Kind == NoReference {
		if r.Re != nil || r.Im != nil || r.Period != 0 || r.Length != 0 || r.Bits != 0 {
			c.add("record.reference", "has a kind of none and yet more keys", "")
		}
		return
	}
	if r.Re == nil {
		c.add(path+"re", "is required but for a kind of none", "")
	}
	if r.Im == nil {
		c.add(path+"im", "is required but for a kind of none", "")
	}
	if r.Kind == Nucleus && r.Period == 0 {
		c.add(path+"period", "is required for a nucleus", "")
	}
}

func (r *Run) check(c *collector) {
	if _, err := r.Started.MarshalText(); err != nil {
		c.add("run.started", "is not a time RFC 3339 can write", "")
	}
	c.title("run.host", r.Host)
	for _, e := range r.Seconds.table() {
		c.within(join("run.seconds", e.key), *e.to, 0, maxSeconds)
	}
	c.whole("run.workers", r.Workers, 0, math.MaxInt32)
	c.whole64("run.peak_bytes", r.Peak, 0)
	if q := r.Queue; q != nil {
		q.table().check(c, "run.queue")
		c.within("run.queue.seconds", q.Seconds, 0, maxSeconds)
	}
}

// whole64 checks a count: from least to MaxWhole.
func (c *collector) whole64(path string, v, least int64) {
	if v < least || v > MaxWhole {
		c.addf(path, fmt.Sprintf("a whole number from %d to %d", least, int64(MaxWhole)), "%d is out of range", v)
	}
}

// name checks a free text that must not be empty.
func (c *collector) name(path, s string) {
	if s == "" {
		c.add(path, "must not be empty", "")
	}
	c.title(path, s)
}

// fileName checks that a text names a file without leaving its folder, on any
// system.
func (c *collector) fileName(path, s string) {
	if len(s) > MaxFileName || s == "" || s == "." || s == ".." || strings.ContainsAny(s, `/\:`) {
		c.addf(path, fmt.Sprintf("a name of 1 to %d bytes without / \\ or :", MaxFileName),
			"%q is not a file name without a folder", brief(s))
	}
	c.title(path, s)
}
