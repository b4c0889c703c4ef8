package tui

import (
	"bytes"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/ansi"

	"leadline/jobs"
	"leadline/precision"
	"leadline/render/frame"
	"leadline/tui/engine"
	"leadline/tui/kit"
)

// bench is the program without a terminal: messages go in, commands are run at
// once, and what they bring back goes in again.
type bench struct {
	t *testing.T
	*model
	env map[string]string
}

func newBench(t *testing.T, o Options) *bench {
	t.Helper()
	b := &bench{t: t, env: map[string]string{"TERM": "xterm-256color", "COLORTERM": "truecolor", "LANG": "C.UTF-8"}}
	if o.Getenv == nil {
		o.Getenv = func(k string) string { return b.env[k] }
	}
	light := false
	o.Light, o.Output = &light, new(bytes.Buffer)
	if o.Session == "" {
		o.Session = filepath.Join(t.TempDir(), "desk.json")
	}
	if o.Queue == nil && o.NoQueue == nil {
		q, err := jobs.Open(t.Context(), filepath.Join(t.TempDir(), "queue.db"), jobs.Options{})
		if err != nil {
			t.Fatal(err)
		}
		t.Cleanup(q.Close)
		o.Queue = q
	}
	m, err := newModel(o)
	if err != nil {
		t.Fatal(err)
	}
	b.model = m
	b.send(tea.WindowSizeMsg{Width: 80, Height: 24})
	return b
}

// send gives the program a message and runs the commands that come of it, those
// that end within a moment.
func (b *bench) send(msg tea.Msg) {
	_, cmd := b.Update(msg)
	b.do(cmd, 0)
}

func (b *bench) do(cmd tea.Cmd, depth int) {
	if cmd == nil || depth > 20 {
		return
	}
	came := make(chan tea.Msg, 1)
	go func() { came <- cmd() }()
	select {
	case msg := <-came:
		switch msg := msg.(type) {
		case nil:
		case tea.BatchMsg:
			for _, c := range msg {
				b.do(c, depth+1)
			}
		case kit.Say, kit.Go, kit.Changed, saved, opened, notOpened, sessionSaved:
			_, next := b.Update(msg)
			b.do(next, depth+1)
		}
	case <-time.After(100 * time.Millisecond): // a tick
	}
}

// keys types keys by their names, runes one by one.
func (b *bench) keys(names ...string) {
	for _, n := range names {
		b.send(keyOf(n))
	}
}

func (b *bench) text(s string) {
	for _, r := range s {
		b.send(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune{r}})
	}
}

var named = map[string]tea.KeyType{"enter": tea.KeyEnter, "esc": tea.KeyEsc, "tab": tea.KeyTab, "shift+tab": tea.KeyShiftTab, "left": tea.KeyLeft,
	"right": tea.KeyRight, "up": tea.KeyUp, "down": tea.KeyDown, "pgdown": tea.KeyPgDown, "pgup": tea.KeyPgUp, "ctrl+s": tea.KeyCtrlS,
	"ctrl+o": tea.KeyCtrlO, "ctrl+c": tea.KeyCtrlC, "ctrl+u": tea.KeyCtrlU, "backspace": tea.KeyBackspace, "space": tea.KeySpace, "shift+right": tea.KeyShiftRight}

func keyOf(name string) tea.KeyMsg {
	if k, ok := named[name]; ok {
		return tea.KeyMsg{Type: k}
	}
	return tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(name)}
}

// fits checks that a view has exactly the screen's size.
func (b *bench) fits(width, height int) {
	b.t.Helper()
	lines := strings.Split(b.View(), "\n")
	if len(lines) != height {
		b.t.Errorf("%s at %dx%d: %d lines", b.screen().Name(), width, height, len(lines))
	}
	for i, l := range lines {
		if n := ansi.StringWidth(l); n > width {
			b.t.Errorf("%s at %dx%d: line %d has %d cells: %s", b.screen().Name(), width, height, i, n, ansi.Strip(l))
		}
	}
}

// TestSizes draws every screen, and help, at every size.
func TestSizes(t *testing.T) {
	b := newBench(t, Options{})
	for _, size := range [][2]int{{80, 24}, {200, 60}, {40, 10}, {41, 11}, {60, 15}, {120, 40}, {39, 9}, {5, 2}, {300, 90}} {
		b.send(tea.WindowSizeMsg{Width: size[0], Height: size[1]})
		for i := range b.screens {
			b.keys(fmt.Sprint(i + 1))
			b.fits(size[0], size[1])
			b.keys("?")
			b.fits(size[0], size[1])
			b.keys("esc")
		}
		b.keys("1")
	}
	b.send(tea.WindowSizeMsg{Width: 39, Height: 9})
	if s := ansi.Strip(b.View()); !strings.Contains(s, "40 x 10") {
		t.Errorf("too small: %q", s)
	}
}

