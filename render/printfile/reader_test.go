package printfile

import (
	"bytes"
	"compress/zlib"
	"encoding/binary"
	"errors"
	"fmt"
	"image"
	"image/color"
	"image/png"
	"io"
	"math/rand/v2"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"
)

// plainPNG is a second writer, made for tests: any chunks, any filters, the
// standard library's zlib.
type plainPNG struct{ bytes.Buffer }

func newPlain(width, height uint32, depth, colour, interlace byte) *plainPNG {
	p := new(plainPNG)
	p.WriteString(signature)
	b := binary.BigEndian.AppendUint32(nil, width)
	b = binary.BigEndian.AppendUint32(b, height)
	p.chunk("IHDR", append(b, depth, colour, 0, 0, interlace))
	return p
}

func (p *plainPNG) chunk(typ string, data []byte) *plainPNG {
	p.Write(appendChunk(nil, typ, data))
	return p
}

// pixels adds IDAT chunks of at most n bytes and, between them, empty ones.
func (p *plainPNG) pixels(filtered []byte, n int) *plainPNG {
	for b := deflated(filtered); len(b) > 0; b = b[min(n, len(b)):] {
		p.chunk("IDAT", b[:min(n, len(b))])
		p.chunk("IDAT", nil)
	}
	return p
}

func (p *plainPNG) end() []byte { return p.chunk("IEND", nil).Bytes() }

func deflated(b []byte) []byte {
	var out bytes.Buffer
	z := zlib.NewWriter(&out)
	z.Write(b)
	z.Close()
	return out.Bytes()
}

// read reads a file from memory to its end.
func read(file []byte, rowsAtOnce int) (Info, []byte, error) {
	r, err := newReader(bytes.NewReader(file), int64(len(file)), "")
	if err != nil {
		return Info{}, nil, err
	}
	pixels, err := readAll(r, rowsAtOnce)
	return r.Info(), pixels, err
}

// TestReadsWhatWasWritten: everything given to the Writer comes back.
func TestReadsWhatWasWritten(t *testing.T) {
	const width, height = 643, 300
	pixels, info := mixed(width, height), fullInfo(t, width, height)
	path := filepath.Join(t.TempDir(), "a.png")
	writeFile(t, path, info, pixels, 2)
	for _, rows := range []int{1, 3, height, height + 5} {
		r, err := Open(path)
		if err != nil {
			t.Fatal(err)
		}
		if got := r.Info(); !reflect.DeepEqual(got, info) {
			t.Errorf("info %v, want %v", got, info)
		}
		if got, err := readAll(r, rows); err != nil || !bytes.Equal(got, pixels) {
			t.Errorf("%d rows at once: other pixels (%v)", rows, err)
		}
		if err := r.Close(); err != nil {
			t.Error(err)
		}
		if _, err := r.ReadRows(make([]byte, width*bpp)); err != ErrClosed {
			t.Errorf("after Close: %v", err)
		}
	}
}

// TestReadsAnyFilters: files in which each row has a filter chosen at random.
func TestReadsAnyFilters(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	for range 200 {
		width, height := 1+r.IntN(30), 1+r.IntN(30)
		var pixels, filtered []byte
		prev := make([]byte, width*bpp)
		for range height {
			cur, f := randomRow(r, width*bpp), r.IntN(filterCount)
			filtered = append(append(filtered, byte(f)), plainFilter(f, cur, prev)...)
			pixels, prev = append(pixels, cur...), cur
		}
		file := newPlain(uint32(width), uint32(height), 16, 2, 0).pixels(filtered, 1+r.IntN(99)).end()
		if _, got, err := read(file, 1+r.IntN(40)); err != nil || !bytes.Equal(got, pixels) {
			t.Fatalf("%dx%d: other pixels (%v)", width, height, err)
		}
	}
}

