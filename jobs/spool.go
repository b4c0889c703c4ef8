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
)

// spool keeps payloads as files: DIR/PRINT/INDEX.TRY. The names are made of
// numbers only.
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

// name is a payload's name inside the spool.
func (t ticket) name() string {
	return filepath.Join(strconv.FormatInt(t.Print, 10), fmt.Sprintf("%d.%d", t.Index, t.Try))
}

// put stores a payload; it is on the disk when put returns.
func (s *spool) put(name string, data []byte) error {
	if err := s.write(name, data); err != nil {
		return fmt.Errorf("keeping a tile: %w", err)
	}
	return nil
}

func (s *spool) write(name string, data []byte) error {
	path := filepath.Join(s.dir, name)
	if err := s.folder(filepath.Dir(path)); err != nil {
		return err
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
	b, err := os.ReadFile(filepath.Join(s.dir, name))
	if errors.Is(err, fs.ErrNotExist) {
		return nil, fmt.Errorf("%w: %s is missing", errDamaged, name)
	}
	return b, err
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
