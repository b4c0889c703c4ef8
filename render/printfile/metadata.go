package printfile

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"io"
	"unicode/utf8"

	"github.com/klauspost/compress/zlib"
)

// maxTexts bounds the profile, the packet and the texts of a file read, each
// chunk and all together, before and after decompression.
const maxTexts = 8 << 20

// header reads the IHDR chunk at hand.
func (r *Reader) header() error {
	b, err := r.chunks.data(13)
	if err != nil {
		return err
	}
	if len(b) != 13 {
		return damaged(fmt.Sprintf("has a header of %d bytes instead of 13", len(b)))
	}
	w, h := binary.BigEndian.Uint32(b), binary.BigEndian.Uint32(b[4:])
	if w < 1 || w > MaxSide || h < 1 || h > MaxSide {
		return damaged(fmt.Sprintf("has a picture of %d x %d pixels", w, h))
	}
	r.info.Width, r.info.Height = int(w), int(h)
	colours := map[byte]string{0: "greyscale", 2: "RGB", 3: "palette", 4: "greyscale with transparency", 6: "RGB with transparency"}
	switch {
	case b[8] != 16 || b[9] != 2:
		return otherKind(fmt.Sprintf("is %d-bit %s, not 16-bit RGB", b[8], colours[b[9]]))
	case b[10] != 0 || b[11] != 0:
		return otherKind(fmt.Sprintf("uses compression method %d and filter method %d, which no standard defines", b[10], b[11]))
	case b[12] != 0:
		return otherKind("is interlaced")
	}
	return nil
}

func otherKind(problem string) error { return &FormatError{Problem: problem, Cure: cureKind} }

// metadata reads the chunk at hand, which is not one of the pixels' own.
func (r *Reader) metadata(before bool) error {
	typ := r.chunks.typ
	switch typ {
	case "iCCP", "pHYs":
		if !before || r.seen[typ] {
			return damaged("has a chunk " + typ + " out of place")
		}
		r.seen[typ] = true
	case "tRNS":
		return otherKind("has a transparent colour")
	case "PLTE": // a suggestion only, in RGB pictures (PNG §11.2.2)
		if n := r.chunks.length; !before || r.seen[typ] || n == 0 || n%3 != 0 || n > 3*256 {
			return damaged("has a chunk PLTE that is out of place or malformed")
		}
		r.seen[typ] = true
		return nil
	case "iTXt", "tEXt", "zTXt":
	case "IHDR", "IDAT":
		return damaged("has a chunk " + typ + " out of place")
	default:
		if typ[0]&0x20 == 0 { // upper case: critical (PNG §5.4)
			return otherKind("has an unknown chunk " + typ + " that the picture depends on")
		}
		return nil
	}
	b, err := r.chunks.data(maxTexts)
	if err != nil {
		return err
	}
	switch typ {
	case "iCCP":
		err = r.iccp(b)
	case "pHYs":
		err = r.phys(b)
	default:
		err = r.text(typ, b)
	}
	return err
}

func (r *Reader) phys(b []byte) error {
	if len(b) != 9 {
		return damaged(fmt.Sprintf("has a chunk pHYs of %d bytes instead of 9", len(b)))
	}
	x, y := binary.BigEndian.Uint32(b), binary.BigEndian.Uint32(b[4:])
	if b[8] == 1 && x == y { // metres, square pixels; anything else is no ppi
		r.info.PixelsPerMetre = x
	}
	return nil
}

func (r *Reader) iccp(b []byte) error {
	name, rest, ok := bytes.Cut(b, []byte{0})
	if !ok || len(rest) < 1 || rest[0] != 0 {
		return damaged("has a malformed chunk iCCP")
	}
	icc, err := r.inflate("iCCP", rest[1:])
	if err != nil {
		return err
	}
	r.info.ICCName, r.info.ICC = fromLatin1(name), icc
	return nil
}

// text reads one of the three kinds of text chunks (PNG §11.3.3).
func (r *Reader) text(typ string, b []byte) error {
	key, rest, ok := bytes.Cut(b, []byte{0})
	if !ok {
		return damaged("has a malformed chunk " + typ)
	}
	t := Text{Keyword: fromLatin1(key)}
	var err error
	switch typ {
	case "tEXt":
		err = r.spend(typ, len(rest))
		t.Value = fromLatin1(rest)
	case "zTXt":
		if len(rest) < 1 || rest[0] != 0 {
			return damaged("has a malformed chunk zTXt")
		}
		rest, err = r.inflate(typ, rest[1:])
		t.Value = fromLatin1(rest)
	case "iTXt":
		t.Value, err = r.internationalText(rest)
	}
	if err != nil {
		return err
	}
	if t.Keyword != xmpKeyword {
		r.info.Texts = append(r.info.Texts, t)
		return nil
	}
	if r.info.XMP != nil {
		return damaged("has two XMP packets")
	}
	r.info.XMP = []byte(t.Value)
	return nil
}

// internationalText reads an iTXt chunk from behind its keyword: compression
// flag, method, language, NUL, translated keyword, NUL, text.
func (r *Reader) internationalText(b []byte) (string, error) {
	bad := damaged("has a malformed chunk iTXt")
	if len(b) < 2 || b[0] > 1 || b[1] != 0 {
		return "", bad
	}
	_, rest, ok := bytes.Cut(b[2:], []byte{0})
	if !ok {
		return "", bad
	}
	_, value, ok := bytes.Cut(rest, []byte{0})
	if !ok {
		return "", bad
	}
	var err error
	if b[0] == 1 {
		value, err = r.inflate("iTXt", value)
	} else {
		err = r.spend("iTXt", len(value))
	}
	if err == nil && !utf8.Valid(value) {
		err = bad
	}
	return string(value), err
}

// inflate decompresses the metadata of a chunk within what maxTexts leaves.
func (r *Reader) inflate(typ string, b []byte) ([]byte, error) {
	z, err := zlib.NewReader(bytes.NewReader(b))
	if err != nil {
		return nil, &FormatError{Problem: "has a chunk " + typ + " that cannot be decompressed", Cure: cureDamaged, Err: err}
	}
	out, err := io.ReadAll(io.LimitReader(z, int64(maxTexts-r.spent)+1))
	if err != nil {
		return nil, &FormatError{Problem: "has a chunk " + typ + " that cannot be decompressed", Cure: cureDamaged, Err: err}
	}
	return out, r.spend(typ, len(out))
}

// spend takes n bytes from the allowance for metadata.
func (r *Reader) spend(typ string, n int) error {
	if n > maxTexts-r.spent {
		return &FormatError{Problem: fmt.Sprintf("has more than %d bytes of metadata, at a chunk %s", maxTexts, typ),
			Cure: "remove the oversized metadata from the file"}
	}
	r.spent += n
	return nil
}
