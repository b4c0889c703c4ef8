package printfile

import (
	"bytes"
	"encoding/binary"
	"fmt"
	"math"
	"strings"
	"unicode/utf8"

	"github.com/klauspost/compress/zlib"
)

// Info is what a PNG says beside its pixels.
type Info struct {
	Width, Height  int    // pixels, 1 to MaxSide
	PixelsPerMetre uint32 // across and down; 0 leaves it unsaid
	ICCName        string // name of the colour profile, 1 to 79 Latin-1 characters
	ICC            []byte // the colour profile of RGB pixels; empty for none
	XMP            []byte // the XMP packet, UTF-8; empty for none
	Texts          []Text // in order
}

// Text is a text in a PNG, written as iTXt, uncompressed.
type Text struct {
	Keyword string // 1 to 79 Latin-1 characters
	Value   string // UTF-8 without NUL
}

const (
	xmpKeyword = "XML:com.adobe.xmp" // PNG §11.3.3.1

	// maxTextsWritten bounds the texts, the packet and the profile written, in
	// bytes: libpng by default refuses a chunk of 8 000 000 bytes.
	maxTextsWritten = 7_900_000
)

// check reports the first thing a PNG could not hold.
func (i *Info) check() error {
	if i.Width < 1 || i.Width > MaxSide || i.Height < 1 || i.Height > MaxSide || i.Width > math.MaxInt/(3*bpp) {
		return &SizeError{i.Width, i.Height}
	}
	if len(i.ICC) > 0 || i.ICCName != "" {
		if err := checkICC(i.ICCName, i.ICC); err != nil {
			return err
		}
	}
	if i.PixelsPerMetre > math.MaxInt32 {
		return &InfoError{"resolution", fmt.Sprintf("of %d pixels a metre is more than %d", i.PixelsPerMetre, math.MaxInt32), "lower the sheet's ppi"}
	}
	return i.checkTexts()
}

func (i *Info) checkTexts() error {
	total := len(i.ICC) + len(i.XMP)
	if err := checkText(Text{xmpKeyword, string(i.XMP)}); err != nil {
		return err
	}
	for _, t := range i.Texts {
		if t.Keyword == xmpKeyword {
			return &InfoError{fmt.Sprintf("text %q", t.Keyword), "is kept for the XMP packet", "give the packet as XMP"}
		}
		if err := checkText(t); err != nil {
			return err
		}
		total += len(t.Keyword) + len(t.Value)
	}
	if total > maxTextsWritten {
		return &InfoError{"metadata", fmt.Sprintf("of %d bytes is more than the %d many readers take", total, maxTextsWritten),
			"shorten the texts; the frame travels in the sidecar too"}
	}
	return nil
}

// checkText applies PNG §11.3.3.1 to one text.
func checkText(t Text) error {
	field := fmt.Sprintf("text %q", t.Keyword)
	if err := checkKeyword(field, t.Keyword); err != nil {
		return err
	}
	if !utf8.ValidString(t.Value) {
		return &InfoError{field, "is not valid UTF-8", "save it as UTF-8"}
	}
	if strings.ContainsRune(t.Value, 0) {
		return &InfoError{field, "contains a NUL", "remove it"}
	}
	return nil
}

// checkKeyword applies the rules of keywords and profile names (PNG §11.3.2.3,
// 11.3.3.1): 1 to 79 printable Latin-1 characters, no space at either end and
// no two in a row.
func checkKeyword(field, s string) error {
	const cure = "use 1 to 79 Latin-1 characters, without spaces at the ends or in a row"
	n := 0
	for _, r := range s {
		n++
		if r < 0x20 || r > 0x7E && r < 0xA1 || r > 0xFF {
			return &InfoError{field, fmt.Sprintf("has the character %q in its name", r), cure}
		}
	}
	if n < 1 || n > 79 {
		return &InfoError{field, fmt.Sprintf("has a name of %d characters", n), cure}
	}
	if strings.HasPrefix(s, " ") || strings.HasSuffix(s, " ") || strings.Contains(s, "  ") {
		return &InfoError{field, "has spaces at an end of its name or in a row", cure}
	}
	return nil
}

// checkICC refuses what is plainly no profile of RGB pixels (ICC.1:2022 §7.2:
// size at 0, colour space at 16, signature at 36).
func checkICC(name string, icc []byte) error {
	const field, cure = "colour profile", "give an ICC profile of an RGB colour space"
	if err := checkKeyword(field, name); err != nil {
		return err
	}
	switch {
	case len(icc) < 132 || string(icc[36:40]) != "acsp":
		return &InfoError{field, "is not an ICC profile", cure}
	case int64(binary.BigEndian.Uint32(icc)) != int64(len(icc)):
		return &InfoError{field, fmt.Sprintf("has %d bytes but says %d", len(icc), binary.BigEndian.Uint32(icc)), cure}
	case string(icc[16:20]) != "RGB ":
		return &InfoError{field, fmt.Sprintf("is for the colour space %q", icc[16:20]), cure}
	}
	return nil
}

// head returns the file's beginning up to the pixels. The order of chunks is one
// that every reader tried accepts.
func (i *Info) head() ([]byte, error) {
	b := []byte(signature)
	ihdr := binary.BigEndian.AppendUint32(nil, uint32(i.Width))
	ihdr = binary.BigEndian.AppendUint32(ihdr, uint32(i.Height))
	ihdr = append(ihdr, 16, 2, 0, 0, 0) // depth, RGB, deflate, the five filters, not interlaced
	b = appendChunk(b, "IHDR", ihdr)
	if len(i.ICC) > 0 {
		data, err := iccpData(i.ICCName, i.ICC)
		if err != nil {
			return nil, err
		}
		b = appendChunk(b, "iCCP", data)
	}
	if i.PixelsPerMetre > 0 {
		phys := binary.BigEndian.AppendUint32(nil, i.PixelsPerMetre)
		phys = binary.BigEndian.AppendUint32(phys, i.PixelsPerMetre)
		b = appendChunk(b, "pHYs", append(phys, 1)) // 1: the unit is the metre
	}
	if len(i.XMP) > 0 {
		b = appendChunk(b, "iTXt", itxtData(Text{xmpKeyword, string(i.XMP)}))
	}
	for _, t := range i.Texts {
		b = appendChunk(b, "iTXt", itxtData(t))
	}
	return b, nil
}

// iccpData is the data of an iCCP chunk: name, NUL, method 0, zlib.
func iccpData(name string, icc []byte) ([]byte, error) {
	b := bytes.NewBuffer(append(toLatin1(name), 0, 0))
	z, err := zlib.NewWriterLevel(b, zlib.BestCompression)
	if err != nil {
		return nil, err
	}
	if _, err := z.Write(icc); err != nil {
		return nil, err
	}
	if err := z.Close(); err != nil {
		return nil, err
	}
	return b.Bytes(), nil
}

// itxtData is the data of an iTXt chunk: keyword, NUL, not compressed, method
// 0, empty language and translated keyword, text.
func itxtData(t Text) []byte {
	b := append(toLatin1(t.Keyword), 0, 0, 0, 0, 0)
	return append(b, t.Value...)
}

// toLatin1 converts a checked keyword.
func toLatin1(s string) []byte {
	b := make([]byte, 0, len(s))
	for _, r := range s {
		b = append(b, byte(r))
	}
	return b
}

// fromLatin1 is the inverse of toLatin1.
func fromLatin1(b []byte) string {
	var s strings.Builder
	for _, c := range b {
		s.WriteRune(rune(c))
	}
	return s.String()
}
