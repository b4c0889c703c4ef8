package prints

import (
	"fmt"
	"strings"
	"time"

	"leadline/jobs"
	"leadline/render/words"
)

// silentAfter is when a worker that shows no sign of life is marked. Its tasks
// go to others soon after.
const silentAfter = 10 * time.Second

// crew lists the workers and what each holds.
func (s *Screen) crew(width int) []string {
	st := s.desk.Style
	if len(s.sight.workers) == 0 {
		var lines []string
		for _, l := range wrap("Nobody works on this queue. w works here; so does leadline work, here or elsewhere.", width, "") {
			lines = append(lines, st.Warn.Render(l))
		}
		return lines
	}
	var lines []string
	for i := range s.sight.workers {
		w := &s.sight.workers[i]
		lines = append(lines, s.worker(w, width))
		if len(w.Holding) == 0 {
			continue
		}
		for _, l := range wrap(strings.Join(holding(w.Holding), "; "), width-2, "") {
			lines = append(lines, "  "+st.Faint.Render(l))
		}
	}
	return lines
}

// worker is a worker's own line.
func (s *Screen) worker(w *jobs.Worker, width int) string {
	st := s.desk.Style
	sign, style, manner := "○", st.Faint, st.Text
	if w.Running > 0 {
		sign, style = "►", st.Lead
	}
	busy, room := fmt.Sprintf("%d of %s busy", w.Running, words.Plural(w.Slots, "slot", "slots")), 18
	if width < 60 {
		busy, room = fmt.Sprintf("%d/%d busy", w.Running, w.Slots), 11
	}
	if silent := s.sight.at.Sub(w.Seen); silent > silentAfter {
		sign, style, manner = "!", st.Warn, st.Warn
		busy = "silent " + words.Span(silent.Seconds())
	}
	name := row{{sign + " ", style}}
	if s.here(w) {
		name = append(name, span{"here ", st.Lead})
	}
	name = append(name, span{clean(w.Name), st.Text})
	rate := ""
	if w.Rate > 0 {
		rate = words.Amount(w.Rate, "px/s")
	}
	r := cell(max(8, width-1-room-rateWidth), false, name...)
	r = append(r, span{" ", st.Text})
	r = append(r, cell(room, false, span{busy, manner})...)
	return append(r, cell(rateWidth, true, span{rate, st.Text})...).render(width, nil)
}

// rateWidth is that of a worker's rate.
const rateWidth = 10

// holding puts the tiles of one print together.
func holding(all []string) []string {
	var out []string
	last := int64(-1)
	for _, h := range all {
		var tile int
		var id int64
		if n, err := fmt.Sscanf(h, "tile %d of print %d", &tile, &id); err != nil || n != 2 {
			out, last = append(out, h), -1
			continue
		}
		if id == last {
			out[len(out)-1] += fmt.Sprintf(", %d", tile)
			continue
		}
		out, last = append(out, fmt.Sprintf("print %d: tile %d", id, tile)), id
	}
	for i, o := range out {
		if strings.Contains(o, ", ") {
			out[i] = strings.Replace(o, ": tile ", ": tiles ", 1)
		}
	}
	return out
}
