package paper

import (
	"math"
	"strings"
	"testing"

	"leadline/palette"
	"leadline/render/frame"
	"leadline/render/kernel"
	"leadline/tui/kit"
)

// calm is a set-up that nothing stands against, from 60 cm.
const calm = `{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},
	"iteration":{"limit":500},"ink":{"ramp":{"stops":[{"at":0,"colour":"#102030"},{"at":1,"colour":"#e0d0c0"}]}},
	"sheet":{"width":"600mm","height":"400mm","ppi":146,"bleed":"3mm"}}`

// TestFindings breaks one rule after another. Beside each stands where its
// figure comes from.
func TestFindings(t *testing.T) {
	set := func(edit func(*frame.Frame)) func(*rig) {
		return func(r *rig) {
			if err := r.desk.Change("broke a rule", func(f *frame.Frame) error { edit(f); return nil }); err != nil {
				r.t.Fatal(err)
			}
			r.send(kit.Changed{})
		}
	}
	edge := func(width string) func(*rig) {
		return set(func(f *frame.Frame) {
			f.Ink.Edge = &frame.Edge{Width: length(width), Colour: palette.MustColour("#000")}
		})
	}
	sized := func(w, h string, ppi int) func(*rig) {
		return set(func(f *frame.Frame) { f.Sheet.Width, f.Sheet.Height, f.Sheet.PPI = length(w), length(h), ppi })
	}
	some := func(n int) func(*rig) {
		return func(r *rig) {
			r.draw(r.picture(func(i, j int, f *kernel.Field) {
				if i < n && j == 30 {
					f.State = kernel.Undecided
				}
			}))
		}
	}
	for _, c := range []struct {
		name   string
		do     func(*rig)
		level  level
		figure string // "" for no finding
		enter  string // the screen or the field's label
	}{
		{"calm", func(*rig) {}, 0, "", ""},
		// One sample in a thousand (common practice, no source): 5 and 6 of 5400.
		{"few undecided", some(5), 0, "", ""},
		{"undecided", some(6), care, "0.1 % of the picture is undecided", "Compose"},
		{"undecided and pinned", func(r *rig) { r.desk.Pinned = true; some(54)(r) }, fault, "the pinned limit of 500 is too low: 1.0 %", "Compose"},
		// A quarter point (common practice, no source) of 1/72 in: 0.0882 mm.
		{"thin edge", edge("0.088mm"), care, "the edge line is 0.088 mm wide", "Ink"},
		{"edge", edge("0.0883mm"), 0, "", ""},
		{"no edge", edge("0mm"), 0, "", ""},
		// The ramp runs to the edge of Display P3, beyond sRGB (Display P3's green
		// has a red of -0.51 in sRGB: CSS Color 4).
		{"out of space", func(r *rig) {
			set(func(f *frame.Frame) { f.Ink.Ramp.Stops[1].Colour = palette.MustColour("color(display-p3 0 1 0)") })(r)
		}, note, "of 1,024 ramp colours lie outside srgb", "space"},
		{"in space", func(r *rig) {
			set(func(f *frame.Frame) {
				f.Ink.Ramp.Stops[1].Colour = palette.MustColour("color(display-p3 0 1 0)")
				f.Sheet.Space = "prophoto-rgb"
			})(r)
		}, 0, "", ""},
		// Acuity of one minute of arc: 146 ppi from 60 cm, 175 from 50 cm, 117 from
		// 75 cm (25.4 mm / (d tan 1')).
		{"coarse", func(r *rig) { r.write(atDistance, "50cm") }, care, "146 ppi: from 50 cm the eye resolves 175", "ppi"},
		{"too fine", func(r *rig) { r.write(atDistance, "75cm") }, note, "more ppi shows nothing at this distance", "ppi"},
		{"margins meet", set(func(f *frame.Frame) { f.Sheet.Safe = length("200mm") }), care, "the safe margins meet", "safe area"},
		// 44 in (common practice, no source); 1112 + 2·3 mm fit, whichever way round.
		{"wide", sized("1200mm", "1113mm", 146), care, "a roll of 44 in 1118 mm wide", "size"},
		{"wide on its side", sized("1113mm", "1200mm", 146), care, "a roll of 44 in 1118 mm wide", "size"},
		{"not wide", sized("3000mm", "1111mm", 146), 0, "", ""},
		{"no bleed", set(func(f *frame.Frame) { f.Sheet.Bleed = length("0mm") }), note, "no bleed", "bleed"},
	} {
		r := newRig(t, calm)
		r.draw(r.picture(nil))
		c.do(r)
		list := r.s.findings()
		if c.figure == "" {
			if len(list) != 0 {
				t.Errorf("%s: %+v", c.name, list)
			}
			continue
		}
		if len(list) != 1 || list[0].level != c.level || !strings.Contains(list[0].figure, c.figure) || list[0].cure == "" {
			t.Errorf("%s: %+v", c.name, list)
			continue
		}
		r.s.cursor = 0
		r.keys("f", "enter")
		got := ""
		if len(r.msgs) > 0 {
			got = string(r.msgs[0].(kit.Go))
		} else if r.s.cursor < len(fields) {
			got = fields[r.s.cursor].label
		}
		if got != c.enter {
			t.Errorf("%s: enter goes to %q, want %q", c.name, got, c.enter)
		}
	}
}

