package jobs

import (
	"crypto/rand"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
	"strconv"
	"strings"
	"syscall"
	"time"
)

// spool keeps payloads as files: DIR/PRINT/INDEX.TRY. The names are made of
// numbers only. A print's folder is made with its plan and never later: where
// it is missing the disk is not mounted, or the folder is another queue's, and
// nothing is taken for lost.
type spool struct {
	dir string
	// sync is (*os.File).Sync; tests make it fail.
	sync func(*os.File) error
}

func newSpool(dir string) (*spool, error) {
	dir, err := filepath.Abs(dir)
	if err != nil {
		return nil, fmt.Errorf("opening the spool: %w", err)
	}
	if err := os.MkdirAll(dir, 0o700); err != nil {
		return nil, fmt.Errorf("making the spool: %w", err)
	}
	return &spool{dir, (*os.File).Sync}, nil
}

// nameFile holds the name of the queue whose spool a folder is.
const nameFile = "queue"

// claim makes the folder the spool of the queue with this name, once and for
// all: two queues in one folder would take each other's tiles for remains.
func (s *spool) claim(name string) error {
	path := filepath.Join(s.dir, nameFile)
	f, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o600)
	if err == nil {
		_, err = f.WriteString(name)
		return errors.Join(err, s.sync(f), f.Close())
	}
	if !errors.Is(err, fs.ErrExist) {
		return s.trouble("opening the spool", nameFile, err)
	}
	for range 100 { // another process may be writing it just now
		b, err := os.ReadFile(path)
		switch {
		case err != nil:
			return s.trouble("opening the spool", nameFile, err)
		case string(b) == name:
			return nil
		case len(b) >= len(name):
			return &OptionError{s.dir + " is the spool of another queue", "give each queue a folder of its own, and all workers of one queue the same"}
		}
		time.Sleep(10 * time.Millisecond)
	}
	return &OptionError{path + " does not name a queue", "if no tile is kept in the folder, remove it"}
}

// name is a payload's name inside the spool.
func (t ticket) name() string {
	return filepath.Join(strconv.FormatInt(t.Print, 10), fmt.Sprintf("%d.%d", t.Index, t.Try))
}

// planPrefix begins the file name of a plan, whatever its try.
var planPrefix = strconv.Itoa(planIndex) + "."

// put stores a payload; it is on the disk when put returns.
func (s *spool) put(name string, data []byte) error {
	if err := s.write(name, data); err != nil {
		return s.trouble("keeping a tile", name, err)
	}
	return nil
}

func (s *spool) write(name string, data []byte) error {
	path := filepath.Join(s.dir, name)
	if strings.HasPrefix(filepath.Base(path), planPrefix) {
		if err := s.folder(filepath.Dir(path)); err != nil {
			return err
		}
	}
	temp := path + "." + rand.Text()[:8] + ".part"
	f, err := os.OpenFile(temp, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o600)
	if err != nil {
		return err
	}
	defer os.Remove(temp) // finds nothing once renamed
	_, err = f.Write(data)
	if err == nil {
		err = s.sync(f)
	}
	if err = errors.Join(err, f.Close()); err != nil {
		return err
	}
	if err := os.Rename(temp, path); err != nil {
		return err
	}
	return s.settle(filepath.Dir(path))
}

// folder makes a print's folder where it is missing.
func (s *spool) folder(dir string) error {
	err := os.Mkdir(dir, 0o700)
	if errors.Is(err, fs.ErrExist) {
		return nil
	}
	if err != nil {
		return err
	}
	return s.settle(s.dir)
}

// settle makes what changed in a folder last. Windows has no such call.
func (s *spool) settle(dir string) error {
	if runtime.GOOS == "windows" {
		return nil
	}
	d, err := os.Open(dir)
	if err != nil {
		return err
	}
	defer d.Close()
	return s.sync(d)
}

// get reads a payload. The name comes from the database, so it is held to its
// form.
func (s *spool) get(name string) ([]byte, error) {
	if !filepath.IsLocal(name) {
		return nil, errDamaged
	}
	path := filepath.Join(s.dir, name)
	b, err := os.ReadFile(path)
	if errors.Is(err, fs.ErrNotExist) {
		if _, e := os.Stat(filepath.Dir(path)); e == nil {
			return nil, fmt.Errorf("%w: %s is missing", errDamaged, name)
		}
	}
	if err != nil {
		return nil, s.trouble("reading a tile", name, err)
	}
	return b, nil
}

// drop removes one payload that lost its use, and its folder if it is empty.
// What cannot be removed is tidied later.
func (s *spool) drop(name string) {
	path := filepath.Join(s.dir, name)
	_ = os.Remove(path)
	_ = os.Remove(filepath.Dir(path))
}

// dropPrint removes a print's payloads.
func (s *spool) dropPrint(id int64) error {
	return os.RemoveAll(filepath.Join(s.dir, strconv.FormatInt(id, 10)))
}

// prints lists the prints that have a folder.
func (s *spool) prints() ([]int64, error) {
	entries, err := os.ReadDir(s.dir)
	var ids []int64
	for _, e := range entries {
		if id, err := strconv.ParseInt(e.Name(), 10, 64); err == nil && e.IsDir() {
			ids = append(ids, id)
		}
	}
	return ids, err
}

// spoolError says that the disk or folder of the spool, not the work, is in
// trouble.
type spoolError struct {
	doing  string
	folder string // of the print
	err    error  // as the system gave it
}

func (e *spoolError) Error() string { return fmt.Sprintf("%s in %s: %v", e.doing, e.folder, e.err) }
func (e *spoolError) Unwrap() error { return e.err }

// Hint says what to do about the disk or the folder.
func (e *spoolError) Hint() string {
	const then = ", then queue again goes on from the tiles that are kept"
	switch {
	case errors.Is(e.err, syscall.ENOSPC), errors.Is(e.err, syscall.EDQUOT):
		return "the spool's disk is full: make room in " + e.folder + then
	case errors.Is(e.err, fs.ErrNotExist):
		return "bring the spool's folder back (its disk may not be mounted, or a worker was given another folder)" + then +
			"; if it is lost for good make an empty folder " + e.folder + ", and what it held is computed anew"
	case errors.Is(e.err, fs.ErrPermission), errors.Is(e.err, syscall.EROFS):
		return "allow writing to the spool's folder" + then
	}
	return "check the spool's disk and folder" + then
}

// trouble wraps an error without the file's own, passing name.
func (s *spool) trouble(doing, name string, err error) error {
	var pe *fs.PathError
	if errors.As(err, &pe) {
		err = pe.Err
	}
	return &spoolError{doing, filepath.Dir(filepath.Join(s.dir, name)), err}
}
