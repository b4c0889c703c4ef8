package printfile

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"syscall"
	"testing"
)

// TestFileInPieces: the name holds what it held until Commit, and all of the
// pieces after.
func TestFileInPieces(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "a")
	if err := os.WriteFile(path, []byte("before"), 0o666); err != nil {
		t.Fatal(err)
	}
	f, err := CreateFile(path)
	if err != nil {
		t.Fatal(err)
	}
	for _, piece := range []string{"one ", "two"} {
		if n, err := f.Write([]byte(piece)); n != len(piece) || err != nil {
			t.Fatalf("Write: %d, %v", n, err)
		}
		if b, _ := os.ReadFile(path); string(b) != "before" {
			t.Fatalf("before Commit the name holds %q", b)
		}
	}
	if n, err := f.Commit(); n != 7 || err != nil {
		t.Fatalf("Commit: %d, %v", n, err)
	}
	f.Abort() // nothing
	if b, _ := os.ReadFile(path); string(b) != "one two" {
		t.Errorf("after Commit the name holds %q", b)
	}
	if _, err := f.Write(nil); err != ErrClosed {
		t.Errorf("Write after Commit: %v", err)
	}
	if got := fmt.Sprint(entries(t, dir)); got != "[a]" {
		t.Errorf("files %v", got)
	}
}

// TestFileGivenUp: neither Abort nor a full disk leaves anything.
func TestFileGivenUp(t *testing.T) {
	dir := t.TempDir()
	f, err := CreateFile(filepath.Join(dir, "a"))
	if err != nil {
		t.Fatal(err)
	}
	f.Abort()
	if _, err := f.Commit(); err != ErrClosed {
		t.Errorf("Commit after Abort: %v", err)
	}
	if f, err = CreateFile(filepath.Join(dir, "a")); err != nil {
		t.Fatal(err)
	}
	saved := system
	system.write = func(*os.File, []byte) (int, error) { return 0, syscall.ENOSPC }
	defer func() { system = saved }()
	for range 2 {
		if _, err := f.Write([]byte("x")); !errors.Is(err, syscall.ENOSPC) {
			t.Errorf("Write to a full disk: %v", err)
		}
	}
	if _, err := f.Commit(); !errors.Is(err, syscall.ENOSPC) {
		t.Errorf("Commit after a full disk: %v", err)
	}
	if left := entries(t, dir); len(left) > 0 {
		t.Errorf("left %v", left)
	}
}
