package board

import (
	"cmp"
	"fmt"
	"net/url"
	"slices"
	"strings"
	"time"

	"leadline/jobs"
	"leadline/render/words"
)

// card is one print as the pages show it.
type card struct {
	ID                 int64
	Name, File         string
	State, Share       string // in words
	Scale              scale
	Tiles, Rate, Left  string
	Note, Cure         string
	Picture            picture
	Actions            []action
	Facts              []fact
	Moving, Over, Good bool
}

// picture is a print's thumbnail, or the empty sheet.
type picture struct {
	Source        string // "" while there is none
	Alt           string
	Width, Height int
}

// fact is a line of a print's page.
type fact struct {
	Name, Value string
	Literal     bool // a path or a hash
}

// scale is the bar of tiles, drawn like the border of a chart: ten lengths by
// turns dark and light, as far as the print is done.
type scale struct {
	Now     string // per cent, for readers of the page aloud
	Lengths []length
	Marks   []int // between the lengths
}

type length struct {
	X, Width int // of 1000
	Dark     bool
}

func newScale(share float64) scale {
	s := scale{Now: fmt.Sprintf("%.0f", share*100)}
	done := int(share * 1000)
	for i := range 10 {
		if i > 0 {
			s.Marks = append(s.Marks, i*100)
		}
		if w := min(done-i*100, 100); w > 0 {
			s.Lengths = append(s.Lengths, length{i * 100, w, i%2 == 0})
		}
	}
	return s
}

// newCard describes a print; mark is its picture's.
func newCard(p *jobs.Print, mark string) card {
	done := share(p)
	c := card{ID: p.ID, Name: name(p), File: p.Out, State: p.Word(), Share: percent(done), Scale: newScale(done),
		Left: left(p), Note: p.Reason, Cure: p.Hint, Moving: moving(p), Over: p.Over(), Good: p.State == jobs.Done}
	c.Tiles = fmt.Sprintf("%s of %s", words.Count(int64(p.Done)), words.Plural(p.Tiles, "tile", "tiles"))
	if p.Rate > 0 {
		c.Rate = words.Amount(p.Rate, "px/s")
	}
	if !p.Over() && !p.Paused && p.Progress.Workers == 0 {
		c.Note = fmt.Sprintf("No worker of release %s with numerics %d is there.", p.Release, p.Numerics)
		c.Cure = "leadline work, on this machine or another, goes on with it"
	}
	c.Picture = newPicture(p, mark)
	c.Actions = actions(p)
	return c
}

// pictureSide is the longest side of a thumbnail.
const pictureSide = 480

func newPicture(p *jobs.Print, mark string) picture {
	w, h := max(p.Width, 1), max(p.Height, 1)
	if long := max(w, h); long > pictureSide {
		w, h = max(1, w*pictureSide/long), max(1, h*pictureSide/long)
	}
	v := picture{Alt: fmt.Sprintf("%s, %s done", name(p), percent(share(p))), Width: w, Height: h}
	if mark != "" {
		v.Source = fmt.Sprintf("/prints/%d/thumbnail.png?mark=%s", p.ID, url.QueryEscape(mark))
	}
	return v
}

// facts is all that is known of a print.
func facts(p *jobs.Print) []fact {
	all := []fact{
		{"Number", fmt.Sprint(p.ID), false},
		{"Asked for", p.Out, true},
		{"Size", size(p), false},
		{"Priority", fmt.Sprintf("%d (1 is first, 4 last)", p.Priority), false},
		{"Pixels done", fmt.Sprintf("%s of %s", words.Count(p.Pixel), words.Count(p.Pixels)), false},
		{"Tasks", fmt.Sprintf("%s begun, %s taken over from silent workers", words.Count(p.Attempts), words.Count(p.Rescued)), false},
		{"Workers", able(p), false},
		{"Release", fmt.Sprintf("%s, numerics %d", p.Release, p.Numerics), false},
		{"Added", when(p.Added), false},
		{"Begun", when(p.Began), false},
		{"Ended", when(p.Ended), false},
		{"File", p.File, true},
		{"Sidecar", p.Sidecar, true},
		{"Pixels' SHA-256", p.SHA256, true},
	}
	if p.Bytes > 0 {
		all = append(all, fact{"File size", words.Amount(float64(p.Bytes), "B"), false})
	}
	return slices.DeleteFunc(all, func(f fact) bool { return f.Value == "" })
}

