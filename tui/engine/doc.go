// Package engine computes the preview: the fields of a grid of samples over a
// frame's trim, by passes that get finer, around a reference orbit that is used
// again for as long as it serves, with an iteration limit that finds itself. It
// works in the background and hands pictures over as they get better. It knows
// no terminal and no key.
//
// A sample is render.Plan.Field at a point of the sheet's own lattice, so the
// preview shows what the print will hold there.
package engine
