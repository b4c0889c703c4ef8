package paper

import (
	"sort"
	"strings"

	"leadline/render/frame"
	"leadline/render/sheet"
)

// spaced is a length as it is read: "594 mm".
func spaced(l sheet.Length) string {
	unit := string(l.Unit())
	return strings.TrimSuffix(l.String(), unit) + " " + unit
}

// sides writes a sheet's two sides, with one unit where they share it.
func (s *Screen) sides(w, h sheet.Length) string {
	by := s.glyph(" × ", " x ")
	if w.Unit() == h.Unit() {
		return strings.TrimSuffix(w.String(), string(w.Unit())) + by + spaced(h)
	}
	return spaced(w) + by + spaced(h)
}

func shownSize(s *Screen) (string, string) {
	sh := s.desk.Frame.Sheet
	if name := sheet.Name(sh.Width, sh.Height); name != "" {
		return name, s.sides(sh.Width, sh.Height)
	}
	return s.sides(sh.Width, sh.Height), ""
}

func textSize(s *Screen) string {
	sh := s.desk.Frame.Sheet
	return sh.Width.String() + " x " + sh.Height.String()
}

// lies says whether the sheet is wider than high.
func (s *Screen) lies() bool {
	sh, ppi := s.desk.Frame.Sheet, s.resolve().Sheet.PPI
	return sh.Width.RatMM(ppi).Cmp(sh.Height.RatMM(ppi)) > 0
}

// readSize takes a size. A name alone leaves the sheet lying or standing.
func readSize(s *Screen, text string) (edit, error) {
	w, h, named, err := sheet.ParseSize(text)
	if err != nil {
		return edit{}, err
	}
	if named && s.lies() {
		w, h = h, w
	}
	return setSize(w, h), nil
}

func setSize(w, h sheet.Length) edit {
	return edit{frame: func(f *frame.Frame) { f.Sheet.Width, f.Sheet.Height = w, h }}
}

// take is the edit to a known size, lying or standing as the sheet does.
func (s *Screen) take(z sheet.Size) edit {
	if s.lies() {
		return setSize(z.Height, z.Width)
	}
	return setSize(z.Width, z.Height)
}

// nextSize is the next larger size of the same series, or the next smaller; of
// a sheet without a name, of ISO A.
func nextSize(s *Screen, by int) edit {
	sh := s.desk.Frame.Sheet
	series := "ISO A"
	if z, ok := sheet.SizeByName(sheet.Name(sh.Width, sh.Height)); ok {
		series = z.Series
	}
	var row []sheet.Size
	for _, z := range sheet.Sizes() {
		if z.Series == series {
			row = append(row, z)
		}
	}
	area := func(w, h sheet.Length) float64 { return w.MM(s.resolve().Sheet.PPI) * h.MM(s.resolve().Sheet.PPI) }
	sort.Slice(row, func(i, j int) bool { return area(row[i].Width, row[i].Height) < area(row[j].Width, row[j].Height) })
	now := area(sh.Width, sh.Height)
	const alike = 1e-9
	at := -1
	for i, z := range row {
		switch a := area(z.Width, z.Height); {
		case by > 0 && a > now*(1+alike):
			return s.take(z)
		case by < 0 && a < now*(1-alike):
			at = i
		}
	}
	if at < 0 {
		return edit{}
	}
	return s.take(row[at])
}

func shownTurn(s *Screen) (string, string) {
	sh, ppi := s.desk.Frame.Sheet, s.resolve().Sheet.PPI
	switch sh.Width.RatMM(ppi).Cmp(sh.Height.RatMM(ppi)) {
	case 1:
		return "landscape", ""
	case -1:
		return "portrait", ""
	}
	return "square", ""
}

func swapSides() edit {
	return edit{frame: func(f *frame.Frame) { f.Sheet.Width, f.Sheet.Height = f.Sheet.Height, f.Sheet.Width }}
}

// standing says what a sheet is called and where the name comes from, or what
// would hold it.
func (s *Screen) standing() (name, aside string) {
	sh := s.desk.Frame.Sheet
	if z, ok := sheet.SizeByName(sheet.Name(sh.Width, sh.Height)); ok {
		return z.Name, z.Standard
	}
	w, h := s.trimMM()
	if z, ok := sheet.Holder(w, h); ok {
		return "a size of its own", z.Name + " holds it"
	}
	return "a size of its own", "beyond 4A0"
}

// trimMM is the trim's width and height in millimetres, as printed: in whole
// pixels.
func (s *Screen) trimMM() (w, h float64) {
	g := s.resolve().Sheet
	return mm(g, g.TrimW), mm(g, g.TrimH)
}

// mm is so many pixels of a sheet in millimetres.
func mm(g sheet.Geometry, pixels int) float64 { return float64(pixels) * 25.4 / float64(g.PPI) }
