//go:build unix

package main

import (
	"maps"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"
)

// farm is the folder of the examples for schedulers.
const farm = "../../testdata/farm"

// stripeArgs renders stripe 1 of 2 of a small part of the slow frame, which takes a second or two, into the folder
// parts.
func stripeArgs(t *testing.T) []string {
	return []string{"render", testdata(t, "slow.frame.json"), "--crop", "0,0,32,32", "--audit", "2",
		"--part", "1/2", "--parts", "parts", "--progress", "json"}
}

// TestKillLeavesNoPart ends a task in the midst of its pixels as a power cut
// would; the same task again finishes and leaves no trace of the first.
func TestKillLeavesNoPart(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	p := start(t, dir, stripeArgs(t)...)
	p.hear(underWay)
	p.signal(syscall.SIGKILL)
	if code := p.end(); code != -1 {
		t.Fatalf("exit code %d of a killed process", code)
	}
	files := contents(t, filepath.Join(dir, "parts"))
	delete(files, "print.json")
	delete(files, "shared")
	if names := keys(files); len(names) != 1 || !strings.HasPrefix(names[0], ".part-0001-of-0002.") {
		t.Fatalf("a killed task left %v, not just one hidden file", names)
	}
	command(t, dir, stripeArgs(t)...)
	if files := contents(t, filepath.Join(dir, "parts")); len(files) != 3 || files["part-0001-of-0002"] == "" {
		t.Errorf("after the next run there are %v", keys(files))
	}
}

// TestKillAtAnyMoment kills a task over and over, each time a little later.
// Whatever has a final name then is what a task left in peace makes.
func TestKillAtAnyMoment(t *testing.T) {
	t.Parallel()
	dir, frame := t.TempDir(), testdata(t, "small.frame.json")
	args := func(folder string) []string { return []string{"render", frame, "--part", "1/1", "--parts", folder} }
	began := time.Now()
	command(t, dir, args("peace")...)
	whole, kills := time.Since(began), 0
	want := contents(t, filepath.Join(dir, "peace"))
	const times = 24
	for i := range times {
		folder := filepath.Join(dir, "killed")
		if i%3 == 0 { // in an empty folder, and on top of what two others left
			os.RemoveAll(folder)
		}
		p := start(t, dir, args("killed")...)
		time.Sleep(whole * time.Duration(i+1) / times)
		p.cmd.Process.Kill() // fails when it is done already
		if p.end() == -1 {
			kills++
		}
		if _, err := os.Stat(folder); err != nil {
			continue // killed before it made one
		}
		for name, text := range contents(t, folder) {
			if !strings.HasPrefix(name, ".") && want[name] != text {
				t.Fatalf("killed after %d/%d of its time, a task left a broken %s", i+1, times, name)
			}
		}
	}
	if kills == 0 {
		t.Error("no task was killed: nothing was tested")
	}
	command(t, dir, args("killed")...)
	got := contents(t, filepath.Join(dir, "killed"))
	for name := range got {
		if strings.HasPrefix(name, ".") && !strings.HasPrefix(name, ".part-") {
			delete(got, name) // of shared or print.json, which the last run had no need to write
		}
	}
	if !maps.Equal(got, want) {
		t.Errorf("in the end there are %v, not the same as %v", keys(got), keys(want))
	}
}

// TestTwoTasksOfOnePart run at once and both succeed.
func TestTwoTasksOfOnePart(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	first := start(t, dir, stripeArgs(t)...)
	second := start(t, dir, stripeArgs(t)...)
	if a, b := first.end(), second.end(); a != exitDone || b != exitDone {
		t.Fatalf("exit codes %d and %d:\n%s\n%s", a, b, strings.Join(first.heard, "\n"), strings.Join(second.heard, "\n"))
	}
	files := contents(t, filepath.Join(dir, "parts"))
	if len(files) != 3 {
		t.Errorf("left %v", keys(files))
	}
	before := files["part-0001-of-0002"]
	if err := os.Remove(filepath.Join(dir, "parts", "part-0001-of-0002")); err != nil {
		t.Fatal(err)
	}
	command(t, dir, stripeArgs(t)...)
	if contents(t, filepath.Join(dir, "parts"))["part-0001-of-0002"] != before {
		t.Error("a task alone makes another part")
	}
}

// TestInterruptOfATask stops cleanly: nothing of the part stays.
func TestInterruptOfATask(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	p := start(t, dir, stripeArgs(t)...)
	p.hear(underWay)
	p.signal(syscall.SIGTERM)
	if code := p.end(); code != exitInterrupted {
		t.Errorf("exit code %d, not %d", code, exitInterrupted)
	}
	if files := contents(t, filepath.Join(dir, "parts")); len(files) != 2 || files["print.json"] == "" || files["shared"] == "" {
		t.Errorf("left %v", keys(files))
	}
}
