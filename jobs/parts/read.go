package parts

import (
	"bufio"
	"crypto/sha256"
	"encoding/binary"
	"errors"
	"hash"
	"image"
	"io"

	"leadline/render"
)

// stripeReader reads a part's file, a band at a time.
type stripeReader struct {
	r    *bufio.Reader
	sum  hash.Hash
	rect image.Rectangle
	y    int // the next row
}

// readStripe hands the rows of a part's file to sink, a band at a time, and
// returns the counts. Whatever is not as stripeWriter writes it, to the last
// byte, is errDamaged; a sink's error comes back as it is.
func readStripe(r io.Reader, h head, rect image.Rectangle, sink func(rows []byte) error) (render.Counts, error) {
	s := &stripeReader{bufio.NewReaderSize(r, 1<<20), sha256.New(), rect, rect.Min.Y}
	begin, err := s.take(headSize)
	if err != nil {
		return render.Counts{}, err
	}
	if string(begin) != string(h.bytes()) {
		return render.Counts{}, errDamaged
	}
	for {
		rows, err := s.band()
		if err != nil {
			return render.Counts{}, err
		}
		if rows == nil {
			return s.end()
		}
		if err := sink(rows); err != nil {
			return render.Counts{}, err
		}
	}
}

// take reads n bytes into the checksum.
func (s *stripeReader) take(n int) ([]byte, error) {
	b := make([]byte, n)
	if _, err := io.ReadFull(s.r, b); err != nil {
		return nil, damagedAtEOF(err)
	}
	s.sum.Write(b)
	return b, nil
}

// band reads the next record, nil at the end of them.
func (s *stripeReader) band() ([]byte, error) {
	b, err := s.take(4)
	if err != nil {
		return nil, err
	}
	n := binary.LittleEndian.Uint32(b)
	if n == 0 {
		return nil, nil
	}
	if n > maxRecord(s.rect.Dx()) {
		return nil, errDamaged
	}
	if b, err = s.take(int(n)); err != nil {
		return nil, err
	}
	p, err := render.DecodePart(b)
	switch {
	case errors.Is(err, render.ErrPart):
		return nil, errDamaged
	case err != nil:
		return nil, err
	case p.Rect.Min != image.Pt(s.rect.Min.X, s.y), p.Rect.Max.X != s.rect.Max.X, p.Rect.Max.Y > s.rect.Max.Y:
		return nil, errDamaged
	}
	s.y = p.Rect.Max.Y
	return p.Pix, nil
}

// end reads counts and checksum, after which nothing may follow.
func (s *stripeReader) end() (render.Counts, error) {
	var c counts
	b, err := s.take(binary.Size(c))
	if err != nil {
		return render.Counts{}, err
	}
	if _, err := binary.Decode(b, binary.LittleEndian, &c); err != nil {
		return render.Counts{}, errDamaged
	}
	want := s.sum.Sum(nil)
	have, err := s.take(sha256.Size)
	if err != nil {
		return render.Counts{}, err
	}
	if _, err := s.r.ReadByte(); !errors.Is(err, io.EOF) {
		return render.Counts{}, errDamaged
	}
	if string(have) != string(want) || s.y != s.rect.Max.Y || c.Pixels != int64(s.rect.Dx())*int64(s.rect.Dy()) {
		return render.Counts{}, errDamaged
	}
	return render.Counts{Pixels: c.Pixels, Samples: c.Samples, Escaped: c.Escaped, Inside: c.Inside, Undecided: c.Undecided}, nil
}