// TestReadsOthersFiles: image/png's writer, and chunks of all kinds around.
func TestReadsOthersFiles(t *testing.T) {
	img := image.NewRGBA64(image.Rect(0, 0, 13, 9))
	for y := range 9 {
		for x := range 13 {
			img.SetRGBA64(x, y, color.RGBA64{uint16(x * 5000), uint16(y * 7000), uint16(x * y), 0xFFFF})
		}
	}
	var b bytes.Buffer
	if err := png.Encode(&b, img); err != nil {
		t.Fatal(err)
	}
	_, got, err := read(b.Bytes(), 2)
	if _, _, want := decode(t, b.Bytes()); err != nil || !bytes.Equal(got, want) {
		t.Errorf("image/png's file: other pixels (%v)", err)
	}

	p := newPlain(1, 1, 16, 2, 0)
	p.chunk("gAMA", []byte{0, 0, 0xB1, 0x8F}).chunk("PLTE", []byte{1, 2, 3}).chunk("pHYs", []byte{0, 0, 0, 1, 0, 0, 0, 2, 0})
	p.chunk("tEXt", []byte("Title\x00caf\xe9")).chunk("zTXt", append([]byte("Note\x00\x00"), deflated([]byte("long"))...))
	p.chunk("iTXt", append([]byte("Key\x00\x01\x00de\x00Wort\x00"), deflated([]byte("größer"))...))
	p.pixels([]byte{0, 1, 2, 3, 4, 5, 6}, 1000).chunk("tIME", make([]byte, 7))
	p.chunk("iTXt", []byte("After\x00\x00\x00\x00\x00late"))
	info, got, err := read(p.end(), 1)
	if err != nil || !bytes.Equal(got, []byte{1, 2, 3, 4, 5, 6}) {
		t.Errorf("pixels %v (%v)", got, err)
	}
	if got, want := fmt.Sprint(info), "{1 1 0  [] [] [{Title café} {Note long} {Key größer} {After late}]}"; got != want {
		t.Errorf("info %s, want %s", got, want)
	}
}

// TestEveryFlippedBitIsSeen: CRC-32 finds every single flipped bit, and what no
// CRC covers (signature, lengths) is checked otherwise. Nothing slips through,
// nor does a file cut anywhere.
func TestEveryFlippedBitIsSeen(t *testing.T) {
	info := fullInfo(t, 9, 4)
	info.ICC, info.ICCName = nil, ""
	file := encode(t, info, mixed(9, 4), 1)
	if _, _, err := read(file, 1); err != nil {
		t.Fatal(err)
	}
	for i := range len(file) * 8 {
		bad := bytes.Clone(file)
		bad[i/8] ^= 1 << (i % 8)
		checkRefused(t, fmt.Sprintf("bit %d of byte %d flipped", i%8, i/8), bad)
	}
	for n := range file {
		checkRefused(t, fmt.Sprintf("cut to %d bytes", n), file[:n])
	}
}

func checkRefused(t *testing.T, what string, file []byte) {
	t.Helper()
	_, _, err := read(file, 3)
	var fe *FormatError
	if !errors.As(err, &fe) {
		t.Fatalf("%s: %v", what, err)
	}
	hint(t, err)
}

