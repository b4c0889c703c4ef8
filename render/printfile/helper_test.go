package printfile

import (
	"encoding/binary"
	"errors"
	"io"
	"math"
	"math/rand/v2"
	"os"
	"path/filepath"
	"testing"
)

// The pictures below stand for what prints hold: even gradients, fine structure
// with flat parts, and noise.

// smoothRow is slow waves, the kind of a wide colour gradient.
func smoothRow(dst []byte, width, y int) {
	for x := range width {
		v := math.Sin(float64(x)/311+float64(y)/173) + math.Sin(float64(y)/97-float64(x)/523)
		putPixel(dst, x, uint16(32768+9000*v), uint16(30000+7000*v), uint16(20000+4000*v))
	}
}

// detailedRow is rings that grow finer towards a corner, around a flat disc.
func detailedRow(dst []byte, width, y int) {
	cx, cy := float64(width)/3, 300.0
	for x := range width {
		dx, dy := float64(x)-cx, float64(y)-cy
		d := dx*dx + dy*dy
		if d < 20000 {
			putPixel(dst, x, 0, 0, 0)
			continue
		}
		v := math.Sin(d/900) * math.Sin(float64(x*y)/7000)
		putPixel(dst, x, uint16(32768+30000*v), uint16(32768+20000*v*v), uint16(32768-25000*v))
	}
}

// noisyRow is a gradient under noise of 400 codes.
func noisyRow(dst []byte, width, y int) {
	r := rand.New(rand.NewPCG(1, uint64(y)))
	for x := range width {
		base := uint16(8 * (x + y) % 60000)
		putPixel(dst, x, base+uint16(r.IntN(400)), base+uint16(r.IntN(400)), base+uint16(r.IntN(400)))
	}
}

func putPixel(dst []byte, x int, r, g, b uint16) {
	binary.BigEndian.PutUint16(dst[6*x:], r)
	binary.BigEndian.PutUint16(dst[6*x+2:], g)
	binary.BigEndian.PutUint16(dst[6*x+4:], b)
}

// picture returns height rows of a row function.
func picture(row func([]byte, int, int), width, height int) []byte {
	b := make([]byte, width*height*bpp)
	for y := range height {
		row(b[y*width*bpp:(y+1)*width*bpp], width, y)
	}
	return b
}

// mixed is a picture in which every filter has rows that suit it.
func mixed(width, height int) []byte {
	b := make([]byte, width*height*bpp)
	for y := range height {
		row := b[y*width*bpp : (y+1)*width*bpp]
		switch y / 5 % 4 {
		case 0:
			smoothRow(row, width, y)
		case 1:
			detailedRow(row, width, y)
		case 2:
			noisyRow(row, width, y)
		}
	}
	return b
}

// writeFile writes a whole picture, cut into calls of the given numbers of rows
// over and over.
func writeFile(t testing.TB, path string, info Info, pixels []byte, workers int, cuts ...int) {
	t.Helper()
	w, err := Create(path, info, workers)
	if err != nil {
		t.Fatal(err)
	}
	defer w.Abort()
	rowBytes := info.Width * bpp
	for i := 0; len(pixels) > 0; i++ {
		n := len(pixels)
		if len(cuts) > 0 {
			n = min(n, cuts[i%len(cuts)]*rowBytes)
		}
		if err := w.WriteRows(pixels[:n]); err != nil {
			t.Fatal(err)
		}
		pixels = pixels[n:]
	}
	size, err := w.Commit()
	if err != nil {
		t.Fatal(err)
	}
	if st, err := os.Stat(path); err != nil || st.Size() != size {
		t.Fatalf("Commit says %d bytes, the file has %v (%v)", size, st.Size(), err)
	}
}

// encode returns the bytes of a whole picture as a file.
func encode(t testing.TB, info Info, pixels []byte, workers int, cuts ...int) []byte {
	t.Helper()
	path := filepath.Join(t.TempDir(), "a.png")
	writeFile(t, path, info, pixels, workers, cuts...)
	b, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// readAll reads a whole picture, some rows at a time.
func readAll(r *Reader, rowsAtOnce int) ([]byte, error) {
	var out []byte
	buf := make([]byte, r.Info().Width*bpp*rowsAtOnce+1)
	for {
		n, err := r.ReadRows(buf)
		out = append(out, buf[:n*r.Info().Width*bpp]...)
		if err == io.EOF {
			return out, nil
		}
		if err != nil {
			return out, err
		}
	}
}

// entries returns the names in a folder, hidden ones too.
func entries(t testing.TB, dir string) []string {
	t.Helper()
	list, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	var names []string
	for _, e := range list {
		names = append(names, e.Name())
	}
	return names
}

// hint returns the hint of an error, which every error for users has.
func hint(t testing.TB, err error) string {
	t.Helper()
	var h interface{ Hint() string }
	if !errors.As(err, &h) {
		t.Fatalf("%v (%T) has no hint", err, err)
	}
	if h.Hint() == "" {
		t.Fatalf("%v has an empty hint", err)
	}
	return h.Hint()
}
