//go:build unix

package main

import (
	"bufio"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"
)

// patience is how long a test waits for a sign; only a failure takes so long.
const patience = 2 * time.Minute

// process is the command under way.
type process struct {
	t     *testing.T
	cmd   *exec.Cmd
	lines chan string // of standard error
	heard []string
}

// start runs the command in dir.
func start(t *testing.T, dir string, args ...string) *process {
	t.Helper()
	p := &process{t: t, cmd: exec.Command(executable(t), args...), lines: make(chan string, 1000)}
	p.cmd.Dir = dir
	talk, err := p.cmd.StderrPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := p.cmd.Start(); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { p.cmd.Process.Kill() })
	go func() {
		defer close(p.lines)
		for s := bufio.NewScanner(talk); s.Scan(); {
			p.lines <- s.Text()
		}
	}()
	return p
}

// hear waits for a line that holds text, or for the end where text is "".
func (p *process) hear(text string) {
	p.t.Helper()
	late := time.After(patience)
	for {
		select {
		case line, ok := <-p.lines:
			switch {
			case !ok && text == "":
				return
			case !ok:
				p.t.Fatalf("ended without saying %q, but:\n%s", text, strings.Join(p.heard, "\n"))
			}
			p.heard = append(p.heard, line)
			if text != "" && strings.Contains(line, text) {
				return
			}
		case <-late:
			p.t.Fatalf("did not say %q in %v, but:\n%s", text, patience, strings.Join(p.heard, "\n"))
		}
	}
}

func (p *process) signal(s syscall.Signal) {
	p.t.Helper()
	if err := p.cmd.Process.Signal(s); err != nil {
		p.t.Fatal(err)
	}
}

// end waits for the end and returns the exit code, -1 after a kill.
func (p *process) end() int {
	p.t.Helper()
	p.hear("")
	p.cmd.Wait() // its error is the code
	return p.cmd.ProcessState.ExitCode()
}

// underWay is the line of progress that says: the file is begun, no pixel is
// done.
const underWay = `"phase":"pixels","done":0`

// startPrint renders a test frame to tide.png and waits until it is under way.
func startPrint(t *testing.T, dir, frame string) *process {
	t.Helper()
	p := start(t, dir, "render", testdata(t, frame), "--out", "tide.png", "--progress", "json")
	p.hear(underWay)
	return p
}

func testdata(t *testing.T, name string) string {
	t.Helper()
	path, err := filepath.Abs(filepath.Join("testdata", name))
	if err != nil {
		t.Fatal(err)
	}
	return path
}

// command runs the command to its end, which must be a good one, and returns
// its standard output.
func command(t *testing.T, dir string, args ...string) string {
	t.Helper()
	cmd := exec.Command(executable(t), args...)
	cmd.Dir = dir
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("leadline %s: %v\n%s", strings.Join(args, " "), err, err.(*exec.ExitError).Stderr)
	}
	return string(out)
}

// contents is every file of a folder, hidden ones included.
func contents(t *testing.T, dir string) map[string]string {
	t.Helper()
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	files := map[string]string{}
	for _, e := range entries {
		b, err := os.ReadFile(filepath.Join(dir, e.Name()))
		if err != nil {
			t.Fatal(err)
		}
		files[e.Name()] = string(b)
	}
	return files
}

// hidden are the names of hidden parts of tide.png.
func hidden(files map[string]string) (names []string) {
	for name := range files {
		if strings.HasPrefix(name, ".tide.png.") && strings.HasSuffix(name, ".part") {
			names = append(names, name)
		}
	}
	return names
}
