package orbit

import (
	"errors"
	"reflect"
	"testing"

	"leadline/render/formula"
)

// stored returns references of every shape with their stored form.
func stored(t testing.TB) map[string]*Reference {
	t.Helper()
	julia := request(t, 2, "0.1", "0.2", "1e-30", 500)
	julia.Julia = true
	julia.Parameter = julia.Centre
	return map[string]*Reference{
		"closed": reference(t, request(t, 2, "0", "1", "1e-40", 1000)),
		"centre": reference(t, request(t, 2, "0.3", "0.6", "1e-20", 1000)),
		"deep":   reference(t, request(t, 2, "-1.76", "0.01", "1e-500", 300)),
		"cube":   reference(t, request(t, 3, "0.4", "0.9", "1e-30", 500)),
		"julia":  reference(t, julia),
	}
}

// TestRestore: what is stored comes back exactly.
func TestRestore(t *testing.T) {
	for name, r := range stored(t) {
		b, err := r.AppendBinary(nil)
		if err != nil {
			t.Fatal(err)
		}
		again, err := Restore(r.Map, b)
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if !reflect.DeepEqual(r, again) {
			t.Errorf("%s comes back changed", name)
		}
		for _, n := range []int{0, 5, len(referenceMagic) + 3, len(b) / 2, len(b) - 1} {
			if _, err := Restore(r.Map, b[:n]); !errors.Is(err, errReference) {
				t.Errorf("%s cut to %d bytes: %v", name, n, err)
			}
		}
	}
}

// FuzzRestore: no bytes make Restore panic or take memory they do not have,
// and what it takes it writes back the same.
func FuzzRestore(f *testing.F) {
	for _, r := range stored(f) {
		b, err := r.AppendBinary(nil)
		if err != nil {
			f.Fatal(err)
		}
		if len(b) < 1<<16 {
			f.Add(b)
		}
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		r, err := Restore(formula.Square{}, data)
		if err != nil {
			return
		}
		if b, err := r.AppendBinary(nil); err != nil || len(b) != len(data) {
			t.Fatalf("%d bytes became %d: %v", len(data), len(b), err)
		}
	})
}
