// Package inking is the Ink screen: the ramp and its stops, how the smooth count
// drives it, the inside and the edge line. The picture on it is the desk's, in
// other colours; nothing is iterated here.
//
// The screen has a list of fields, a mixer with three sliders for the colour in
// hand, and a paint locker with the ramps of the house and those in files. It
// knows no other screen.
package inking
