package inking

import (
	"fmt"
	"strconv"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render/frame"
)

// kind is a kind of line in the list.
type kind uint8

const (
	nothing kind = iota
	theRamp
	aStop
	smooth
	ends
	scale
	exponent
	laid
	fitLow
	fitHigh
	period
	offset
	base
	inside
	edgeWidth
	edgeColour
	mixer // not a line: a slider that the mouse holds
)

// place is a line of the list.
type place struct {
	kind kind
	stop int // of a stop, from 0; of the mixer, the slider
}

// row is a line of the list: what it shows, and what can be done on it.
type row struct {
	place
	label string
	value string
	// step is what the left and right arrows do; nil: nothing.
	step func(by int, fine bool) tea.Cmd
	// typed is what a typed value does; nil: nothing can be typed. plain is
	// what the question proposes.
	typed func(k *frame.Ink, text string) error
	plain string
	what  string // for the history, when typed
}

func indexOf(rows []row, p place) int {
	for i, r := range rows {
		if r.place == p {
			return i
		}
	}
	return -1
}

// rows is the list for the frame on the desk.
func (s *Screen) rows() []row {
	if s.cache.rows == nil || s.cache.rowsOf != s.desk.Frame || s.cache.rowsFree != s.free {
		s.cache.rows = append(append(s.rampRows(), s.driveRows()...), s.otherRows()...)
		s.cache.rowsOf, s.cache.rowsFree = s.desk.Frame, s.free
	}
	return s.cache.rows
}

func (s *Screen) rampRows() []row {
	r := s.now().ramp
	out := []row{{place: place{kind: theRamp}, label: "ramp", value: s.nameOf(r), step: func(by int, _ bool) tea.Cmd { return s.nextRamp(by) }}}
	for i, stop := range r.Stops {
		out = append(out, row{place: place{aStop, i}, label: "stop " + strconv.Itoa(i+1), value: fmt.Sprintf("%.3f", stop.At),
			step: func(by int, fine bool) tea.Cmd {
				return s.moveStop(i, r.Stops[i].At+float64(by)*pick(fine, 0.001, 0.01))
			},
			typed: func(k *frame.Ink, text string) error { return s.typePlace(k, i, text) },
			plain: fmt.Sprint(stop.At), what: "stop moved"})
	}
	between, seam := "straight", "apart"
	if r.Smooth {
		between = "smooth"
	}
	switch {
	case r.Cyclic() && s.free:
		seam = "meet, untied"
	case r.Cyclic():
		seam = "meet, tied"
	}
	return append(out,
		row{place: place{kind: smooth}, label: "between", value: between, step: func(int, bool) tea.Cmd { return s.toggleSmooth() }},
		row{place: place{kind: ends}, label: "ends", value: seam, step: func(int, bool) tea.Cmd { return s.toggleEnds() }})
}

func (s *Screen) driveRows() []row {
	d := s.now().resolved.Drive
	out := []row{{place: place{kind: scale}, label: "scale", value: string(d.Scale), step: func(by int, _ bool) tea.Cmd { return s.setScale(by) }}}
	num := func(is kind, label string, v0 float64, unit, what string, next func(v float64, by int, fine bool) float64, put func(d *frame.Drive, v float64)) {
		out = append(out, row{place: place{kind: is}, label: label, value: short(v0) + unit, plain: short(v0), what: what,
			step: func(by int, fine bool) tea.Cmd {
				return s.changeDrive(what, what, func(d *frame.Drive) { put(d, next(v0, by, fine)) })
			},
			typed: func(k *frame.Ink, text string) error {
				v, err := number(strings.TrimSuffix(text, "%"))
				if err == nil && v <= 0 && (is == period || is == exponent) {
					err = &refusal{label + " must be above 0", "a number such as " + short(v0)}
				}
				if err != nil {
					return err
				}
				return driven(k, func(d *frame.Drive) { put(d, v) })
			}})
	}
	if d.Scale == frame.Power {
		num(exponent, "exponent", d.Exponent, "", "exponent changed", adding(0.05, 0.01, 0.01, frame.MaxPower),
			func(d *frame.Drive, v float64) { d.Exponent = v })
	}
	if d.Period == 0 {
		out = append(out, row{place: place{kind: laid}, label: "laid", value: "once, fitted", step: func(int, bool) tea.Cmd { return s.toggleLaid() }})
		num(fitLow, "from", d.Fit.Low, " %", "fit changed", adding(0.5, 0.1, 0, d.Fit.High-0.1), func(e *frame.Drive, v float64) { e.Fit = &frame.Fit{Low: v, High: d.Fit.High} })
		num(fitHigh, "to", d.Fit.High, " %", "fit changed", adding(0.5, 0.1, d.Fit.Low+0.1, 100), func(e *frame.Drive, v float64) { e.Fit = &frame.Fit{Low: d.Fit.Low, High: v} })
		return append(out, s.baseRow(d))
	}
	out = append(out, row{place: place{kind: laid}, label: "laid", value: "over and over", step: func(int, bool) tea.Cmd { return s.toggleLaid() }})
	num(period, "period", d.Period, "", "period changed", growing(0.1, 0.01), func(d *frame.Drive, v float64) { d.Period = v })
	num(offset, "offset", d.Offset, "", "offset changed", adding(0.05, 0.005, -frame.MaxCount, frame.MaxCount), func(d *frame.Drive, v float64) { d.Offset = given(v, 0) })
	return append(out, s.baseRow(d))
}

