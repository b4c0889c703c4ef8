package frame

import (
	"errors"
	"fmt"
	"strings"
)

// Fault is one thing wrong with a document.
type Fault struct {
	Path    string // where: "view.height", "ink.ramp.stops[3].at"; "" is the document
	Message string // what is wrong
	Hint    string // the cure, "" where there is none to name
}

// String is the path and the message.
func (f Fault) String() string {
	if f.Path == "" {
		return f.Message
	}
	return f.Path + ": " + f.Message
}

// Faults is every fault found in a document, in the document's own key order.
// As an error it is never empty.
type Faults []Fault

// Error lists the faults: one on a line of its own, several below a count.
func (fs Faults) Error() string {
	if len(fs) == 1 {
		return fs[0].String()
	}
	var b strings.Builder
	fmt.Fprintf(&b, "%d faults:", len(fs))
	for _, f := range fs {
		b.WriteString("\n  " + f.String())
	}
	return b.String()
}

// Hint lists the cures, each once; "" where no fault has one.
func (fs Faults) Hint() string {
	var lines []string
	seen := map[string]bool{}
	for _, f := range fs {
		if f.Hint == "" || seen[f.Hint] {
			continue
		}
		seen[f.Hint] = true
		line := f.Hint
		if len(fs) > 1 && f.Path != "" {
			line = f.Path + ": " + f.Hint
		}
		lines = append(lines, line)
	}
	return strings.Join(lines, "\n")
}

// hintOf is the hint an error offers, or "".
func hintOf(err error) string {
	var h interface{ Hint() string }
	if errors.As(err, &h) {
		return h.Hint()
	}
	return ""
}

// collector gathers faults below a path.
type collector struct {
	faults Faults
	prefix string // put before every path: "frame" inside a sidecar, else ""
	full   bool   // MaxFaults was reached
}

// add records a fault, unless one at the path, above it or below it is known:
// a value that could not be read is not also out of range.
func (c *collector) add(path, message, hint string) {
	path = join(c.prefix, path)
	for _, f := range c.faults {
		if covers(f.Path, path) || covers(path, f.Path) {
			return
		}
	}
	c.push(Fault{path, message, hint})
}

// push records a fault whatever else is known.
func (c *collector) push(f Fault) {
	switch {
	case c.full:
	case len(c.faults) == MaxFaults:
		c.full = true
		c.faults = append(c.faults, Fault{Message: "more faults are not listed"})
	default:
		c.faults = append(c.faults, f)
	}
}

// addf is add with a formatted message and no hint.
func (c *collector) addf(path, hint, format string, args ...any) {
	c.add(path, fmt.Sprintf(format, args...), hint)
}

// err is the faults as an error, nil where there are none.
func (c *collector) err() error {
	if len(c.faults) == 0 {
		return nil
	}
	return c.faults
}

// covers reports whether inner is outer or lies inside it.
func covers(outer, inner string) bool {
	rest, ok := strings.CutPrefix(inner, outer)
	return ok && (outer == "" || rest == "" || rest[0] == '.' || rest[0] == '[')
}

// join puts a key behind a path.
func join(path, key string) string {
	switch {
	case path == "":
		return key
	case key == "" || key[0] == '[':
		return path + key
	}
	return path + "." + key
}
