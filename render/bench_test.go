package render

import (
	"context"
	"path/filepath"
	"testing"

	"leadline/render/frame"
)

// benchFrames are the shared frames by depth, each at a scale that takes about
// a second.
var benchFrames = []struct {
	name  string
	scale int
}{
	{"gull-archipelago", 32}, {"barnacle-lamp", 32}, {"undertow", 8}, {"samphire-star", 16},
}

func loadShared(b testing.TB, name string) *frame.Frame {
	b.Helper()
	d, err := frame.Load(filepath.Join("..", "testdata", "frames", name+".frame.json"))
	if err != nil {
		b.Fatal(err)
	}
	return d.Frame
}

// BenchmarkFrame renders a whole frame without writing it: reference, tables,
// survey and pixels, on all cores.
func BenchmarkFrame(b *testing.B) {
	for _, f := range benchFrames {
		b.Run(f.name, func(b *testing.B) {
			v := loadShared(b, f.name)
			var n Counts
			for b.Loop() {
				p, err := NewPlan(context.Background(), v, Options{})
				if err != nil {
					b.Fatal(err)
				}
				c, err := p.Bands(context.Background(), p.Geometry.Scaled(f.scale).Trim(), f.scale, Options{}, func([]byte) error { return nil })
				if err != nil {
					b.Fatal(err)
				}
				n.Add(c)
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(n.Samples), "ns/sample")
			b.ReportMetric(float64(n.Samples)/float64(n.Pixels), "samples/px")
		})
	}
}

// BenchmarkPlan is the part of a frame before its first pixel.
func BenchmarkPlan(b *testing.B) {
	for _, f := range benchFrames {
		b.Run(f.name, func(b *testing.B) {
			v := loadShared(b, f.name)
			for b.Loop() {
				if _, err := NewProbe(context.Background(), v, Options{}); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// TestSharedFramesAgree probes every shared frame against direct iteration on
// a grid.
func TestSharedFramesAgree(t *testing.T) {
	paths, err := filepath.Glob(filepath.Join("..", "testdata", "frames", "*.frame.json"))
	if err != nil || len(paths) < 3 {
		t.Fatal("too few shared frames", paths, err)
	}
	for _, path := range paths {
		d, err := frame.Load(path)
		if err != nil {
			t.Fatal(err)
		}
		p, err := NewProbe(context.Background(), d.Frame, Options{})
		if err != nil {
			t.Fatal(err)
		}
		for i := range 8 {
			x := float64((2*i+1)*p.Geometry.TrimW)/16 + 0.5
			y := float64((2*(i*3%8)+1)*p.Geometry.TrimH)/16 + 0.5
			e, err := p.Exact(context.Background(), x, y)
			if err != nil {
				t.Fatal(err)
			}
			if a, robust := p.Compare(p.Field(x, y), e); a == Wrong || robust && a != Equal {
				t.Errorf("%s at %v,%v: %+v, direct iteration %+v", filepath.Base(path), x, y, p.Field(x, y), e)
			}
		}
	}
}
