// Package contract holds code that decides pixels to the numeric contract: the same bits on every machine.
//
// It looks twice. The source must contain none of
//
//   - a product as a direct operand of + or -, or of += or -=: the language lets a compiler fuse it into one rounding
//     (Go specification, "Floating-point operators"), and Go's does so on arm64 and under GOAMD64=v3. Written out it is
//     math.FMA(a, b, c), or float64(a*b) + c. Complex products hide such sums, and are refused altogether;
//   - functions of math and math/cmplx that are not correctly rounded and have assembly or fused code on some machines;
//   - ranges over maps, and the unordered iterators of package maps unless sorted on the spot.
//
// Fusing also reaches across statements and inlined calls, where no reading of single expressions can find it.
// The machine code is therefore searched too: a multiply-add instruction may only come from a line that asks for one.
// A division by a power of two counts as a product there, for so it is compiled.
//
// A line is excused by the comment directive "//leadline:exact REASON" on it or alone above it. A directive without
// a reason, or in the source check one that excuses nothing, is itself a finding.
//
// The package knows nothing of the program's own packages: callers say which code to look at.
package contract
