package prints

import (
	"fmt"
	"math"
	"path/filepath"

	"github.com/charmbracelet/lipgloss"

	"leadline/jobs"
	"leadline/render/words"
	"leadline/tui/kit"
)

// title is what a print is called: its title, else its file.
func title(p *jobs.Print) string {
	if t := clean(p.Title); t != "" {
		return t
	}
	return clean(filepath.Base(p.Out))
}

// stateSign tells states apart without colour, in one cell each, with characters
// of WGL4 that nearly every font has.
func stateSign(p *jobs.Print) string {
	if p.Paused {
		return "║"
	}
	switch p.State {
	case jobs.Planning:
		return "◊"
	case jobs.Rendering:
		return "►"
	case jobs.Assembling:
		return "▲"
	case jobs.Done:
		return "●"
	case jobs.Cancelled:
		return "×"
	case jobs.Failed:
		return "!"
	}
	return "○" // queued
}

func stateStyle(s kit.Style, p *jobs.Print) lipgloss.Style {
	switch {
	case p.Paused:
		return s.Warn
	case p.State == jobs.Done:
		return s.Good
	case p.State == jobs.Failed:
		return s.Bad
	case p.State == jobs.Queued, p.State == jobs.Cancelled:
		return s.Faint
	}
	return s.Lead
}

// share is the finished part of a print's tiles, 0…1.
func share(p *jobs.Print) float64 {
	if p.Tiles <= 0 {
		return 0
	}
	return min(1, float64(p.Done)/float64(p.Tiles))
}

// percent rounds down: 100 % is all.
func percent(share float64) string { return fmt.Sprintf("%d %%", int(share*100)) }

// moving says that the time left of a print is known.
func moving(p *jobs.Print) bool { return p.Left > 0 && !p.Paused && p.State == jobs.Rendering }

// leftWords is the time to go with its range; "" where nothing is known.
func leftWords(p *jobs.Print) string {
	left, between := p.LeftWords()
	if between == "" {
		return left
	}
	return left + ", " + between
}

// leftShort is the time to go and how well it is known.
func leftShort(p *jobs.Print) string {
	switch {
	case !moving(p):
		return ""
	case p.LeftHigh <= 0:
		return words.Span(p.Left) + " ±  ? %"
	}
	return words.Span(p.Left) + " ±" + margin(p.Left, p.LeftHigh)
}

func margin(left, high float64) string {
	return fmt.Sprintf("%3.0f %%", math.Ceil(100*(high-left)/left))
}

// outlook is how the whole queue stands.
type outlook struct {
	moving, waiting, held, over int // prints
	rate                        float64
	left, low, high             float64 // seconds; low and high are 0 where there is no telling
	guessed                     int     // prints whose pace is taken to be that of the others
}

// look over all prints. One that moves would take its Left times its part of the
// workers if they all went to it; the parts make one, so that the time for all
// lies between the least and the greatest Left, and their mean is an estimate.
// Prints that wait are taken to go at the pace of those that move.
func overall(all []jobs.Print) (o outlook) {
	known, sure := 0, true
	var pixels int64
	for i := range all {
		p := &all[i]
		switch {
		case p.Over():
			o.over++
			continue
		case p.Paused:
			o.held++
			continue
		case p.State == jobs.Queued:
			o.waiting++
		default:
			o.moving++
		}
		if !moving(p) {
			if rest := p.Pixels - p.Pixel; rest > 0 {
				pixels += rest
				o.guessed++
			}
			continue
		}
		if known++; known == 1 || p.LeftLow < o.low {
			o.low = p.LeftLow
		}
		o.left += p.Left
		o.high = max(o.high, p.LeftHigh)
		o.rate += p.Rate
		sure = sure && p.LeftHigh > 0
	}
	if known > 0 {
		o.left = o.left/float64(known) + float64(pixels)/o.rate
	}
	if !sure || o.guessed > 0 {
		o.low, o.high = 0, 0
	}
	return o
}

// counts says how many prints stand how.
func (o outlook) counts() string {
	s := "nothing under way"
	if o.moving > 0 {
		s = words.Plural(o.moving, "print under way", "prints under way")
	}
	for _, c := range []struct {
		n    int
		word string
	}{{o.waiting, "waiting"}, {o.held, "paused"}, {o.over, "over"}} {
		if c.n > 0 {
			s += fmt.Sprintf(", %d %s", c.n, c.word)
		}
	}
	return s
}

// time says how long the whole queue takes, from long to short.
func (o outlook) time(workers int) []string {
	switch {
	case o.moving+o.waiting == 0:
		return []string{"nothing left to do"}
	case o.left <= 0 && workers == 0:
		return []string{"nobody works on the queue", "nobody works on it"}
	case o.left <= 0:
		return []string{"the whole queue: time left not known yet", "time left not known yet"}
	}
	t := words.Span(o.left)
	if o.guessed > 0 {
		t = "about " + t
	}
	short := []string{"whole queue: " + t + " left", t + " in all"}
	switch {
	case o.guessed > 0:
		others := "the other goes"
		if o.guessed > 1 {
			others = fmt.Sprintf("the %d others go", o.guessed)
		}
		return append([]string{fmt.Sprintf("whole queue: %s left, if %s as fast", t, others)}, short...)
	case o.high > 0:
		return append([]string{fmt.Sprintf("whole queue: %s left, %s", t, words.Between(o.low, o.high)),
			fmt.Sprintf("whole queue: %s ±%s", t, margin(o.left, o.high))}, short...)
	}
	return short
}