// TestKeysAreKnown has no key mean two things on one screen, and help name all.
func TestKeysAreKnown(t *testing.T) {
	b := newBench(t, Options{})
	for i, s := range b.screens {
		for _, g := range append(s.Keys(), own()) {
			seen := map[string]string{}
			for _, k := range g.Keys {
				for _, name := range k.Keys() {
					if was, twice := seen[name]; twice && was != k.Help().Desc && name == k.Help().Key {
						t.Errorf("%s: %q means %q and %q", s.Name(), name, was, k.Help().Desc)
					}
					seen[name] = k.Help().Desc
				}
			}
		}
		b.keys(fmt.Sprint(i + 1))
		text := ansi.Strip(strings.Join(b.helpLines(), "\n"))
		for _, g := range s.Keys() {
			for _, k := range g.Keys {
				if !strings.Contains(text, k.Help().Desc) {
					t.Errorf("%s: help does not say %q", s.Name(), k.Help().Desc)
				}
			}
		}
	}
}

// TestSession opens where it was, as after a kill: what is in the file is enough.
func TestSession(t *testing.T) {
	path := filepath.Join(t.TempDir(), "desk.json")
	b := newBench(t, Options{Session: path})
	b.keys("+", "+", "right", "m")
	b.keys("ctrl+u")
	b.text("the gate")
	b.keys("enter", "-", "2")
	b.send(saveTick{})
	st, err := os.Stat(path)
	if err != nil || st.Mode().Perm() != 0o600 {
		t.Fatalf("%v, %v", st, err)
	}
	want, steps := b.desk.Frame, len(b.desk.Marks)
	again := newBench(t, Options{Session: path})
	if string(doc(t, again)) != string(doc(t, b)) || again.screen().Name() != "Ink" || steps != 1 ||
		len(again.desk.Marks) != 1 || again.desk.Marks[0].Name != "the gate" {
		t.Errorf("%s on %s with %v", doc(t, again), again.screen().Name(), again.desk.Marks)
	}
	if again.desk.Back() != "zoomed" || again.desk.Frame.View.Height == want.View.Height {
		t.Error("the history was not kept")
	}
	if err := os.WriteFile(path, []byte("{"), 0o600); err != nil {
		t.Fatal(err)
	}
	broken := newBench(t, Options{Session: path})
	if _, err := os.Stat(path + ".unreadable"); err != nil || !broken.said.Bad {
		t.Errorf("%v, said %q", err, broken.said.Text)
	}
}

