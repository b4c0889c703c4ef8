package printfile

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"math"
	"os"

	"github.com/klauspost/compress/zlib"
)

// Reader reads one 16-bit RGB PNG, row by row, and checks all of it: every CRC,
// the stream's Adler-32, and that the pixels are neither too few nor too many.
// It holds one row, the decompressor's window and the metadata, which are
// limited to 8 MiB. It is for one goroutine.
type Reader struct {
	path   string
	file   io.Closer // nil when reading from memory
	chunks *chunkReader
	info   Info
	seen   map[string]bool // chunks that may come once
	spent  int             // bytes of metadata

	stream io.ReadCloser // the filtered rows; nil before the first
	data   *bufio.Reader // the compressed stream under it
	row    int           // rows read
	prev   []byte        // the last one; nil before the first
	err    error         // what ended the reading
}

// Open opens the PNG path and reads up to its pixels. A file that is damaged or
// of another kind gives a *FormatError, by this and by ReadRows.
func Open(path string) (*Reader, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	st, err := f.Stat()
	if err != nil {
		f.Close()
		return nil, err
	}
	if !st.Mode().IsRegular() {
		f.Close()
		return nil, &FormatError{Path: path, Problem: "not a file", Cure: "give a png as it was rendered"}
	}
	r, err := newReader(f, st.Size(), path)
	if err != nil {
		f.Close()
		return nil, err
	}
	r.file = f
	return r, nil
}

// newReader reads a PNG of size bytes; path is for messages.
func newReader(src io.Reader, size int64, path string) (*Reader, error) {
	r := &Reader{path: path, seen: make(map[string]bool)}
	r.chunks = &chunkReader{r: bufio.NewReaderSize(src, 1<<16), left: size}
	if err := r.begin(size); err != nil {
		return nil, r.named(err)
	}
	return r, nil
}

// begin reads everything before the pixels.
func (r *Reader) begin(size int64) error {
	if err := r.chunks.begin(); err != nil {
		return err
	}
	if err := r.chunks.next(); err != nil {
		return err
	}
	if r.chunks.typ != "IHDR" {
		return damaged("does not begin with a header")
	}
	if err := r.header(); err != nil {
		return err
	}
	if err := r.plausible(size); err != nil {
		return err
	}
	for {
		if err := r.chunks.next(); err != nil {
			return err
		}
		switch r.chunks.typ {
		case "IDAT":
			return nil
		case "IEND":
			return damaged("has no pixels")
		}
		if err := r.metadata(true); err != nil {
			return err
		}
	}
}

// plausible compares the picture's size with the file's. Deflate writes at least
// 2 bits for at most 258 bytes (RFC 1951 §3.2.5): 1032 bytes from one. What
// claims more is cut short, and nobody should reserve memory on its word.
func (r *Reader) plausible(size int64) error {
	if r.info.Width > math.MaxInt/(3*bpp) {
		return otherKind(fmt.Sprintf("is %d pixels wide, too wide for this machine", r.info.Width))
	}
	const most = 1032
	if row := int64(r.info.Width)*bpp + 1; int64(r.info.Height) > size*most/row {
		return damaged(fmt.Sprintf("says %d x %d pixels, but %d bytes cannot hold them", r.info.Width, r.info.Height, size))
	}
	return nil
}

// Info returns what the file says beside its pixels: the size, and the rest as
// far as it has been read (texts may follow the pixels).
func (r *Reader) Info() Info { return r.info }

// ReadRows fills dst with as many whole rows as it has room for and are left,
// and returns how many: each pixel red, green, blue as big-endian 16-bit codes.
// There must be room for one row. After the last row it returns 0 and io.EOF.
// The call that reads the last row also reads the rest of the file: an error
// beside rows means that the file is damaged behind or in them.
func (r *Reader) ReadRows(dst []byte) (int, error) {
	if r.err != nil {
		return 0, r.err
	}
	rowBytes := r.info.Width * bpp
	if len(dst) < rowBytes {
		return 0, fmt.Errorf("read %s: %w: room for %d bytes, but a row has %d", r.path, ErrRows, len(dst), rowBytes)
	}
	prev, n := r.prev, 0
	for ; len(dst) >= rowBytes && r.row < r.info.Height; n++ {
		cur := dst[:rowBytes]
		if err := r.readRow(cur, prev); err != nil {
			r.err = r.named(err)
			return n, r.err
		}
		prev, dst = cur, dst[rowBytes:]
		r.row++
	}
	r.prev = append(r.prev[:0], prev...)
	if r.row == r.info.Height {
		r.err = io.EOF
		if err := r.finish(); err != nil {
			r.err = r.named(err)
			return n, r.err
		}
	}
	return n, nil
}

// readRow reads the next row into cur.
func (r *Reader) readRow(cur, prev []byte) error {
	if r.stream == nil {
		r.data = bufio.NewReaderSize(idat{r.chunks}, 1<<15)
		z, err := zlib.NewReader(r.data)
		if err != nil {
			return r.broken(err)
		}
		r.stream = z
	}
	var filter [1]byte
	if _, err := io.ReadFull(r.stream, filter[:]); err != nil {
		return r.broken(err)
	}
	if _, err := io.ReadFull(r.stream, cur); err != nil {
		return r.broken(err)
	}
	if !unfilter(filter[0], cur, prev) {
		return damaged(fmt.Sprintf("has the unknown filter %d in row %d", filter[0], r.row))
	}
	return nil
}

// broken names what is wrong with the compressed stream.
func (r *Reader) broken(err error) error {
	var fe *FormatError
	if errors.As(err, &fe) {
		return fe
	}
	if err == io.EOF || err == io.ErrUnexpectedEOF {
		return damaged(fmt.Sprintf("has pixels for %d of %d rows", r.row, r.info.Height))
	}
	return &FormatError{Problem: fmt.Sprintf("cannot be decompressed at row %d", r.row), Cure: cureDamaged, Err: err}
}

// finish reads everything behind the last row.
func (r *Reader) finish() error {
	var b [1]byte
	if n, err := io.ReadFull(r.stream, b[:]); n != 0 {
		return damaged("has more pixels than its header says")
	} else if err != io.EOF { // nil cannot be: EOF comes once the Adler-32 is right
		return r.broken(err)
	}
	if _, err := r.data.ReadByte(); err == nil {
		return damaged("has bytes behind the end of its pixels")
	} else if err != io.EOF {
		return r.broken(err)
	}
	for {
		if err := r.chunks.next(); err != nil {
			return err
		}
		if r.chunks.typ == "IEND" {
			return r.chunks.finish()
		}
		if err := r.metadata(false); err != nil {
			return err
		}
	}
}

// named adds the file's name to a format error.
func (r *Reader) named(err error) error {
	var fe *FormatError
	if errors.As(err, &fe) {
		fe.Path = r.path
		return fe
	}
	return fmt.Errorf("read %s: %w", r.path, err)
}

// Close closes the file.
func (r *Reader) Close() error {
	r.err = ErrClosed
	if r.file == nil {
		return nil
	}
	err := r.file.Close()
	r.file = nil
	return err
}