// TestRefusedFiles: other kinds of PNG, and hostile ones, each with its reason.
func TestRefusedFiles(t *testing.T) {
	good := []byte{0, 1, 2, 3, 4, 5, 6}
	rgb := func() *plainPNG { return newPlain(1, 1, 16, 2, 0) }
	bomb := deflated(make([]byte, 9<<20)) // 9 KiB that say they are 9 MiB
	for want, file := range map[string][]byte{
		"is 8-bit RGB, not 16-bit RGB":                            newPlain(1, 1, 8, 2, 0).pixels(good[:4], 99).end(),
		"is 16-bit RGB with transparency":                         newPlain(1, 1, 16, 6, 0).end(),
		"is 16-bit greyscale, not":                                newPlain(1, 1, 16, 0, 0).end(),
		"is 8-bit palette, not":                                   newPlain(1, 1, 8, 3, 0).end(),
		"is interlaced":                                           newPlain(1, 1, 16, 2, 1).pixels(good, 99).end(),
		"0 x 1 pixels":                                            newPlain(0, 1, 16, 2, 0).pixels(good, 99).end(),
		"2147483648 x 1 pixels":                                   newPlain(1<<31, 1, 16, 2, 0).pixels(good, 99).end(),
		"bytes cannot hold them":                                  newPlain(1<<31-1, 1<<31-1, 16, 2, 0).pixels(good, 99).end(),
		"says 2147483647 x 1 pixels, but":                         newPlain(1<<31-1, 1, 16, 2, 0).pixels(good, 99).end(),
		"has no pixels":                                           rgb().end(),
		"not a png":                                               []byte("GIF89a and more"),
		"does not begin with a header":                            append([]byte(signature), appendChunk(nil, "IEND", nil)...),
		"has a transparent colour":                                rgb().chunk("tRNS", make([]byte, 6)).pixels(good, 99).end(),
		"unknown chunk ABCD that":                                 rgb().chunk("ABCD", nil).pixels(good, 99).end(),
		"chunk IDAT out of place":                                 rgb().pixels(good, 99).chunk("tIME", nil).pixels(good, 99).end(),
		"chunk pHYs out of place":                                 rgb().pixels(good, 99).chunk("pHYs", make([]byte, 9)).end(),
		"chunk pHYs of 8 bytes":                                   rgb().chunk("pHYs", make([]byte, 8)).pixels(good, 99).end(),
		"malformed chunk iCCP":                                    rgb().chunk("iCCP", []byte("name")).pixels(good, 99).end(),
		"malformed chunk iTXt":                                    rgb().chunk("iTXt", []byte("a\x00\x02\x00\x00\x00x")).pixels(good, 99).end(),
		"chunk PLTE that is out of place":                         rgb().chunk("PLTE", make([]byte, 4)).pixels(good, 99).end(),
		"more than 8388608 bytes of metadata, at a chunk iCCP":    rgb().chunk("iCCP", append([]byte("a\x00\x00"), bomb...)).pixels(good, 99).end(),
		"more than 8388608 bytes of metadata, at a chunk zTXt":    rgb().chunk("zTXt", append([]byte("a\x00\x00"), bomb...)).pixels(good, 99).end(),
		"more than 8388608 bytes of metadata, at a chunk tEXt":    repeatedText().pixels(good, 99).end(),
		"chunk iTXt of 9000000 bytes, more than the 8388608":      rgb().chunk("iTXt", make([]byte, 9_000_000)).pixels(good, 99).end(),
		"chunk zTXt that cannot be decompressed":                  rgb().chunk("zTXt", []byte("a\x00\x00xyz")).pixels(good, 99).end(),
		"two XMP packets":                                         rgb().chunk("tEXt", []byte(xmpKeyword+"\x00a")).chunk("tEXt", []byte(xmpKeyword+"\x00b")).pixels(good, 99).end(),
		"unknown filter 5 in row 0":                               rgb().pixels([]byte{5, 1, 2, 3, 4, 5, 6}, 99).end(),
		"pixels for 0 of 1 rows":                                  rgb().pixels(good[:5], 99).end(),
		"pixels for 1 of 2 rows":                                  newPlain(1, 2, 16, 2, 0).pixels(good, 99).end(),
		"more pixels than its header":                             rgb().pixels(append(good, good...), 99).end(),
		"bytes behind the end of its pixels":                      rgb().chunk("IDAT", append(deflated(good), 0)).end(),
		"cannot be decompressed at row 0":                         rgb().chunk("IDAT", []byte("no zlib")).end(),
		"cannot be decompressed at row 1: zlib: invalid checksum": rgb().chunk("IDAT", badSum(good)).end(),
		"has a chunk tEXt of 2000000000 bytes":                    append(rgb().Bytes(), 0x77, 0x35, 0x94, 0x00, 't', 'E', 'X', 't', 'a', 0),
		"impossible type":                                         rgb().chunk("a1b2", nil).pixels(good, 99).end(),
		"ends too early":                                          rgb().pixels(good, 99).Bytes(),
	} {
		t.Run(want, func(t *testing.T) {
			_, _, err := read(file, 1)
			var fe *FormatError
			if !errors.As(err, &fe) || !strings.Contains(err.Error(), want) {
				t.Fatalf("error %v", err)
			}
			hint(t, err)
		})
	}
}

