//go:build unix

package main

import (
	"bytes"
	"encoding/json"
	"image"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"leadline/render"
)

// rendered renders a frame with the built command and returns what it reports
// and the picture.
func rendered(t *testing.T, dir, frame, out string, args ...string) (render.Result, *picture) {
	t.Helper()
	var r render.Result
	args = append([]string{"render", frame, "--out", out, "--json"}, args...)
	if err := json.Unmarshal([]byte(command(t, dir, args...)), &r); err != nil {
		t.Fatal(err)
	}
	p, err := readPicture(filepath.Join(dir, out))
	if err != nil {
		t.Fatal(err)
	}
	return r, p
}

// TestSamePixels renders with 1, 2 and 7 workers and in parts: the pixels, and
// for the whole the bytes of the file too, do not depend on either.
func TestSamePixels(t *testing.T) {
	t.Parallel()
	dir, frame := t.TempDir(), testdata(t, "small.frame.json")
	one, whole := rendered(t, dir, frame, "one.png", "--workers", "1")
	for _, n := range []int{2, 7} {
		name := strconv.Itoa(n) + ".png"
		r, p := rendered(t, dir, frame, name, "--workers", strconv.Itoa(n))
		if r.SHA256 != one.SHA256 || !bytes.Equal(p.rows, whole.rows) {
			t.Errorf("%d workers give other pixels", n)
		}
		if files := contents(t, dir); files[name] != files["one.png"] {
			t.Errorf("%d workers give another file", n)
		}
	}
	const bleed = 4
	for _, r := range []image.Rectangle{image.Rect(-4, -4, 83, 63), image.Rect(0, 0, 79, 59), image.Rect(60, 3, 83, 4), image.Rect(5, -2, 6, 61)} {
		crop := strconv.Itoa(r.Min.X) + "," + strconv.Itoa(r.Min.Y) + "," + strconv.Itoa(r.Dx()) + "," + strconv.Itoa(r.Dy())
		_, p := rendered(t, dir, frame, "part.png", "--crop", crop, "--workers", "3")
		if !bytes.Equal(p.rows, whole.crop(r.Add(image.Pt(bleed, bleed)))) {
			t.Errorf("the crop %s has other pixels than the whole", crop)
		}
	}
}

// wide is a sheet as wide as a print of 5.08 m at 300 ppi, far from any set: a
// band of it is as large as a band ever is.
const wide = `{"format": "leadline.frame/1", "set": {"kind": "mandelbrot"},
	"view": {"centre": {"re": "3.9", "im": "3.9"}, "height": "0.001"}, "iteration": {"limit": 50},
	"sampling": {"least": 1, "most": 1, "filter": "box"}, "sheet": {"width": "60000px", "height": "256px", "ppi": 300}}`

// TestMemory holds the peak of a wide print against 600 MB, the bound set for
// sheets of any height: memory holds a few bands, so that 256 rows, four bands
// and more, take what 40 000 take.
func TestMemory(t *testing.T) {
	t.Parallel()
	if testing.Short() {
		t.Skip("left out by -short: it renders 15 million pixels")
	}
	dir := t.TempDir()
	frame := filepath.Join(dir, "wide.frame.json")
	if err := os.WriteFile(frame, []byte(wide), 0o666); err != nil {
		t.Fatal(err)
	}
	var r render.Result
	if err := json.Unmarshal([]byte(command(t, dir, "render", frame, "--out", "wide.png", "--audit", "4", "--json")), &r); err != nil {
		t.Fatal(err)
	}
	if r.Width != 60000 || r.Height != 256 {
		t.Fatalf("%d x %d pixels", r.Width, r.Height)
	}
	const bound = 600e6
	if r.Peak <= 0 || r.Peak >= bound {
		t.Errorf("peak of %d bytes, not below %.0f", r.Peak, bound)
	}
	t.Logf("peak %d bytes, %.1f s", r.Peak, r.Seconds.Total)
}
