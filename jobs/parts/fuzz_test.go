package parts

import (
	"bytes"
	"crypto/sha256"
	"errors"
	"image"
	"path/filepath"
	"testing"

	"leadline/render"
)

// FuzzReadStripe: whatever a file holds, its reader neither fails otherwise
// than with errDamaged nor gives more or fewer rows than the part has. The
// checksum is set right, so that the fuzzer comes past it.
func FuzzReadStripe(f *testing.F) {
	h, rect := head{I: 2, N: 3}, image.Rect(-1, 4, 3, 9)
	path := filepath.Join(f.TempDir(), "part")
	for _, bands := range [][]int{{5}, {2, 3}} {
		s := must(createStripe(path, h, rect))(f)
		for _, rows := range bands {
			if err := s.band(bytes.Repeat([]byte{7}, rows*4*render.BytesPerPixel)); err != nil {
				f.Fatal(err)
			}
		}
		must(s.commit(render.Counts{Pixels: 20, Samples: 40}))(f)
		f.Add([]byte(files(f, filepath.Dir(path))["part"]))
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		if n := len(data) - sha256.Size; n >= 0 {
			sum := sha256.Sum256(data[:n])
			data = append(bytes.Clone(data[:n]), sum[:]...)
		}
		got := 0
		n, err := readStripe(bytes.NewReader(data), h, rect, func(rows []byte) error {
			if got += len(rows); len(rows) == 0 || len(rows)%(4*render.BytesPerPixel) != 0 || got > 20*render.BytesPerPixel {
				t.Fatalf("%d bytes of rows, %d in all", len(rows), got)
			}
			return nil
		})
		if err != nil {
			if !errors.Is(err, errDamaged) {
				t.Fatal(err)
			}
			return
		}
		if got != 20*render.BytesPerPixel || n.Pixels != 20 {
			t.Fatalf("a whole part has %d bytes and counts %+v", got, n)
		}
	})
}

// FuzzParsePrint: what is taken is written back the same.
func FuzzParsePrint(f *testing.F) {
	p := must(newPrint(testFrame(f, whole), render.PrintOptions{Audit: 3}, "tide.png", 3))(f)
	f.Add(p.marshal())
	f.Fuzz(func(t *testing.T, data []byte) {
		p, err := parsePrint(data)
		if err == nil && !bytes.Equal(p.marshal(), data) {
			t.Fatalf("%q is taken as %q", data, p.marshal())
		}
	})
}
