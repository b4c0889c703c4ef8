package prints

import (
	"errors"
	"os"
	"path/filepath"
	"testing"

	"github.com/charmbracelet/x/ansi"

	"leadline/jobs"
	"leadline/tui/cells"
	"leadline/tui/kit"
)

// TestOutlook adds prints up as its comments say, by hand.
func TestOutlook(t *testing.T) {
	t.Parallel()
	going := func(rate, left, low, high float64) jobs.Print {
		return jobs.Print{State: jobs.Rendering, Tiles: 2, Progress: jobs.Progress{Pixels: 1000, Pixel: 500, Rate: rate, Left: left, LeftLow: low, LeftHigh: high}}
	}
	waits := jobs.Print{State: jobs.Queued, Progress: jobs.Progress{Pixels: 3000}}
	held := jobs.Print{State: jobs.Rendering, Paused: true, Progress: jobs.Progress{Pixels: 9000}}
	done := jobs.Print{State: jobs.Done, Progress: jobs.Progress{Pixels: 10, Pixel: 10}}
	for _, c := range []struct {
		prints        []jobs.Print
		workers       int
		counts, times string
	}{
		{nil, 0, "nothing under way", "nothing left to do"},
		{[]jobs.Print{done}, 1, "nothing under way, 1 over", "nothing left to do"},
		{[]jobs.Print{waits}, 0, "nothing under way, 1 waiting", "nobody works on the queue"},
		{[]jobs.Print{waits}, 1, "nothing under way, 1 waiting", "the whole queue: time left not known yet"},
		{[]jobs.Print{going(5, 200, 150, 250), held}, 1, "1 print under way, 1 paused", "whole queue: 3 min left, between 2.5 and 4.2 min"},
		{[]jobs.Print{going(5, 200, 0, 0)}, 1, "1 print under way", "whole queue: 3 min left"},
		// Each alone would take between 60·part and 120·part: 60 to 120 in all, the mean 90.
		{[]jobs.Print{going(5, 60, 50, 70), going(5, 120, 100, 140)}, 2, "2 prints under way", "whole queue: 90 s left, between 0.8 and 2.3 min"},
		// 3000 pixels at 5 + 5 a second take 300 s more: 390 s, 6.5 min.
		{[]jobs.Print{going(5, 60, 50, 70), going(5, 120, 100, 140), waits}, 2, "2 prints under way, 1 waiting", "whole queue: about 7 min left, if the other goes as fast"},
	} {
		o := overall(c.prints)
		if got := o.counts(); got != c.counts {
			t.Errorf("%q, not %q", got, c.counts)
		}
		if got := o.time(c.workers)[0]; got != c.times {
			t.Errorf("%q, not %q", got, c.times)
		}
	}
}

// TestBusy says what goes on without the screen.
func TestBusy(t *testing.T) {
	t.Parallel()
	s := still(t, cells.None, scene())
	if n, elsewhere := s.Busy(); n != 0 || !elsewhere {
		t.Errorf("%d, %v, although nothing works here and two others do", n, elsewhere)
	}
	s.hand = &hand{cancel: func() {}}
	if n, elsewhere := s.Busy(); n != 1 || !elsewhere || ansi.Strip(s.Status()) != "working here on 1 core, 1 task in hand" {
		t.Errorf("%d, %v, %q", n, elsewhere, s.Status())
	}
	for i := range s.sight.prints {
		s.sight.prints[i].Progress.Workers = 1
	}
	if _, elsewhere := s.Busy(); elsewhere {
		t.Error("the only worker is this one")
	}
}

// TestPaths proposes and refuses names.
func TestPaths(t *testing.T) {
	t.Parallel()
	for _, c := range [][3]string{{"/x/tide.frame.json", "T", "tide.png"}, {"tide.sidecar.json", "", "tide.png"}, {"a.b.json", "", "a.b.png"},
		{"tide.png", "", "tide.png"}, {"tide", "", "tide.png"}, {"", "Small Reef!", "small-reef.png"}, {"", "海", "print.png"}, {"", "", "print.png"}} {
		d := kit.NewDesk(small(t))
		d.Path, d.Frame.Title = c[0], c[1]
		if got := proposal(d); got != c[2] || checkPath(got) != nil {
			t.Errorf("%q of %q gives %q, not %q", c[0], c[1], got, c[2])
		}
	}
	for path, want := range map[string]error{"": errNoPath, "  ": errNoPath, "a": errNotPNG, ".png": errNotPNG, "a.png/": errNotPNG,
		"a.jpg": errNotPNG, "d/": errNotPNG, "a.PNG": nil, "~/p/a.png": nil} {
		if got := checkPath(path); !errors.Is(got, want) {
			t.Errorf("%q: %v, not %v", path, got, want)
		}
	}
	home, err := os.UserHomeDir()
	if err != nil {
		t.Fatal(err)
	}
	if got, err := absolute("~/p/a.png"); err != nil || got != filepath.Join(home, "p", "a.png") {
		t.Errorf("%q, %v", got, err)
	}
}

// TestNeverColourAlone tells each state by a sign and by a word of its own.
func TestNeverColourAlone(t *testing.T) {
	t.Parallel()
	signs, said := map[string]bool{}, map[string]bool{}
	f := scene()
	for i := range f.prints {
		p := &f.prints[i]
		signs[stateSign(p)], said[p.Word()] = true, true
		if ansi.StringWidth(stateSign(p)) != 1 {
			t.Errorf("the sign of %s is not one cell", p.State)
		}
	}
	if len(signs) != 8 || len(said) != 8 {
		t.Errorf("%d signs and %d words for 8 states", len(signs), len(said))
	}
}
