package frame

import (
	"bytes"
	"testing"
)

// roundTrip is what holds for every document: no panic; what is accepted is
// written, read and written again to the same bytes; the published schema
// accepts what is written.
func roundTrip(t *testing.T, data []byte, parse func([]byte) (marshaler, error), schema func([]byte) error) {
	v, err := parse(data)
	if err != nil {
		if len(err.(Faults)) == 0 {
			t.Fatal("refused without a fault")
		}
		return
	}
	once, err := v.Marshal()
	if err != nil {
		t.Fatalf("accepted, not written: %v", err)
	}
	v, err = parse(once)
	if err != nil {
		t.Fatalf("written, not accepted: %v\n%s", err, once)
	}
	if twice, err := v.Marshal(); err != nil || !bytes.Equal(once, twice) {
		t.Fatalf("written otherwise the second time (%v)\n%s\n%s", err, once, twice)
	}
	if err := schema(once); err != nil {
		t.Fatalf("written, but not to the schema: %v\n%s", err, once)
	}
}

// seeds gives a fuzz target the examples and the small edits of the table.
func seeds(f *testing.F) {
	base := map[string][]byte{}
	for name, m := range examples() {
		base[name] = mustMarshal(f, m)
		f.Add(base[name])
	}
	for _, v := range verdicts() {
		if len(v.value) < 200 {
			f.Add(edited(f, base[v.doc], v.path, v.value))
		}
	}
	for _, h := range hostile(f) {
		if len(h.doc) < 4096 {
			f.Add(h.doc)
		}
	}
}

// FuzzFrame, like FuzzSidecar, is best run with -fuzzminimizetime 1x: its seeds
// are kilobytes long and cutting each find down takes most of the time.
func FuzzFrame(f *testing.F) {
	seeds(f)
	schema, _ := compiled(f)
	f.Fuzz(func(t *testing.T, data []byte) {
		roundTrip(t, data, func(b []byte) (marshaler, error) { return Parse(b) },
			func(b []byte) error { return valid(t, schema, b) })
	})
}

func FuzzSidecar(f *testing.F) {
	seeds(f)
	_, schema := compiled(f)
	f.Fuzz(func(t *testing.T, data []byte) {
		roundTrip(t, data, func(b []byte) (marshaler, error) { return ParseSidecar(b) },
			func(b []byte) error { return valid(t, schema, b) })
	})
}

func BenchmarkParse(b *testing.B) {
	for name, m := range examples() {
		data := mustMarshal(b, m)
		b.Run(name, func(b *testing.B) {
			b.SetBytes(int64(len(data)))
			b.ReportAllocs()
			for b.Loop() {
				if _, err := ParseAny(data); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

func BenchmarkMarshal(b *testing.B) {
	s := fullSidecar()
	b.ReportAllocs()
	for b.Loop() {
		if _, err := s.Marshal(); err != nil {
			b.Fatal(err)
		}
	}
}
