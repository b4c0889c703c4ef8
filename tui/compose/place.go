package compose

import (
	"errors"
	"fmt"
	"strconv"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/precision"
	"leadline/render/frame"
	"leadline/render/sheet"
	"leadline/tui/kit"
)

// placeError says that a text is no place.
type placeError struct{ err error }

func (e *placeError) Error() string { return e.err.Error() }
func (e *placeError) Unwrap() error { return e.err }

// Hint says what a place looks like.
func (e *placeError) Hint() string {
	return "write RE IM, with a height behind them if it changes; or d and a depth, such as d 120.5"
}

// askPlace asks for a place or a depth; text that was pasted is the proposal.
func (s *Screen) askPlace(text string) tea.Cmd {
	check := func(t string) error {
		if strings.TrimSpace(t) == "" {
			return &placeError{errors.New("nothing is written yet")}
		}
		_, err := parsePlace(t, s.desk.Frame)
		return err
	}
	return s.ask.Ask("go to", strings.Join(strings.Fields(text), " "), check, func(t string) tea.Cmd {
		f, err := parsePlace(t, s.desk.Frame)
		if err == nil {
			if !s.desk.Pinned {
				f.Iteration.Limit = startLimit // the old one says nothing of another place
			}
			err = s.desk.Put("went to a place", f)
		}
		return kit.Fail(err)
	})
}

// numbers splits a place: numbers set apart by spaces, commas or line ends, with
// an i, a brace or quotes about them left out.
func numbers(text string) []string {
	return strings.FieldsFunc(text, func(r rune) bool { return strings.ContainsRune(" \t\r\n,;()[]{}\"'i", r) })
}

// parsePlace is the frame with the view that a text names.
func parsePlace(text string, f *frame.Frame) (*frame.Frame, error) {
	g := f.Clone()
	g.Ink.Drive.Fitted = nil
	parts := numbers(text)
	var err error
	switch {
	case len(parts) == 2 && strings.EqualFold(parts[0], "d"):
		g.View.Height, err = heightAt(parts[1])
	case len(parts) == 2 || len(parts) == 3:
		if g.View.Centre.Re, err = number(parts[0]); err == nil {
			g.View.Centre.Im, err = number(parts[1])
		}
		if err == nil && len(parts) == 3 {
			g.View.Height, err = number(parts[2])
		}
	default:
		err = fmt.Errorf("a place has two numbers or three, not %d", len(parts))
	}
	if err == nil {
		err = g.Validate()
	}
	if err != nil {
		return nil, &placeError{err}
	}
	return g, nil
}

// number reads a decimal; a plus sign is taken too.
func number(s string) (precision.Decimal, error) {
	return precision.ParseDecimal(strings.TrimPrefix(s, "+"))
}

// heightAt is the height at a depth: 10^-depth.
func heightAt(s string) (precision.Decimal, error) {
	depth, err := strconv.ParseFloat(s, 64)
	if err != nil || depth < -3 || depth > precision.MaxExponent-100 {
		return precision.Decimal{}, fmt.Errorf("%q is not a depth", s)
	}
	whole := int(depth)
	if float64(whole) > depth {
		whole--
	}
	part := precision.Pow(10, 1-(depth-float64(whole)))
	return precision.ParseDecimal(fmt.Sprintf("%.4fe%d", part, -whole-1))
}

// reset shows the whole set, on the sheet as it is.
func (s *Screen) reset() tea.Cmd {
	return kit.Fail(s.desk.Change("went back to the whole set", func(f *frame.Frame) error {
		v := wholeView(f)
		g, err := f.Sheet.Geometry()
		if err != nil {
			return err
		}
		f.View, f.Ink.Drive.Fitted = v, nil
		if !s.desk.Pinned {
			f.Iteration.Limit = startLimit
		}
		return fitWidth(f, g)
	}))
}

// startLimit is the iteration limit at the whole set.
const startLimit = 1000

// wholeView shows all of a set: its width and height about its middle.
func wholeView(f *frame.Frame) frame.View {
	dec := func(t string) precision.Decimal {
		d, err := precision.ParseDecimal(t)
		if err != nil {
			panic(err) // written in the program
		}
		return d
	}
	v := frame.View{Height: dec("2.6")}
	switch {
	case f.Set.Kind == frame.Julia:
		v.Height = dec("3.4")
	case f.Set.Power != 3:
		v.Centre.Re = dec("-0.6")
	}
	return v
}

// fitWidth makes the height larger where the sheet is upright, so that the
// set's width, about that of its height and a fifth more, fits.
func fitWidth(f *frame.Frame, g sheet.Geometry) error {
	aspect := float64(g.TrimW) / float64(g.TrimH)
	if aspect >= 1.2 {
		return nil
	}
	h := f.View.Height.Ext().Float64() * 1.2 / aspect
	var err error
	f.View.Height, err = precision.ParseDecimal(strconv.FormatFloat(h, 'g', 4, 64))
	return err
}
