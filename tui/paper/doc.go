// Package paper is the screen on which a print is set up: the sheet's size,
// resolution and margins, colour space, sampling and texts; what they come to
// in pixels, bytes and time; what is to be looked at before printing; and a
// window on the sheet's own pixels. What it changes goes through the desk.
//
// The viewing distance is the maker's and stands in no frame: no pixel depends
// on it. The screen keeps it, and gives it out for the session's file.
package paper
