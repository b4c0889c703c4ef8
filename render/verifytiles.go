package render

import (
	"context"
	"image"
	"math/rand/v2"
	"slices"

	"leadline/render/sheet"
)

// tiles renders n random tiles again and compares them with the file, which is
// read once from top to bottom.
func (v *verifier) tiles(ctx context.Context, n int, seed uint64) (*Verdict, error) {
	file, err := v.open()
	if err != nil {
		return nil, err
	}
	defer file.Close()
	picked := v.pick(n, seed)
	d := &Verdict{Source: v.e.Source, Against: "file", Tiles: len(picked)}
	var total int64
	for _, t := range picked {
		total += int64(t.Dx()) * int64(t.Dy())
	}
	stride := v.rect.Dx() * BytesPerPixel
	done := 0
	for len(picked) > 0 {
		y := picked[0].Min.Y
		rows := make([]byte, stride*picked[0].Dy())
		for at := v.rect.Min.Y + done; at < y+picked[0].Dy(); {
			step := min(picked[0].Dy(), y+picked[0].Dy()-at)
			if at < y {
				step = min(step, y-at)
			}
			if err := readRows(file, rows[:step*stride]); err != nil {
				return nil, err
			}
			at += step
			done += step
		}
		for len(picked) > 0 && picked[0].Min.Y == y {
			if err := v.tile(ctx, picked[0], rows, d); err != nil {
				return nil, err
			}
			picked = picked[1:]
			v.o.tell(PhasePixels, d.Pixels, total)
		}
	}
	return d, nil
}

// pick draws n different tiles, sorted from the top.
func (v *verifier) pick(n int, seed uint64) []image.Rectangle {
	cut := sheet.Tiling{Rect: v.rect, Size: image.Pt(tileSide, tileSide)}
	r := rand.New(rand.NewPCG(seed, 0))
	n = min(n, cut.Count())
	chosen := map[int]bool{}
	for len(chosen) < n {
		chosen[r.IntN(cut.Count())] = true
	}
	var tiles []image.Rectangle
	for i := range chosen { //leadline:exact sorted below
		tiles = append(tiles, cut.At(i))
	}
	slices.SortFunc(tiles, func(a, b image.Rectangle) int {
		if a.Min.Y != b.Min.Y {
			return a.Min.Y - b.Min.Y
		}
		return a.Min.X - b.Min.X
	})
	return tiles
}

// tile renders one tile, over all workers, and compares it with the file's
// rows.
func (v *verifier) tile(ctx context.Context, r image.Rectangle, rows []byte, d *Verdict) error {
	stride := v.rect.Dx() * BytesPerPixel
	diff := differ{rect: r}
	y := 0
	_, err := v.p.Bands(ctx, r, v.e.Origin.Pixels.Scale, Options{Workers: v.o.Workers}, func(again []byte) error {
		n := len(again) / (r.Dx() * BytesPerPixel)
		have := make([]byte, 0, len(again))
		for i := range n {
			start := (y+i)*stride + (r.Min.X-v.rect.Min.X)*BytesPerPixel
			have = append(have, rows[start:start+r.Dx()*BytesPerPixel]...)
		}
		y += n
		diff.compare(have, again)
		return nil
	})
	if err != nil {
		return err
	}
	d.Pixels += int64(r.Dx()) * int64(r.Dy())
	return v.altered(&diff, "")
}
