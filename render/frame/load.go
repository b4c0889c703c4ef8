package frame

import (
	"fmt"
	"io"
	"os"
	"strings"
)

// Document is what a file held: a frame, or a sidecar and the frame inside it.
type Document struct {
	Frame   *Frame   // never nil
	Sidecar *Sidecar // nil for a bare frame
}

// ParseAny reads a frame or a sidecar, as the document's format says. The error
// is a Faults; a document with no format at all is read as a frame.
func ParseAny(data []byte) (*Document, error) {
	return read(data, func(c *collector, n *node) *Document {
		if isSidecar(n) {
			s := sidecarOf(c, n)
			return &Document{Frame: &s.Frame, Sidecar: s}
		}
		return &Document{Frame: frameOf(c, n)}
	})
}

// isSidecar reports whether the document calls itself a sidecar of any version.
func isSidecar(n *node) bool {
	if n.kind != anObject {
		return false
	}
	v := n.get("format")
	return v != nil && v.kind == aString && strings.HasPrefix(v.text, "leadline.sidecar/")
}

// Load reads a frame or a sidecar from a file, at most MaxDocument bytes of it.
func Load(path string) (*Document, error) {
	return load(path, ParseAny)
}

// load reads a document of at most MaxDocument bytes from a file.
func load[T any](path string, parse func([]byte) (*T, error)) (*T, error) {
	file, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer file.Close()
	data, err := io.ReadAll(io.LimitReader(file, MaxDocument+1))
	if err != nil {
		return nil, fmt.Errorf("reading a document: %w", err)
	}
	doc, err := parse(data)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", path, err)
	}
	return doc, nil
}
