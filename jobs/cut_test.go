package jobs

import (
	"image"
	"testing"
	"time"
)

// TestCut covers every rectangle exactly once, in rows from the top.
func TestCut(t *testing.T) {
	for _, c := range []struct {
		r    image.Rectangle
		side int
	}{
		{image.Rect(0, 0, 48, 32), 16}, {image.Rect(-3, -3, 51, 35), 16}, {image.Rect(5, 7, 6, 8), 512},
		{image.Rect(0, 0, 1000, 700), 512}, {image.Rect(0, 0, 100, 3), 64}, {image.Rect(-9, 4, 100000, 300), 512},
	} {
		columns, lines := grid(c.r, c.side)
		area, at := 0, c.r.Min
		for i := range columns * lines {
			r := tileAt(c.r, c.side, i)
			if r.Min != at || r.Empty() || !r.In(c.r) || r.Dx()*r.Dy() > c.side*c.side {
				t.Fatalf("%v by %d: tile %d is %v, expected at %v", c.r, c.side, i, r, at)
			}
			if line := r.Dy() * c.r.Dx() * pixelBytes; line > bandBytes {
				t.Fatalf("%v by %d: a row of tiles takes %d bytes", c.r, c.side, line)
			}
			area += r.Dx() * r.Dy()
			if at.X = r.Max.X; at.X == c.r.Max.X {
				at = image.Pt(c.r.Min.X, r.Max.Y)
			}
		}
		if area != c.r.Dx()*c.r.Dy() || at.Y != c.r.Max.Y {
			t.Errorf("%v by %d: %d pixels of %d", c.r, c.side, area, c.r.Dx()*c.r.Dy())
		}
	}
}

// TestUsualSide has at least sharing tiles where the print allows it.
func TestUsualSide(t *testing.T) {
	for r, want := range map[image.Rectangle]int{
		image.Rect(0, 0, 48, 32):        64,  // the least, whatever the print
		image.Rect(0, 0, 1023, 1024):    64,  // a pixel column short of 64 tiles of 128
		image.Rect(0, 0, 1024, 1024):    128, // 64 tiles
		image.Rect(0, 0, 2048, 2048):    256,
		image.Rect(-9, -9, 14000, 9000): 512,
	} {
		if got := usualSide(r); got != want {
			t.Errorf("%v: %d, not %d", r, got, want)
		}
	}
}

// TestEstimate checks rate and time left by hand.
func TestEstimate(t *testing.T) {
	p := Progress{Pixels: 1000, Pixel: 400}
	p.estimate(4, 200, 20*time.Second, 4000, 4e6) // four tiles of a second each
	if p.Rate != 10 || p.Left != 60 || p.LeftLow != 60 || p.LeftHigh != 60 {
		t.Errorf("%+v", p)
	}
	p.estimate(4, 200, time.Hour, 4000, 5e6) // in the last minute; deviation a half of the mean
	if p.Rate != 200.0/60 || p.Left != 180 || p.LeftLow != 90 || p.LeftHigh != 270 {
		t.Errorf("%+v", p)
	}
	if p = (Progress{Pixels: 9}); true {
		p.estimate(0, 0, time.Second, 0, 0)
	}
	if p.Rate != 0 || p.Left != 0 {
		t.Errorf("%+v", p)
	}
}

func TestQueueNames(t *testing.T) {
	for release, want := range map[string]string{"0.1.0": "leadline-0-1-0-n3", "1.2.0-RC.1+x": "leadline-1-2-0-rc-1-x-n3"} {
		if got := queueName(release, 3); got != want {
			t.Errorf("%s: %s", release, got)
		}
	}
}
