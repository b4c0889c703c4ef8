package printfile

// File is any other file under way than a PNG: written in pieces, in place
// only when whole. It is for one goroutine.
type File struct {
	p   *part
	err error // the first failure, or ErrClosed
}

// CreateFile begins the file path. Nothing is under that name, or what was
// there stays, until Commit.
func CreateFile(path string) (*File, error) {
	p, err := createPart(path)
	if err != nil {
		return nil, err
	}
	return &File{p: p}, nil
}

// Write appends b. After a failure the file is gone and every call returns the
// same error.
func (f *File) Write(b []byte) (int, error) {
	if f.err != nil {
		return 0, f.err
	}
	n, err := f.p.Write(b)
	if err != nil {
		f.p.abort()
		f.err = err
	}
	return n, err
}

// Commit puts the file in place, on disk, and returns its size in bytes. It
// ends the file, whatever comes of it.
func (f *File) Commit() (int64, error) {
	if f.err != nil {
		return 0, f.err
	}
	f.err = ErrClosed
	return f.p.size, f.p.commit(f.p.path)
}

// Abort removes what was written. After Commit it does nothing.
func (f *File) Abort() {
	if f.err == nil {
		f.err = ErrClosed
		f.p.abort()
	}
}
