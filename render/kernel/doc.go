// Package kernel holds the inner loops: from a point of the pixel lattice to
// its field (escape count, smooth count, distance). It knows a reference, its
// tables and the geometry of the view, but no sheet, sampling or colour.
//
// Everything here decides pixels. A sample is a pure function of the frame and
// of its own position: no state passes between samples, and every operation is
// one that IEEE 754 fixes to the last bit.
//
// A sample runs in one of three regimes. Direct: where the pixel spacing is
// coarse (DirectSpacing) z is iterated as it is. Double: the difference δ to
// the reference is iterated in doubles. Deep: while δ is below 2^-400, and the
// frame so fine that it can be, δ is iterated in extended range, nearly all of
// it by leaps.
package kernel
