package printfile

import (
	"crypto/rand"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
)

// Steps of writing a file, as they stand in a WriteError.
const (
	opCreate  = "create"
	opWrite   = "write"
	opSync    = "sync"
	opRename  = "rename"
	opSyncDir = "sync folder of"
)

// system holds the calls that can fail, so that tests can make each one fail.
var system = struct {
	create  func(name string) (*os.File, error)
	write   func(f *os.File, b []byte) (int, error)
	sync    func(f *os.File) error
	rename  func(from, to string) error
	syncDir func(dir string) error
}{
	create: func(name string) (*os.File, error) {
		return os.OpenFile(name, os.O_RDWR|os.O_CREATE|os.O_EXCL, 0o666)
	},
	write:   func(f *os.File, b []byte) (int, error) { return f.Write(b) },
	sync:    func(f *os.File) error { return f.Sync() },
	rename:  os.Rename,
	syncDir: syncDir,
}

// errTarget is the cause when a name is taken by something else than a file.
var errTarget = errors.New("the name is taken by something that is not a file")

// part is a file being written under a hidden name beside its final one. An
// exclusive lock on it, held until it is renamed or removed, tells a part in
// work from one whose process died.
type part struct {
	path string // final name
	temp string // hidden name
	file *os.File
	size int64 // bytes written
}

// createPart removes the stale parts of path and begins a new one.
func createPart(path string) (*part, error) {
	if err := checkTarget(path); err != nil {
		return nil, writeError(opCreate, path, 0, err)
	}
	dir, prefix := filepath.Dir(path), partPrefix(filepath.Base(path))
	removeStale(dir, prefix)
	const tries = 100 // each lost only to a sweep that came between create and lock
	for range tries {
		temp := filepath.Join(dir, prefix+randomHex()+partSuffix)
		f, err := system.create(temp)
		if errors.Is(err, os.ErrExist) {
			continue
		}
		if err != nil {
			return nil, writeError(opCreate, path, 0, err)
		}
		if lockFile(f) != lockBusy && sameFile(f, temp) {
			return &part{path: path, temp: temp, file: f}, nil
		}
		f.Close() // a sweep took it for stale and removes it
	}
	return nil, writeError(opCreate, path, 0, errors.New("no name for the part was free"))
}

// Try finds out whether path can be written, before hours are spent on what
// shall stand there: it makes a part and removes it again. The error is the
// *WriteError that Create would give.
func Try(path string) error {
	p, err := createPart(path)
	if err == nil {
		p.abort()
	}
	return err
}

// checkTarget refuses a name that a rename could not, or should not, replace,
// before hours of work rather than after.
func checkTarget(path string) error {
	if base := filepath.Base(path); path == "" || base == "." || base == ".." || base == string(filepath.Separator) {
		return fmt.Errorf("%q names no file: %w", path, errTarget)
	}
	st, err := os.Lstat(path)
	if err != nil || st.Mode().IsRegular() || st.Mode()&os.ModeSymlink != 0 {
		return nil // a missing folder shows when the part is created
	}
	return errTarget
}

// Write appends b.
func (p *part) Write(b []byte) (int, error) {
	n, err := system.write(p.file, b)
	if err != nil {
		return n, writeError(opWrite, p.path, p.size+int64(len(b)), err)
	}
	p.size += int64(n)
	return n, nil
}

// commit puts the part in place as path. When it fails before the rename,
// nothing is left; when only the folder's sync fails, the whole file stands.
func (p *part) commit(path string) error {
	if err := checkTarget(path); err != nil {
		p.abort()
		return writeError(opRename, path, p.size, err)
	}
	if err := system.sync(p.file); err != nil {
		p.abort()
		return writeError(opSync, path, p.size, err)
	}
	if err := p.rename(path); err != nil {
		p.abort()
		return writeError(opRename, path, p.size, err)
	}
	if err := system.syncDir(filepath.Dir(path)); err != nil {
		return writeError(opSyncDir, path, p.size, err)
	}
	return nil
}

// rename gives the part its final name. Where an open file can be renamed it
// stays open, and so locked, until it has its name: a sweep cannot take it.
// All bytes are synced by then, so closing has nothing left to report.
func (p *part) rename(path string) error {
	if !renamesOpenFiles {
		if err := p.file.Close(); err != nil {
			return err
		}
	}
	if err := system.rename(p.temp, path); err != nil {
		var le *os.LinkError
		if errors.As(err, &le) {
			err = le.Err
		}
		return err
	}
	if renamesOpenFiles {
		p.file.Close()
	}
	return nil
}

// abort removes the part.
func (p *part) abort() {
	if renamesOpenFiles {
		os.Remove(p.temp) // while locked, so that no sweep meets it
		p.file.Close()
		return
	}
	p.file.Close()
	os.Remove(p.temp)
}

const (
	partSuffix = ".part"
	partRandom = 16  // hex digits
	partName   = 200 // bytes of the final name kept; file systems allow 255 in all
)

// partPrefix returns what the names of all parts of the file base begin with.
// A long name is cut, with a digest of the whole in place of its end.
func partPrefix(base string) string {
	if len(base) > partName {
		sum := sha256.Sum256([]byte(base))
		base = base[:partName-partRandom-1] + "~" + hex.EncodeToString(sum[:partRandom/2])
	}
	return "." + base + "."
}

func randomHex() string {
	var b [partRandom / 2]byte
	rand.Read(b[:]) // never fails, since Go 1.24
	return hex.EncodeToString(b[:])
}

// removeStale removes the parts in dir that begin with prefix and that no
// living process holds. It is a courtesy: what fails here stays.
func removeStale(dir, prefix string) {
	d, err := os.Open(dir)
	if err != nil {
		return
	}
	defer d.Close()
	names, _ := d.Readdirnames(-1)
	for _, name := range names {
		if isPart(name, prefix) {
			removeIfStale(filepath.Join(dir, name))
		}
	}
}

// isPart reports whether name is exactly prefix, random hex digits, suffix: the
// prefix of "a" must not match a part of "a.png".
func isPart(name, prefix string) bool {
	rest, ok := strings.CutPrefix(name, prefix)
	if !ok {
		return false
	}
	digits, ok := strings.CutSuffix(rest, partSuffix)
	if !ok || len(digits) != partRandom {
		return false
	}
	_, err := hex.DecodeString(digits)
	return err == nil
}

// sameFile reports whether name still is the open file f.
func sameFile(f *os.File, name string) bool {
	a, err := f.Stat()
	if err != nil {
		return false
	}
	b, err := os.Lstat(name)
	return err == nil && os.SameFile(a, b)
}

// WriteFile puts data at path atomically: afterwards the name holds either what
// it held before or all of data, also after a power cut. The folder must exist.
func WriteFile(path string, data []byte) error {
	p, err := createPart(path)
	if err != nil {
		return err
	}
	if _, err := p.Write(data); err != nil {
		p.abort()
		return err
	}
	return p.commit(path)
}
