package paper

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"leadline/render/frame"
	"leadline/render/sheet"
)

// entryError says that a text is not what a field takes.
type entryError struct{ what, hint string }

func (e *entryError) Error() string { return e.what }

// Hint says what the field takes.
func (e *entryError) Hint() string { return e.hint }

// whole reads a whole number; 0 stands for nothing written.
func whole(text string) (int, error) {
	t := strings.NewReplacer(",", "", " ", "", "_", "").Replace(text)
	if t == "" {
		return 0, nil
	}
	n, err := strconv.Atoi(t)
	if err != nil || n < 1 {
		return 0, &entryError{fmt.Sprintf("%.40q is not a whole number above 0", text), "write a whole number, or nothing for the default"}
	}
	return n, nil
}

// beside is the value of a list after the present one, or before it; the
// present one again at the list's end.
func beside(list []float64, now float64, by int) float64 {
	to := now
	for i := range list {
		if v := list[i]; by > 0 && v > now*(1+1e-9) {
			return v
		} else if by < 0 && v < now*(1-1e-9) {
			to = v
		}
	}
	return to
}

// ppiSteps are the resolutions in use (common practice, no source).
var ppiSteps = []float64{72, 100, 150, 200, 240, 300, 360, 400, 600, 720, 1200}

func shownPPI(s *Screen) (string, string) {
	ppi := s.resolve().Sheet.PPI
	aside := ""
	if float64(ppi) > s.eye() {
		aside = "more than eyes resolve"
	}
	return strconv.Itoa(ppi), aside
}

func textPPI(s *Screen) string { return strconv.Itoa(s.resolve().Sheet.PPI) }

func readPPI(_ *Screen, text string) (edit, error) {
	n, err := whole(text)
	return edit{frame: func(f *frame.Frame) { f.Sheet.PPI = n }}, err
}

func nextPPI(s *Screen, by int) edit {
	to := int(beside(ppiSteps, float64(s.resolve().Sheet.PPI), by))
	return edit{frame: func(f *frame.Frame) { f.Sheet.PPI = to }}
}

// The margins.

func bleedOf(s *Screen) sheet.Length {
	if l := s.desk.Frame.Sheet.Bleed; !l.IsZero() {
		return l
	}
	return sheet.MustLength(frame.DefaultBleed)
}

func safeOf(s *Screen) sheet.Length {
	if l := s.desk.Frame.Sheet.Safe; !l.IsZero() {
		return l
	}
	return sheet.MustLength(frame.DefaultSafe)
}

func setBleed(f *frame.Frame, l sheet.Length) { f.Sheet.Bleed = l }
func setSafe(f *frame.Frame, l sheet.Length)  { f.Sheet.Safe = l }

func margin(of func(*Screen) sheet.Length) func(*Screen) (string, string) {
	return func(s *Screen) (string, string) {
		l := of(s)
		n := l.Pixels(s.resolve().Sheet.PPI)
		if n == 0 {
			return "none", ""
		}
		return spaced(l), fmt.Sprintf("%d px", n)
	}
}

// readLength reads a length with or without a space before its unit; nothing
// written is no length.
func readLength(text string) (sheet.Length, error) {
	t := strings.ToLower(strings.ReplaceAll(text, " ", ""))
	if t == "" {
		return sheet.Length{}, nil
	}
	return sheet.ParseLength(t)
}

func readMargin(set func(*frame.Frame, sheet.Length)) func(*Screen, string) (edit, error) {
	return func(_ *Screen, text string) (edit, error) {
		l, err := readLength(text)
		return edit{frame: func(f *frame.Frame) { set(f, l) }}, err
	}
}

func nextMargin(of func(*Screen) sheet.Length, set func(*frame.Frame, sheet.Length), steps ...string) func(*Screen, int) edit {
	return func(s *Screen, by int) edit {
		to := stepLength(of(s), s.resolve().Sheet.PPI, by, steps)
		return edit{frame: func(f *frame.Frame) { set(f, to) }}
	}
}

// stepLength is the length of a list after the present one, or before it.
func stepLength(now sheet.Length, ppi, by int, steps []string) sheet.Length {
	list := make([]float64, len(steps))
	for i, t := range steps {
		list[i] = sheet.MustLength(t).MM(ppi)
	}
	to := beside(list, now.MM(ppi), by)
	for i, v := range list {
		if v == to && to != now.MM(ppi) {
			return sheet.MustLength(steps[i])
		}
	}
	return now
}

// The viewing distance.

// checkDistance refuses what is no distance.
func checkDistance(l sheet.Length) error {
	if l.Unit() == sheet.Px || l.IsZero() || l.MM(1) < 1 {
		return &entryError{"a distance is a length from 1 mm on", "write it in mm, cm or in, such as 60 cm"}
	}
	return nil
}

// eye is the resolution that the eye tells apart from the viewing distance.
func (s *Screen) eye() float64 { return sheet.AcuityPPI(s.distance.MM(1)) }

func shownDistance(s *Screen) (string, string) {
	return spaced(s.distance), fmt.Sprintf("eyes resolve %.0f ppi", math.Round(s.eye()))
}

func readDistance(_ *Screen, text string) (edit, error) {
	l, err := readLength(text)
	if err == nil {
		err = checkDistance(l)
	}
	return edit{distance: l}, err
}

func nextDistance(s *Screen, by int) edit {
	return edit{distance: stepLength(s.distance, 1, by, []string{"20cm", "25cm", "30cm", "40cm", "50cm", "60cm", "75cm", "100cm",
		"150cm", "200cm", "300cm", "500cm"})}
}
