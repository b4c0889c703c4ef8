package paper

import (
	"strconv"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render/frame"
	"leadline/render/sheet"
	"leadline/tui/kit"
)

// TestFields presses keys on a 600 x 400 mm sheet and looks at the frame.
func TestFields(t *testing.T) {
	sizes := func(r *rig) string { return size(r.sheet()) }
	for _, c := range []struct {
		name string
		do   func(*rig)
		got  func(*rig) string
		want string
	}{
		{"a name lies as the sheet did", func(r *rig) { r.write(atSize, "a2") }, sizes, "594mm 420mm"},
		{"a name that says how it stands", func(r *rig) { r.write(atSize, "A2 portrait") }, sizes, "420mm 594mm"},
		{"mm", func(r *rig) { r.write(atSize, "300x450 mm") }, sizes, "300mm 450mm"},
		{"cm", func(r *rig) { r.write(atSize, "30.5 x 45cm") }, sizes, "30.5cm 45cm"},
		{"in", func(r *rig) { r.write(atSize, "24x36in") }, sizes, "24in 36in"},
		{"px", func(r *rig) { r.write(atSize, "4000×3000 px") }, sizes, "4000px 3000px"},
		{"two units", func(r *rig) { r.write(atSize, "24in x 900mm") }, sizes, "24in 900mm"},
		{"t turns", func(r *rig) { r.keys("t") }, sizes, "400mm 600mm"},
		{"enter turns", func(r *rig) { r.s.cursor = atTurn; r.keys("enter") }, sizes, "400mm 600mm"},
		{"turned twice", func(r *rig) { r.keys("t", "t") }, sizes, "600mm 400mm"},
		{"the next size of the series", func(r *rig) { r.keys("right") }, sizes, "70cm 50cm"},
		{"the size before", func(r *rig) { r.write(atSize, "A3"); r.keys("left") }, sizes, "297mm 210mm"},
		{"no size beyond the last", func(r *rig) { r.write(atSize, "4A0"); r.keys("right") }, sizes, "2378mm 1682mm"},
		{"chosen", func(r *rig) { r.keys("c", "left", "left", "up", "up", "up", "enter") }, sizes, "34in 22in"},
		{"chosen not", func(r *rig) { r.keys("c", "down", "esc") }, sizes, "600mm 400mm"},
		{"ppi", func(r *rig) { r.write(atPPI, "1,200") }, ppi, "1200"},
		{"ppi by default", func(r *rig) { r.write(atPPI, "240"); r.write(atPPI, "") }, ppi, "0"},
		{"ppi up", func(r *rig) { r.s.cursor = atPPI; r.keys("right", "right") }, ppi, "400"},
		{"ppi down", func(r *rig) { r.write(atPPI, "301"); r.keys("left", "left") }, ppi, "240"},
		{"ppi down to the end", func(r *rig) { r.write(atPPI, "100"); r.keys("left", "left", "left") }, ppi, "72"},
		{"bleed", func(r *rig) { r.write(atBleed, "0.125 in") }, func(r *rig) string { return r.sheet().Bleed.String() }, "0.125in"},
		{"no bleed", func(r *rig) { r.write(atBleed, "") }, func(r *rig) string { return r.sheet().Bleed.String() }, ""},
		{"bleed up", func(r *rig) { r.s.cursor = atBleed; r.keys("right", "right") }, func(r *rig) string { return r.sheet().Bleed.String() }, "6mm"},
		{"safe down", func(r *rig) { r.s.cursor = atSafe; r.keys("left") }, func(r *rig) string { return r.sheet().Safe.String() }, "3mm"},
		{"space", func(r *rig) { r.s.cursor = atSpace; r.keys("right", "enter") }, func(r *rig) string { return r.sheet().Space }, "a98-rgb"},
		{"space round", func(r *rig) { r.s.cursor = atSpace; r.keys("left") }, func(r *rig) string { return r.sheet().Space }, "prophoto-rgb"},
		{"least", func(r *rig) { r.s.cursor = atLeast; r.keys("right") }, func(r *rig) string { return strconv.Itoa(r.desk.Frame.Sampling.Least) }, "2"},
		{"most", func(r *rig) { r.write(atMost, "100"); r.keys("right") }, func(r *rig) string { return strconv.Itoa(r.desk.Frame.Sampling.Most) }, "128"},
		{"tolerance", func(r *rig) { r.write(atTolerance, "0.01"); r.keys("left") }, func(r *rig) string { return short(*r.desk.Frame.Sampling.Tolerance) }, "0.008"},
		{"tolerance none", func(r *rig) { r.write(atTolerance, "0") }, func(r *rig) string { return short(*r.desk.Frame.Sampling.Tolerance) }, "0"},
		{"filter", func(r *rig) { r.s.cursor = atFilter; r.keys("right") }, func(r *rig) string { return string(r.desk.Frame.Sampling.Filter) }, "box"},
		{"title", func(r *rig) { r.write(atTitle, "Low water") }, func(r *rig) string { return r.desk.Frame.Title }, "Low water"},
		{"rights", func(r *rig) { r.write(atRights, "all") }, func(r *rig) string { return r.desk.Frame.Rights }, "all"},
		{"distance", func(r *rig) { r.write(atDistance, "1500 mm") }, func(r *rig) string { return r.s.Distance().String() }, "1500mm"},
		{"distance up", func(r *rig) { r.s.cursor = atDistance; r.keys("right") }, func(r *rig) string { return r.s.Distance().String() }, "75cm"},
		{"taken back", func(r *rig) { r.keys("t", "u") }, sizes, "600mm 400mm"},
		{"and done again", func(r *rig) { r.keys("t", "u", "U") }, sizes, "400mm 600mm"},
	} {
		r := newRig(t, document)
		before := r.desk.Frame.View
		c.do(r)
		if got := c.got(r); got != c.want {
			t.Errorf("%s: %q, want %q (%s)", c.name, got, c.want, r.said)
		}
		if r.desk.Frame.View != before {
			t.Errorf("%s: the view became %v", c.name, r.desk.Frame.View)
		}
		r.view()
	}
}

