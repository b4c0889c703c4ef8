//go:build darwin || dragonfly || freebsd || linux || netbsd || openbsd

package printfile

import (
	"bufio"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// startChild starts a process that has begun path and waits.
func startChild(t *testing.T, path string) *exec.Cmd {
	t.Helper()
	cmd := exec.Command(os.Args[0])
	cmd.Env = append(os.Environ(), childPath+"="+path)
	if _, err := cmd.StdinPipe(); err != nil { // held open: the child waits for it
		t.Fatal(err)
	}
	out, err := cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { cmd.Process.Kill(); cmd.Wait() })
	if line, err := bufio.NewReader(out).ReadString('\n'); line != "begun\n" {
		t.Fatalf("child says %q (%v)", line, err)
	}
	return cmd
}

// TestKilledProcess: a killed writer leaves nothing under the name, and what it
// leaves beside it goes when the same file is next written, not before it died.
func TestKilledProcess(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "a.png")
	cmd := startChild(t, path)
	living := entries(t, dir)
	if len(living) != 1 || !isPart(living[0], ".a.png.") {
		t.Fatalf("the child's files are %v", living)
	}
	if err := WriteFile(path, []byte("ours")); err != nil {
		t.Fatal(err)
	}
	if got, want := fmt.Sprint(entries(t, dir)), fmt.Sprintf("[%s a.png]", living[0]); got != want {
		t.Fatalf("files %s, want %s: the part of a living process must stay", got, want)
	}
	cmd.Process.Kill()
	cmd.Wait()
	if b, _ := os.ReadFile(path); string(b) != "ours" {
		t.Errorf("after the kill the name holds %q", b)
	}
	if err := WriteFile(path+"x", []byte("another")); err != nil { // not this one's part
		t.Fatal(err)
	}
	if got, want := fmt.Sprint(entries(t, dir)), fmt.Sprintf("[%s a.png a.pngx]", living[0]); got != want {
		t.Errorf("files %s, want %s: another file's part must stay", got, want)
	}
	w, err := Create(path, Info{Width: 1, Height: 1}, 1)
	if err != nil {
		t.Fatal(err)
	}
	w.Abort()
	if got := fmt.Sprint(entries(t, dir)); got != "[a.png a.pngx]" {
		t.Errorf("files %s: the dead process's part must go", got)
	}
}

// TestSweepSparesWhatIsNoPart: only regular files with a part's exact name go.
func TestSweepSparesWhatIsNoPart(t *testing.T) {
	dir := t.TempDir()
	hex := strings.Repeat("0", partRandom)
	spared := []string{".a.png." + hex + "0.part", ".a.png." + hex[1:] + ".part", ".a.png." + hex + ".parts",
		".a.png." + hex[1:] + "g.part", ".a.png.b." + hex + ".part", "a.png." + hex + ".part"}
	for _, name := range append(spared, ".a.png."+hex+".part") {
		if err := os.WriteFile(filepath.Join(dir, name), nil, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	link := ".a.png." + strings.Repeat("1", partRandom) + ".part"
	if err := os.Symlink(spared[0], filepath.Join(dir, link)); err != nil {
		t.Fatal(err)
	}
	if err := WriteFile(filepath.Join(dir, "a.png"), nil); err != nil {
		t.Fatal(err)
	}
	left := map[string]bool{}
	for _, name := range entries(t, dir) {
		left[name] = true
	}
	for _, name := range append(spared, link, "a.png") {
		if !left[name] {
			t.Errorf("%s is gone", name)
		}
	}
	if left[".a.png."+hex+".part"] {
		t.Error("the stale part stays")
	}
}

// TestSweepBetweenCreateAndLock: a part that is locked or removed by a sweep in
// the instant before its own lock is given up for another.
func TestSweepBetweenCreateAndLock(t *testing.T) {
	defer func(old func(string) (*os.File, error)) { system.create = old }(system.create)
	create, calls := system.create, 0
	system.create = func(name string) (*os.File, error) {
		f, err := create(name)
		switch calls++; calls {
		case 1: // swept at once
			removeIfStale(name)
		case 2: // being swept
			other, err := os.OpenFile(name, os.O_RDWR, 0)
			if err != nil || lockFile(other) != lockHeld {
				t.Fatal("no lock for the sweep:", err)
			}
			t.Cleanup(func() { other.Close() })
		}
		return f, err
	}
	dir := t.TempDir()
	if err := WriteFile(filepath.Join(dir, "a"), []byte("x")); err != nil {
		t.Fatal(err)
	}
	if calls != 3 {
		t.Errorf("%d parts were begun, want 3", calls)
	}
	if b, err := os.ReadFile(filepath.Join(dir, "a")); string(b) != "x" {
		t.Errorf("the file holds %q (%v)", b, err)
	}
}
