// Package cells turns a picture into terminal cells: coloured block characters
// that stand for one to six samples each, overlays of text and lines on top of
// them, and lines of text with as few escape sequences as will do.
//
// A Picture is drawn into a Grid with Draw; labels, rules, boxes and marks go on
// the Grid; Lines writes it. Render does the first and the last step at once.
//
// A cell has two colours. Where its samples have more, every way of parting them
// into two sets is weighed and the one with the least squared error in OKLab is
// taken. OKLab (Ottosson 2020), not linear light: half the range of linear light
// lies above sRGB 188, so an error measured there lets the lines in dark parts of
// a picture go for the sake of invisible ones in bright parts. Each set is painted
// with its mean in OKLab, the colour that error is least for.
//
// A cell depends on its own samples alone (and on its place, where dithering is
// asked for; and on the picture's range of lightness, where there is no colour and
// the caller gives none). So what did not change in a picture does not change on
// the screen, and the same picture gives the same bytes.
//
// Functions here are pure: no clock, no environment, no input or output. Nothing
// here decides a pixel of a print, so the arithmetic is plain float32. The package
// must not know of frames, fields, keys or the terminal framework.
package cells
