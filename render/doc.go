// Package render turns a frame into pixels and pixels into a print file.
//
// A Plan holds what a whole frame shares: its geometry, reference orbit,
// tables and ink. A Plan's Tile is the one way to a pixel; the sheet, a crop,
// a proof, verify and a queue's worker all take it with another rectangle and
// another scale. It knows no queue and no screen.
package render

// Release names this release.
const Release = "0.1.0"

// Numerics counts the changes that have altered a pixel. Two releases with the
// same number print the same pixels from the same frame.
const Numerics = 1
