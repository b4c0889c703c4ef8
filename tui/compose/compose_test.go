package compose

import (
	"image"
	"math"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/lipgloss"
	"github.com/charmbracelet/x/ansi"

	"leadline/precision"
	"leadline/render"
	"leadline/render/frame"
	"leadline/tui/cells"
	"leadline/tui/kit"
)

func newScreen(t *testing.T) *Screen {
	t.Helper()
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},
		"iteration":{"limit":1000},"sheet":{"width":"420mm","height":"297mm","bleed":"3mm"}}`))
	if err != nil {
		t.Fatal(err)
	}
	d := kit.NewDesk(f)
	d.Depth = cells.TrueColour
	d.Style = kit.NewStyle(lipgloss.NewRenderer(nil), true)
	s := New(d)
	s.Update(tea.WindowSizeMsg{Width: 80, Height: 21})
	return s
}

func (s *Screen) press(keys ...string) {
	for _, k := range keys {
		m := tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(k)}
		switch k {
		case "left":
			m = tea.KeyMsg{Type: tea.KeyLeft}
		case "right":
			m = tea.KeyMsg{Type: tea.KeyRight}
		case "up":
			m = tea.KeyMsg{Type: tea.KeyUp}
		case "shift+right":
			m = tea.KeyMsg{Type: tea.KeyShiftRight}
		case "enter":
			m = tea.KeyMsg{Type: tea.KeyEnter}
		case "esc":
			m = tea.KeyMsg{Type: tea.KeyEsc}
		case " ":
			m = tea.KeyMsg{Type: tea.KeySpace, Runes: []rune(" ")}
		}
		s.Update(m)
	}
}

// TestLayout keeps the trim's shape and leaves nothing of the screen unused in
// both directions.
func TestLayout(t *testing.T) {
	for _, mesh := range cells.Meshes() {
		for _, room := range []image.Point{{80, 21}, {200, 57}, {40, 7}, {120, 37}} {
			for _, aspect := range []float64{1.414, 0.707, 1, 3} {
				l := lay(room, mesh, aspect)
				per := mesh.Size()
				shape := float64(per.Y) / float64(per.X) / cellAspect
				got := float64(l.size.X) * shape / float64(l.size.Y)
				if slack := aspect * (0.5/float64(l.size.X) + 0.5/float64(l.size.Y) + 1e-9); math.Abs(got-aspect) > 1.01*slack {
					t.Errorf("%v %v: aspect %v, not %v", mesh, room, got, aspect)
				}
				if l.size.X < l.grid.X && l.size.Y < l.grid.Y-1 {
					t.Errorf("%v %v: %v of %v is used", mesh, room, l.size, l.grid)
				}
				for _, u := range []float64{0.1, 0.5, 0.93} {
					x, y := l.cell(u, u)
					gu, gv, in := l.share(x, y)
					if !in || math.Abs(gu-u) > 1.01/float64(l.size.X)*float64(per.X) || math.Abs(gv-u) > 1.01/float64(l.size.Y)*float64(per.Y) {
						t.Errorf("%v %v: %v came back as %v, %v", mesh, room, u, gu, gv)
					}
				}
			}
		}
	}
}

// TestMoves holds keys to what they do to the frame.
func TestMoves(t *testing.T) {
	s := newScreen(t)
	at := func() (re, im, height float64) {
		v := s.desk.Frame.View
		return v.Centre.Re.Ext().Float64(), v.Centre.Im.Ext().Float64(), v.Height.Ext().Float64()
	}
	is := func(what string, re, im, height float64) {
		t.Helper()
		a, b, h := at()
		if math.Abs(a-re) > 1e-5 || math.Abs(b-im) > 1e-5 || math.Abs(h/height-1) > 1e-5 {
			t.Errorf("%s: %v, %v, %v, not %v, %v, %v", what, a, b, h, re, im, height)
		}
	}
	g, err := s.desk.Frame.Sheet.Geometry()
	if err != nil {
		t.Fatal(err)
	}
	width := 2.6 * float64(g.TrimW) / float64(g.TrimH)
	step := math.Round(float64(s.lay.size.X)/8) / float64(s.lay.size.X) * width
	s.press("right")
	is("right", -0.6+step, 0, 2.6)
	s.press("left", "shift+right")
	is("one sample", -0.6+width/float64(s.lay.size.X), 0, 2.6)
	s.press("u", "u", "u")
	is("back", -0.6, 0, 2.6)
	s.press("+", "-")
	is("in and out", -0.6, 0, 2.6)
	s.press("x")
	for range 50 {
		s.press("left", "up")
	}
	s.press("+")
	// Zooming about the top left corner keeps it where it is.
	is("about the corner", -0.6-width/2+width/2/1.5, 1.3-1.3/1.5, 2.6/1.5)
	s.press("esc", "0", "t")
	if d := s.desk.Frame.View.Turn.Degrees(); d != 5 {
		t.Errorf("turned by %v", d)
	}
	s.press("T", "T")
	if d := s.desk.Frame.View.Turn.Degrees(); d != -5 {
		t.Errorf("turned by %v", d)
	}
}

// TestBox zooms into a box that hangs from the plumb, and one that is dragged.
func TestBox(t *testing.T) {
	s := newScreen(t)
	s.press("x", " ", "right", "enter")
	if h := s.desk.Frame.View.Height.Ext().Float64(); math.Abs(h-2.6*math.Round(float64(s.lay.size.X)/8)/float64(s.lay.size.X)) > 1e-4 {
		t.Errorf("height %v", h)
	}
	s.press("0")
	x1, y1 := s.lay.cell(0.25, 0.25)
	x2, y2 := s.lay.cell(0.5, 0.5)
	s.Update(tea.MouseMsg{X: x1, Y: y1, Button: tea.MouseButtonLeft, Action: tea.MouseActionPress})
	s.Update(tea.MouseMsg{X: x2, Y: y2, Button: tea.MouseButtonLeft, Action: tea.MouseActionMotion})
	s.Update(tea.MouseMsg{X: x2, Y: y2, Button: tea.MouseButtonLeft, Action: tea.MouseActionRelease})
	if h := s.desk.Frame.View.Height.Ext().Float64(); math.Abs(h-2.6/4) > 0.1 {
		t.Errorf("height %v", h)
	}
}

// TestPlaces reads what people write and paste, thousands of digits of it too.
func TestPlaces(t *testing.T) {
	s := newScreen(t)
	f := s.desk.Frame
	digits := strings.Repeat("1234567890", 300)
	for text, want := range map[string][3]string{
		"-1.25 0.1":          {"-1.25", "0.1", "2.6"},
		"-1.25, +0.1i 1e-20": {"-1.25", "0.1", "1e-20"},
		"d 3":                {"-0.6", "0", "10.0000e-4"},
		"-0." + digits + "\n0." + digits + " 1e-2990": {"-0." + digits, "0." + digits, "1e-2990"},
	} {
		g, err := parsePlace(text, f)
		if err != nil {
			t.Errorf("%.30q: %v", text, err)
			continue
		}
		if v := g.View; v.Centre.Re.String() != want[0] || v.Centre.Im.String() != want[1] || v.Height.String() != want[2] {
			t.Errorf("%.30q: %.40s %.40s %s", text, v.Centre.Re, v.Centre.Im, v.Height)
		}
	}
	for _, text := range []string{"1", "a b", "1 2 3 4", "9 0", "d x", "d 99999", "0 0 0", "0 0 -1"} {
		if _, err := parsePlace(text, f); err == nil {
			t.Errorf("%q was taken", text)
		} else if h, ok := kit.Hint(err); !ok || h == "" {
			t.Errorf("%q: no hint in %v", text, err)
		}
	}
	h, err := heightAt("120.5")
	if err != nil || math.Abs(precision.Depth(h)-120.5) > 1e-4 {
		t.Errorf("%v, %v", h, err)
	}
	// A paste opens the question with the text in it.
	s.Update(tea.KeyMsg{Type: tea.KeyRunes, Paste: true, Runes: []rune("-0." + digits + "\n0." + digits + "\n1e-2990\n")})
	if !s.Typing() {
		t.Fatal("the paste was lost")
	}
	s.press("enter")
	if got := precision.Depth(s.desk.Frame.View.Height); math.Abs(got-2990) > 1e-6 {
		t.Errorf("depth %v", got)
	}
}

// TestMarks marks a place and comes back to it.
func TestMarks(t *testing.T) {
	s := newScreen(t)
	s.press("+", "+", "m", "enter", "0")
	if len(s.desk.Marks) != 1 {
		t.Fatal(s.desk.Marks)
	}
	s.press("'", "a")
	if got, want := s.desk.Frame.View.Height, s.desk.Marks[0].View.Height; got != want {
		t.Errorf("%v, not %v", got, want)
	}
}

// TestSoundingLine has the lead where the depth is, and every line fit.
func TestSoundingLine(t *testing.T) {
	s := newScreen(t)
	s.desk.Marks = []kit.Mark{{Name: "deep", View: frame.View{Height: number1(t, "1e-300")}}}
	for _, d := range []string{"2.6", "1e-5", "1e-100", "1e-1000"} {
		s.desk.Frame = s.desk.Frame.Clone()
		s.desk.Frame.View.Height = number1(t, d)
		text := ansi.Strip(s.soundingLine(leadWide, 40))
		if strings.Count(text, "◆") != 1 || !strings.Contains(text, "deep") {
			t.Errorf("%s:\n%s", d, text)
		}
		for _, l := range strings.Split(text, "\n") {
			if ansi.StringWidth(l) != leadWide {
				t.Errorf("%s: %q has %d cells", d, l, ansi.StringWidth(l))
			}
		}
	}
}

// TestFound goes to a nucleus, half way down to its atom, and to it.
func TestFound(t *testing.T) {
	s := newScreen(t)
	if err := s.desk.Change("", func(f *frame.Frame) error {
		f.View.Centre.Re, f.View.Height = number1(t, "-1.75"), number1(t, "0.2")
		return nil
	}); err != nil {
		t.Fatal(err)
	}
	s.press("f", "n")
	if s.search == nil {
		t.Fatal("no search runs")
	}
	target, err := s.target(s.search)
	if err != nil {
		t.Fatal(err)
	}
	m := nucleus(t.Context(), target, 0)
	m.of = s.search
	s.Update(m)
	// The real nucleus of period 3: the real root of c³ + 2c² + c + 1.
	if v := s.desk.Frame.View; math.Abs(v.Centre.Re.Ext().Float64()+1.7548776662466927) > 1e-9 || v.Centre.Im.Ext().Float64() != 0 || v.Height.String() != "0.2" {
		t.Errorf("%+v", v)
	}
	size := s.atom.size.Float64()
	if s.atom.period != 3 || size < 0.01 || size > 0.03 {
		t.Errorf("%+v", s.atom)
	}
	s.press("f", "h")
	if h := s.desk.Frame.View.Height.Ext().Float64(); math.Abs(h/math.Sqrt(0.2*atomRoom*size)-1) > 1e-5 {
		t.Errorf("height %v", h)
	}
	s.press("f", "a")
	if h := s.desk.Frame.View.Height.Ext().Float64(); math.Abs(h/(atomRoom*size)-1) > 1e-5 {
		t.Errorf("height %v", h)
	}
	// A search that was stopped, or whose place has been left, changes nothing.
	was := s.desk.Frame
	s.press("f", "n", "esc")
	late := m
	late.of = &search{}
	s.Update(late)
	if s.desk.Frame != was {
		t.Error("a late answer was taken")
	}
}

func number1(t *testing.T, text string) precision.Decimal {
	t.Helper()
	d, err := precision.ParseDecimal(text)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// TestPointAndPlace is the way from a cell to the plane and back.
func TestPointAndPlace(t *testing.T) {
	s := newScreen(t)
	s.press("x", "right", "up")
	x, y := s.spot()
	at, err := render.Point(s.desk.Frame, x, y)
	if err != nil {
		t.Fatal(err)
	}
	bx, by, err := render.Place(s.desk.Frame, at)
	if err != nil || math.Abs(bx-x) > 1e-3 || math.Abs(by-y) > 1e-3 {
		t.Errorf("%v, %v came back as %v, %v (%v)", x, y, bx, by, err)
	}
}
