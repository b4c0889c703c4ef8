package jobs

import (
	"path/filepath"
	"testing"

	"leadline/render/frame"
)

// BenchmarkSmallTiles does a print of 256 tiles that take next to no time to
// render: what is measured is the queue.
func BenchmarkSmallTiles(b *testing.B) {
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},
		"view":{"centre":{"re":"1.9","im":"1.5"},"height":"0.5"},"iteration":{"limit":10},
		"sampling":{"least":1,"most":1},"sheet":{"width":"256px","height":"256px"}}`))
	if err != nil {
		b.Fatal(err)
	}
	for _, kind := range []string{"sqlite", "postgres"} {
		b.Run(kind, func(b *testing.B) {
			d := database{kind, "sqlite:" + filepath.Join(b.TempDir(), "queue.db")}
			if kind == "postgres" {
				d.where = freshPostgres(b, true)
				if err := Migrate(b.Context(), d.where); err != nil {
					b.Fatal(err)
				}
			}
			q := d.open(b)
			q.time = usual
			for b.Loop() {
				id, err := q.Add(b.Context(), f, AddOptions{Out: filepath.Join(b.TempDir(), "a.png"), Tile: 16})
				if err != nil {
					b.Fatal(err)
				}
				if err := q.Work(b.Context(), WorkOptions{Slots: 2, Drain: true}); err != nil {
					b.Fatal(err)
				}
				if p := show(b, q, id); p.State != Done {
					b.Fatalf("%+v", p)
				}
			}
			b.ReportMetric(float64(b.N*256)/b.Elapsed().Seconds(), "tiles/s")
		})
	}
}
