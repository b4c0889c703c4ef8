package jobs

import (
	"context"
	"fmt"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"leadline/render"
	"leadline/render/frame"
)

// plain is a frame of so many pixels a side that takes next to no time to
// render: what is measured with it is the queue.
func plain(b *testing.B, side int) *frame.Frame {
	b.Helper()
	f, err := frame.Parse([]byte(strings.ReplaceAll(`{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},
		"view":{"centre":{"re":"1.9","im":"1.5"},"height":"0.5"},"iteration":{"limit":10},
		"sampling":{"least":1,"most":1},"sheet":{"width":"SIDEpx","height":"SIDEpx"}}`, "SIDE", fmt.Sprint(side))))
	if err != nil {
		b.Fatal(err)
	}
	return f
}

// benchEngines runs a benchmark on a queue of each engine, with the leases that
// are used outside the tests.
func benchEngines(b *testing.B, f func(b *testing.B, d database, q *Queue)) {
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
			f(b, d, q)
		})
	}
}

// addPlain queues a plain print of n x n tiles of 16 pixels.
func addPlain(b *testing.B, q *Queue, n int) int64 {
	b.Helper()
	id, err := q.Add(b.Context(), plain(b, 16*n), AddOptions{Out: filepath.Join(b.TempDir(), "a.png"), Tile: 16})
	if err != nil {
		b.Fatal(err)
	}
	return id
}

// BenchmarkSmallTiles does prints of 1024 tiles with two slots. A tile's share
// is taken between the 64th and the 1000th to begin, so that neither the start
// and end of worker and print nor the last, emptier window counts. What the
// renderer and the compressor take of it stands beside it.
func BenchmarkSmallTiles(b *testing.B) {
	benchEngines(b, func(b *testing.B, _ database, q *Queue) {
		var perTile time.Duration
		for b.Loop() {
			id := addPlain(b, q, 32)
			var mu sync.Mutex
			var n int
			var from, to time.Time
			err := q.Work(b.Context(), WorkOptions{Slots: 2, Drain: true, before: func(_ context.Context, k ticket) {
				mu.Lock()
				defer mu.Unlock()
				switch n++; n {
				case 64:
					from = time.Now()
				case 1000:
					to = time.Now()
				}
			}})
			if err != nil {
				b.Fatal(err)
			}
			if p := show(b, q, id); p.State != Done || p.Attempts != 1026 {
				b.Fatalf("%+v", p)
			}
			perTile += to.Sub(from) / (1000 - 64)
		}
		ms := float64(perTile.Microseconds()) / 1000 / float64(b.N)
		b.ReportMetric(ms, "ms/tile")
		b.ReportMetric(1000/ms, "tiles/s")
		b.ReportMetric(0, "ns/op") // of whole prints; no figure of use
	})
}

// BenchmarkSmallTilesAlone renders and compresses the same tiles without a
// queue, on one core.
func BenchmarkSmallTilesAlone(b *testing.B) {
	p, err := render.NewPlan(b.Context(), plain(b, 512), render.Options{Workers: 1})
	if err != nil {
		b.Fatal(err)
	}
	rect, err := (render.PrintOptions{}).Part(p.Frame())
	if err != nil {
		b.Fatal(err)
	}
	rect.Max = rect.Min.Add(rect.Max.Sub(rect.Min).Div(32))
	for b.Loop() {
		c := render.NewCanvas(rect)
		n, err := p.Tile(b.Context(), c, rect, 1)
		if err != nil {
			b.Fatal(err)
		}
		if _, err := (&render.Part{Rect: rect, Counts: n, Pix: c.Pix}).Encode(); err != nil {
			b.Fatal(err)
		}
	}
}

// BenchmarkWorker starts and stops a worker that finds nothing to do.
func BenchmarkWorker(b *testing.B) {
	benchEngines(b, func(b *testing.B, _ database, q *Queue) {
		q.time.watch = 10 * time.Millisecond // when it looks whether anything is left
		for b.Loop() {
			if err := q.Work(b.Context(), WorkOptions{Slots: 2, Drain: true}); err != nil {
				b.Fatal(err)
			}
		}
	})
}

// BenchmarkAdd queues prints of 10,000 tiles.
func BenchmarkAdd(b *testing.B) {
	benchEngines(b, func(b *testing.B, _ database, q *Queue) {
		for b.Loop() {
			addPlain(b, q, 100)
		}
	})
}

// BenchmarkFill queues the 10,000 tiles of a print in windows, to the last.
// Only the filling counts, not what ends the tiles in between.
func BenchmarkFill(b *testing.B) {
	benchEngines(b, func(b *testing.B, _ database, q *Queue) {
		var total time.Duration
		for b.Loop() {
			total += fillToEnd(b, q, addPlain(b, q, 100))
		}
		b.ReportMetric(total.Seconds()/float64(b.N), "s/10000-tiles")
		b.ReportMetric(0, "ns/op") // with what ends the tiles
	})
}

// fillToEnd fills a print's windows and ends what is queued, until none is left.
func fillToEnd(b *testing.B, q *Queue, id int64) (filling time.Duration) {
	b.Helper()
	ctx := b.Context()
	end := func() error {
		for _, query := range []string{
			`UPDATE river_job SET state = 'completed', finalized_at = {stamp} WHERE id IN
				(SELECT job FROM leadline_tile WHERE print = ? AND state = 'queued')`,
			`UPDATE leadline_tile SET state = 'done' WHERE print = ? AND state = 'queued'`} {
			if _, err := q.e.read().exec(ctx, query, id); err != nil {
				return err
			}
		}
		return nil
	}
	if err := end(); err != nil { // the plan
		b.Fatal(err)
	}
	if _, err := q.e.read().exec(ctx, `UPDATE leadline_print SET state = 'rendering' WHERE id = ?`, id); err != nil {
		b.Fatal(err)
	}
	for {
		from := time.Now()
		if err := q.e.do(ctx, func(t tx) error { return q.fill(ctx, t, id) }); err != nil {
			b.Fatal(err)
		}
		filling += time.Since(from)
		if p := stateOf(b, q, id); p == Assembling {
			break
		}
		if err := end(); err != nil {
			b.Fatal(err)
		}
	}
	if err := q.Cancel(ctx, id); err != nil {
		b.Fatal(err)
	}
	return filling
}

func stateOf(b *testing.B, q *Queue, id int64) (s State) {
	b.Helper()
	var text string
	if err := one(b.Context(), q.e.read(), `SELECT state FROM leadline_print WHERE id = ?`, []any{id}, &text); err != nil {
		b.Fatal(err)
	}
	return State(text)
}
