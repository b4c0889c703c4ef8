package printfile

import (
	"errors"
	"fmt"
	"io/fs"
	"path/filepath"
)

// ErrClosed is returned by the methods of a Writer or Reader after its end.
var ErrClosed = errors.New("print file is closed")

// ErrRows is wrapped when the bytes given or asked for are not whole rows, or
// are more or fewer rows than the file has.
var ErrRows = errors.New("rows do not fit the file")

// SizeError reports a picture with a side PNG cannot hold.
type SizeError struct{ Width, Height int }

func (e *SizeError) Error() string {
	return fmt.Sprintf("a picture of %d x %d pixels cannot be a png: a side is 1 to %d pixels", e.Width, e.Height, MaxSide)
}

// Hint says what to change.
func (e *SizeError) Hint() string {
	return "change the sheet's width, height or ppi, or print it in panels"
}

// InfoError reports metadata that a PNG cannot hold.
type InfoError struct {
	Field   string // which part of the Info or of the Credit
	Problem string // what is wrong with it
	Cure    string // what to do
}

func (e *InfoError) Error() string { return e.Field + " " + e.Problem }

// Hint says what to change.
func (e *InfoError) Hint() string { return e.Cure }

// FormatError reports a file that is damaged, or is not the kind of PNG this
// package reads.
type FormatError struct {
	Path    string // the file, empty when reading from memory
	Problem string
	Cure    string
	Err     error // the cause, may be nil
}

func (e *FormatError) Error() string {
	s := e.Problem
	if e.Path != "" {
		s = e.Path + ": " + s
	}
	if e.Err != nil {
		s += ": " + e.Err.Error()
	}
	return s
}

// Unwrap returns the cause.
func (e *FormatError) Unwrap() error { return e.Err }

// Hint says what to do with the file.
func (e *FormatError) Hint() string { return e.Cure }

const (
	cureDamaged = "the file is damaged or cut short: copy it again, or render it again from its sidecar"
	cureKind    = "only 16-bit RGB png without interlacing or transparency is read: give the file as it was rendered"
)

// WriteError reports a file that could not be written. Nothing incomplete is
// left under its name.
type WriteError struct {
	Op     string // create, write, sync, rename, sync folder
	Path   string // the final name
	Needed int64  // bytes the file needed at least, up to the failure
	Err    error  // the cause
}

func (e *WriteError) Error() string { return fmt.Sprintf("%s %s: %v", e.Op, e.Path, e.Err) }

// Unwrap returns the cause, as the system gave it.
func (e *WriteError) Unwrap() error { return e.Err }

// Hint says what to do about the disk or the folder.
func (e *WriteError) Hint() string {
	dir := filepath.Dir(e.Path)
	switch {
	case isDiskFull(e.Err):
		return fmt.Sprintf("the disk of folder %s is full: the file needs at least %d bytes there; free more than that, or write to another disk", dir, e.Needed)
	case isTooLarge(e.Err):
		return fmt.Sprintf("the file system of folder %s takes no file of %d bytes: write to another disk", dir, e.Needed)
	case isOtherDevice(e.Err):
		return "a finished file can only be renamed on its own disk: choose a name in the folder it was begun in"
	case errors.Is(e.Err, errTarget):
		return "choose another name, or move away what has this one"
	case errors.Is(e.Err, fs.ErrNotExist):
		return fmt.Sprintf("make the folder %s first", dir)
	case errors.Is(e.Err, fs.ErrPermission):
		return fmt.Sprintf("allow writing to folder %s, or choose another one", dir)
	case e.Op == opSyncDir:
		return fmt.Sprintf("the file is whole, but may be gone after a power cut: check the disk of folder %s", dir)
	}
	return fmt.Sprintf("check the disk and the folder %s", dir)
}

// writeError wraps err once, without the name of the hidden part that the
// system's own message would show.
func writeError(op, path string, needed int64, err error) error {
	var pe *fs.PathError
	if errors.As(err, &pe) {
		err = pe.Err
	}
	return &WriteError{Op: op, Path: path, Needed: needed, Err: err}
}
