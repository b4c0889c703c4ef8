// Package palette holds colour: the four RGB spaces a print can be delivered
// in and their exact transfer functions, OKLab and CIE Lab, CSS colour syntax,
// ramps and their baking to 16-bit codes, gamut mapping, colour difference and
// the ICC profiles that go into the files.
//
// It must not know of sets, fields, frames, sheets or files: it is handed
// numbers between 0 and 1 and gives back colours.
//
// # Which numbers are what
//
// "Linear" values are proportional to light, 1 being the white of the space;
// "codes" are encoded by the transfer function of the space and scaled to
// 0…65535. XYZ is relative to D65 with Y = 1 for white, unless a name says
// D50. Nothing here is premultiplied: there is no transparency in a print, and
// the parser refuses it.
//
// # Same bits everywhere
//
// Baked colours decide printed pixels. Matrices are worked out in exact
// rational arithmetic from the published decimals and rounded once; products
// are written as math.FMA or rounded explicitly; roots, powers and angles come
// from package precision. Package go-colorful is used where no printed pixel
// depends on it: terminal colours, HSLuv as a way to pick colours, and reading
// the digits of hexadecimal notation, which is exact.
package palette
