package jobs

import (
	"context"
	"syscall"
	"testing"
	"time"
)

// BenchmarkRestart measures from the kill of a worker to the next beginning of
// the tile that it had in hand, under the leases that are used outside the
// tests.
func BenchmarkRestart(b *testing.B) {
	if testing.Short() {
		b.Skip("left out by -short: it waits for a lease of ten seconds")
	}
	benchEngines(b, func(b *testing.B, d database, q *Queue) {
		var total time.Duration
		for b.Loop() {
			id := add(b, q, AddOptions{})
			c := spawn(b, d, childHang+"=3")
			c.says("begin 3")
			again := make(chan time.Time, 1)
			stop := start(b, q, WorkOptions{Slots: 1, before: func(_ context.Context, k ticket) {
				if k.Index == 3 {
					again <- time.Now()
				}
			}})
			time.Sleep(3 * time.Second) // the other works, and knows the one that is killed
			c.signal(syscall.SIGKILL)
			killed := time.Now()
			total += (<-again).Sub(killed)
			until(b, q, id, "done", inState(Done))
			stop()
		}
		b.ReportMetric(total.Seconds()/float64(b.N), "s/restart")
		b.ReportMetric(0, "ns/op")
	})
}
