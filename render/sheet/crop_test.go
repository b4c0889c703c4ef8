package sheet

import (
	"errors"
	"image"
	"strings"
	"testing"
)

func TestParseCrop(t *testing.T) {
	g := build(t, "100px", "80px", "10px", "0px", 300)
	good := map[string]image.Rectangle{
		"0,0,100,80":        g.Trim(),
		"-10,-10,120,100":   g.Full(),
		"5,6,1,1":           image.Rect(5, 6, 6, 7),
		"109,89,1,1":        image.Rect(109, 89, 110, 90),
		"-10,89,120,1":      image.Rect(-10, 89, 110, 90),
		"00000000,0,0001,1": image.Rect(0, 0, 1, 1),
	}
	for s, want := range good {
		got, err := g.ParseCrop(s)
		if err != nil || got != want {
			t.Errorf("%q: %v, %v, want %v", s, got, err, want)
		}
		if again, err := g.ParseCrop(FormatCrop(got)); err != nil || again != got {
			t.Errorf("%q written as %q reads as %v, %v", s, FormatCrop(got), again, err)
		}
	}
	bad := []string{"", "1,2,3", "1,2,3,4,5", "1,2,3,x", "1, 2,3,4", "1.5,2,3,4", "+1,2,3,4", "0,0,0,5",
		"0,0,5,0", "0,0,-5,5", "-11,0,5,5", "0,-11,5,5", "110,0,1,1", "0,0,111,5", "0,0,5,91",
		"2147483647,0,2147483647,1", "-2147483648,0,2147483647,1", "99999999999999999999,0,1,1",
		"0x1,0,1,1", "1_0,0,1,1", strings.Repeat("1,", 1<<20)}
	for _, s := range bad {
		r, err := g.ParseCrop(s)
		var ce *CropError
		if !errors.As(err, &ce) || !strings.Contains(ce.Hint(), "-10,-10,120,100") || !r.Empty() {
			t.Errorf("%q: %v, %v", brief(s), r, err)
		} else if len(ce.Error()) > 120 {
			t.Errorf("%q: message of %d bytes", brief(s), len(ce.Error()))
		}
	}
}

func TestParseScale(t *testing.T) {
	for s, want := range map[string]int{"1": 1, "1/1": 1, "1/8": 8, "1/4096": 4096} {
		if k, err := ParseScale(s); err != nil || k != want {
			t.Errorf("%q: %d, %v", s, k, err)
		}
	}
	for _, s := range []string{"", "0", "1/", "1/0", "1/-8", "1/+8", "2/8", "8", "0.125", "1/08", "1/4097",
		"1/99999999999", "1/8x", "1/ 8"} {
		k, err := ParseScale(s)
		var se *ScaleError
		if !errors.As(err, &se) || se.Hint() == "" || k != 0 {
			t.Errorf("%q: %d, %v", s, k, err)
		}
	}
}

func FuzzCrop(f *testing.F) {
	for _, s := range []string{"0,0,1,1", "-10,-10,120,100", "1,2,3", "2147483647,0,1,1"} {
		f.Add(s)
	}
	g, err := New(MustLength("100px"), MustLength("80px"), MustLength("10px"), Length{}, 300)
	if err != nil {
		f.Fatal(err)
	}
	f.Fuzz(func(t *testing.T, s string) {
		r, err := g.ParseCrop(s)
		if err == nil && (r.Empty() || !r.In(g.Full())) {
			t.Fatalf("%q gave %v", s, r)
		}
	})
}
