package kernel

import (
	"testing"

	"leadline/precision"
)

// perIteration reports nanoseconds for each of n iterations.
func perIteration(b *testing.B, n int) {
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(n), "ns/iteration")
	b.ReportMetric(0, "ns/op")
}

// BenchmarkDirect is the direct inner loop on bounded orbits.
func BenchmarkDirect(b *testing.B) {
	for i, name := range []string{"square", "cube"} {
		b.Run(name, func(b *testing.B) {
			s := (&scene{height: "4", power: 2 + i, limit: 1 << 30}).build(b)
			n := 0
			for b.Loop() {
				d := directLane{zr: 0.1, zi: 0.4, cr: 0.1, ci: 0.4, add: 1, gr: 1, w: 1}
				for range 16 {
					s.kernel.loops.direct(&d, s.kernel, s.limit)
					d.w = 1
				}
				n += d.n
			}
			perIteration(b, n)
		})
	}
}

// BenchmarkSteps is one step at a time against a reference: in doubles, and in
// extended range.
func BenchmarkSteps(b *testing.B) {
	for _, v := range []struct {
		name, view string
	}{{"square", "embedded-1e-60"}, {"cube", "cubic-1e-60"}} {
		b.Run(v.name, func(b *testing.B) {
			s := known(b, v.view)
			s.noTables = true
			s.build(b)
			n := 0
			for b.Loop() {
				l := s.kernel.start(100, 100)
				for range 16 {
					s.kernel.loops.steps(&l, s.kernel, s.limit)
					l.w = 1
				}
				n += l.n - 1
			}
			perIteration(b, n)
		})
	}
	b.Run("deep", func(b *testing.B) {
		s := known(b, "embedded-1e-500")
		s.noTables = true
		s.build(b)
		n := 0
		for b.Loop() {
			l := s.kernel.start(100, 100)
			for range 256 {
				s.kernel.deepAdvance(&l, s.limit)
			}
			n += l.n - 1
		}
		perIteration(b, n)
	})
}

// BenchmarkLeaps is a leap, however long, in both ranges.
func BenchmarkLeaps(b *testing.B) {
	b.Run("double", func(b *testing.B) {
		s := known(b, "embedded-1e-60").build(b)
		l := s.kernel.start(100, 100)
		for s.kernel.leap(&l, s.limit) == evNone {
			s.kernel.loops.steps(&l, s.kernel, s.limit)
		}
		l = s.kernel.start(100, 100)
		for b.Loop() {
			c := l
			if s.kernel.leap(&c, s.limit) != evMore {
				b.Fatal("no leap")
			}
		}
	})
	b.Run("deep", func(b *testing.B) {
		s := known(b, "embedded-1e-500").build(b)
		l := s.kernel.start(100, 100)
		for b.Loop() {
			c := l
			if !s.kernel.deepLeap(&c, s.limit) {
				b.Fatal("no leap")
			}
		}
	})
}

// BenchmarkSample is whole samples, spread over places of our own finding (see
// testdata/truth).
func BenchmarkSample(b *testing.B) {
	for _, name := range []string{"whole", "minibrot-1e-4", "nucleus-1e-13", "minibrot-1e-30", "embedded-1e-60",
		"long-period-1e-99", "misiurewicz-1e-150", "range-edge-1e-305", "embedded-1e-500", "nested-1e-1030",
		"tip-1e-2000", "cubic-1e-60", "julia-whole", "julia-cycle-1e-60"} {
		b.Run(name, func(b *testing.B) {
			s := known(b, name).build(b)
			points := s.spread(1009, 50)
			n, i := 0, 0
			for b.Loop() {
				p := points[i%len(points)]
				i++
				n += s.kernel.Sample(p[0], p[1]).N
			}
			b.ReportMetric(float64(n)/float64(i), "n/sample")
		})
	}
}

// BenchmarkFind is the search for the longest leap.
func BenchmarkFind(b *testing.B) {
	s := known(b, "range-edge-1e-305").build(b)
	g := &s.kernel.segs[0]
	key := precision.KeyOf(1e-200)
	for b.Loop() {
		g.find(1024, key, s.limit)
	}
}
