package jobs

import (
	"context"
	"slices"
	"sync"
	"sync/atomic"
	"testing"
	"time"
)

// BenchmarkWatchers has 20 watchers, each with a connection of its own, look at
// the list and at a print of 10,000 tiles, half of them done, once a second,
// beside a worker that goes on with it. It reports how long a look takes, and
// what share of the worker's speed is lost.
func BenchmarkWatchers(b *testing.B) {
	if testing.Short() {
		b.Skip("left out by -short: it takes about fifteen seconds")
	}
	benchEngines(b, func(b *testing.B, d database, q *Queue) {
		id := halfDone(b, q)
		watchers := make([]*Queue, 20)
		for i := range watchers {
			watchers[i] = d.open(b)
		}
		var begun atomic.Int64
		ctx, stop := context.WithCancel(b.Context())
		ended := make(chan error, 1)
		go func() {
			ended <- q.Work(ctx, WorkOptions{Slots: 2, before: func(context.Context, ticket) { begun.Add(1) }})
		}()
		for begun.Load() < 100 {
			time.Sleep(time.Millisecond)
		}
		// Turn and turn about, so that what else the machine does falls on both.
		var alone, watched float64
		var looks []time.Duration
		const turn, turns = 2 * time.Second, 3
		b.ResetTimer()
		for range turns {
			alone += speed(&begun, func() { time.Sleep(turn) })
			watched += speed(&begun, func() { looks = append(looks, watch(b, watchers, id, turn)...) })
		}
		if s := stateOf(b, q, id); s != Rendering {
			b.Errorf("the print is %s: the figures are of nothing", s)
		}
		stop()
		<-ended
		slices.Sort(looks)
		b.ReportMetric(ms(looks[len(looks)/2]), "ms/look-median")
		b.ReportMetric(ms(looks[len(looks)*95/100]), "ms/look-95%")
		b.ReportMetric(alone/turns, "tiles/s-alone")
		b.ReportMetric(watched/turns, "tiles/s-watched")
		b.ReportMetric(100*(1-watched/alone), "%-lost")
		b.ReportMetric(0, "ns/op")
	})
}

func ms(d time.Duration) float64 { return float64(d.Microseconds()) / 1000 }

// speed is how many tiles a second are begun during f.
func speed(begun *atomic.Int64, f func()) float64 {
	n, from := begun.Load(), time.Now()
	f()
	return float64(begun.Load()-n) / time.Since(from).Seconds()
}

// watch has every watcher look once a second, for a time; they are spread over
// the second.
func watch(b *testing.B, watchers []*Queue, id int64, d time.Duration) (looks []time.Duration) {
	var mu sync.Mutex
	var wg sync.WaitGroup
	begun := time.Now()
	for i, q := range watchers {
		wg.Go(func() {
			for at := time.Second * time.Duration(i) / time.Duration(len(watchers)); at < d; at += time.Second {
				time.Sleep(time.Until(begun.Add(at)))
				from := time.Now()
				_, err := q.List(b.Context())
				listed := time.Now()
				if err == nil {
					_, err = q.Show(b.Context(), id)
				}
				if err != nil {
					b.Error(err)
				}
				mu.Lock()
				looks = append(looks, listed.Sub(from), time.Since(listed))
				mu.Unlock()
			}
		})
	}
	wg.Wait()
	return looks
}

// halfDone is a print of 10,000 tiles of which the first half counts as done,
// one a second up to now.
func halfDone(b *testing.B, q *Queue) int64 {
	b.Helper()
	id := addPlain(b, q, 100)
	ctx, cancel := context.WithCancel(b.Context())
	defer cancel()
	_ = q.Work(ctx, WorkOptions{Slots: 1, before: func(_ context.Context, k ticket) { // ends with ctx's error
		if k.Index == 0 {
			cancel()
		}
	}})
	for _, query := range []string{
		`DELETE FROM leadline_tile WHERE print = ? AND idx >= 0`,
		`INSERT INTO leadline_tile (print, idx, state, started, finished, pixels, worker, file, sum)
			WITH RECURSIVE n (i) AS (SELECT 0 UNION ALL SELECT i + 1 FROM n WHERE i < 4999)
			SELECT p.id, i, 'done', {now} - 1000*(5000-i) - 2000, {now} - 1000*(5000-i), 256, 'somebody', '1/0.0',
			'0000000000000000000000000000000000000000000000000000000000000000' FROM n, leadline_print p WHERE p.id = ?`,
		`UPDATE leadline_print SET next = 5000, began = {now} - 5000000 WHERE id = ?`,
	} {
		if _, err := q.e.read().exec(b.Context(), query, id); err != nil {
			b.Fatal(err)
		}
	}
	if s := stateOf(b, q, id); s != Rendering {
		b.Fatalf("the print is %s", s)
	}
	return id
}