func doc(t *testing.T, b *bench) []byte {
	t.Helper()
	d, err := b.desk.Frame.Marshal()
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// TestFiles saves and opens, and writes over nothing that is not its own.
func TestFiles(t *testing.T) {
	t.Chdir(t.TempDir())
	b := newBench(t, Options{})
	b.keys("+", "ctrl+s", "ctrl+u")
	b.text("reef")
	b.keys("enter")
	if b.desk.Path != "reef.frame.json" || b.desk.Unsaved() {
		t.Fatalf("path %q, unsaved %v, said %q", b.desk.Path, b.desk.Unsaved(), b.said.Text)
	}
	b.keys("+", "ctrl+s", "enter")
	if b.desk.Unsaved() {
		t.Errorf("its own file was not written again: %q", b.said.Text)
	}
	if err := os.WriteFile("other.frame.json", []byte("precious"), 0o600); err != nil {
		t.Fatal(err)
	}
	b.keys("ctrl+s", "ctrl+u")
	b.text("other")
	b.keys("enter")
	if s, err := os.ReadFile("other.frame.json"); err != nil || string(s) != "precious" || !b.said.Bad {
		t.Errorf("%q, %v, said %q", s, err, b.said.Text)
	}
	was := doc(t, b)
	b.keys("0", "ctrl+o", "ctrl+u")
	b.text("reef.frame.json")
	b.keys("enter")
	if string(doc(t, b)) != string(was) {
		t.Errorf("opened %s", doc(t, b))
	}
	b.keys("ctrl+o", "ctrl+u")
	b.text("gone.frame.json")
	b.keys("enter")
	if !b.said.Bad || !strings.Contains(b.said.Text, "gone.frame.json") {
		t.Errorf("said %q", b.said.Text)
	}
}

// TestNoKeyIsLost presses keys while an orbit at 1e-1195 is in the making: each
// has its step, in order.
func TestNoKeyIsLost(t *testing.T) {
	doc, err := frame.Load("../testdata/frames/samphire-star.frame.json")
	if err != nil {
		t.Fatal(err)
	}
	b := newBench(t, Options{Frame: doc.Frame})
	pictures := make(chan *engine.Picture, 10_000)
	b.desk.Engine = engine.New(func(p *engine.Picture) { pictures <- p })
	t.Cleanup(b.desk.Engine.Close)
	b.desk.Pinned, b.asked = false, engine.Request{}
	before, _ := b.desk.Steps()
	b.Update(tea.WindowSizeMsg{Width: 120, Height: 40}) // the engine begins
	keys := []string{"+", "right", "+", "t", "-", "up", "+"}
	const presses = 70
	for i := range presses {
		b.Update(keyOf(keys[i%len(keys)]))
		if len(pictures) > 0 {
			b.Update(kit.Drawn{Picture: <-pictures})
		}
	}
	if after, _ := b.desk.Steps(); after-before != presses {
		t.Errorf("%d keys made %d steps", presses, after-before)
	}
	// 1.5 to the power of (3 - 1) x 10
	want := precision.Depth(doc.Frame.View.Height) + 20*math.Log10(1.5)
	if got := precision.Depth(b.desk.Frame.View.Height); math.Abs(got-want) > 1e-3 {
		t.Errorf("depth %v, not %v", got, want)
	}
}

// TestMeshIsKept: a terminal that shows letters only does not make the maker's
// choice of cells forgotten.
func TestMeshIsKept(t *testing.T) {
	path := filepath.Join(t.TempDir(), "desk.json")
	first := newBench(t, Options{Session: path})
	first.keys("v")
	want := first.desk.Mesh
	first.send(saveTick{})
	bare := newBench(t, Options{Session: path, Getenv: func(k string) string {
		return map[string]string{"TERM": "xterm", "NO_COLOR": "1", "LANG": "C.UTF-8"}[k]
	}})
	if bare.desk.Mesh == want {
		t.Fatal("cells of colour without colour")
	}
	bare.keys("+")
	bare.send(saveTick{})
	if again := newBench(t, Options{Session: path}); again.desk.Mesh != want {
		t.Errorf("the cells are %v, not %v", again.desk.Mesh, want)
	}
}

// TestFailedOpenStays keeps the question open with what was wrong.
func TestFailedOpenStays(t *testing.T) {
	b := newBench(t, Options{})
	b.keys("ctrl+o")
	b.text("gone.json")
	b.keys("enter")
	if !b.file.Open() || !b.said.Bad {
		t.Errorf("open %v, said %q", b.file.Open(), b.said.Text)
	}
	b.text("p") // is text, and no command
	if b.screen().Name() != "Compose" || !b.file.Open() {
		t.Error("a letter was taken for a command")
	}
}

// TestLettersInOneMessage takes letters that came in one message one by one, as
// they do from a key held down or from a fast hand.
func TestLettersInOneMessage(t *testing.T) {
	b := newBench(t, Options{})
	b.send(tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune("++2")})
	if steps, _ := b.desk.Steps(); steps != 2 || b.screen().Name() != "Ink" {
		t.Errorf("%d steps, on %s", steps, b.screen().Name())
	}
}

// TestASCII has nothing but ASCII on any screen where the locale has no more,
// and every line as wide as ever.
func TestASCII(t *testing.T) {
	b := newBench(t, Options{Getenv: func(k string) string { return map[string]string{"TERM": "xterm-256color", "LC_ALL": "C"}[k] }})
	if !b.desk.ASCII {
		t.Fatal("the locale was not understood")
	}
	if err := b.desk.Change("named", func(f *frame.Frame) error { f.Title = "Ebbe Größe 日"; return nil }); err != nil {
		t.Fatal(err)
	}
	for i := range b.screens {
		b.keys(fmt.Sprint(i + 1))
		for _, helping := range []bool{false, true} {
			b.helping = helping
			for _, r := range b.View() {
				if r >= 0x80 {
					t.Fatalf("%s shows %q", b.screen().Name(), r)
				}
			}
			b.fits(80, 24)
		}
		b.helping = false
	}
}
