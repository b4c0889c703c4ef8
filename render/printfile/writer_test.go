package printfile

import (
	"bytes"
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"errors"
	"fmt"
	"hash/adler32"
	"image"
	"image/png"
	"math/rand/v2"
	"os"
	"path/filepath"
	"testing"

	"leadline/palette"
)

// fullInfo has everything a print carries.
func fullInfo(t testing.TB, width, height int) Info {
	t.Helper()
	xmp, err := Credit{Title: "Kelp <stair> & “plate” 4", Maker: "A. Maker", Rights: "© A. Maker", Hash: []byte{1, 2, 3}}.XMP()
	if err != nil {
		t.Fatal(err)
	}
	return Info{Width: width, Height: height, PixelsPerMetre: 11811, ICCName: palette.DisplayP3.Name(),
		ICC: palette.DisplayP3.ICC(), XMP: xmp,
		Texts: []Text{{"leadline.frame/1", "{\n  \"title\": \"Kelp ≈ stair\"\n}"}, {"Über", "second"}}}
}

// decode has Go's image/png, an independent implementation, read the file.
func decode(t testing.TB, file []byte) (width, height int, pixels []byte) {
	t.Helper()
	img, err := png.Decode(bytes.NewReader(file))
	if err != nil {
		t.Fatalf("image/png: %v", err)
	}
	rgba, ok := img.(*image.RGBA64)
	if !ok {
		t.Fatalf("image/png made %T of it, not 16-bit colour", img)
	}
	size := rgba.Bounds().Size()
	for i := 0; i < len(rgba.Pix); i += 8 {
		pixels = append(pixels, rgba.Pix[i:i+6]...)
	}
	return size.X, size.Y, pixels
}

func TestImagePNGReadsTheSamePixels(t *testing.T) {
	for _, size := range []struct{ w, h int }{{1, 1}, {1, 300}, {2, 2}, {3, 1}, {300, 1}, {7, 5}, {641, 357}} {
		t.Run(fmt.Sprintf("%dx%d", size.w, size.h), func(t *testing.T) {
			pixels := mixed(size.w, size.h)
			file := encode(t, fullInfo(t, size.w, size.h), pixels, 2, 3)
			w, h, got := decode(t, file)
			if w != size.w || h != size.h || !bytes.Equal(got, pixels) {
				t.Errorf("image/png reads %dx%d, pixels equal: %v", w, h, bytes.Equal(got, pixels))
			}
		})
	}
}

// TestSeveralStrips makes sure that dictionaries, flushes and the combined
// Adler-32 hold over strip boundaries, for pictures of every kind.
func TestSeveralStrips(t *testing.T) {
	const width, height = 1201, 300 // 145 rows a strip
	for name, row := range map[string]func([]byte, int, int){"smooth": smoothRow, "detailed": detailedRow, "noisy": noisyRow} {
		t.Run(name, func(t *testing.T) {
			pixels := picture(row, width, height)
			_, _, got := decode(t, encode(t, Info{Width: width, Height: height}, pixels, 2))
			if !bytes.Equal(got, pixels) {
				t.Error("image/png reads other pixels")
			}
		})
	}
}

func TestSameBytesForAnyWorkersAndCuts(t *testing.T) {
	const width, height = 601, 600 // 290 rows a strip
	pixels, info := mixed(width, height), fullInfo(t, width, height)
	want := encode(t, info, pixels, 1)
	for _, c := range []struct {
		workers int
		cuts    []int
	}{{1, []int{1}}, {2, nil}, {2, []int{289, 1, 2}}, {7, []int{290}}, {7, []int{1, 13, 400}}, {0, []int{291}}} {
		if got := encode(t, info, pixels, c.workers, c.cuts...); !bytes.Equal(got, want) {
			t.Errorf("%d workers and calls of %v rows give other bytes", c.workers, c.cuts)
		}
	}
}

// TestSameBytesOnEveryMachine fixes the bytes of one file, several strips long.
// They may change with the release of the deflate library or with the strategy
// here, never with the machine.
func TestSameBytesOnEveryMachine(t *testing.T) {
	const width, height = 1000, 700
	pixels := make([]byte, width*height*bpp)
	state := uint32(1)
	for i := range pixels {
		state = state*1664525 + 1013904223 // any fixed sequence of integers
		pixels[i] = byte(i/1000) + byte(state>>24)%byte(1+i*7/len(pixels)*9)
	}
	const want = "ffb6cd515c45a6e198101ea1836617e43d48ed23c88720a110fdb2c628ee9307"
	sum := sha256.Sum256(encode(t, Info{Width: width, Height: height, PixelsPerMetre: 11811}, pixels, 2))
	if got := hex.EncodeToString(sum[:]); got != want {
		t.Errorf("file hash %s, want %s", got, want)
	}
}

