package inking

import (
	"fmt"
	"reflect"
	"slices"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/palette"
	"leadline/render/frame"
)

// stops writes a ramp in short: places and colours as a frame has them.
func stops(f *frame.Frame) string {
	var parts []string
	for _, s := range f.Ink.Ramp.Stops {
		parts = append(parts, fmt.Sprintf("%g %s", s.At, s.Colour))
	}
	return strings.Join(parts, " | ")
}

// TestKeys: what key sequences leave in the frame. Sienna, #a0522d, is
// oklch(0.5265 0.1151 44.60) and sRGB ends at a chroma of 0.1515 there, by CSS
// Color 4's matrices in another language's doubles. The least count of the test
// picture is 100 + 3000/(54.08 + 10) = 146.8, so its fit's base is 146.
func TestKeys(t *testing.T) {
	const first, second, third, last = "0 #10202c", "0.25 #a0522d", "0.5 #f0e6c8", "1 #10202c"
	ramp := func(parts ...string) string { return strings.Join(parts, " | ") }
	same := ramp(first, second, third, last)
	for _, c := range []struct {
		name, keys string
		want       func(k *frame.Ink) any
		is         any
		steps      int
	}{
		{"a stop moves", "down down right", nil, ramp(first, "0.26 #a0522d", third, last), 1},
		{"by a little", "down down shift+left", nil, ramp(first, "0.249 #a0522d", third, last), 1},
		{"not past its neighbour", "down down 40*right", nil, ramp(first, "0.499 #a0522d", third, last), 1},
		{"not the ends", "down right", nil, same, 0},
		{"a typed place", "down down e ctrl+u =0.4 enter", nil, ramp(first, "0.4 #a0522d", third, last), 1},
		{"a stop is added", "down down a", func(k *frame.Ink) any { return [2]float64{k.Ramp.Stops[2].At, float64(len(k.Ramp.Stops))} }, [2]float64{0.375, 5}, 1},
		{"after the last, before it", "9*] a", func(k *frame.Ink) any { return [2]float64{k.Ramp.Stops[3].At, float64(len(k.Ramp.Stops))} }, [2]float64{0.75, 5}, 1},
		{"a stop is removed", "] d", nil, ramp(first, third, last), 1},
		{"an end is removed", "down delete", nil, ramp("0 #a0522d", third, last), 1},
		{"two stops stay", "] d d d", nil, ramp(first, last), 2},
		{"reversed", "r", nil, ramp(first, third, "0.75 #a0522d", last), 1},
		{"reversed twice", "r r", nil, same, 2},
		{"typed colour", "] c ctrl+u =teal enter", nil, ramp(first, "0.25 teal", third, last), 1},
		{"typed colour of the ends, tied", "down c ctrl+u =navy enter", nil, ramp("0 navy", second, third, "1 navy"), 1},
		{"and untied", toRow(ends) + "left 5*up c ctrl+u =navy enter", nil, ramp("0 navy", second, third, last), 1},
		{"lightness", "] m right", nil, ramp(first, "0.25 oklch(0.536 0.1151 44.6)", third, last), 1},
		{"chroma, finely", "] enter down shift+right", nil, ramp(first, "0.25 oklch(0.5265 0.116 44.6)", third, last), 1},
		{"hue", "] m down down left left", nil, ramp(first, "0.25 oklch(0.5265 0.1151 38.5)", third, last), 1},
		{"to the end of the space", "] m down end", nil, ramp(first, "0.25 oklch(0.5265 0.151 44.6)", third, last), 1},
		{"to grey", "] m down home", nil, ramp(first, "0.25 oklch(0.5265 0 44.6)", third, last), 1},
		{"straight", toRow(smooth) + "right", func(k *frame.Ink) any { return *k.Ramp.Smooth }, false, 1},
		{"and smooth again", toRow(smooth) + "right right", func(k *frame.Ink) any { return k.Ramp.Smooth == nil }, true, 2},
		{"power", toRow(scale) + "right", func(k *frame.Ink) any { return k.Drive.Scale }, frame.Power, 1},
		{"linear", toRow(scale) + "left", func(k *frame.Ink) any { return k.Drive.Scale }, frame.Linear, 1},
		{"exponent", toRow(scale) + "right down right", func(k *frame.Ink) any { return k.Drive.Exponent }, 0.55, 2},
		{"typed exponent", toRow(scale) + "right down enter ctrl+u =1.5 enter", func(k *frame.Ink) any { return k.Drive.Exponent }, 1.5, 2},
		{"no exponent without power", toRow(scale) + "right down right up right", func(k *frame.Ink) any { return k.Drive.Exponent }, 0.0, 3},
		{"fit from", toRow(scale) + "down down right", func(k *frame.Ink) any { return *k.Drive.Fit }, frame.Fit{Low: 1, High: 99.5}, 1},
		{"fit to", toRow(scale) + "down down down e ctrl+u =97% enter", func(k *frame.Ink) any { return *k.Drive.Fit }, frame.Fit{Low: 0.5, High: 97}, 1},
		{"period", toRow(scale) + "down right", func(k *frame.Ink) any { return k.Drive.Period > 0 && k.Drive.Base != nil }, true, 1},
		{"typed period", toRow(scale) + "down right down e ctrl+u =2.5 enter", func(k *frame.Ink) any { return k.Drive.Period }, 2.5, 2},
		{"longer period", toRow(scale) + "down right down e ctrl+u =2.5 enter right", func(k *frame.Ink) any { return k.Drive.Period }, 2.75, 3},
		{"offset", toRow(scale) + "down right down down e ctrl+u =0.25 enter right", func(k *frame.Ink) any { return *k.Drive.Offset }, 0.3, 3},
		{"fitted again", toRow(scale) + "down right left", func(k *frame.Ink) any { return k.Drive }, frame.Drive{}, 2},
		{"base", toRow(scale) + "down down down down e =120 enter", func(k *frame.Ink) any { return *k.Drive.Base }, 120.0, 1},
		{"base from the fit on", toRow(scale) + "down down down down right", func(k *frame.Ink) any { return *k.Drive.Base }, 156.0, 1},
		{"base left to the fit", toRow(scale) + "down down down down right e ctrl+u enter", func(k *frame.Ink) any { return k.Drive.Base == nil }, true, 2},
		{"inside", "end up c ctrl+u =#010203 enter", func(k *frame.Ink) any { return k.Inside.String() }, "#010203", 1},
		{"edge", "end right", func(k *frame.Ink) any { return k.Edge.Width.String() + " " + k.Edge.Colour.String() }, "0.05mm #070d10", 1},
		{"edge by a little", "end right shift+right", func(k *frame.Ink) any { return k.Edge.Width.String() }, "0.06mm", 1},
		{"typed edge", "end e ctrl+u =0.01in enter", func(k *frame.Ink) any { return k.Edge.Width.String() }, "0.01in", 1},
		{"no edge", "end right right right left left left", func(k *frame.Ink) any { return k.Edge == nil }, true, 0},
		{"edge colour", "end right end c ctrl+u =tan enter", func(k *frame.Ink) any { return k.Edge.Colour.String() }, "tan", 2},
		{"another ramp", "k home down enter", func(k *frame.Ink) any { return k.Ramp.Stops[1].Colour.String() }, palette.Ramps()[1].Ramp.Stops[1].Colour.String(), 1},
		{"a ramp only looked at", "k home down down esc", nil, same, 0},
	} {
		s := testScreen(t, testFrame(t, "", "srgb"))
		press(t, s, c.keys)
		var got any = stops(s.desk.Frame)
		if c.want != nil {
			got = c.want(&s.desk.Frame.Ink)
		}
		if !reflect.DeepEqual(got, c.is) {
			t.Errorf("%s: %s leaves\n     %v\nwant %v", c.name, c.keys, got, c.is)
		}
		if n, _ := s.desk.Steps(); n != c.steps {
			t.Errorf("%s: %d steps in the history, want %d", c.name, n, c.steps)
		}
	}
}

