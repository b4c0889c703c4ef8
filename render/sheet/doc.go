// Package sheet holds the geometry of a print in whole pixels: lengths as the
// print trade writes them ("600mm", "23.5in", "400px"), the trim, bleed and
// safe rectangles they become at a given ppi, and the crops and scaled-down
// lattices cut from them.
//
// All rectangles are in lattice coordinates: pixel (0,0) is the trim's top
// left, x grows to the right and y downwards, bleed has negative or
// beyond-trim coordinates. Lengths are exact rationals until the one rounding
// to pixels, so the same sheet has the same pixels on every machine.
//
// The package must not know what is drawn: no sets, colours, frames or files.
package sheet
