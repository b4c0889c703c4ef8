package jobs

import (
	"context"
	"path/filepath"
	"testing"

	"leadline/render"
	"leadline/render/frame"
	"leadline/render/sheet"
)

// BenchmarkTwoSecondTiles makes one print of some 120 tiles of about two
// seconds, by render.Print and by the desk's queue with one worker, both on all
// cores, one after the other; -benchtime 1x does each once.
func BenchmarkTwoSecondTiles(b *testing.B) {
	doc, err := frame.Load("../testdata/frames/undertow.frame.json")
	if err != nil {
		b.Fatal(err)
	}
	f := doc.Frame
	for _, side := range []struct {
		of   *sheet.Length
		text string
	}{{&f.Sheet.Width, "230mm"}, {&f.Sheet.Height, "153mm"}} {
		if *side.of, err = sheet.ParseLength(side.text); err != nil {
			b.Fatal(err)
		}
	}
	b.Run("render", func(b *testing.B) {
		for b.Loop() {
			if _, err := render.Print(b.Context(), f, render.PrintOptions{Out: filepath.Join(b.TempDir(), "a.png")}); err != nil {
				b.Fatal(err)
			}
		}
	})
	b.Run("queue", func(b *testing.B) {
		for b.Loop() {
			q, err := Open(b.Context(), filepath.Join(b.TempDir(), "queue.db"), Options{})
			if err != nil {
				b.Fatal(err)
			}
			id, err := q.Add(b.Context(), f, AddOptions{Out: filepath.Join(b.TempDir(), "a.png"), Tile: 208})
			if err != nil {
				b.Fatal(err)
			}
			if err := q.Work(context.Background(), WorkOptions{Drain: true}); err != nil {
				b.Fatal(err)
			}
			p := show(b, q, id)
			if p.State != Done {
				b.Fatalf("%+v", p)
			}
			how, err := q.queued(b.Context(), id)
			if err != nil {
				b.Fatal(err)
			}
			b.ReportMetric(how.Seconds/float64(how.Tiles), "s/tile")
			b.ReportMetric(float64(how.Tiles), "tiles")
			q.Close()
		}
	})
}
