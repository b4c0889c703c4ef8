package paper

import (
	"flag"
	"fmt"
	"image"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/lipgloss"
	"github.com/charmbracelet/x/ansi"
	"github.com/muesli/termenv"

	"leadline/render/frame"
	"leadline/render/kernel"
	"leadline/render/sheet"
	"leadline/tui/cells"
	"leadline/tui/engine"
	"leadline/tui/kit"
)

var update = flag.Bool("update", false, "write the golden files anew")

// document is the frame that tests begin with.
const document = `{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},
	"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},"iteration":{"limit":500},"sampling":{"least":1,"most":4},
	"sheet":{"width":"600mm","height":"400mm","bleed":"3mm"}}`

// rig is a screen with everything around it that a test needs.
type rig struct {
	t    testing.TB
	s    *Screen
	desk *kit.Desk
	said string      // by the last key
	msgs []tea.Msg   // for others than the screen, by the last key
	room image.Point // of the screen
}

// newRig opens the screen on a frame, without colour.
func newRig(t testing.TB, doc string) *rig {
	t.Helper()
	f, err := frame.Parse([]byte(doc))
	if err != nil {
		t.Fatal(err)
	}
	d := kit.NewDesk(f)
	renderer := lipgloss.NewRenderer(io.Discard)
	renderer.SetColorProfile(termenv.Ascii)
	d.Style = kit.NewStyle(renderer, true)
	d.Mesh = cells.Plain
	r := &rig{t: t, s: New(d), desk: d}
	r.s.cores = 2
	r.resize(80, 21)
	r.send(kit.Opened("Sheet"))
	return r
}

func (r *rig) resize(width, height int) {
	r.room = image.Pt(width, height)
	r.send(tea.WindowSizeMsg{Width: width, Height: height})
}

// send gives the screen a message and does what follows, as the program would.
func (r *rig) send(msg tea.Msg) {
	was := r.desk.Frame
	r.follow(r.s.Update(msg))
	if r.desk.Frame != was {
		r.send(kit.Changed{})
	}
}

func (r *rig) follow(cmd tea.Cmd) {
	if cmd == nil {
		return
	}
	switch msg := cmd().(type) {
	case nil, waited:
	case tea.BatchMsg:
		for _, c := range msg {
			r.follow(c)
		}
	case kit.Say:
		r.said = msg.Text
	case kit.Go:
		r.msgs = append(r.msgs, msg)
	default:
		r.send(msg)
	}
}

var named = map[string]tea.KeyType{"enter": tea.KeyEnter, "esc": tea.KeyEsc, "up": tea.KeyUp, "down": tea.KeyDown, "left": tea.KeyLeft,
	"right": tea.KeyRight, "home": tea.KeyHome, "end": tea.KeyEnd, "clear": tea.KeyCtrlU, "shift+right": tea.KeyShiftRight,
	"shift+down": tea.KeyShiftDown}

// keys presses keys, by name or as they are.
func (r *rig) keys(list ...string) {
	for _, k := range list {
		r.said, r.msgs = "", nil
		if t, ok := named[k]; ok {
			r.send(tea.KeyMsg{Type: t})
			continue
		}
		r.send(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(k)})
	}
}

// write puts a text into a field, as by hand.
func (r *rig) write(at int, text string) {
	r.s.cursor = at
	r.keys("enter", "clear")
	for _, c := range text {
		r.keys(string(c))
	}
	r.keys("enter")
}

func (r *rig) sheet() frame.Sheet { return r.desk.Frame.Sheet }

// view draws the screen and holds it to its size.
func (r *rig) view() string {
	r.t.Helper()
	v := r.s.View(r.room.X, r.room.Y)
	lines := strings.Split(v, "\n")
	if len(lines) != r.room.Y {
		r.t.Errorf("%v: %d lines", r.room, len(lines))
	}
	for i, l := range lines {
		if n := ansi.StringWidth(l); n != r.room.X {
			r.t.Errorf("%v: line %d is %d cells wide: %q", r.room, i, n, l)
		}
	}
	return v
}

// golden compares with a file of testdata, or writes it.
func golden(t *testing.T, name, got string) {
	t.Helper()
	path := filepath.Join("testdata", name)
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
		t.Errorf("%s:\n%s\nnot\n%s", name, got, want)
	}
}

// picture is a whole preview that escapes everywhere, later to the right; edit
// changes samples of it.
func (r *rig) picture(edit func(i, j int, f *kernel.Field)) *engine.Picture {
	g, err := r.sheet().Geometry()
	if err != nil {
		r.t.Fatal(err)
	}
	p := &engine.Picture{Request: engine.Request{Frame: r.desk.Frame, Size: image.Pt(90, 60), Pinned: r.desk.Pinned}, Geometry: g, Whole: true}
	undecided := 0
	for k := range p.Size.X * p.Size.Y {
		i, j := k%p.Size.X, k/p.Size.X
		f := kernel.Field{State: kernel.Escaped, N: i, Smooth: float64(10 + i), Distance: 1e6}
		if edit != nil {
			edit(i, j, &f)
		}
		if f.State == kernel.Undecided {
			undecided++
		}
		p.Fields, p.From = append(p.Fields, f), append(p.From, engine.Computed)
	}
	p.Undecided = float64(undecided) / float64(len(p.Fields))
	return p
}

// draw puts a preview on the desk.
func (r *rig) draw(p *engine.Picture) {
	r.desk.Picture = p
	r.send(kit.Drawn{Picture: p})
}

// size writes a sheet's sides.
func size(s frame.Sheet) string { return fmt.Sprintf("%s %s", s.Width, s.Height) }

func length(text string) sheet.Length { return sheet.MustLength(text) }
