package printfile

import (
	"io"
	"path/filepath"
	"runtime"
	"runtime/debug"
	"testing"
)

// peak runs use, which reports now and then, and returns the most heap in use
// at a report, in bytes above that before.
func peak(use func(report func())) uint64 {
	defer debug.SetGCPercent(debug.SetGCPercent(20)) // so that garbage is little
	var m runtime.MemStats
	runtime.GC()
	runtime.ReadMemStats(&m)
	before, most := m.HeapAlloc, uint64(0)
	use(func() {
		runtime.ReadMemStats(&m)
		if m.HeapAlloc > before {
			most = max(most, m.HeapAlloc-before)
		}
	})
	return most
}

// TestMemoryIsBounded writes and reads a picture of 120 MB. Live at a time may
// be the strips in use, each at most five buffers of 1 MiB, and the workers'
// compressors.
func TestMemoryIsBounded(t *testing.T) {
	if raceEnabled {
		t.Skip("the race detector needs memory of its own")
	}
	if testing.Short() {
		t.Skip("left out by -short: it writes a large file")
	}
	const width, height, workers = 4000, 5_000, 2
	const limit = 48 << 20
	path := filepath.Join(t.TempDir(), "a.png")
	rows := picture(smoothRow, width, 2)
	most := peak(func(report func()) {
		w, err := Create(path, Info{Width: width, Height: height}, workers)
		if err != nil {
			t.Fatal(err)
		}
		defer w.Abort()
		for y := range height {
			part := rows[:width*bpp]
			if y%16 == 0 { // few changes: it is memory that is tried, not the compressor
				part = rows[width*bpp:]
			}
			if err := w.WriteRows(part); err != nil {
				t.Fatal(err)
			}
			if y%50 == 0 {
				report()
			}
		}
		if _, err := w.Commit(); err != nil {
			t.Fatal(err)
		}
	})
	t.Logf("writing %d MB took %.1f MB", width*height*bpp>>20, float64(most)/(1<<20))
	if most > limit {
		t.Errorf("writing took %d bytes, more than %d", most, limit)
	}
	most = peak(func(report func()) {
		r, err := Open(path)
		if err != nil {
			t.Fatal(err)
		}
		defer r.Close()
		buf := make([]byte, 50*width*bpp)
		for err == nil {
			_, err = r.ReadRows(buf)
			report()
		}
		if err != io.EOF {
			t.Error(err)
		}
	})
	t.Logf("reading took %.1f MB", float64(most)/(1<<20))
	if most > 4<<20 {
		t.Errorf("reading took %d bytes", most)
	}
}
