package main

import (
	"bytes"
	"context"
	"strings"
	"testing"
	"time"
	"unicode/utf8"

	"leadline/render"
)

// TestBarFits draws the bar at every width, for short and long texts: it never
// reaches the last column, where terminals wrap, and never goes below nothing.
func TestBarFits(t *testing.T) {
	for columns := range 200 {
		for _, p := range []render.Progress{
			{Phase: render.PhasePixels, Done: 0, Total: 1},
			{Phase: render.PhasePixels, Done: 1, Total: 2_400_000_000},
			{Phase: render.PhaseReference, Done: 12_345_678, Total: 100_000_000},
			{Phase: render.PhaseAudit, Done: 32, Total: 32},
			{Phase: render.PhaseTables, Done: 0, Total: 0},
		} {
			for _, spent := range []time.Duration{0, 3 * time.Second, 100 * time.Hour} {
				for _, plain := range []bool{true, false} {
					s := barLine(p, spent, columns, plain)
					if n := utf8.RuneCountInString(s); n >= max(columns, 1) {
						t.Fatalf("%d characters for %d columns: %q", n, columns, s)
					}
					if plain && len(s) != utf8.RuneCountInString(s) {
						t.Fatalf("not ASCII: %q", s)
					}
				}
			}
		}
	}
}

func TestBar(t *testing.T) {
	half := render.Progress{Phase: render.PhasePixels, Done: 500_000, Total: 1_000_000}
	for _, c := range []struct {
		p       render.Progress
		spent   time.Duration
		columns int
		want    string
	}{
		{half, 0, 80, "pixels    --------------o..............  50 %"},
		{half, 25 * time.Second, 80, "pixels    --------------o..............  50 %  25 s left  20.0 kpx/s"},
		{half, 25 * time.Second, 60, "pixels    ---------o..........  50 %  25 s left  20.0 kpx/s"},
		{half, 25 * time.Second, 40, "pixels      50 %  25 s left  20.0 kpx/s"},
		{half, 25 * time.Second, 28, "pixels      50 %  25 s left"},
		{half, 25 * time.Second, 20, "pixels      50 %"},
		{render.Progress{Phase: render.PhasePixels, Total: 9}, 5 * time.Second, 80, "pixels    o............................   0 %  5.0 s so far"},
		{render.Progress{Phase: render.PhaseFile, Done: 1, Total: 1}, time.Second, 80, "file      ----------------------------o 100 %"},
	} {
		if got := barLine(c.p, c.spent, c.columns, true); got != c.want {
			t.Errorf("at %d columns\n%q, not\n%q", c.columns, got, c.want)
		}
	}
}

// TestHelpFits holds every help screen against the usual terminal's 80
// columns, and the overview against its 24 lines, one being the prompt's.
func TestHelpFits(t *testing.T) {
	for _, name := range []string{"", "render", "join", "board", "probe", "verify", "version", "completion", "help", "farm"} {
		var out, errs bytes.Buffer
		args := append([]string{"help"}, strings.Fields(name)...)
		if code := run(context.Background(), args, &out, &errs); code != exitDone || errs.Len() > 0 {
			t.Fatalf("help %s: code %d, %s", name, code, errs.String())
		}
		lines := strings.Split(strings.TrimSuffix(out.String(), "\n"), "\n")
		for _, line := range lines {
			if n := utf8.RuneCountInString(line); n > 80 {
				t.Errorf("help %s: %d columns: %s", name, n, line)
			}
		}
		if name == "" && len(lines) > 23 {
			t.Errorf("the overview has %d lines", len(lines))
		}
	}
}
