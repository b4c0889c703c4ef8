package tui

import (
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/x/ansi"
	"github.com/charmbracelet/x/vt"

	"leadline/tui/engine"
	"leadline/tui/kit"
)

var update = flag.Bool("update", false, "write the golden screens anew")

// whole is the program over a frame once its picture is whole.
func whole(t *testing.T, o Options, width, height int) *bench {
	t.Helper()
	b := newBench(t, o)
	pictures := make(chan *engine.Picture, 10_000)
	b.desk.Engine = engine.New(func(p *engine.Picture) { pictures <- p })
	t.Cleanup(b.desk.Engine.Close)
	b.asked = engine.Request{} // what was asked for without an engine
	b.Update(tea.WindowSizeMsg{Width: width, Height: height})
	for late := time.After(time.Minute); ; {
		select {
		case p := <-pictures:
			b.Update(kit.Drawn{Picture: p})
			if p.Whole && b.desk.Picture == p {
				return b
			}
		case <-late:
			t.Fatal("no whole picture")
		}
	}
}

// TestEmulator shows every screen to a terminal emulator (charmbracelet/x/vt):
// what stands there is what was meant, cell by cell, with nothing wrapped.
func TestEmulator(t *testing.T) {
	for _, size := range [][2]int{{80, 24}, {200, 60}, {40, 10}} {
		for _, env := range []map[string]string{
			{"TERM": "xterm-256color", "COLORTERM": "truecolor", "LANG": "C.UTF-8"},
			{"TERM": "xterm-256color", "LANG": "C.UTF-8"}, {"TERM": "xterm", "LANG": "C.UTF-8"}, {"TERM": "xterm", "NO_COLOR": "1", "LANG": "C.UTF-8"},
		} {
			b := whole(t, Options{Getenv: func(k string) string { return env[k] }}, size[0], size[1])
			for i := range b.screens {
				b.keys(fmt.Sprint(i + 1))
				e := vt.NewEmulator(size[0], size[1])
				view := b.View()
				if _, err := e.WriteString(strings.ReplaceAll(view, "\n", "\r\n")); err != nil {
					t.Fatal(err)
				}
				got := strings.Split(ansi.Strip(e.Render()), "\n")
				want := strings.Split(ansi.Strip(view), "\n")
				for y := range want {
					if y >= len(got) || strings.TrimRight(got[y], " \r") != strings.TrimRight(want[y], " ") {
						t.Fatalf("%s at %v, %v: line %d shows\n%q, not\n%q", b.screen().Name(), size, env, y, line(got, y), want[y])
					}
				}
				_ = e.Close()
			}
		}
	}
}

func line(lines []string, y int) string {
	if y < len(lines) {
		return lines[y]
	}
	return "nothing"
}

// TestGoldenCompose holds the Compose screen, without colour, to what was
// looked at and found good. Its picture is the engine's.
func TestGoldenCompose(t *testing.T) {
	env := map[string]string{"TERM": "xterm", "NO_COLOR": "1", "LANG": "C.UTF-8"}
	for _, size := range [][2]int{{80, 24}, {40, 10}, {120, 40}} {
		b := whole(t, Options{Getenv: func(k string) string { return env[k] }}, size[0], size[1])
		path := filepath.Join("testdata", fmt.Sprintf("compose-%dx%d.txt", size[0], size[1]))
		got := ansi.Strip(b.View()) + "\n"
		if *update {
			if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
				t.Fatal(err)
			}
		}
		want, err := os.ReadFile(path)
		if err != nil || got != string(want) {
			t.Errorf("%v, %v: the screen is\n%s", size, err, got)
		}
	}
}