// able says who could work on a print that is not over.
func able(p *jobs.Print) string {
	if p.Over() {
		return ""
	}
	return fmt.Sprintf("%d that could work on it", p.Progress.Workers)
}

// size is what is printed, and at which scale.
func size(p *jobs.Print) string {
	s := fmt.Sprintf("%s × %s px", words.Count(int64(p.Width)), words.Count(int64(p.Height)))
	if p.Scale > 1 {
		s += fmt.Sprintf(" at 1/%d", p.Scale)
	}
	return s
}

// hand is a worker as the page shows it.
type hand struct {
	Name, Busy, Rate, Tiles, Kind, Seen string
	Holding                             []string
}

func newHand(w *jobs.Worker) hand {
	h := hand{Name: w.Name, Kind: fmt.Sprintf("release %s, numerics %d", w.Release, w.Numerics), Holding: w.Holding,
		Busy: fmt.Sprintf("%d of %s busy", w.Running, words.Plural(w.Slots, "slot", "slots")),
		Seen: "seen " + words.Span(max(0, time.Since(w.Seen).Seconds())) + " ago"}
	if w.Rate > 0 {
		h.Rate = words.Amount(w.Rate, "px/s")
		h.Tiles = words.Plural(int(w.Tiles), "tile", "tiles") + " in the last minute"
	}
	return h
}

// home is the page of all prints.
type home struct {
	Title, Sum           string
	Now, Waiting, Over   []card
	More                 int // finished prints that are not listed
	Hands                []hand
	Empty, Live, Console bool
}

// recent is how many finished prints are listed unless all are asked for.
const recent = 12

func newHome(s *sight, all bool) *home {
	h := &home{Empty: len(s.Prints) == 0, Live: true}
	done := make([]*jobs.Print, 0, len(s.Prints))
	for i := range s.Prints {
		switch p := &s.Prints[i]; {
		case p.Over():
			done = append(done, p)
		case moving(p):
			h.Now = append(h.Now, newCard(p, s.marks[p.ID]))
		default:
			h.Waiting = append(h.Waiting, newCard(p, s.marks[p.ID]))
		}
	}
	slices.SortStableFunc(done, func(a, b *jobs.Print) int {
		return cmp.Or(b.Ended.Compare(a.Ended), cmp.Compare(b.ID, a.ID))
	})
	shown := done
	if !all && len(done) > recent {
		shown = done[:recent]
	}
	h.More = len(done) - len(shown)
	for _, p := range shown {
		h.Over = append(h.Over, newCard(p, s.marks[p.ID]))
	}
	rate := 0.0
	for i := range s.Workers {
		h.Hands = append(h.Hands, newHand(&s.Workers[i]))
		rate += s.Workers[i].Rate
	}
	h.Sum, h.Title = sum(h, len(done), rate)
	return h
}

// sum says in one line how the queue stands, and shorter for the tab.
func sum(h *home, done int, rate float64) (line, tab string) {
	parts := []string{"nothing under way"}
	if n := len(h.Now); n > 0 {
		parts[0] = words.Plural(n, "print under way", "prints under way")
	}
	if n := len(h.Waiting); n > 0 {
		parts = append(parts, fmt.Sprintf("%d waiting", n))
	}
	if done > 0 {
		parts = append(parts, fmt.Sprintf("%d over", done))
	}
	parts = append(parts, words.Plural(len(h.Hands), "worker", "workers"))
	if rate > 0 {
		parts = append(parts, words.Amount(rate, "px/s"))
	}
	tab = "leadline board"
	if len(h.Now) > 0 {
		tab = h.Now[0].Share + " " + h.Now[0].Name + " – " + tab
	}
	return strings.Join(parts, " · "), tab
}