// toRow is the keys that lead from the first line to a line of the test frame.
func toRow(k kind) string {
	lines := []kind{theRamp, aStop, aStop, aStop, aStop, smooth, ends, scale}
	return fmt.Sprintf("%d*down ", slices.Index(lines, k))
}

// TestBackAndForward: presses on one slider are one step, on another the next;
// what is taken back comes again.
func TestBackAndForward(t *testing.T) {
	s := testScreen(t, testFrame(t, "", "srgb"))
	start := s.desk.Frame
	press(t, s, "] m right right right")
	lightness := s.desk.Frame
	press(t, s, "down right right")
	if n, _ := s.desk.Steps(); n != 2 {
		t.Fatalf("two sliders made %d steps", n)
	}
	if said := press(t, s, "u"); said.Text != "taken back: stop recoloured" || !reflect.DeepEqual(s.desk.Frame, lightness) {
		t.Errorf("the first step back says %q and leaves %s", said.Text, stops(s.desk.Frame))
	}
	press(t, s, "backspace")
	if !reflect.DeepEqual(s.desk.Frame, start) {
		t.Errorf("the second step back leaves %s", stops(s.desk.Frame))
	}
	if said := press(t, s, "u"); said.Text != "nothing to take back" {
		t.Errorf("with nothing left it says %q", said.Text)
	}
	if said := press(t, s, "U"); said.Text != "done again: stop recoloured" || !reflect.DeepEqual(s.desk.Frame, lightness) {
		t.Errorf("forward says %q", said.Text)
	}
	// A step back ends the run: the next press is a step of its own.
	press(t, s, "right")
	if n, _ := s.desk.Steps(); n != 2 {
		t.Errorf("%d steps after going on", n)
	}
}

