package render

import (
	"bytes"
	"context"
	"errors"
	"image"
	"path/filepath"
	"reflect"
	"testing"
)

// TestPartRoundTrip: a part comes back as it was, and any flipped bit or lost
// end is noticed.
func TestPartRoundTrip(t *testing.T) {
	p := testPlan(t, "double")
	r := image.Rect(-3, 5, 20, 17)
	c := NewCanvas(r)
	n, err := p.Tile(context.Background(), c, r, 1)
	if err != nil {
		t.Fatal(err)
	}
	n.Encoding = 0
	part := &Part{Rect: r, Counts: n, Pix: c.Pix}
	b, err := part.Encode()
	if err != nil {
		t.Fatal(err)
	}
	again, err := DecodePart(b)
	if err != nil || !reflect.DeepEqual(part, again) {
		t.Fatalf("a part comes back changed: %v", err)
	}
	for i := range b {
		d := bytes.Clone(b)
		d[i] ^= 4
		if v, err := DecodePart(d); err == nil && !reflect.DeepEqual(part, v) {
			t.Fatalf("a flipped bit in byte %d of %d goes unnoticed", i, len(b))
		} else if err != nil && !errors.Is(err, ErrPart) {
			t.Fatalf("byte %d: %v", i, err)
		}
	}
	for _, n := range []int{0, 10, len(b) / 2, len(b) - 1} {
		if _, err := DecodePart(b[:n]); !errors.Is(err, ErrPart) {
			t.Errorf("a part cut to %d bytes: %v", n, err)
		}
	}
}

func FuzzDecodePart(f *testing.F) {
	p := &Part{Rect: image.Rect(0, 0, 2, 2), Pix: make([]byte, 24)}
	b, err := p.Encode()
	if err != nil {
		f.Fatal(err)
	}
	f.Add(b)
	f.Fuzz(func(t *testing.T, data []byte) {
		p, err := DecodePart(data)
		if err != nil {
			return
		}
		if b, err := p.Encode(); err != nil || len(b) == 0 {
			t.Fatal(err)
		}
	})
}

// TestSharedPlanPrintsTheSame: a plan restored from its shared part renders
// the same rows, and assembling parts of them gives the same file as printing.
func TestSharedPlanPrintsTheSame(t *testing.T) {
	for _, name := range []string{"whole", "turned", "deep", "julia-deep"} {
		p := testPlan(t, name)
		b, err := p.Shared()
		if err != nil {
			t.Fatal(err)
		}
		q, err := NewPlanFromShared(context.Background(), b, Options{})
		if err != nil {
			t.Fatal(err)
		}
		want, hash := rowsOf(t, p, p.Geometry.Full(), 1, 2)
		if _, again := rowsOf(t, q, q.Geometry.Full(), 1, 1); again != hash {
			t.Errorf("%s: a restored plan gives other pixels", name)
		}
		direct, err := printed(t, name, PrintOptions{Audit: 4})
		if err != nil {
			t.Fatal(err)
		}
		out := filepath.Join(t.TempDir(), "again.png")
		r, err := Assemble(context.Background(), q, PrintOptions{Out: out, Audit: 4}, func(_ context.Context, sink func([]byte) error) (Counts, error) {
			half := len(want) / q.Geometry.Full().Dy() * 11 // eleven rows first
			if err := sink(want[:half]); err != nil {
				return Counts{}, err
			}
			return Counts{Pixels: direct.Counts.Pixels}, sink(want[half:])
		})
		if err != nil || r.SHA256 != direct.SHA256 || r.Bytes != direct.Bytes || r.Audit != direct.Audit {
			t.Errorf("%s: assembled %+v, printed %+v: %v", name, r, direct, err)
		}
	}
}

// TestSharedNoticesDamage flips bits all over.
func TestSharedNoticesDamage(t *testing.T) {
	b, err := testPlan(t, "turned").Shared()
	if err != nil {
		t.Fatal(err)
	}
	for i := 0; i < len(b); i += 97 {
		d := bytes.Clone(b)
		d[i] ^= 1
		if _, err := NewPlanFromShared(context.Background(), d, Options{}); !errors.Is(err, ErrShared) {
			t.Fatalf("byte %d flipped: %v", i, err)
		}
	}
	if _, err := NewPlanFromShared(context.Background(), b[:20], Options{}); !errors.Is(err, ErrShared) {
		t.Errorf("cut short: %v", err)
	}
}
