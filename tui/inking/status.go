package inking

import (
	"fmt"
	"strings"

	"leadline/render/frame"
	"leadline/render/words"
)

// Status says how the ink stands: what leaves the sheet's space comes first.
func (s *Screen) Status() string {
	if s.ask.Open() {
		return s.ask.View(s.desk.Style, s.room.X)
	}
	st, l := s.desk.Style, s.shown()
	var parts []string
	space := l.resolved.Space
	if n := l.out(); n > 0 {
		parts = append(parts, st.Warn.Render(fmt.Sprintf("%s of %s ramp steps leave %s, by ΔE %s at most",
			words.Count(int64(n)), words.Count(frame.RampSize), space, deltaWords(l.most))))
	}
	for _, c := range s.othersOutside() {
		parts = append(parts, st.Warn.Render(c))
	}
	if len(parts) == 0 {
		parts = append(parts, st.Good.Render("all within "+space.String()))
	}
	if s.locker != nil {
		if s.locker.reading {
			parts = append(parts, st.Faint.Render("reading ramp files"))
		}
		return strings.Join(append(parts, st.Text.Render("enter takes the ramp, esc leaves it")), "  ")
	}
	if d := l.resolved.Drive; d.Period == 0 && s.desk.Picture != nil {
		f := s.fitted(l)
		word := "fitted"
		if d.Fitted != nil {
			word = "frozen"
		}
		parts = append(parts, st.Faint.Render(word+" ")+st.Text.Render(fmt.Sprintf("%.3g to %.3g over %s", f.Low, f.High, short(f.Base))))
	}
	if d := l.resolved.Drive; d.Period != 0 {
		parts = append(parts, st.Faint.Render("one ramp for every ")+st.Text.Render(short(d.Period))+st.Faint.Render(" of "+bent(d)))
	}
	return strings.Join(parts, "  ")
}

// bent is the scaled count in letters, n being the smooth count.
func bent(d frame.ResolvedDrive) string {
	from := "n"
	if d.Base != 0 {
		from = "n - " + short(d.Base)
	}
	switch d.Scale {
	case frame.Log:
		return "ln(1 + " + from + ")"
	case frame.Power:
		return "(" + from + ")^" + short(d.Exponent)
	}
	return from
}

// othersOutside warns of the inside and the edge line.
func (s *Screen) othersOutside() (out []string) {
	r := s.shown().resolved
	if d := beyond(r.Inside, r.Space); d > 0 {
		out = append(out, fmt.Sprintf("the inside leaves %s by ΔE %s", r.Space, deltaWords(d)))
	}
	if r.Edge.Width > 0 {
		if d := beyond(r.Edge.Colour, r.Space); d > 0 {
			out = append(out, fmt.Sprintf("the edge line leaves %s by ΔE %s", r.Space, deltaWords(d)))
		}
	}
	return out
}
