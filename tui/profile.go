package tui

import (
	"github.com/muesli/termenv"

	"leadline/tui/cells"
)

// profile is the colour depth as the styles' package calls it.
func profile(d cells.Depth) termenv.Profile {
	switch d {
	case cells.TrueColour:
		return termenv.TrueColor
	case cells.C256:
		return termenv.ANSI256
	case cells.C16:
		return termenv.ANSI
	}
	return termenv.Ascii
}
