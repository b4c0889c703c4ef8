package cells

import (
	"fmt"
	"testing"
)

// BenchmarkRender200x60 draws and writes a full screen of a picture in which every
// cell differs from the next; bytes/frame is what goes to the terminal.
func BenchmarkRender200x60(b *testing.B) {
	for _, m := range Meshes() {
		p := scene(m, 200, 60)
		for _, d := range []Depth{TrueColour, C256, C16, None} {
			b.Run(fmt.Sprintf("%s/%s", m, d), func(b *testing.B) {
				benchRender(b, p, m, d)
			})
		}
	}
}

func benchRender(b *testing.B, p Picture, m Mesh, d Depth) {
	b.ReportAllocs()
	total := 0
	for _, line := range Render(p, m, d, Options{}) {
		total += len(line)
	}
	for b.Loop() {
		Render(p, m, d, Options{})
	}
	b.ReportMetric(float64(total), "bytes/frame")
}
