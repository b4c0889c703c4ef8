//go:build unix

package printfile

import (
	"bytes"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"syscall"
	"testing"
)

// failAt makes the n-th call to the system fail with err, counting from 0, and
// all later ones of the same step too; a failing write writes half. It returns
// the name of the step that failed, for after the fact, and what ends the faults.
func failAt(n int, err error) (step *string, restore func()) {
	old := system
	step = new(string)
	var mu sync.Mutex
	fails := func(op string) bool {
		mu.Lock()
		defer mu.Unlock()
		n--
		if n == -1 {
			*step = op
		}
		return *step == op
	}
	system.create = func(name string) (*os.File, error) {
		if fails(opCreate) {
			return nil, &fs.PathError{Op: "open", Path: name, Err: err}
		}
		return old.create(name)
	}
	system.write = func(f *os.File, b []byte) (int, error) {
		if fails(opWrite) {
			k, _ := old.write(f, b[:len(b)/2])
			return k, &fs.PathError{Op: "write", Path: f.Name(), Err: err}
		}
		return old.write(f, b)
	}
	system.sync = func(f *os.File) error {
		if fails(opSync) {
			return &fs.PathError{Op: "sync", Path: f.Name(), Err: err}
		}
		return old.sync(f)
	}
	system.rename = func(from, to string) error {
		if fails(opRename) {
			return &os.LinkError{Op: "rename", Old: from, New: to, Err: err}
		}
		return old.rename(from, to)
	}
	system.syncDir = func(dir string) error {
		if fails(opSyncDir) {
			return &fs.PathError{Op: "sync", Path: dir, Err: err}
		}
		return old.syncDir(dir)
	}
	return step, func() { system = old }
}

// TestDiskFullAtEveryStep lets the disk fill up at each call in turn: each time
// there is one error that names the folder and the bytes, nothing is left, and
// the name holds what it held before.
func TestDiskFullAtEveryStep(t *testing.T) {
	const width, height = 100, 40 // four strips of 6 kB
	pixels := make([]byte, width*height*bpp)
	steps := map[string]int{}
	for n := 0; ; n++ {
		dir := t.TempDir()
		path := filepath.Join(dir, "a.png")
		if err := os.WriteFile(path, []byte("before"), 0o644); err != nil {
			t.Fatal(err)
		}
		step, restore := failAt(n, syscall.ENOSPC)
		err := writeRowByRow(path, Info{Width: width, Height: height}, pixels)
		restore()
		if *step == "" {
			if err != nil {
				t.Fatal(err)
			}
			break
		}
		steps[*step]++
		checkFailure(t, fmt.Sprintf("%s, call %d", *step, n), err, syscall.ENOSPC, path)
		if !strings.Contains(hint(t, err), "folder "+dir+" is full") {
			t.Errorf("call %d: hint %q", n, hint(t, err))
		}
		if *step == opSyncDir {
			continue // the whole file stands
		}
		if b, _ := os.ReadFile(path); string(b) != "before" {
			t.Errorf("%s, call %d: the name holds %d other bytes", *step, n, len(b))
		}
	}
	// Head, IEND, and three writes for each of at least four strips.
	if steps[opCreate] != 1 || steps[opWrite] < 14 || steps[opSync] != 1 || steps[opRename] != 1 || steps[opSyncDir] != 1 {
		t.Errorf("failures were tried at %v", steps)
	}
}

// writeRowByRow writes a file and returns the first error; later calls must
// return the same.
func writeRowByRow(path string, info Info, pixels []byte) error {
	w, err := create(path, info, 2, 10*(info.Width*bpp+1))
	if err != nil {
		return err
	}
	rowBytes := info.Width * bpp
	for ; len(pixels) > 0 && err == nil; pixels = pixels[rowBytes:] {
		err = w.WriteRows(pixels[:rowBytes])
	}
	_, last := w.Commit()
	if err != nil && last != err {
		return fmt.Errorf("first %w, then %w", err, last)
	}
	w.Abort()
	return last
}

func checkFailure(t *testing.T, when string, err, cause error, path string) {
	t.Helper()
	we, ok := err.(*WriteError) // itself, not wrapped again
	if !ok {
		t.Fatalf("%s: error %v (%T)", when, err, err)
	}
	if !errors.Is(err, cause) || we.Path != path || strings.Contains(err.Error(), partSuffix) {
		t.Errorf("%s: error %v about %s", when, err, we.Path)
	}
	if we.Op != opCreate && we.Needed < 33 { // signature and IHDR alone
		t.Errorf("%s: says that %d bytes were needed", when, we.Needed)
	}
	if got := fmt.Sprint(entries(t, filepath.Dir(path))); got != "[a.png]" {
		t.Errorf("%s: files %v", when, got)
	}
}