// TestLargeFormats: a JPEG's sides have 16 bits (ITU-T T.81), a TIFF's offsets 32
// (TIFF 6.0); both from memory.
func TestLargeFormats(t *testing.T) {
	for _, c := range []struct {
		w, h string
		want string
	}{
		{"65535px", "1000px", ""}, {"65536px", "1000px", "a JPEG holds 65,535 a side"},
		{"1000px", "65536px", "a JPEG holds 65,535 a side"},
		// 6 bytes a pixel: 715,827,882 pixels are 4,294,967,292 bytes, 4 short of 2^32.
		{"27594px", "25941px", ""}, {"27594px", "25942px", "a TIFF holds 4 GiB"},
	} {
		r := newRig(t, calm)
		if err := r.desk.Change("grew", func(f *frame.Frame) error {
			f.Sheet.Width, f.Sheet.Height, f.Sheet.Bleed, f.Sheet.PPI = length(c.w), length(c.h), length("0mm"), 4800
			return nil
		}); err != nil {
			t.Fatal(err)
		}
		text := ""
		for _, f := range r.s.findings() {
			if strings.Contains(f.figure, "JPEG") || strings.Contains(f.figure, "TIFF") {
				text += f.figure
			}
		}
		if (c.want == "") != (text == "") || !strings.Contains(text, c.want) {
			t.Errorf("%s x %s: %q, want %q", c.w, c.h, text, c.want)
		}
	}
}

// TestUnfinished: a picture that is not whole is not judged.
func TestUnfinished(t *testing.T) {
	r := newRig(t, calm)
	p := r.picture(func(_, _ int, f *kernel.Field) { f.State = kernel.Undecided })
	p.Whole = false
	r.draw(p)
	if list := r.s.findings(); len(list) != 0 {
		t.Errorf("%+v", list)
	}
	if !strings.Contains(r.view(), "not finished yet") {
		t.Error("nothing says that the picture is not finished")
	}
}

// TestOrder: what matters most stands first.
func TestOrder(t *testing.T) {
	r := newRig(t, document)
	r.desk.Pinned = true
	r.write(atBleed, "")
	r.write(atSafe, "300mm")
	r.draw(r.picture(func(_, _ int, f *kernel.Field) { f.State = kernel.Undecided }))
	last := fault
	list := r.s.findings()
	for _, f := range list {
		if f.level > last {
			t.Errorf("%q stands below lesser ones", f.figure)
		}
		last = f.level
	}
	if len(list) != 4 || list[0].level != fault {
		t.Errorf("%+v", list)
	}
}

// TestPlaces: a finding that can be seen opens the window there: at the sample
// nearest to the middle.
func TestPlaces(t *testing.T) {
	r := newRig(t, calm)
	r.draw(r.picture(func(i, j int, f *kernel.Field) {
		if i == 10 || i == 30 && j == 20 {
			f.State = kernel.Undecided
		}
	}))
	r.keys("f", "w")
	g := r.s.resolve().Sheet
	if !r.s.win.open || math.Abs(r.s.win.u*float64(g.TrimW)-30.5/90*float64(g.TrimW)) > 1 || math.Abs(r.s.win.v*float64(g.TrimH)-20.5/60*float64(g.TrimH)) > 1 {
		t.Errorf("the window is at %v, %v", r.s.win.u, r.s.win.v)
	}
}
