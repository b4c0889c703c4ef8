// Package frame holds the frame, everything that decides the pixels of one
// picture, and the sidecar, a frame as it was rendered with its record: their
// Go types, their JSON, the published JSON Schema and the rules a document
// must keep.
//
// Reading is strict and bounded. A document has a size, a nesting and a count
// of values it may not pass, checked before anything is built from it; unknown
// and repeated keys are refused; every fault found is reported, each with the
// path it stands at ("view.height") and, where there is one, its cure. Writing
// is canonical: fixed key order, two spaces of indent, no HTML escapes, the
// shortest form of every number, one newline at the end. What was absent stays
// absent, and what Parse accepts comes back byte for byte after one Marshal.
//
// Long numbers, lengths, angles and colours are strings and keep their text.
// Defaults are applied in one place, Frame.Resolve.
//
// The package must not know how a pixel is computed, nor how files other than
// these two are written.
package frame
