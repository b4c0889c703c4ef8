package kit

import (
	"strconv"

	"github.com/charmbracelet/lipgloss"
	"github.com/muesli/termenv"

	"leadline/tui/cells"
)

// Style is the interface's colours, by what they mean. Each has a form for
// terminals with a dark and with a light background; TestContrast holds text to
// 4.5:1 (WCAG 2.2, 1.4.3).
type Style struct {
	Text   lipgloss.Style // what is read
	Faint  lipgloss.Style // labels and asides
	Strong lipgloss.Style // the word that counts
	Lead   lipgloss.Style // our accent: the sounding line's lead, the chosen thing
	Warn   lipgloss.Style
	Bad    lipgloss.Style
	Good   lipgloss.Style
	Bar    lipgloss.Style // header and footer
	Tab    lipgloss.Style // the open screen's tab
	Chosen lipgloss.Style // the line under the cursor
	Mat    lipgloss.Style // around the sheet

	// The same as plain colours, for what is drawn into a picture.
	InkTone, LeadTone, MatTone, FaintTone cells.RGB

	Dark bool // the terminal's background
}

// shade is a colour for dark and for light backgrounds.
type shade struct{ dark, light string }

// Colours of a sea chart: paper and ink, shallow blue, the magenta that charts
// use for what must not be missed, buff for land.
var (
	ink     = shade{"#e8e4d8", "#1d2a33"}
	pencil  = shade{"#9fb0b5", "#515e64"}
	shallow = shade{"#8fd0e8", "#0a5a78"}
	magenta = shade{"#f09ad2", "#9a1f70"}
	buff    = shade{"#e8c87a", "#7a5200"}
	red     = shade{"#ff9c8a", "#a8240f"}
	green   = shade{"#9fdcae", "#1c6a3a"}
	bar     = shade{"#16303d", "#d8e6ea"}
	tab     = shade{"#255268", "#a9cfdc"}
	chosen  = shade{"#1e3f50", "#c4dde5"}
	mat     = shade{"#0f1a20", "#eef1ee"}
	paper   = shade{"#0b1318", "#fbf9f2"} // what contrast is judged against, nearly any terminal's background
)

func (s shade) of(dark bool) lipgloss.Color {
	if dark {
		return lipgloss.Color(s.dark)
	}
	return lipgloss.Color(s.light)
}

func (s shade) tone(dark bool) cells.RGB {
	n, err := strconv.ParseUint(string(s.of(dark))[1:], 16, 32)
	if err != nil {
		panic(err) // written above
	}
	return cells.RGB{R: uint8(n >> 16), G: uint8(n >> 8), B: uint8(n)}
}

// NewStyle makes the colours for a renderer, which knows the terminal's depth
// of colour, and a dark or light background.
func NewStyle(r *lipgloss.Renderer, dark bool) Style {
	if r.ColorProfile() == termenv.ANSI {
		return sixteen(r, dark)
	}
	fg := func(c shade) lipgloss.Style { return r.NewStyle().Foreground(c.of(dark)) }
	return Style{
		Text: fg(ink), Faint: fg(pencil), Strong: fg(ink).Bold(true), Lead: fg(magenta), Warn: fg(buff), Bad: fg(red), Good: fg(green),
		Bar: fg(ink).Background(bar.of(dark)), Tab: fg(ink).Background(tab.of(dark)).Bold(true),
		Chosen: fg(ink).Background(chosen.of(dark)), Mat: r.NewStyle().Background(mat.of(dark)), Dark: dark,
		InkTone: ink.tone(dark), LeadTone: magenta.tone(dark), MatTone: mat.tone(dark), FaintTone: pencil.tone(dark),
	}
}

// sixteen is the style where the terminal chooses what its colours look like.
// Text is in its own colours, which it made readable; bars are those reversed.
// Of the others the bright ones are for dark backgrounds, the dull ones for
// light, and none carries a meaning that no word or sign has.
func sixteen(r *lipgloss.Renderer, dark bool) Style {
	plain := r.NewStyle()
	fg := func(bright, dull string) lipgloss.Style {
		if dark {
			return plain.Foreground(lipgloss.Color(bright))
		}
		return plain.Foreground(lipgloss.Color(dull))
	}
	return Style{
		Text: plain, Faint: plain, Strong: plain.Bold(true), Lead: fg("13", "5"), Warn: fg("11", "1"), Bad: fg("9", "1"), Good: fg("10", "2"),
		Bar: plain.Reverse(true), Tab: plain.Bold(true), Chosen: plain.Reverse(true), Mat: plain,
		InkTone: ink.tone(dark), LeadTone: magenta.tone(dark), MatTone: mat.tone(dark), FaintTone: pencil.tone(dark), Dark: dark,
	}
}
