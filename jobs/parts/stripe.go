package parts

import (
	"bufio"
	"bytes"
	"crypto/sha256"
	"encoding/binary"
	"errors"
	"fmt"
	"hash"
	"image"
	"io"
	"os"

	"leadline/render"
	"leadline/render/printfile"
)

// stripeMagic opens a part's file and names the layout: magic, head, a record
// a band (length as u32, then render.Part as it encodes itself), a length of
// 0, the counts, SHA-256 of all before. Numbers are little-endian.
const stripeMagic = "leadline stripe 1\n"

// errDamaged says that a file is not the part it should be.
var errDamaged = errors.New("damaged, or of another print")

// head says which part of which print a file is.
type head struct {
	Print identity
	I, N  uint32
}

// counts are render.Counts as they are stored.
type counts struct{ Pixels, Samples, Escaped, Inside, Undecided int64 }

// headSize is the length of magic and head.
const headSize = len(stripeMagic) + sha256.Size + 8

// bytes is the beginning of the part's file.
func (h head) bytes() []byte { return appendFixed([]byte(stripeMagic), &h) }

// appendFixed appends a value of fixed size.
func appendFixed(b []byte, v any) []byte {
	b, err := binary.Append(b, binary.LittleEndian, v)
	if err != nil {
		panic(err) // a slip in the types above
	}
	return b
}

// maxRecord bounds a record of a stripe w pixels wide: a band of 24 MB, or one
// row where that is more, that did not compress at all.
func maxRecord(w int) uint32 {
	raw := max(24<<20, w*render.BytesPerPixel)
	return uint32(min(raw+raw/8+4096, 1<<31))
}

// stripeWriter writes a part's file, a band at a time.
type stripeWriter struct {
	f    *printfile.File
	w    *bufio.Writer
	sum  hash.Hash
	rect image.Rectangle
	y    int // the next row
}

// createStripe begins a part's file.
func createStripe(path string, h head, rect image.Rectangle) (*stripeWriter, error) {
	f, err := printfile.CreateFile(path)
	if err != nil {
		return nil, err
	}
	s := &stripeWriter{f: f, sum: sha256.New(), rect: rect, y: rect.Min.Y}
	s.w = bufio.NewWriterSize(io.MultiWriter(f, s.sum), 1<<20)
	_, err = s.w.Write(h.bytes())
	return s, err
}

// band appends whole rows.
func (s *stripeWriter) band(rows []byte) error {
	r := s.rect
	r.Min.Y = s.y
	r.Max.Y = s.y + len(rows)/(r.Dx()*render.BytesPerPixel)
	s.y = r.Max.Y
	b, err := (&render.Part{Rect: r, Pix: rows}).Encode()
	if err != nil {
		return err
	}
	if _, err := s.w.Write(binary.LittleEndian.AppendUint32(nil, uint32(len(b)))); err != nil {
		return err
	}
	_, err = s.w.Write(b)
	return err
}

// commit ends the file and puts it in place; it returns the size in bytes.
func (s *stripeWriter) commit(n render.Counts) (int64, error) {
	if s.y != s.rect.Max.Y {
		return 0, fmt.Errorf("part %v ends at row %d", s.rect, s.y)
	}
	end := binary.LittleEndian.AppendUint32(nil, 0)
	end = appendFixed(end, &counts{n.Pixels, n.Samples, n.Escaped, n.Inside, n.Undecided})
	if _, err := s.w.Write(end); err != nil {
		return 0, err
	}
	if err := s.w.Flush(); err != nil {
		return 0, err
	}
	if _, err := s.f.Write(s.sum.Sum(nil)); err != nil {
		return 0, err
	}
	return s.f.Commit()
}

// checkStripe reads a part's file once and holds it against its head and its
// checksum: errDamaged, fs.ErrNotExist, or what the disk says.
func checkStripe(path string, h head) error { return checkFile(path, h.bytes()) }

// checkFile is checkStripe for any file that begins with start and ends with
// the SHA-256 of all before.
func checkFile(path string, start []byte) error {
	f, err := os.Open(path)
	if err != nil {
		return err
	}
	defer f.Close()
	st, err := f.Stat()
	if err != nil {
		return err
	}
	if !st.Mode().IsRegular() {
		return errDamaged
	}
	return checkSum(f, st.Size(), start)
}

// checkSum is checkFile for an open file of a size.
func checkSum(r io.Reader, size int64, start []byte) error {
	rest := size - int64(len(start)) - sha256.Size
	have := make([]byte, len(start))
	if rest < 0 {
		return errDamaged
	}
	if _, err := io.ReadFull(r, have); err != nil {
		return damagedAtEOF(err)
	}
	if !bytes.Equal(have, start) {
		return errDamaged
	}
	sum := sha256.New()
	sum.Write(have)
	if _, err := io.CopyN(sum, r, rest); err != nil {
		return damagedAtEOF(err)
	}
	want := make([]byte, sha256.Size)
	if _, err := io.ReadFull(r, want); err != nil {
		return damagedAtEOF(err)
	}
	if !bytes.Equal(want, sum.Sum(nil)) {
		return errDamaged
	}
	return nil
}

// damagedAtEOF makes the end of a file that is too short its damage, and
// leaves the disk's own errors alone.
func damagedAtEOF(err error) error {
	if errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF) {
		return errDamaged
	}
	return err
}
