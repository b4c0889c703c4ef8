// Package compose is the screen on which a frame is found: the trim as the
// sheet will show it, the sounding line beside it, and the ways to move, find
// and mark places. What it shows comes from the engine, what it changes goes
// through the desk.
package compose