func TestVeryWideRow(t *testing.T) {
	const width, height = 300_000, 2 // 1.8 MB a row: more than a strip
	pixels := picture(smoothRow, width, height)
	file := encode(t, Info{Width: width, Height: height}, pixels, 2)
	if w, h, got := decode(t, file); w != width || h != height || !bytes.Equal(got, pixels) {
		t.Error("image/png reads other pixels")
	}
	r, err := newReader(bytes.NewReader(file), int64(len(file)), "")
	if err != nil {
		t.Fatal(err)
	}
	if got, err := readAll(r, 1); err != nil || !bytes.Equal(got, pixels) {
		t.Errorf("our reader reads other pixels (%v)", err)
	}
	if n := rowsPerStrip(width*bpp, stripBytes); n != 1 {
		t.Errorf("%d rows a strip, want 1", n)
	}
}

// TestOrderOfChunks: PNG 3rd ed. §5.6, table 7, and no chunk besides.
func TestOrderOfChunks(t *testing.T) {
	file := encode(t, fullInfo(t, 500, 800), mixed(500, 800), 2)
	var got []string
	for at := len(signature); at < len(file); {
		n := int(binary.BigEndian.Uint32(file[at:]))
		if typ := string(file[at+4 : at+8]); typ != "IDAT" || got[len(got)-1] != "IDAT" {
			got = append(got, typ)
		}
		at += 12 + n
	}
	if want := "[IHDR iCCP pHYs iTXt iTXt iTXt IDAT IEND]"; fmt.Sprint(got) != want {
		t.Errorf("chunks %v, want %v", got, want)
	}
}

// TestLimitOfIDAT: a compressed strip longer than a chunk may be is cut.
func TestLimitOfIDAT(t *testing.T) {
	pixels := picture(noisyRow, 100, 50)
	path := filepath.Join(t.TempDir(), "a.png")
	w, err := Create(path, Info{Width: 100, Height: 50}, 1)
	if err != nil {
		t.Fatal(err)
	}
	w.maxIDAT = 1000
	if err := w.WriteRows(pixels); err != nil {
		t.Fatal(err)
	}
	if _, err := w.Commit(); err != nil {
		t.Fatal(err)
	}
	file, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if n := bytes.Count(file, []byte("IDAT")); n < 10 {
		t.Errorf("only %d chunks: the picture tests nothing", n)
	}
	if _, _, got := decode(t, file); !bytes.Equal(got, pixels) {
		t.Error("image/png reads other pixels")
	}
}

func TestAdlerCombine(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	for range 100 {
		b := make([]byte, r.IntN(100_000))
		for i := range b {
			b[i] = byte(r.Uint32()) | byte(r.IntN(2)*255)
		}
		n := r.IntN(len(b) + 1)
		got := adlerCombine(adler32.Checksum(b[:n]), adler32.Checksum(b[n:]), len(b)-n)
		if want := adler32.Checksum(b); got != want {
			t.Fatalf("%d+%d bytes: %08x, want %08x", n, len(b)-n, got, want)
		}
	}
}

func TestRefusedInfo(t *testing.T) {
	icc := palette.SRGB.ICC()
	short := bytes.Clone(icc[:len(icc)-1])
	grey := bytes.Clone(icc)
	copy(grey[16:], "GRAY")
	over := MaxSide
	over++ // negative where int has 32 bits
	long := string(bytes.Repeat([]byte("x"), 80))
	for name, info := range map[string]Info{
		"no width":        {Width: 0, Height: 1},
		"negative height": {Width: 1, Height: -1},
		"height 2^31":     {Width: 1, Height: over},
		"width 2^31":      {Width: over, Height: 1},
		"resolution":      {Width: 1, Height: 1, PixelsPerMetre: 1 << 31},
		"nameless icc":    {Width: 1, Height: 1, ICC: icc},
		"name alone":      {Width: 1, Height: 1, ICCName: "sRGB"},
		"cut icc":         {Width: 1, Height: 1, ICCName: "sRGB", ICC: short},
		"grey icc":        {Width: 1, Height: 1, ICCName: "grey", ICC: grey},
		"icc of zeros":    {Width: 1, Height: 1, ICCName: "sRGB", ICC: make([]byte, 500)},
		"name of 80":      {Width: 1, Height: 1, ICCName: long, ICC: icc},
		"two spaces":      {Width: 1, Height: 1, ICCName: "a  b", ICC: icc},
		"leading space":   {Width: 1, Height: 1, Texts: []Text{{" a", ""}}},
		"no keyword":      {Width: 1, Height: 1, Texts: []Text{{"", "x"}}},
		"greek keyword":   {Width: 1, Height: 1, Texts: []Text{{"αβγ", "x"}}},
		"NUL in text":     {Width: 1, Height: 1, Texts: []Text{{"a", "x\x00y"}}},
		"not UTF-8":       {Width: 1, Height: 1, Texts: []Text{{"a", "\xff"}}},
		"xmp not UTF-8":   {Width: 1, Height: 1, XMP: []byte("\xff")},
		"xmp as text":     {Width: 1, Height: 1, Texts: []Text{{xmpKeyword, "x"}}},
		"too long":        {Width: 1, Height: 1, Texts: []Text{{"a", string(bytes.Repeat([]byte("x"), maxTextsWritten))}}},
	} {
		t.Run(name, func(t *testing.T) {
			dir := t.TempDir()
			_, err := Create(filepath.Join(dir, "a.png"), info, 1)
			var size *SizeError
			var field *InfoError
			if !errors.As(err, &size) && !errors.As(err, &field) {
				t.Fatalf("error %v", err)
			}
			hint(t, err)
			if left := entries(t, dir); len(left) > 0 {
				t.Errorf("left %v", left)
			}
		})
	}
}

