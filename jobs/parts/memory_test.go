package parts

import (
	"image"
	"os"
	"path/filepath"
	"runtime"
	"testing"

	"leadline/render"
)

// TestMemoryOfAStripe writes, checks and reads a stripe of 200 MB and looks at
// the heap at every band: neither side holds more than a few bands of 2 MB.
func TestMemoryOfAStripe(t *testing.T) {
	if testing.Short() {
		t.Skip("left out by -short: it writes and reads 200 MB")
	}
	const width, rows, bands = 5461, 64, 100 // 2 MB a band
	path, h := filepath.Join(t.TempDir(), "part"), head{I: 1, N: 1}
	rect := image.Rect(0, 0, width, rows*bands)
	var most uint64
	look := func() {
		runtime.GC() // what is held, not what is left lying about
		var m runtime.MemStats
		runtime.ReadMemStats(&m)
		most = max(most, m.HeapAlloc)
	}
	s := must(createStripe(path, h, rect))(t)
	band := make([]byte, width*rows*render.BytesPerPixel)
	for i := range bands {
		for j := range 1000 { // some of it does not repeat
			band[j*97%len(band)] += byte(i * j)
		}
		if err := s.band(band); err != nil {
			t.Fatal(err)
		}
		look()
	}
	must(s.commit(render.Counts{Pixels: width * rows * bands}))(t)
	if err := checkStripe(path, h); err != nil {
		t.Fatal(err)
	}
	f := must(os.Open(path))(t)
	defer f.Close()
	got := 0
	if _, err := readStripe(f, h, rect, func(b []byte) error { got += len(b); look(); return nil }); err != nil {
		t.Fatal(err)
	}
	if want := width * rows * bands * render.BytesPerPixel; got != want {
		t.Errorf("%d bytes, not %d", got, want)
	}
	const bound = 20e6
	if most > bound {
		t.Errorf("%d bytes held at most, not below %.0f", most, bound)
	}
	t.Logf("%d bytes held at most, for a stripe of %d", most, got)
}
