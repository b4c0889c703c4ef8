package jobs

import (
	"context"
	"encoding/binary"
	"fmt"
	"image"
	"sort"

	"leadline/palette"
	"leadline/render"
)

// thumbnailSide is the longer side of a print's thumbnail, in pixels, where the
// print has as many.
const thumbnailSide = 480

// reduction says how a print is made small: pixel i, j of its thumbnail shows
// the square of step pixels that begins at (i, j)·step.
type reduction struct {
	of   image.Rectangle // the print
	step int
}

func reduce(of image.Rectangle) reduction {
	return reduction{of, max(1, (max(of.Dx(), of.Dy())+thumbnailSide-1)/thumbnailSide)}
}

// size is the thumbnail's.
func (d reduction) size() image.Point {
	return image.Pt((d.of.Dx()+d.step-1)/d.step, (d.of.Dy()+d.step-1)/d.step)
}

// share is the part of the thumbnail that a tile shows: the squares whose
// middle lies in it.
func (d reduction) share(tile image.Rectangle) image.Rectangle {
	r, n := tile.Sub(d.of.Min), d.size()
	first := func(edge, count, length int) int {
		return sort.Search(count, func(i int) bool { return min(i*d.step+d.step/2, length-1) >= edge })
	}
	return image.Rect(first(r.Min.X, n.X, d.of.Dx()), first(r.Min.Y, n.Y, d.of.Dy()),
		first(r.Max.X, n.X, d.of.Dx()), first(r.Max.Y, n.Y, d.of.Dy()))
}

// look is a tile's share as 8-bit sRGB, row by row: the mean light of what each
// square has of the tile.
func (d reduction) look(c *render.Canvas, space palette.Space) []byte {
	share := d.share(c.Rect)
	b := make([]byte, 0, 3*share.Dx()*share.Dy())
	t := space.Transfer()
	for y := share.Min.Y; y < share.Max.Y; y++ {
		for x := share.Min.X; x < share.Max.X; x++ {
			at := d.of.Min.Add(image.Pt(x*d.step, y*d.step))
			square := image.Rectangle{at, at.Add(image.Pt(d.step, d.step))}.Intersect(c.Rect)
			light := palette.SRGB.FromXYZ(space.ToXYZ(mean(c, square, t)))
			for _, v := range light {
				b = append(b, byte(palette.SRGB.Encode(v)>>8))
			}
		}
	}
	return b
}

// mean is the mean light of a rectangle that is not empty.
func mean(c *render.Canvas, r image.Rectangle, t *palette.Transfer) (sum [3]float64) {
	for y := r.Min.Y; y < r.Max.Y; y++ {
		row := c.At(r.Min.X, y, r.Dx())
		for i := 0; i < len(row); i += render.BytesPerPixel {
			for j := range sum {
				sum[j] += t.Decode(binary.BigEndian.Uint16(row[i+2*j:]))
			}
		}
	}
	for j := range sum {
		sum[j] /= float64(r.Dx() * r.Dy())
	}
	return sum
}

// Thumbnail is a print as far as it is done, at most 480 pixels long: finished
// tiles are opaque, in sRGB, the rest is transparent. mark changes whenever the
// picture does. *NoPrintError where there is no such print.
func (q *Queue) Thumbnail(ctx context.Context, id int64) (img *image.NRGBA, mark string, err error) {
	o, err := load(ctx, q.e.read(), id, "")
	if err != nil {
		return nil, "", err
	}
	// The mark is taken first: it may be older than the picture, never newer.
	if mark, err = q.ThumbnailMark(ctx, id); err != nil {
		return nil, "", err
	}
	d, cut := reduce(o.rect), o.cut()
	img = image.NewNRGBA(image.Rectangle{Max: d.size()})
	err = each(ctx, q.e.read(), `SELECT idx, look FROM leadline_tile WHERE print = ? AND idx BETWEEN 0 AND ?
		AND state = 'done' AND look IS NOT NULL`, []any{id, cut.Count() - 1}, func(scan func(...any) error) error {
		var i int
		var look []byte
		if err := scan(&i, &look); err != nil {
			return err
		}
		place(img, d.share(cut.At(i)), look)
		return nil
	})
	return img, mark, err
}

// place copies a look into its share; one of another size is left out.
func place(img *image.NRGBA, share image.Rectangle, look []byte) {
	if len(look) != 3*share.Dx()*share.Dy() {
		return
	}
	for y := share.Min.Y; y < share.Max.Y; y++ {
		at := img.PixOffset(share.Min.X, y)
		for range share.Dx() {
			copy(img.Pix[at:], look[:3])
			img.Pix[at+3] = 0xff
			at, look = at+4, look[3:]
		}
	}
}

// ThumbnailMark is the mark of Thumbnail alone, which costs little.
func (q *Queue) ThumbnailMark(ctx context.Context, id int64) (string, error) {
	var n, tries int64
	err := one(ctx, q.e.read(), `SELECT count(*), cast(coalesce(sum(try), 0) as bigint) FROM leadline_tile
		WHERE print = ? AND state = 'done' AND idx >= 0`, []any{id}, &n, &tries)
	return fmt.Sprintf("%d-%d-%d", id, n, tries), err
}