// TestNeededBytes: the hint counts all bytes up to and with the refused ones.
func TestNeededBytes(t *testing.T) {
	_, restore := failAt(1, syscall.ENOSPC)
	defer restore()
	err := WriteFile(filepath.Join(t.TempDir(), "a"), make([]byte, 12345))
	if !strings.Contains(hint(t, err), " 12345 bytes") {
		t.Errorf("hint %q", hint(t, err))
	}
}

func TestHints(t *testing.T) {
	for _, c := range []struct {
		cause error
		want  string
	}{
		{syscall.EDQUOT, "is full"}, {syscall.EFBIG, "takes no file of"}, {syscall.EXDEV, "on its own disk"},
		{syscall.EACCES, "allow writing"}, {syscall.ENOENT, "make the folder"}, {syscall.EIO, "check the disk"},
	} {
		err := writeError(opWrite, filepath.Join("d", "a.png"), 7, &fs.PathError{Op: "x", Path: "y", Err: c.cause})
		if !strings.Contains(hint(t, err), c.want) || !errors.Is(err, c.cause) {
			t.Errorf("%v: hint %q", c.cause, hint(t, err))
		}
	}
}

func TestNamesThatAreNoFiles(t *testing.T) {
	dir := t.TempDir()
	if err := os.Mkdir(filepath.Join(dir, "sub"), 0o755); err != nil {
		t.Fatal(err)
	}
	for _, path := range []string{filepath.Join(dir, "sub"), dir + "/.", dir + "/..", "", "/", os.DevNull, filepath.Join(dir, "none", "a")} {
		err := WriteFile(path, []byte("x"))
		var we *WriteError
		if !errors.As(err, &we) || we.Op != opCreate {
			t.Errorf("%q: %v", path, err)
			continue
		}
		hint(t, err)
	}
	if got := fmt.Sprint(entries(t, dir)); got != "[sub]" {
		t.Errorf("files %v", got)
	}
}

func TestCommitAsRefusesAFolder(t *testing.T) {
	dir := t.TempDir()
	w, err := Create(filepath.Join(dir, "a.png"), Info{Width: 1, Height: 1}, 1)
	if err != nil {
		t.Fatal(err)
	}
	if err := w.WriteRows(make([]byte, bpp)); err != nil {
		t.Fatal(err)
	}
	_, err = w.CommitAs(dir)
	if !errors.Is(err, errTarget) {
		t.Errorf("error %v", err)
	}
	if left := entries(t, dir); len(left) > 0 {
		t.Errorf("left %v", left)
	}
}

// TestLongName: 255 bytes are the most that common file systems take (NAME_MAX
// of linux/limits.h), and the part's name must not need more.
func TestLongName(t *testing.T) {
	for _, n := range []int{partName, partName + 1, 255} {
		path := filepath.Join(t.TempDir(), strings.Repeat("n", n))
		if err := WriteFile(path, []byte("x")); err != nil {
			t.Errorf("%d bytes: %v", n, err)
		}
	}
	a, b := partPrefix(strings.Repeat("n", 254)+"a"), partPrefix(strings.Repeat("n", 254)+"b")
	if a == b {
		t.Error("two long names share their parts")
	}
}

func TestWriteFile(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "a.json")
	for _, data := range [][]byte{[]byte("first"), {}, bytes.Repeat([]byte("x"), 1<<20)} {
		if err := WriteFile(path, data); err != nil {
			t.Fatal(err)
		}
		if got, err := os.ReadFile(path); err != nil || !bytes.Equal(got, data) {
			t.Errorf("%d bytes came back as %d (%v)", len(data), len(got), err)
		}
	}
	if got := fmt.Sprint(entries(t, dir)); got != "[a.json]" {
		t.Errorf("files %v", got)
	}
}

// TestManyAtOnce: writers of one name do not disturb each other; the last to
// commit has the name.
func TestManyAtOnce(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "a")
	var all sync.WaitGroup
	for i := range 8 {
		all.Go(func() {
			for range 10 {
				if err := WriteFile(path, bytes.Repeat([]byte{byte(i)}, 1000)); err != nil {
					t.Error(err)
				}
			}
		})
	}
	all.Wait()
	b, err := os.ReadFile(path)
	if err != nil || len(b) != 1000 || !bytes.Equal(b, bytes.Repeat(b[:1], 1000)) {
		t.Errorf("%d bytes, mixed (%v)", len(b), err)
	}
	if got := fmt.Sprint(entries(t, dir)); got != "[a]" {
		t.Errorf("files %v", got)
	}
}
