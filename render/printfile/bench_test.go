package printfile

import (
	"image"
	"image/color"
	"image/png"
	"os"
	"path/filepath"
	"testing"
)

var kinds = []struct {
	name string
	row  func([]byte, int, int)
}{{"smooth", smoothRow}, {"detailed", detailedRow}, {"noisy", noisyRow}}

const benchWidth, benchHeight = 3000, 1000 // 18 MB

// BenchmarkWrite reports MB/s of raw pixels, and the size of the file as a part
// of that of the pixels.
func BenchmarkWrite(b *testing.B) {
	for _, kind := range kinds {
		for _, workers := range []string{"1", "2"} {
			b.Run(kind.name+"/workers="+workers, func(b *testing.B) {
				pixels := picture(kind.row, benchWidth, benchHeight)
				path := filepath.Join(b.TempDir(), "a.png")
				b.SetBytes(int64(len(pixels)))
				for b.Loop() {
					writeFile(b, path, Info{Width: benchWidth, Height: benchHeight}, pixels, int(workers[0]-'0'))
				}
				reportRatio(b, path, len(pixels))
			})
		}
	}
}

func reportRatio(b *testing.B, path string, raw int) {
	st, err := os.Stat(path)
	if err != nil {
		b.Fatal(err)
	}
	b.ReportMetric(float64(st.Size())/float64(raw), "of-raw")
}

// opaque lends our pixels to image/png, which writes RGB of 16 bits when a
// picture says that it is opaque.
type opaque struct{ pixels []byte }

func (o opaque) ColorModel() color.Model { return color.RGBA64Model }
func (o opaque) Bounds() image.Rectangle { return image.Rect(0, 0, benchWidth, benchHeight) }
func (o opaque) Opaque() bool            { return true }
func (o opaque) At(x, y int) color.Color {
	p := o.pixels[(y*benchWidth+x)*bpp:]
	return color.RGBA64{uint16(p[0])<<8 | uint16(p[1]), uint16(p[2])<<8 | uint16(p[3]), uint16(p[4])<<8 | uint16(p[5]), 0xFFFF}
}

// BenchmarkImagePNG is what the standard library does with the same pixels.
func BenchmarkImagePNG(b *testing.B) {
	for _, kind := range kinds {
		b.Run(kind.name, func(b *testing.B) {
			pixels := picture(kind.row, benchWidth, benchHeight)
			path := filepath.Join(b.TempDir(), "a.png")
			b.SetBytes(int64(len(pixels)))
			for b.Loop() {
				f, err := os.Create(path)
				if err != nil {
					b.Fatal(err)
				}
				if err := png.Encode(f, opaque{pixels}); err != nil {
					b.Fatal(err)
				}
				f.Close()
			}
			reportRatio(b, path, len(pixels))
		})
	}
}

func BenchmarkRead(b *testing.B) {
	for _, kind := range kinds {
		b.Run(kind.name, func(b *testing.B) {
			pixels := picture(kind.row, benchWidth, benchHeight)
			path := filepath.Join(b.TempDir(), "a.png")
			writeFile(b, path, Info{Width: benchWidth, Height: benchHeight}, pixels, 2)
			buf := make([]byte, 20*benchWidth*bpp)
			b.SetBytes(int64(len(pixels)))
			for b.Loop() {
				r, err := Open(path)
				for err == nil {
					_, err = r.ReadRows(buf)
				}
				r.Close()
			}
		})
	}
}

func BenchmarkHasher(b *testing.B) {
	row := picture(noisyRow, 14173, 1)
	var h Hasher
	b.SetBytes(int64(len(row)))
	for b.Loop() {
		h.Write(row)
	}
}