func TestWrongNumberOfRows(t *testing.T) {
	for name, use := range map[string]func(*Writer) error{
		"half a row":   func(w *Writer) error { return w.WriteRows(make([]byte, 10*bpp+3)) },
		"a row beyond": func(w *Writer) error { return w.WriteRows(make([]byte, 6*10*bpp)) },
		"a row short":  func(w *Writer) error { w.WriteRows(make([]byte, 4*10*bpp)); _, err := w.Commit(); return err },
		"no rows":      func(w *Writer) error { _, err := w.Commit(); return err },
	} {
		t.Run(name, func(t *testing.T) {
			dir := t.TempDir()
			w, err := Create(filepath.Join(dir, "a.png"), Info{Width: 10, Height: 5}, 1)
			if err != nil {
				t.Fatal(err)
			}
			if err := use(w); !errors.Is(err, ErrRows) {
				t.Errorf("error %v, want ErrRows", err)
			}
			if err := w.WriteRows(nil); !errors.Is(err, ErrRows) {
				t.Errorf("afterwards %v, want the same error", err)
			}
			if left := entries(t, dir); len(left) > 0 {
				t.Errorf("left %v", left)
			}
		})
	}
}

func TestClosedWriter(t *testing.T) {
	dir := t.TempDir()
	w, err := Create(filepath.Join(dir, "a.png"), Info{Width: 1, Height: 1}, 1)
	if err != nil {
		t.Fatal(err)
	}
	if err := w.WriteRows(make([]byte, 6)); err != nil {
		t.Fatal(err)
	}
	if _, err := w.CommitAs(filepath.Join(dir, "b.png")); err != nil {
		t.Fatal(err)
	}
	w.Abort() // nothing
	if err := w.WriteRows(nil); err != ErrClosed {
		t.Errorf("WriteRows after Commit: %v", err)
	}
	if _, err := w.Commit(); err != ErrClosed {
		t.Errorf("Commit after Commit: %v", err)
	}
	if got := fmt.Sprint(entries(t, dir)); got != "[b.png]" {
		t.Errorf("files %v, want b.png alone", got)
	}
}

func TestAbortLeavesNothing(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "a.png")
	if err := os.WriteFile(path, []byte("before"), 0o644); err != nil {
		t.Fatal(err)
	}
	w, err := Create(path, Info{Width: 1000, Height: 1000}, 3)
	if err != nil {
		t.Fatal(err)
	}
	if err := w.WriteRows(make([]byte, 400*1000*bpp)); err != nil {
		t.Fatal(err)
	}
	w.Abort()
	w.Abort()
	if _, err := w.Commit(); err != ErrClosed {
		t.Errorf("Commit after Abort: %v", err)
	}
	if got := fmt.Sprint(entries(t, dir)); got != "[a.png]" {
		t.Errorf("files %v", got)
	}
	if b, _ := os.ReadFile(path); string(b) != "before" {
		t.Errorf("the name now holds %q", b)
	}
}

// TestStripsOfAnySize: strips shorter than the deflate window, down to one row.
func TestStripsOfAnySize(t *testing.T) {
	const width, height = 101, 60
	pixels := mixed(width, height)
	for _, strip := range []int{1, 2000, 20_000, 1 << 20} {
		path := filepath.Join(t.TempDir(), "a.png")
		w, err := create(path, Info{Width: width, Height: height}, 3, strip)
		if err != nil {
			t.Fatal(err)
		}
		if err := w.WriteRows(pixels); err != nil {
			t.Fatal(err)
		}
		if _, err := w.Commit(); err != nil {
			t.Fatal(err)
		}
		file, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		if _, _, got := decode(t, file); !bytes.Equal(got, pixels) {
			t.Errorf("strips of %d bytes: image/png reads other pixels", strip)
		}
	}
}