// Slid back to where it began, a run leaves no step and harms none before it.
func TestRunBackToItsBeginning(t *testing.T) {
	s := testScreen(t, testFrame(t, "", "srgb"))
	press(t, s, "] d") // a step of another kind
	before := s.desk.Frame
	press(t, s, "down right right left left right left")
	if n, _ := s.desk.Steps(); n != 1 || !reflect.DeepEqual(s.desk.Frame, before) {
		t.Errorf("%d steps, %s", n, stops(s.desk.Frame))
	}
}

// Pasted text is taken for a colour, which is asked for once more.
func TestPastedColour(t *testing.T) {
	s := testScreen(t, testFrame(t, "", "srgb"))
	press(t, s, "] k")
	s.Update(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("oklch(0.5 0.1 200)"), Paste: true})
	if press(t, s, "enter"); s.colour().String() != "oklch(0.5 0.1 200)" || s.locker != nil {
		t.Errorf("the stop is %s", s.colour())
	}
}

// What rendering froze goes with what it was made for: the baked ink with any
// change, the fit with the drive's.
func TestFrozenInkGoes(t *testing.T) {
	frozen := func() *frame.Frame {
		f := testFrame(t, `"drive":{"scale":"log","fitted":{"base":120,"low":0.5,"high":5}}`, "srgb")
		f.Ink.Baked = &frame.Baked{Space: "srgb"}
		return f
	}
	for _, c := range []struct {
		keys         string
		fitted, bake bool
	}{
		{"down down right", true, false},
		{"r", true, false},
		{"k home enter", true, false},
		{"end right", true, false},
		{toRow(scale) + "right", false, false},
		{toRow(scale) + "down down right", false, false},
		{toRow(scale) + "down down down down right", false, false},
		{toRow(scale) + "down right", false, false},
		{"down down", true, true},
		{"k down down esc", true, true},
	} {
		s := testScreen(t, frozen())
		press(t, s, c.keys)
		if k := s.desk.Frame.Ink; (k.Drive.Fitted != nil) != c.fitted || (k.Baked != nil) != c.bake {
			t.Errorf("%s leaves fitted %v, baked %v", c.keys, k.Drive.Fitted, k.Baked != nil)
		}
	}
}

// TestHints: a question that cannot be answered so says what would do, and the
// frame stays.
func TestHints(t *testing.T) {
	for _, c := range []struct{ keys, hint string }{
		{"] c ctrl+u =lightseegreen", "did you mean lightseagreen?"},
		{"] c ctrl+u =#12345678", "prints are opaque"},
		{"] c ctrl+u =#12", "write a CSS colour"},
		{"down down e ctrl+u =0.7", "between 0 and 0.5"},
		{"down down e ctrl+u =x", "write a plain number"},
		{toRow(scale) + "right down e ctrl+u =40", "a number above 0, at most 16"},
		{toRow(scale) + "right down e ctrl+u =0", "a number such as 0.5"},
		{toRow(scale) + "down down e ctrl+u =99.9", "percentiles ascend"},
		{toRow(scale) + "down right down e ctrl+u =0", "a number such as"},
		{"end e ctrl+u =0.15", "mm, cm, in or px"},
		{"s ctrl+u", "such as low-water.ramp.json"},
	} {
		s := testScreen(t, testFrame(t, "", "srgb"))
		s.Update(tea.WindowSizeMsg{Width: 400, Height: 24})
		press(t, s, c.keys)
		before := s.desk.Frame
		if line := stripped(s.Status()); !strings.Contains(line, c.hint) {
			t.Errorf("%s: %q does not say %q", c.keys, strings.TrimSpace(line), c.hint)
		}
		press(t, s, "enter")
		if !s.Typing() || s.desk.Frame != before {
			t.Errorf("%s: taken all the same", c.keys)
		}
		if press(t, s, "esc"); s.Typing() {
			t.Errorf("%s: esc does not leave the question", c.keys)
		}
	}
	for keys, hint := range map[string]string{
		"down right": "the first and the last stop keep the ends — move one between them, or add one: a",
		"] d d d":    "a ramp has at least two stops — recolour one of the two instead",
	} {
		if said := press(t, testScreen(t, testFrame(t, "", "srgb")), keys); said.Text != hint || !said.Bad {
			t.Errorf("%s says %q", keys, said.Text)
		}
	}
}