func repeatedText() *plainPNG {
	p := newPlain(1, 1, 16, 2, 0)
	for range 9 {
		p.chunk("tEXt", append([]byte("a\x00"), bytes.Repeat([]byte("x"), 1<<20)...))
	}
	return p
}

func badSum(b []byte) []byte {
	z := deflated(b)
	z[len(z)-1] ^= 1
	return z
}

// TestImpossibleSizeCostsNothing: a tiny file that claims a huge picture is
// refused before memory is reserved for it, and the bound it is refused by is
// not too strict: the best that deflate can do passes.
func TestImpossibleSizeCostsNothing(t *testing.T) {
	file := newPlain(1<<31-1, 1<<31-1, 16, 2, 0).pixels(nil, 99).end()
	if n := testing.AllocsPerRun(10, func() { read(file, 1) }); n > 50 {
		t.Errorf("%v allocations", n)
	}
	const width, height = 20000, 200 // 24 MB of zeros in about 24 KB
	var b bytes.Buffer
	z, err := zlib.NewWriterLevel(&b, zlib.BestCompression)
	if err != nil {
		t.Fatal(err)
	}
	row := make([]byte, width*bpp+1)
	for range height {
		z.Write(row)
	}
	z.Close()
	file = newPlain(width, height, 16, 2, 0).chunk("IDAT", b.Bytes()).end()
	r, err := newReader(bytes.NewReader(file), int64(len(file)), "")
	if err != nil {
		t.Fatalf("%d bytes for %d: %v", len(file), len(row)*height, err)
	}
	n, err := r.ReadRows(make([]byte, 3*width*bpp))
	if n != 3 || err != nil {
		t.Errorf("%d rows (%v)", n, err)
	}
}

func TestOpenRefusesWhatIsNoFile(t *testing.T) {
	dir := t.TempDir()
	if _, err := Open(filepath.Join(dir, "none")); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("missing file: %v", err)
	}
	_, err := Open(dir)
	if err == nil || !strings.Contains(hint(t, err), "png") {
		t.Errorf("folder: %v", err)
	}
	path := filepath.Join(dir, "a.txt")
	if err := os.WriteFile(path, []byte("text"), 0o644); err != nil {
		t.Fatal(err)
	}
	if _, err := Open(path); err == nil || !strings.Contains(err.Error(), path) {
		t.Errorf("text file: %v does not name it", err)
	}
}

func TestRoomForNoRow(t *testing.T) {
	file := newPlain(2, 1, 16, 2, 0).pixels(make([]byte, 13), 99).end()
	r, err := newReader(bytes.NewReader(file), int64(len(file)), "")
	if err != nil {
		t.Fatal(err)
	}
	if _, err := r.ReadRows(make([]byte, 11)); !errors.Is(err, ErrRows) {
		t.Errorf("error %v", err)
	}
	if n, err := r.ReadRows(make([]byte, 12)); n != 1 || err != nil {
		t.Errorf("%d rows (%v)", n, err)
	}
	if n, err := r.ReadRows(make([]byte, 12)); n != 0 || err != io.EOF {
		t.Errorf("after the last: %d rows (%v)", n, err)
	}
}