// baseRow is the count that the scale starts from, which a fit finds itself
// unless it is given.
func (s *Screen) baseRow(d frame.ResolvedDrive) row {
	r := row{place: place{kind: base}, label: "base", value: short(d.Base), plain: short(d.Base), what: "base changed"}
	own := s.desk.Frame.Ink.Drive.Base
	if own == nil && d.Period == 0 {
		r.value = "found by the fit"
		if f := d.Fitted; f != nil {
			r.value = short(f.Base) + ", by the fit"
		}
		r.plain = ""
	}
	r.step = func(by int, fine bool) tea.Cmd {
		return s.changeDrive(r.what, r.what, func(d *frame.Drive) {
			from := 0.0
			if own != nil {
				from = *own
			} else if d.Period == 0 {
				from = s.fitted(s.now()).Base
			}
			d.Base = new(min(max(from+float64(by)*pick(fine, 1.0, 10.0), -frame.MaxCount), frame.MaxCount))
		})
	}
	r.typed = func(k *frame.Ink, text string) error {
		if strings.TrimSpace(text) == "" {
			return driven(k, func(d *frame.Drive) { d.Base = nil })
		}
		v, err := number(text)
		if err != nil {
			return err
		}
		return driven(k, func(d *frame.Drive) { d.Base = &v })
	}
	return r
}

func (s *Screen) otherRows() []row {
	out := []row{{place: place{kind: inside}, label: "inside"}}
	width := "none"
	if e := s.desk.Frame.Ink.Edge; e != nil {
		width = spaced(e.Width.String())
	}
	out = append(out, row{place: place{kind: edgeWidth}, label: "edge", value: width, what: "edge line changed", plain: strings.ReplaceAll(width, " ", ""),
		step:  func(by int, fine bool) tea.Cmd { return s.stepEdge(float64(by) * pick(fine, 0.01, 0.05)) },
		typed: s.typeEdge})
	if s.desk.Frame.Ink.Edge != nil {
		out = append(out, row{place: place{kind: edgeColour}, label: "edge ink"})
	}
	return out
}

// adding is a step by a fixed amount within bounds, growing by a share.
func adding(coarse, fine, low, high float64) func(float64, int, bool) float64 {
	return func(v float64, by int, isFine bool) float64 {
		unit := pick(isFine, fine, coarse)
		return min(max(figures(rounded(v+float64(by)*unit), 12), low), high)
	}
}

func growing(coarse, fine float64) func(float64, int, bool) float64 {
	return func(v float64, by int, isFine bool) float64 { return grown(v, pick(isFine, fine, coarse), by) }
}

// given is a pointer to v, nil where it is the default.
func given(v, usual float64) *float64 {
	if v == usual {
		return nil
	}
	return &v
}

func pick[T any](yes bool, a, b T) T {
	if yes {
		return a
	}
	return b
}

// short is a number for people.
func short(v float64) string { return strconv.FormatFloat(v, 'g', 6, 64) }

// spaced puts a space before a length's unit.
func spaced(length string) string {
	digits := strings.TrimRight(length, "abcdefghijklmnopqrstuvwxyz")
	return digits + " " + length[len(digits):]
}

// number reads a plain number.
func number(text string) (float64, error) {
	v, err := strconv.ParseFloat(strings.TrimSpace(text), 64)
	if err != nil || v != v || v-v != 0 {
		return 0, &refusal{fmt.Sprintf("%q is not a number", strings.TrimSpace(text)), "write a plain number, such as 0.35 or 2.5e3"}
	}
	return v, nil
}
