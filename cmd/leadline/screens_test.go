//go:build unix

package main

import (
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
	"time"

	"leadline/render/frame"
)

// terminal is the program in a real terminal, tmux, of a server of its own.
type terminal struct {
	t      *testing.T
	socket string
}

// inTerminal starts the program in a folder, with a state folder of its own.
func inTerminal(t *testing.T, dir string, width, height int, env ...string) *terminal {
	t.Helper()
	if testing.Short() {
		t.Skip("left out by -short: it takes some seconds")
	}
	if _, err := exec.LookPath("tmux"); err != nil {
		t.Skip("tmux is missing (Debian: tmux)")
	}
	w := &terminal{t, filepath.Join(t.TempDir(), "tmux")}
	t.Cleanup(func() { _ = exec.Command("tmux", "-S", w.socket, "kill-server").Run() })
	w.start(dir, width, height, env...)
	return w
}

func (w *terminal) start(dir string, width, height int, env ...string) {
	w.t.Helper()
	args := []string{"-S", w.socket, "-f", "/dev/null", "new-session", "-d", "-x", fmt.Sprint(width), "-y", fmt.Sprint(height), "-c", dir, "env",
		"XDG_STATE_HOME=" + filepath.Join(dir, "state"), "LEADLINE_QUEUE=", "LC_ALL=C.UTF-8", "COLORTERM=truecolor"}
	args = append(append(args, env...), executable(w.t))
	if out, err := exec.Command("tmux", args...).CombinedOutput(); err != nil {
		w.t.Fatalf("tmux: %v\n%s", err, out)
	}
}

// keys sends keys by tmux' names; text is sent as it is.
func (w *terminal) keys(names ...string) {
	w.t.Helper()
	for _, n := range names {
		if out, err := exec.Command("tmux", "-S", w.socket, "send-keys", n).CombinedOutput(); err != nil {
			w.t.Fatalf("tmux: %v\n%s", err, out)
		}
	}
}

func (w *terminal) text(s string) {
	w.t.Helper()
	if out, err := exec.Command("tmux", "-S", w.socket, "send-keys", "-l", "--", s).CombinedOutput(); err != nil {
		w.t.Fatalf("tmux: %v\n%s", err, out)
	}
}

// screen is what stands there now.
func (w *terminal) screen() string {
	out, err := exec.Command("tmux", "-S", w.socket, "capture-pane", "-p").Output()
	if err != nil {
		return ""
	}
	return string(out)
}

// shows waits until the screen matches, and returns the match.
func (w *terminal) shows(pattern string) []string {
	w.t.Helper()
	re := regexp.MustCompile(pattern)
	for end := time.Now().Add(patience); time.Now().Before(end); time.Sleep(50 * time.Millisecond) {
		if m := re.FindStringSubmatch(w.screen()); m != nil {
			return m
		}
	}
	w.t.Fatalf("the screen never showed %q, but\n%s", pattern, w.screen())
	return nil
}

// TestScreens goes the way of a maker in a real terminal: zoom in, find a
// nucleus, change the ink, set an A2 sheet, queue it, see it finish, quit. The
// sidecar has the place that was shown.
func TestScreens(t *testing.T) {
	dir := t.TempDir()
	w := inTerminal(t, dir, 120, 40)
	w.shows(`depth -0\.4`)
	w.keys("g")
	w.text("-0.745 0.113 0.01")
	w.keys("Enter")
	w.shows(`depth 2\.00`)
	for range 20 {
		w.text("+")
	}
	w.shows(`depth 5\.52`) // 2 + 20·log10(1.5)
	w.text("fn")
	w.shows(`nucleus of period [0-9]+`)
	w.keys("Left", "u")
	// The print is small, so that it is soon done: 30 ppi.
	w.text("3")
	w.shows(`(?i)ppi`)
	setSheet(w)
	w.text("1")
	at := w.shows(`at (-?[0-9.]+)…? (-?[0-9.]+)…?i`)
	w.keys("C-s")
	w.shows(`save as`)
	w.keys("C-u")
	w.text("cove")
	w.keys("Enter")
	w.shows(`saved as cove`)
	w.text("p")
	w.shows(`print to`)
	w.keys("Enter")
	w.shows(`(?i)done`)
	w.text("q")
	doc, err := frame.Load(filepath.Join(dir, "cove.sidecar.json"))
	if err != nil {
		t.Fatal(err)
	}
	if v := doc.Frame.View; !strings.HasPrefix(v.Centre.Re.String(), at[1]) || !strings.HasPrefix(v.Centre.Im.String(), at[2]) {
		t.Errorf("the sidecar's place is %s %s, the screen's %s %s", v.Centre.Re, v.Centre.Im, at[1], at[2])
	}
	if s := doc.Frame.Sheet; s.Width.MM(1) != 594 || s.Height.MM(1) != 420 || s.PPI != 30 {
		t.Errorf("the sheet is %+v", s)
	}
	if _, err := os.Stat(filepath.Join(dir, "cove.png")); err != nil {
		t.Error(err)
	}
}

// TestScreensAfterKill opens where it was after kill -9.
func TestScreensAfterKill(t *testing.T) {
	dir := t.TempDir()
	w := inTerminal(t, dir, 80, 24)
	w.shows(`depth -0\.4`)
	w.text("+++++")
	w.shows(`depth 0\.47`)
	time.Sleep(2500 * time.Millisecond) // more than a change may be lost for
	pid, err := exec.Command("tmux", "-S", w.socket, "display-message", "-p", "#{pane_pid}").Output()
	if err != nil {
		t.Fatal(err)
	}
	if err := exec.Command("kill", "-9", strings.TrimSpace(string(pid))).Run(); err != nil {
		t.Fatal(err)
	}
	time.Sleep(200 * time.Millisecond)
	w.start(dir, 80, 24)
	w.shows(`depth 0\.47`)
	w.text("u")
	w.shows(`4 back, 1 forward`)
}

// TestScreensResize changes the terminal's size at any moment, down to what is
// too small, and comes back.
func TestScreensResize(t *testing.T) {
	w := inTerminal(t, t.TempDir(), 120, 40)
	w.shows(`depth -0\.4`)
	for _, size := range [][2]string{{"40", "10"}, {"30", "8"}, {"200", "60"}} {
		if out, err := exec.Command("tmux", "-S", w.socket, "resize-window", "-x", size[0], "-y", size[1]).CombinedOutput(); err != nil {
			t.Fatalf("%v %s", err, out)
		}
		if size[0] == "30" {
			w.shows("40 x 10")
			continue
		}
		w.shows(`depth -0\.4`)
		if n := strings.Count(w.screen(), "\n"); fmt.Sprint(n) != size[1] {
			t.Errorf("%d lines at %v", n, size)
		}
	}
}

// setSheet sets an A2 sheet of 30 ppi on the Sheet screen.
func setSheet(w *terminal) {
	w.t.Helper()
	w.keys("Enter", "C-u")
	w.text("A2")
	w.keys("Enter")
	w.shows(`size +A2`)
	w.keys("Down", "Down", "Enter", "C-u")
	w.text("30")
	w.keys("Enter")
	w.shows(`ppi +30 `)
}
