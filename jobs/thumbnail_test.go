package jobs

import (
	"context"
	"errors"
	"image"
	"image/color"
	"image/png"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"leadline/palette"
	"leadline/render"
	"leadline/render/sheet"
)

// TestThumbnailShares has the tiles' shares cover the thumbnail exactly once,
// however the squares lie across the tiles.
func TestThumbnailShares(t *testing.T) {
	for _, c := range []struct {
		r    image.Rectangle
		side int
	}{
		{image.Rect(0, 0, 48, 32), 16}, {image.Rect(-7, -7, 1001, 900), 64}, {image.Rect(3, 5, 5000, 31), 16},
		{image.Rect(0, 0, 100000, 300), 512}, {image.Rect(0, 0, 481, 1), 64},
	} {
		d, cut := reduce(c.r), sheet.Tiles(c.r, c.side, 1<<30)
		seen := map[image.Point]int{}
		for i := range cut.Count() {
			tile := cut.At(i)
			s := d.share(tile)
			for y := s.Min.Y; y < s.Max.Y; y++ {
				for x := s.Min.X; x < s.Max.X; x++ {
					seen[image.Pt(x, y)]++
					at := c.r.Min.Add(image.Pt(x*d.step, y*d.step))
					if !tile.Overlaps(image.Rectangle{at, at.Add(image.Pt(d.step, d.step))}) {
						t.Fatalf("%v: %d,%d has nothing of tile %v", c.r, x, y, tile)
					}
				}
			}
		}
		n := d.size()
		for p, times := range seen {
			if times != 1 || !p.In(image.Rectangle{Max: n}) {
				t.Errorf("%v: %v is shown %d times", c.r, p, times)
			}
		}
		if len(seen) != n.X*n.Y || max(n.X, n.Y) > thumbnailSide {
			t.Errorf("%v: %d of %v", c.r, len(seen), n)
		}
	}
}

// TestLook has the mean of black and white squares be half the light, which
// sRGB encodes as 188 (IEC 61966-2-1: 1.055 × 0.5^(1/2.4) - 0.055 = 0.7354).
func TestLook(t *testing.T) {
	c := render.NewCanvas(image.Rect(0, 0, 960, 2))
	for y := range 2 {
		for x := range 960 {
			if (x+y)%2 == 0 {
				copy(c.At(x, y, 1), "\xff\xff\xff\xff\xff\xff")
			}
		}
	}
	look := reduce(c.Rect).look(c, palette.SRGB)
	if len(look) != 3*480 {
		t.Fatal(len(look))
	}
	for _, v := range look {
		if v != 0xbc {
			t.Fatalf("%x", v)
		}
	}
}

// TestThumbnail grows with the tiles, and ends as the print.
func TestThumbnail(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		id := add(t, q, AddOptions{})
		stop := start(t, q, WorkOptions{Slots: 1, before: func(ctx context.Context, k ticket) {
			if k.Index == 4 {
				<-ctx.Done()
			}
		}})
		until(t, q, id, "nearly done", func(p *Print) bool { return p.Done == 4 })
		part, early, err := q.Thumbnail(t.Context(), id)
		if err != nil {
			t.Fatal(err)
		}
		clear, opaque := part.NRGBAAt(20, 20).A, part.NRGBAAt(10, 20).A
		if clear != 0 || opaque != 0xff {
			t.Errorf("tile 4 has opacity %d, tile 3 %d", clear, opaque)
		}
		stop()
		start(t, q, WorkOptions{Slots: 1})
		p := until(t, q, id, "done", inState(Done))
		full, late, err := q.Thumbnail(t.Context(), id)
		if err != nil || early == late {
			t.Fatal(early, late, err)
		}
		f, err := os.Open(p.File)
		if err != nil {
			t.Fatal(err)
		}
		defer f.Close()
		want, err := png.Decode(f)
		if err != nil {
			t.Fatal(err)
		}
		for y := range 32 {
			for x := range 48 {
				r, g, b, _ := want.At(x, y).RGBA()
				c := full.NRGBAAt(x, y)
				if (color.NRGBA{byte(r >> 8), byte(g >> 8), byte(b >> 8), 0xff}) != c {
					t.Fatalf("%d,%d is %v, the print has %x %x %x", x, y, c, r, g, b)
				}
			}
		}
		var none *NoPrintError
		if _, _, err := q.Thumbnail(t.Context(), 99); !errors.As(err, &none) {
			t.Error(err)
		}
	})
}

// TestRemove takes prints off the list with all that is kept of them, and
// leaves what was delivered.
func TestRemove(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		ctx := t.Context()
		id, other := add(t, q, AddOptions{}), add(t, q, AddOptions{Priority: 4})
		stop := start(t, q, WorkOptions{Slots: 1, before: func(ctx context.Context, k ticket) {
			if k.Print == id && k.Index == 4 {
				<-ctx.Done()
			}
		}})
		until(t, q, id, "nearly done", func(p *Print) bool { return p.Done == 4 })
		var state *StateError
		if err := q.Remove(ctx, id); !errors.As(err, &state) || state.Hint() == "" {
			t.Error(err)
		}
		if err := q.Cancel(ctx, id); err != nil {
			t.Fatal(err)
		}
		if err := q.Remove(ctx, id); err != nil {
			t.Fatal(err)
		}
		p := until(t, q, other, "done", inState(Done))
		if err := q.Remove(ctx, other); err != nil {
			t.Fatal(err)
		}
		stop()
		var none *NoPrintError
		if err := q.Remove(ctx, id); !errors.As(err, &none) {
			t.Error(err)
		}
		for _, table := range []string{"print", "tile", "payload", "loss"} {
			var n int
			if err := one(ctx, q.e.read(), `SELECT count(*) FROM leadline_`+table, nil, &n); err != nil || n != 0 {
				t.Errorf("%d rows of %s are left, %v", n, table, err)
			}
		}
		if q.spool != nil {
			if ids, err := q.spool.prints(); err != nil || len(ids) != 0 {
				t.Errorf("the spool keeps %v, %v", ids, err)
			}
		}
		if _, err := os.Stat(p.File); err != nil {
			t.Error(err)
		}
	})
}

// TestQueuedRun has the sidecar say how the queue came to the print.
func TestQueuedRun(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		id := add(t, q, AddOptions{})
		stop := start(t, q, WorkOptions{Slots: 1, before: func(ctx context.Context, k ticket) {
			if k.Index == 3 {
				<-ctx.Done()
			}
		}})
		until(t, q, id, "half done", func(p *Print) bool { return p.Done == 3 && p.Attempts == 5 }) // tile 3 is in hand
		all, err := q.Workers(t.Context())
		if err != nil || len(all) != 1 || all[0].Tiles != 3 || all[0].Rate <= 0 || len(all[0].Holding) != 1 ||
			!strings.HasPrefix(all[0].Holding[0], "tile 3 of") {
			t.Errorf("%+v, %v", all, err)
		}
		stop()
		start(t, q, WorkOptions{Slots: 1})
		p := until(t, q, id, "done", inState(Done))
		s, err := os.ReadFile(filepath.Join(filepath.Dir(p.File), "small.sidecar.json"))
		if err != nil {
			t.Fatal(err)
		}
		r := runOf(t, s)
		if r == nil || r.Workers != 2 || r.Tiles != 6 || r.Attempts != 9 || r.Rescued != 0 || r.Seconds < 0 {
			t.Errorf("%+v", r)
		}
	})
}
