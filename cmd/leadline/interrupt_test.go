//go:build unix

package main

import (
	"maps"
	"strings"
	"syscall"
	"testing"
	"time"
)

// TestKillLeavesNoPrint ends a render as a power cut would: nothing is under
// the final names, and the next print of that name clears up and succeeds.
func TestKillLeavesNoPrint(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	p := startPrint(t, dir, "slow.frame.json")
	p.signal(syscall.SIGKILL)
	if code := p.end(); code != -1 {
		t.Fatalf("exit code %d of a killed process", code)
	}
	if files := contents(t, dir); len(files) != 1 || len(hidden(files)) != 1 {
		t.Fatalf("a killed render left %v, not just one hidden part", keys(files))
	}
	command(t, dir, "render", testdata(t, "small.frame.json"), "--out", "tide.png")
	if files := contents(t, dir); len(files) != 2 || files["tide.png"] == "" || files["tide.sidecar.json"] == "" {
		t.Errorf("after the next render there are %v", keys(files))
	}
	command(t, dir, "verify", "tide.png")
}

// TestKillSparesThePrintUnderWay runs two prints of one name: the second must
// not take the first one's part for stale.
func TestKillSparesThePrintUnderWay(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	p := startPrint(t, dir, "slow.frame.json")
	command(t, dir, "render", testdata(t, "small.frame.json"), "--out", "tide.png")
	if files := contents(t, dir); len(hidden(files)) != 1 {
		t.Errorf("the part of a living render is gone: %v", keys(files))
	}
	p.signal(syscall.SIGTERM)
	if code := p.end(); code != exitInterrupted {
		t.Errorf("exit code %d, not %d", code, exitInterrupted)
	}
}

// TestFirstSignalStopsCleanly sends each polite signal once, to a first print
// and to a second of the same name.
func TestFirstSignalStopsCleanly(t *testing.T) {
	t.Parallel()
	for _, s := range []syscall.Signal{syscall.SIGINT, syscall.SIGTERM} {
		t.Run(s.String(), func(t *testing.T) {
			dir := t.TempDir()
			interruptOnce(t, dir, s, "leadline: interrupted; nothing is kept of tide.png")
			if files := contents(t, dir); len(files) > 0 {
				t.Errorf("left %v", keys(files))
			}
			command(t, dir, "render", testdata(t, "small.frame.json"), "--out", "tide.png")
			before := contents(t, dir)
			interruptOnce(t, dir, s, "leadline: interrupted; tide.png is the earlier print, untouched")
			if after := contents(t, dir); !maps.Equal(before, after) {
				t.Errorf("the earlier print is not as it was: %v", keys(after))
			}
			command(t, dir, "verify", "tide.png")
		})
	}
}

func interruptOnce(t *testing.T, dir string, s syscall.Signal, want string) {
	t.Helper()
	p := startPrint(t, dir, "slow.frame.json")
	p.signal(s)
	p.hear("leadline: stopping cleanly; interrupt again to stop at once")
	if code := p.end(); code != exitInterrupted {
		t.Errorf("exit code %d, not %d", code, exitInterrupted)
	}
	if last := p.heard[len(p.heard)-1]; last != want {
		t.Errorf("last words %q, not %q", last, want)
	}
}

// TestSecondSignalStopsAtOnce interrupts twice while single pixels take
// seconds. The hidden part stays, which tells a hard end from a clean one.
func TestSecondSignalStopsAtOnce(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	p := startPrint(t, dir, "slowest.frame.json")
	p.signal(syscall.SIGINT)
	p.hear("leadline: stopping cleanly")
	second := time.Now()
	p.signal(syscall.SIGINT)
	if code := p.end(); code != exitInterrupted {
		t.Errorf("exit code %d, not %d", code, exitInterrupted)
	}
	if took := time.Since(second); took > 10*time.Second {
		t.Errorf("took %v to stop at once", took)
	}
	if last := p.heard[len(p.heard)-1]; strings.Contains(last, "interrupted") {
		t.Errorf("a clean end after the second signal: %q", last)
	}
	if files := contents(t, dir); len(files) != 1 || len(hidden(files)) != 1 {
		t.Errorf("left %v, not just one hidden part", keys(files))
	}
}

// TestInterruptOfOthers interrupts verify, which says no more than it knows.
func TestInterruptOfOthers(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	command(t, dir, "render", testdata(t, "slow.frame.json"), "--out", "part.png", "--crop", "0,0,40,30", "--audit", "0")
	before := contents(t, dir)
	p := start(t, dir, "verify", "part.png", "--workers", "1", "--progress", "json")
	p.hear(underWay)
	p.signal(syscall.SIGINT)
	if code := p.end(); code != exitInterrupted {
		t.Errorf("exit code %d, not %d", code, exitInterrupted)
	}
	if last := p.heard[len(p.heard)-1]; last != "leadline: interrupted" {
		t.Errorf("last words %q", last)
	}
	if after := contents(t, dir); !maps.Equal(before, after) {
		t.Errorf("verify left %v", keys(after))
	}
}

func keys(m map[string]string) (k []string) {
	for name := range maps.Keys(m) {
		k = append(k, name)
	}
	return k
}
