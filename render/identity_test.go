package render

import (
	"bytes"
	"context"
	"flag"
	"fmt"
	"image"
	"testing"
)

var update = flag.Bool("update", false, "print the golden hashes instead of comparing")

// goldens are the SHA-256 of the test frames' rows, bleed included. They change
// only together with Numerics.
var goldens = map[string]string{
	"whole":      "8bc32a97d23fe0b58d2acc313ac8ed4cfd442bdf2d54155f00775be1e1967113",
	"double":     "5f05c5093180071d88e82f4a8096e027b4465ccf0e193d94f196383749afd0cc",
	"turned":     "4acad52350aace0bfefdfd246cdb2d391c3745bb6a5eb38fd9733d06c1e2f845",
	"deep":       "1af477b975a0014ceac25c9378eb2663dbe9901a7b380273c8a8cee8e4b0553f",
	"cube":       "b1692e2d04200e1f3f69d41b864dca9eb2ae6a45bca2b1393984f47e213df749",
	"julia":      "d7dfda83f36016fb3daeeae6347bddc6049a75bd58bf55755cc77277c75a05c2",
	"julia-deep": "66393b50659f77f86e4b21f5df76920c7782cacdba7eec2193fbd04484fa0128",
}

// TestIdentityGoldens renders every test frame and compares with one hash each,
// the same on every architecture, with or without assembly.
func TestIdentityGoldens(t *testing.T) {
	for _, f := range testFrames {
		p := testPlan(t, f.name)
		_, hash := rowsOf(t, p, p.Geometry.Full(), 1, 2)
		if *update {
			fmt.Printf("\t%q: %q,\n", f.name, hash)
			continue
		}
		if want := goldens[f.name]; hash != want {
			t.Errorf("%s: rows hash to %s, want %s", f.name, hash, want)
		}
	}
}

// TestIdentityWorkers asks for the same rows from any number of workers.
func TestIdentityWorkers(t *testing.T) {
	for _, name := range []string{"whole", "double", "julia"} {
		p := testPlan(t, name)
		want, _ := rowsOf(t, p, p.Geometry.Full(), 1, 1)
		for _, workers := range []int{2, 7} {
			if got, _ := rowsOf(t, p, p.Geometry.Full(), 1, workers); !bytes.Equal(got, want) {
				t.Errorf("%s: %d workers give other pixels than 1", name, workers)
			}
		}
	}
}

// TestIdentityShapes asks for the same pixels from tiles of any shape, in any
// order, and from a fresh plan of a frozen frame.
func TestIdentityShapes(t *testing.T) {
	for _, name := range []string{"double", "deep", "cube"} {
		p := testPlan(t, name)
		full := p.Geometry.Full()
		want, _ := rowsOf(t, p, full, 1, 2)
		again, err := NewPlan(context.Background(), p.Frame(), Options{Workers: 1})
		if err != nil {
			t.Fatal(err)
		}
		for _, size := range []image.Point{{1, full.Dy()}, {full.Dx(), 1}, {7, 5}, {64, 64}} {
			c := NewCanvas(full)
			var tiles []image.Rectangle
			for y := full.Min.Y; y < full.Max.Y; y += size.Y {
				for x := full.Min.X; x < full.Max.X; x += size.X {
					tiles = append(tiles, image.Rect(x, y, x+size.X, y+size.Y).Intersect(full))
				}
			}
			for i := range tiles { // from the last to the first
				if _, err := again.Tile(context.Background(), c, tiles[len(tiles)-1-i], 1); err != nil {
					t.Fatal(err)
				}
			}
			if !bytes.Equal(c.Pix, want) {
				t.Errorf("%s: tiles of %v give other pixels than the whole", name, size)
			}
		}
	}
}

// TestIdentityCrops asks every crop for exactly the whole's pixels.
func TestIdentityCrops(t *testing.T) {
	for _, name := range []string{"whole", "turned", "julia-deep"} {
		p := testPlan(t, name)
		full := p.Geometry.Full()
		want, _ := rowsOf(t, p, full, 1, 2)
		for _, r := range []image.Rectangle{image.Rect(-3, -3, 5, 2), image.Rect(10, 7, 31, 20), image.Rect(47, 31, 51, 35), image.Rect(-3, 16, 51, 17)} {
			got, _ := rowsOf(t, p, r, 1, 2)
			for y := r.Min.Y; y < r.Max.Y; y++ {
				i := ((y-full.Min.Y)*full.Dx() + r.Min.X - full.Min.X) * BytesPerPixel
				j := (y - r.Min.Y) * r.Dx() * BytesPerPixel
				if n := r.Dx() * BytesPerPixel; !bytes.Equal(got[j:j+n], want[i:i+n]) {
					t.Errorf("%s: row %d of crop %v is not the whole's", name, y, r)
				}
			}
		}
	}
}
