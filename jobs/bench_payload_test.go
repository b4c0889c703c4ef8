package jobs

import (
	"crypto/rand"
	"crypto/sha256"
	"encoding/hex"
	"path/filepath"
	"sync/atomic"
	"testing"
)

// BenchmarkPayload writes and reads payloads of 0.8 MB that no compressor makes
// smaller, from as many goroutines as there are cores, each write on the disk
// when it returns: into the spool, and into either database.
func BenchmarkPayload(b *testing.B) {
	var data [2][]byte // turn and turn about: SQLite leaves pages alone that do not change
	for i := range data {
		data[i] = make([]byte, 800_000)
		rand.Read(data[i])
	}
	b.Run("spool", func(b *testing.B) {
		payloads(b, database{"sqlite", filepath.Join(b.TempDir(), "queue.db")}, data, true)
	})
	b.Run("sqlite", func(b *testing.B) {
		payloads(b, database{"sqlite", filepath.Join(b.TempDir(), "queue.db")}, data, false)
	})
	b.Run("postgres", func(b *testing.B) {
		postgres(b) // or skip
		s, err := newServer()
		if err != nil {
			b.Fatal(err)
		}
		s.more = nil // with fsync
		if err := s.start(); err != nil {
			b.Fatal(err)
		}
		d := database{"postgres", s.url("postgres")}
		if err := Migrate(b.Context(), d.where); err != nil {
			b.Fatal(err)
		}
		payloads(b, d, data, false)
	})
}

// payloads is BenchmarkPayload for one place.
func payloads(b *testing.B, d database, data [2][]byte, files bool) {
	q := d.open(b)
	ctx, id := b.Context(), add(b, q, AddOptions{})
	if !files {
		q.spool = nil
	} else if err := q.spool.put(ticket{id, planIndex, 0}.name(), nil); err != nil { // makes the folder
		b.Fatal(err)
	}
	const most = 64 // different ones
	var next atomic.Int64
	in := func(i int64) error {
		k := ticket{Print: id, Index: int(i % most)}
		if files {
			return q.spool.put(k.name(), data[i/most%2])
		}
		return q.e.do(ctx, func(t tx) error { return store(ctx, t, k, data[i/most%2]) })
	}
	each := func(b *testing.B, f func(int64) error) {
		b.SetBytes(int64(len(data[0])))
		b.RunParallel(func(pb *testing.PB) {
			for pb.Next() {
				if err := f(next.Add(1)); err != nil {
					b.Error(err)
					return
				}
			}
		})
	}
	b.Run("in", func(b *testing.B) { each(b, in) })
	for i := range int64(most) {
		if err := in(i); err != nil {
			b.Fatal(err)
		}
	}
	sum := sha256.Sum256(data[0])
	b.Run("out", func(b *testing.B) {
		each(b, func(i int64) error {
			p := kept{ticket: ticket{Print: id, Index: int(i % most)}, sum: hex.EncodeToString(sum[:])}
			if files {
				p.file = p.name()
			}
			_, err := q.payload(ctx, p)
			return err
		})
	})
}