func ppi(r *rig) string { return strconv.Itoa(r.sheet().PPI) }

// TestRefusals: a bad text is not taken, and the line says what would be.
func TestRefusals(t *testing.T) {
	for _, c := range []struct {
		at         int
		text, hint string
	}{
		{atSize, "A99", "two sides such as"}, {atSize, "600x400", "two sides such as"}, {atSize, "", "two sides such as"},
		{atSize, "0.01x0.01mm", "at least one pixel"}, {atSize, "90000x400 mm", "lower the ppi or the size"},
		{atPPI, "many", "whole number"}, {atPPI, "4801", "from 1 to 4800"}, {atPPI, "-3", "whole number"},
		{atBleed, "3", "plain number and mm"}, {atBleed, "9999999mm", "lower the ppi or the size"}, {atSafe, "thumb", "plain number and mm"},
		{atDistance, "40px", "mm, cm or in"}, {atDistance, "", "mm, cm or in"}, {atDistance, "0.5mm", "mm, cm or in"},
		{atLeast, "5000", "from 1 to 4096"}, {atLeast, "5", "swap the two"}, {atMost, "0", "whole number"},
		{atTolerance, "2", "from 0 to 1"}, {atTolerance, "little", "number from 0 to 1"}, {atTolerance, "NaN", "from 0 to 1"},
		{atTitle, strings.Repeat("x", 1001), "title"},
	} {
		r := newRig(t, document)
		r.resize(240, 21)
		was, from := r.desk.Frame, r.s.Distance()
		r.write(c.at, c.text)
		if line := r.s.Status(); !strings.Contains(line, c.hint) || !r.s.Typing() {
			t.Errorf("%.20q: the line is %q, without %q", c.text, line, c.hint)
		}
		r.keys("esc")
		if r.desk.Frame != was || r.s.Distance() != from || r.s.Typing() {
			t.Errorf("%.20q changed something", c.text)
		}
	}
}

// TestStepRefused: a step that the frame's rules refuse says why.
func TestStepRefused(t *testing.T) {
	r := newRig(t, document)
	r.s.cursor = atLeast
	r.keys("right", "right", "right")
	if r.desk.Frame.Sampling.Least != 4 || !strings.Contains(r.said, "raise most") {
		t.Errorf("least is %d: %q", r.desk.Frame.Sampling.Least, r.said)
	}
}

// TestFrozen: what was frozen for another space or fitted to another shape goes,
// and nothing else does.
func TestFrozen(t *testing.T) {
	for _, c := range []struct {
		name          string
		do            func(*rig)
		baked, fitted bool
	}{
		{"space", func(r *rig) { r.s.cursor = atSpace; r.keys("right") }, false, true},
		{"shape", func(r *rig) { r.keys("t") }, true, false},
		{"ppi", func(r *rig) { r.write(atPPI, "150") }, true, true},
		{"the same shape larger", func(r *rig) { r.write(atSize, "900x600mm") }, true, true},
	} {
		r := newRig(t, document)
		f := r.desk.Frame.Clone()
		f.Ink.Baked = &frame.Baked{Space: "srgb"}
		f.Ink.Drive.Fitted = &frame.Fitted{Low: 1, High: 2}
		if err := r.desk.Put("froze it", f); err != nil {
			t.Fatal(err)
		}
		c.do(r)
		g := r.desk.Frame
		if g == f || (g.Ink.Baked != nil) != c.baked || (g.Ink.Drive.Fitted != nil) != c.fitted {
			t.Errorf("%s: baked %v, fitted %v (%s)", c.name, g.Ink.Baked != nil, g.Ink.Drive.Fitted != nil, r.said)
		}
	}
}

