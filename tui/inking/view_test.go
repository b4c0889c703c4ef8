package inking

import (
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/charmbracelet/x/ansi"

	"leadline/palette"
	"leadline/tui/cells"
	"leadline/tui/engine"
)

var update = flag.Bool("update", false, "write the golden files anew")

// Display P3's green does not fit sRGB: the screen says so at the stop, at the
// ramp and in figures. On a Display P3 sheet the stop is no fault (what the
// smooth ramp does beside it may still be one).
func TestOutsideTheSheetsSpace(t *testing.T) {
	c := palette.MustColour("color(display-p3 0 1 0)")
	far := fmt.Sprintf("ΔE %.1f", palette.DeltaE00(c, c.Map(palette.SRGB)))
	for space, warned := range map[string]bool{"srgb": true, "display-p3": false} {
		s := testScreen(t, testFrame(t, "", space))
		press(t, s, "down down c ctrl+u =color(display-p3_0_1_0) enter")
		text := plain(s.View(80, 24))
		for _, want := range []string{far + " outside " + space, "#00f74f         !"} {
			if strings.Contains(text, want) != warned {
				t.Errorf("%s: %q is %v on the screen:\n%s", space, want, !warned, text)
			}
		}
		if status := stripped(s.Status()); warned && (!strings.Contains(text, "~▲~") || !strings.Contains(status, " of 1,024 ramp steps leave srgb, by ΔE ")) {
			t.Errorf("%s: the status is %q, the marks are\n%s", space, status, text)
		}
		press(t, s, "end right c ctrl+u =color(prophoto-rgb_0_1_0) enter")
		if got := stripped(s.Status()); !strings.Contains(got, "the edge line leaves "+space+" by ΔE ") {
			t.Errorf("%s: the status is %q", space, got)
		}
	}
}

// The picture takes another ink without iteration: no engine is there to ask,
// and its fields are those they were.
func TestRecolouringIteratesNothing(t *testing.T) {
	s := testScreen(t, testFrame(t, "", "srgb"))
	p := s.desk.Picture
	fields := slices.Clone(p.Fields)
	if s.desk.Engine != nil {
		t.Fatal("the desk has an engine")
	}
	s.View(80, 24)
	before := slices.Clone(s.colours(p))
	press(t, s, "r m right")
	s.View(80, 24)
	if slices.Equal(before, s.colours(p)) {
		t.Error("the picture kept its colours")
	}
	if !slices.Equal(fields, p.Fields) || s.desk.Picture != p {
		t.Error("the picture's fields changed")
	}
	k, err := engine.NewInker(s.desk.Frame, p)
	if err != nil {
		t.Fatal(err)
	}
	k.Mat = s.desk.Style.MatTone
	if !slices.Equal(k.Colours(p), s.colours(p)) {
		t.Error("the colours are not the engine's for this frame")
	}
}

// states are the screen's faces.
var states = map[string]string{"list": "", "end": "end", "mixer": "] m down", "locker": "k home down", "question": "] c"}

// TestViewFills: whatever the size, View gives that many lines of that width.
func TestViewFills(t *testing.T) {
	for name, keys := range states {
		for _, depth := range []cells.Depth{cells.None, cells.TrueColour} {
			s := testScreen(t, testFrame(t, "", "srgb"))
			setDepth(s.desk, depth, false)
			s.desk.Mesh = pick(depth == cells.None, cells.Plain, cells.Half)
			press(t, s, keys)
			for _, w := range []int{40, 59, 60, 80, 100, 140, 240} {
				for _, h := range []int{7, 9, 12, 16, 21, 30, 45, 70} {
					lines := strings.Split(s.View(w, h), "\n")
					if len(lines) != h {
						t.Fatalf("%s at %d×%d: %d lines", name, w, h, len(lines))
					}
					for y, line := range lines {
						if n := ansi.StringWidth(line); n != w {
							t.Fatalf("%s at %d×%d: line %d is %d wide: %q", name, w, h, y, n, stripped(line))
						}
					}
				}
			}
		}
	}
}

// Without a picture, and with one that failed, the rest of the screen works.
func TestViewWithoutPicture(t *testing.T) {
	s := testScreen(t, testFrame(t, "", "srgb"))
	s.desk.Picture = nil
	if text := plain(s.View(80, 24)); !strings.Contains(text, "waiting for the picture") || !strings.Contains(text, "stop 2") {
		t.Errorf("drawn as\n%s", text)
	}
	if said := press(t, s, toRow(scale)+"down right"); !strings.Contains(said.Text, "not there yet") {
		t.Errorf("laying a ramp over nothing says %q", said.Text)
	}
}

// TestGolden holds the screen against drawings in testdata; -update writes them.
func TestGolden(t *testing.T) {
	for _, c := range []struct {
		name, keys string
		w, h       int
		ascii      bool
	}{
		{"list-80x24", "down down", 80, 24, false},
		{"mixer-80x24", "] m down", 80, 24, false},
		{"locker-80x24", "k home down down", 80, 24, false},
		{"list-200x60", "down down", 200, 60, false},
		{"list-40x10", "down down", 40, 10, false},
		{"mixer-40x10", "] m down", 40, 10, false},
		{"ascii-80x24", "] m down", 80, 24, true},
	} {
		s := testScreen(t, testFrame(t, `"edge":{"width":"0.1mm","colour":"#201810"}`, "srgb"))
		s.desk.ASCII = c.ascii
		press(t, s, c.keys)
		got := plain(s.View(c.w, c.h)) + stripped(s.Status()) + "\n"
		path := filepath.Join("testdata", c.name+".txt")
		if *update {
			if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
				t.Fatal(err)
			}
		}
		want, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		if got != string(want) {
			t.Errorf("%s is\n%s\nnot\n%s", c.name, got, want)
		}
		if c.ascii && strings.ContainsFunc(got, func(r rune) bool { return r > 126 }) {
			t.Errorf("%s has letters beyond ASCII:\n%s", c.name, got)
		}
	}
}

// Keys shown are keys obeyed: every binding of the key map has its action, none
// is bound twice at a time, and none is one of the program's own.
func TestKeyMap(t *testing.T) {
	own := []string{"1", "2", "3", "4", "tab", "shift+tab", "p", "q", "?", "ctrl+c", "ctrl+o", "ctrl+s", "ctrl+z"}
	for name, keys := range states {
		s := testScreen(t, testFrame(t, "", "srgb"))
		press(t, s, keys)
		seen := map[string]string{}
		for _, a := range s.actions() {
			for _, k := range a.key.Keys() {
				if was := seen[k]; was != "" && !(name == "mixer" && k == "m") {
					t.Errorf("%s: %q is both %q and %q", name, k, was, a.key.Help().Desc)
				}
				seen[k] = a.key.Help().Desc
				if slices.Contains(own, k) {
					t.Errorf("%s: %q is the program's own", name, k)
				}
			}
		}
		if first := s.Keys()[0].Keys[0].Help().Desc; first != s.actions()[0].key.Help().Desc {
			t.Errorf("%s: the foot begins with %q", name, first)
		}
	}
}

// A press of a slider: the ramp baked, the picture recoloured and drawn.
func BenchmarkSlide(b *testing.B) {
	s := testScreen(b, testFrame(b, "", "srgb"))
	setDepth(s.desk, cells.TrueColour, true)
	s.desk.Mesh = cells.Half
	press(b, s, "] m")
	for i := 0; b.Loop(); i++ {
		press(b, s, pick(i%40 < 20, "right", "left"))
		s.View(200, 60)
	}
}
