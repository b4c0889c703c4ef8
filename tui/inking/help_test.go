package inking

import (
	"image"
	"io"
	"math"
	"strconv"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/lipgloss"
	"github.com/charmbracelet/x/ansi"
	"github.com/muesli/termenv"

	"leadline/render/frame"
	"leadline/render/kernel"
	"leadline/tui/cells"
	"leadline/tui/engine"
	"leadline/tui/kit"
)

// testFrame is a frame with a ramp of four stops; more goes into its ink.
func testFrame(t testing.TB, more, space string) *frame.Frame {
	t.Helper()
	if more != "" {
		more = "," + more
	}
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","title":"Low water","set":{"kind":"mandelbrot"},
		"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},"iteration":{"limit":1000},
		"ink":{"ramp":{"stops":[{"at":0,"colour":"#10202c"},{"at":0.25,"colour":"#a0522d"},{"at":0.5,"colour":"#f0e6c8"},{"at":1,"colour":"#10202c"}]}` + more + `},
		"sheet":{"width":"300mm","height":"200mm","space":"` + space + `"}}`))
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// testPicture is a picture with counts from 100 to about 400, a disc inside and
// a corner of which nothing is known.
func testPicture(t testing.TB, f *frame.Frame) *engine.Picture {
	t.Helper()
	g, err := f.Sheet.Geometry()
	if err != nil {
		t.Fatal(err)
	}
	const w, h = 90, 60
	p := &engine.Picture{Request: engine.Request{Frame: f, Size: image.Pt(w, h)}, Geometry: g, Whole: true,
		Fields: make([]kernel.Field, w*h), From: make([]engine.Origin, w*h)}
	for i := range p.Fields {
		x, y := float64(i%w)-45, float64(i/w)-30
		r := math.Sqrt(x*x + y*y)
		p.Fields[i] = kernel.Field{N: 100, Smooth: 100 + 3000/(r+10), Distance: r * 10}
		if r < 8 {
			p.Fields[i] = kernel.Field{State: kernel.Inside}
		}
		p.From[i] = engine.Computed
		if i%w > 80 && i/w > 50 {
			p.From[i] = engine.Nowhere
		}
	}
	return p
}

// testScreen is the screen over a frame, with a picture, in plain text.
func testScreen(t testing.TB, f *frame.Frame) *Screen {
	t.Helper()
	d := kit.NewDesk(f)
	d.Picture = testPicture(t, f)
	setDepth(d, cells.None, true)
	d.Mesh = cells.Plain
	s := newScreen(d)
	s.dir = t.TempDir()
	s.Update(tea.WindowSizeMsg{Width: 80, Height: 24})
	s.Update(kit.Opened("Ink"))
	return s
}

func setDepth(d *kit.Desk, depth cells.Depth, dark bool) {
	r := lipgloss.NewRenderer(io.Discard)
	r.SetColorProfile(map[cells.Depth]termenv.Profile{cells.None: termenv.Ascii, cells.C16: termenv.ANSI,
		cells.C256: termenv.ANSI256, cells.TrueColour: termenv.TrueColor}[depth])
	d.Depth, d.Style = depth, kit.NewStyle(r, dark)
}

var keyTypes = map[string]tea.KeyType{
	"up": tea.KeyUp, "down": tea.KeyDown, "left": tea.KeyLeft, "right": tea.KeyRight, "enter": tea.KeyEnter, "esc": tea.KeyEsc,
	"shift+left": tea.KeyShiftLeft, "shift+right": tea.KeyShiftRight, "home": tea.KeyHome, "end": tea.KeyEnd,
	"delete": tea.KeyDelete, "backspace": tea.KeyBackspace, "ctrl+u": tea.KeyCtrlU,
}

// press sends keys, separated by spaces: names, n*name for n times, "=text" for
// typed text with _ for a space. It carries commands out and gives what was said
// last.
func press(t testing.TB, s *Screen, keys string) kit.Say {
	t.Helper()
	var said kit.Say
	for _, k := range strings.Fields(keys) {
		n := 1
		if count, name, ok := strings.Cut(k, "*"); ok && !strings.HasPrefix(k, "=") {
			n, _ = strconv.Atoi(count)
			k = name
		}
		for range n {
			for _, msg := range messages(k) {
				said = carryOut(t, s, s.Update(msg), said)
			}
		}
	}
	return said
}

func messages(k string) []tea.Msg {
	if text, ok := strings.CutPrefix(k, "="); ok {
		var out []tea.Msg
		for _, r := range strings.ReplaceAll(text, "_", " ") {
			out = append(out, tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune{r}})
		}
		return out
	}
	if typ, ok := keyTypes[k]; ok {
		return []tea.Msg{tea.KeyMsg{Type: typ}}
	}
	return []tea.Msg{tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(k)}}
}

// carryOut does what a command does and hands the screen what it brings.
func carryOut(t testing.TB, s *Screen, cmd tea.Cmd, said kit.Say) kit.Say {
	t.Helper()
	if cmd == nil {
		return said
	}
	switch msg := cmd().(type) {
	case kit.Say:
		return msg
	case tea.BatchMsg:
		for _, c := range msg {
			said = carryOut(t, s, c, said)
		}
	case found, saved:
		said = carryOut(t, s, s.Update(msg), said)
	}
	return said
}

// plain is a drawing without its escape sequences, and without blanks at the
// ends of lines.
func plain(text string) string {
	lines := strings.Split(text, "\n")
	for i := range lines {
		lines[i] = strings.TrimRight(stripped(lines[i]), " ")
	}
	return strings.Join(lines, "\n") + "\n"
}

func stripped(s string) string { return ansi.Strip(s) }