func TestSetDistance(t *testing.T) {
	r := newRig(t, document)
	for text, want := range map[string]string{"2in": "2in", "5px": DefaultDistance, "": DefaultDistance} {
		r.s.distance = length(DefaultDistance)
		var l sheet.Length
		if text != "" {
			l = length(text)
		}
		if r.s.SetDistance(l); r.s.Distance().String() != want {
			t.Errorf("%q became %s", text, r.s.Distance())
		}
	}
}

// TestHistory: steps are named by what was done.
func TestHistory(t *testing.T) {
	r := newRig(t, document)
	r.keys("u")
	if !strings.Contains(r.said, "no step") {
		t.Errorf("said %q", r.said)
	}
	r.write(atPPI, "150")
	r.write(atDistance, "2cm") // no step: it is not the frame's
	r.keys("u")
	if r.said != "step: set the resolution (0 back, 1 forward)" {
		t.Errorf("said %q", r.said)
	}
}

// TestMouse: a click goes to a line, the next one is Enter, the wheel steps.
func TestMouse(t *testing.T) {
	r := newRig(t, document)
	press := func(x, y int, b tea.MouseButton) {
		r.send(tea.MouseMsg{X: x, Y: y, Button: b, Action: tea.MouseActionPress})
	}
	press(5, atTurn, tea.MouseButtonLeft)
	if r.s.cursor != atTurn || size(r.sheet()) != "600mm 400mm" {
		t.Errorf("the cursor is on %d, the sheet %s", r.s.cursor, size(r.sheet()))
	}
	press(5, atTurn, tea.MouseButtonLeft)
	if size(r.sheet()) != "400mm 600mm" {
		t.Errorf("the sheet is %s", size(r.sheet()))
	}
	press(5, atPPI, tea.MouseButtonWheelUp)
	press(5, atPPI, tea.MouseButtonWheelUp)
	press(5, atPPI, tea.MouseButtonWheelDown)
	if r.s.cursor != atPPI || r.sheet().PPI != 360 {
		t.Errorf("the cursor is on %d, %d ppi", r.s.cursor, r.sheet().PPI)
	}
	press(70, 0, tea.MouseButtonLeft) // the drawn sheet
	if r.s.cursor != atPPI {
		t.Errorf("the cursor is on %d", r.s.cursor)
	}
	r.keys("c")
	press(2, 4, tea.MouseButtonLeft) // the fifth series, US
	press(20, 1, tea.MouseButtonLeft)
	press(20, 1, tea.MouseButtonLeft)
	if size(r.sheet()) != "8.5in 14in" {
		t.Errorf("the sheet is %s", size(r.sheet()))
	}
}

// TestKeys: every key that is shown does something, and none is the program's
// own.
func TestKeys(t *testing.T) {
	own := " 1 2 3 4 tab shift+tab p ctrl+s ctrl+o ? ctrl+z q ctrl+c "
	r := newRig(t, document)
	for _, list := range [][]action{r.s.actions(), r.s.windowActions()} {
		seen := map[string]bool{}
		for _, a := range list {
			for _, k := range a.key.Keys() {
				if seen[k] || strings.Contains(own, " "+k+" ") {
					t.Errorf("%q is bound twice", k)
				}
				seen[k] = true
			}
		}
	}
	text := ""
	for _, g := range r.s.Keys() {
		for _, k := range g.Keys {
			text += k.Help().Desc + "\n"
		}
	}
	if !strings.Contains(text, "the view's height stays") {
		t.Error("help does not say what becomes of the view")
	}
}

// TestLeaving: the work of the window rests while another screen is open.
func TestLeaving(t *testing.T) {
	r := newRig(t, document)
	r.s.win.open = true
	r.s.Update(kit.Changed{})
	if r.s.win.cancel == nil {
		t.Fatal("no work began")
	}
	r.s.Update(kit.Opened("Compose"))
	if r.s.win.cancel != nil || r.s.win.ctx.Err() == nil {
		t.Error("the work goes on")
	}
}
