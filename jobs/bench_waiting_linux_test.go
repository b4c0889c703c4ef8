package jobs

import (
	"context"
	"path/filepath"
	"syscall"
	"testing"
	"time"
)

// BenchmarkWaitingTiles makes a print of 100 tiles that each wait for two
// seconds, two at a time, so that 100 s would be no overhead at all, however
// fast the machine is. It reports what the queue adds to that by the clock (the
// print's plan and assembly included) and in processor time.
func BenchmarkWaitingTiles(b *testing.B) {
	const tiles, wait, slots = 100, 2 * time.Second, 2
	benchEngines(b, func(b *testing.B, _ database, q *Queue) {
		f := plain(b, 160)
		for b.Loop() {
			id, err := q.Add(b.Context(), f, AddOptions{Out: filepath.Join(b.TempDir(), "a.png"), Tile: 16})
			if err != nil {
				b.Fatal(err)
			}
			begun, used := time.Now(), processorTime(b)
			err = q.Work(b.Context(), WorkOptions{Slots: slots, Drain: true, before: func(_ context.Context, k ticket) {
				if k.Index >= 0 {
					time.Sleep(wait)
				}
			}})
			if err != nil {
				b.Fatal(err)
			}
			took, cpu := time.Since(begun), processorTime(b)-used
			if p := show(b, q, id); p.State != Done || p.Tiles != tiles {
				b.Fatalf("%+v", p)
			}
			ideal := tiles * wait / slots
			b.ReportMetric(100*(took-ideal).Seconds()/ideal.Seconds(), "%clock")
			b.ReportMetric(100*cpu.Seconds()/(slots*ideal).Seconds(), "%cpu")
		}
	})
}

// processorTime is what this process has used.
func processorTime(b *testing.B) time.Duration {
	b.Helper()
	var u syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &u); err != nil {
		b.Fatal(err)
	}
	return time.Duration(u.Utime.Nano() + u.Stime.Nano())
}
