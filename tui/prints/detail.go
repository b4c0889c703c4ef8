package prints

import (
	"fmt"
	"strings"
	"time"

	"github.com/charmbracelet/lipgloss"

	"leadline/jobs"
	"leadline/render"
	"leadline/render/words"
)

// labelWidth is that of the names of facts.
const labelWidth = 9

// facts is all that is known of a print, in lines of at most width cells.
func (s *Screen) facts(p *jobs.Print, width int) []string {
	st := s.desk.Style
	f := &factList{width: width, label: st.Faint, text: st.Text}
	f.lines = append(f.lines, row{{stateSign(p) + " " + p.Word(), stateStyle(st, p).Bold(true)},
		{fmt.Sprintf("  %s of %s, %s", words.Count(int64(p.Done)), words.Plural(p.Tiles, "tile", "tiles"), percent(share(p))), st.Text}}.render(width, nil))
	f.lines = append(f.lines, row(tileBar(st, p, min(width, 60))).render(width, nil))
	if p.Reason != "" {
		f.say(st.Bad, p.Reason)
		if p.Hint != "" {
			f.say(st.Warn, p.Hint)
		}
	}
	s.nobody(f, p)
	f.fact("left", leftWords(p), "")
	f.fact("rate", rateWords(p), "")
	f.fact("out", p.Out, "/")
	f.fact("size", sizeWords(p), "")
	f.fact("priority", fmt.Sprintf("%d (1 is first, 4 last)", p.Priority), "")
	f.fact("tasks", fmt.Sprintf("%s begun, %s rescued from silent workers", words.Count(p.Attempts), words.Count(p.Rescued)), "")
	if !p.Over() {
		f.fact("workers", fmt.Sprintf("%d that could work on it", p.Progress.Workers), "")
	}
	f.fact("added", when(p.Added), "")
	f.fact("ended", when(p.Ended), "")
	if p.File != "" {
		if p.File != p.Out {
			f.fact("file", p.File, "/")
		}
		f.fact("holds", words.Size(p.Bytes), "")
		f.fact("sidecar", p.Sidecar, "/")
		f.fact("sha256", p.SHA256, "")
	}
	return f.lines
}

// nobody says that no worker could make a print that is still to be made.
func (s *Screen) nobody(f *factList, p *jobs.Print) {
	st := s.desk.Style
	switch {
	case p.Over() || p.Paused || p.Progress.Workers > 0:
	case p.Release != render.Release || p.Numerics != render.Numerics:
		f.say(st.Warn, fmt.Sprintf("No worker of release %s with numerics %d is there; this is %s with %d.",
			p.Release, p.Numerics, render.Release, render.Numerics))
	case s.hand == nil:
		f.say(st.Warn, "Nobody works on it. w works here.")
	}
}

// sizeWords is what is printed, and at which scale.
func sizeWords(p *jobs.Print) string {
	s := fmt.Sprintf("%s × %s px", words.Count(int64(p.Width)), words.Count(int64(p.Height)))
	if p.Scale > 1 {
		s += fmt.Sprintf(" at 1/%d", p.Scale)
	}
	return s
}

// when writes a moment in this machine's zone.
func when(t time.Time) string {
	if t.IsZero() {
		return ""
	}
	return t.Local().Format("2 Jan 2006 15:04:05")
}

// factList collects the lines of facts.
type factList struct {
	width       int
	label, text lipgloss.Style
	lines       []string
}

// fact adds a name and its value, broken at spaces and at the characters of at;
// one without a value is left out.
func (f *factList) fact(name, value, at string) {
	if value == "" {
		return
	}
	for i, l := range wrap(value, f.width-labelWidth, at) {
		if i > 0 {
			name = ""
		}
		f.lines = append(f.lines, f.label.Render(fmt.Sprintf("%-*s", labelWidth, name))+f.text.Render(l))
	}
}

// say adds a sentence.
func (f *factList) say(style lipgloss.Style, text string) {
	for _, l := range wrap(text, f.width, "/") {
		f.lines = append(f.lines, style.Render(l))
	}
}

// printPane is everything about the chosen print: its picture over the facts, or
// beside them where the pane is low and wide. The facts begin at line *at.
func (s *Screen) printPane(width, height int, at *int) []string {
	p := s.print()
	if p == nil {
		return nil
	}
	if width >= 60 && height < 26 {
		pic := s.thumb(p, width*2/5, height)
		room := width
		if len(pic) > 0 {
			room -= lipgloss.Width(pic[0]) + 2
		}
		return beside(pic, window(s.desk.Style, s.facts(p, room), height, at))
	}
	facts := s.facts(p, width)
	pic := s.thumb(p, width, min(height*3/5, height-len(facts)-1))
	if len(pic) > 0 {
		pic = append(pic, "")
	}
	return append(pic, window(s.desk.Style, facts, height-len(pic), at)...)
}

// beside sets a picture to the left of lines.
func beside(pic, lines []string) []string {
	if len(pic) == 0 {
		return lines
	}
	blank := strings.Repeat(" ", lipgloss.Width(pic[0]))
	out := make([]string, max(len(pic), len(lines)))
	for i := range out {
		left, right := blank, ""
		if i < len(pic) {
			left = pic[i]
		}
		if i < len(lines) {
			right = lines[i]
		}
		out[i] = left + "  " + right
	}
	return out
}
