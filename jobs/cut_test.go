package jobs

import (
	"image"
	"testing"
	"time"
)

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
