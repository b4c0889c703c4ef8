package render

import (
	"bytes"
	"crypto/sha256"
	"encoding/binary"
	"errors"
	"fmt"
	"image"
	"io"

	"github.com/klauspost/compress/zstd"
)

// Part is a rendered piece of a print on its way to the whole.
type Part struct {
	Rect   image.Rectangle // in the lattice at the print's scale
	Counts Counts
	Pix    []byte // rows of Rect, BytesPerPixel a pixel
}

// partMagic opens a stored part and names the layout.
const partMagic = "leadline part 1\n"

// ErrPart says that bytes are not a stored part of a print.
var ErrPart = errors.New("not a part of a print, or damaged")

// maxPart bounds the pixels of a part, 64 megapixels (400 MB).
const maxPart = 64 << 20

// partHead is the fixed part of a stored part, in the order written.
type partHead struct {
	X, Y, W, H                                  int32
	Pixels, Samples, Escaped, Inside, Undecided int64
	Sum                                         [sha256.Size]byte // of everything before, and the pixels
}

// Encode stores a part, compressed and with a checksum.
func (p *Part) Encode() ([]byte, error) {
	if len(p.Pix) != p.Rect.Dx()*p.Rect.Dy()*BytesPerPixel {
		return nil, fmt.Errorf("part %v has %d bytes", p.Rect, len(p.Pix))
	}
	h := partHead{X: int32(p.Rect.Min.X), Y: int32(p.Rect.Min.Y), W: int32(p.Rect.Dx()), H: int32(p.Rect.Dy()),
		Pixels: p.Counts.Pixels, Samples: p.Counts.Samples, Escaped: p.Counts.Escaped,
		Inside: p.Counts.Inside, Undecided: p.Counts.Undecided}
	h.Sum = h.sum(p.Pix)
	b, err := binary.Append([]byte(partMagic), binary.LittleEndian, &h)
	if err != nil {
		return nil, fmt.Errorf("storing a part: %w", err)
	}
	w, err := zstd.NewWriter(nil, zstd.WithEncoderLevel(zstd.SpeedFastest), zstd.WithEncoderConcurrency(1), zstd.WithEncoderCRC(false))
	if err != nil {
		return nil, fmt.Errorf("storing a part: %w", err)
	}
	return w.EncodeAll(differences(p.Pix), b), w.Close()
}

// DecodePart reads what Encode stored. Damage of any kind is ErrPart.
func DecodePart(b []byte) (*Part, error) {
	rest, ok := bytes.CutPrefix(b, []byte(partMagic))
	if !ok {
		return nil, ErrPart
	}
	var h partHead
	n, err := binary.Decode(rest, binary.LittleEndian, &h)
	if err != nil || h.W < 1 || h.H < 1 || int64(h.W)*int64(h.H) > maxPart {
		return nil, ErrPart
	}
	p := &Part{Rect: image.Rect(int(h.X), int(h.Y), int(h.X)+int(h.W), int(h.Y)+int(h.H)),
		Counts: Counts{Pixels: h.Pixels, Samples: h.Samples, Escaped: h.Escaped, Inside: h.Inside, Undecided: h.Undecided}}
	p.Pix = make([]byte, int(h.W)*int(h.H)*BytesPerPixel)
	r, err := zstd.NewReader(bytes.NewReader(rest[n:]), zstd.WithDecoderConcurrency(1), zstd.WithDecoderMaxMemory(1<<30))
	if err != nil {
		return nil, fmt.Errorf("%w: %w", ErrPart, err)
	}
	defer r.Close()
	if _, err := io.ReadFull(r, p.Pix); err != nil {
		return nil, ErrPart
	}
	sums(p.Pix)
	if h.Sum != h.sum(p.Pix) {
		return nil, ErrPart
	}
	return p, nil
}

// sum is the checksum of a head, without its own, and of the pixels.
func (h partHead) sum(pix []byte) (s [sha256.Size]byte) {
	h.Sum = [sha256.Size]byte{}
	w := sha256.New()
	b, err := binary.Append(nil, binary.LittleEndian, &h)
	if err != nil {
		panic("render: a part's head has no fixed size") // a slip in partHead
	}
	w.Write(b)
	w.Write(pix)
	return [sha256.Size]byte(w.Sum(nil))
}

// differences replaces each code by its difference from the pixel before, high
// bytes first and low bytes after, which is what compresses well.
func differences(pix []byte) []byte {
	n := len(pix) / 2
	out := make([]byte, len(pix))
	for i := range n {
		v := binary.BigEndian.Uint16(pix[2*i:])
		if i >= 3 {
			v -= binary.BigEndian.Uint16(pix[2*i-BytesPerPixel:])
		}
		out[i], out[n+i] = byte(v>>8), byte(v)
	}
	return out
}

// sums undoes differences.
func sums(b []byte) {
	n := len(b) / 2
	d := bytes.Clone(b)
	for i := range n {
		v := uint16(d[i])<<8 | uint16(d[n+i])
		if i >= 3 {
			v += binary.BigEndian.Uint16(b[2*i-BytesPerPixel:])
		}
		binary.BigEndian.PutUint16(b[2*i:], v)
	}
}
