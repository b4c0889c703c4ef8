package paper

import (
	"strconv"

	"leadline/palette"
	"leadline/render/frame"
	"leadline/render/sheet"
)

// field is a line of the form.
type field struct {
	group, label, help string
	done               string // what a change did, in the past tense
	// shown is the value, and an aside where there is one.
	shown func(*Screen) (value, aside string)
	// text is the editor's proposal, read what an entered text changes; both
	// nil where nothing is to be written.
	text func(*Screen) string
	read func(*Screen, string) (edit, error)
	// next is the value after the present one, or before it; nil: none.
	next func(s *Screen, by int) edit
}

// edit is what a field does: to the frame, or to the viewing distance.
type edit struct {
	frame    func(*frame.Frame)
	distance sheet.Length
}

// Places of fields that findings point to.
const (
	atSize = iota
	atTurn
	atPPI
	atBleed
	atSafe
	atDistance
	atSpace
	atLeast
	atMost
	atTolerance
	atFilter
	atTitle
	atMaker
	atRights
)

// fields is the form, from the top down.
var fields [atRights + 1]field

func init() { // the fields' functions look at the form themselves
	fields = [...]field{
		atSize: {group: "Paper", label: "size", done: "set the size", shown: shownSize, text: textSize, read: readSize, next: nextSize,
			help: "A2, 600x400 mm, 24x36in, 4000x3000px; the view's height stays, its width follows"},
		atTurn: {group: "Paper", label: "turned", done: "turned the sheet", shown: shownTurn, next: func(s *Screen, _ int) edit { return swapSides() },
			help: "swaps the sides; the view's height stays, its width follows"},
		atPPI: {group: "Paper", label: "ppi", done: "set the resolution", shown: shownPPI, text: textPPI, read: readPPI, next: nextPPI,
			help: "pixels an inch, 1 to 4800; empty: 300"},
		atBleed: {group: "Paper", label: "bleed", done: "set the bleed", shown: margin(bleedOf), text: func(s *Screen) string { return s.desk.Frame.Sheet.Bleed.String() },
			read: readMargin(setBleed), next: nextMargin(bleedOf, setBleed, "0mm", "2mm", "3mm", "5mm", "6mm", "10mm", "15mm", "25mm"),
			help: "printed beyond the trim on every side: 3 mm is usual, 6 mm for large sheets; empty: none"},
		atSafe: {group: "Paper", label: "safe area", done: "set the safe margin", shown: margin(safeOf), text: func(s *Screen) string { return s.desk.Frame.Sheet.Safe.String() },
			read: readMargin(setSafe), next: nextMargin(safeOf, setSafe, "0mm", "3mm", "5mm", "10mm", "15mm", "20mm", "25mm"),
			help: "how far inside the trim a careless cut may fall; empty: 5 mm"},
		atDistance: {group: "Paper", label: "seen from", shown: shownDistance, text: func(s *Screen) string { return s.distance.String() },
			read: readDistance, next: nextDistance, help: "from how far the print is looked at; no pixel depends on it"},
		atSpace: {group: "Colour", label: "space", done: "set the colour space", shown: shownSpace, next: nextSpace,
			help: "the space the pixels are written in, with its profile"},
		atLeast: {group: "Sampling", label: "samples", done: "set the least samples", shown: shownLeast, text: func(s *Screen) string { return count(s.desk.Frame.Sampling.Least) },
			read: readCount(setLeast), next: nextCount(func(r *frame.Resolved) int { return r.Least }, setLeast),
			help: "samples that every pixel gets; empty: 4"},
		atMost: {group: "Sampling", label: "at most", done: "set the most samples", shown: shownMost, text: func(s *Screen) string { return count(s.desk.Frame.Sampling.Most) },
			read: readCount(setMost), next: nextCount(func(r *frame.Resolved) int { return r.Most }, setMost),
			help: "samples that a restless pixel gets; empty: 32"},
		atTolerance: {group: "Sampling", label: "tolerance", done: "set the tolerance", shown: shownTolerance, text: textTolerance, read: readTolerance,
			next: nextTolerance, help: "a pixel is settled when its mean is this sure, 0 to 1 of full light; empty: 0.004"},
		atFilter: {group: "Sampling", label: "filter", done: "set the filter", shown: shownFilter, next: nextFilter,
			help: "gaussian is soft at a pixel's border, box is sharp"},
		atTitle: textField("title", "set the title", "of the print; it travels in the file", func(f *frame.Frame) *string { return &f.Title }),
		atMaker: textField("maker", "set the maker", "who made it; travels in the file", func(f *frame.Frame) *string { return &f.Maker }),
		atRights: textField("rights", "set the rights", "who may do what with it; travels in the file",
			func(f *frame.Frame) *string { return &f.Rights }),
	}
}

// textField is a line of free text.
func textField(label, done, help string, of func(*frame.Frame) *string) field {
	return field{group: "Texts", label: label, done: done, help: help,
		shown: func(s *Screen) (string, string) {
			if t := *of(s.desk.Frame); t != "" {
				return t, ""
			}
			return "", "none"
		},
		text: func(s *Screen) string { return *of(s.desk.Frame) },
		read: func(_ *Screen, t string) (edit, error) {
			return edit{frame: func(f *frame.Frame) { *of(f) = t }}, nil
		}}
}

// count writes a whole number that may be absent.
func count(n int) string {
	if n == 0 {
		return ""
	}
	return strconv.Itoa(n)
}

func shownSpace(s *Screen) (string, string) { return s.resolve().Space.Name(), "" }

func nextSpace(s *Screen, by int) edit {
	all := palette.Spaces()
	at := (int(s.resolve().Space) + by + len(all)) % len(all)
	return edit{frame: func(f *frame.Frame) { f.Sheet.Space = all[at].String() }}
}

func shownFilter(s *Screen) (string, string) { return string(s.resolve().Filter), "" }

func nextFilter(s *Screen, _ int) edit {
	to := frame.Box
	if s.resolve().Filter == frame.Box {
		to = frame.Gaussian
	}
	return edit{frame: func(f *frame.Frame) { f.Sampling.Filter = to }}
}
