package main

import (
	"fmt"
	"image"
	"testing"

	"leadline/render"
)

func TestDefaultNames(t *testing.T) {
	crop := image.Rect(-4, 10, 30, 20)
	for _, c := range []struct {
		path     string
		numerics int
		o        render.PrintOptions
		want     string
	}{
		{"a/b/tide.frame.json", 0, render.PrintOptions{}, "tide.png"},
		{"tide.json", 0, render.PrintOptions{Scale: 1}, "tide.png"},
		{"tide.v2.frame.json", 0, render.PrintOptions{}, "tide.v2.png"},
		{"tide", 0, render.PrintOptions{Scale: 8}, "tide.scale-8.png"},
		{"tide.sidecar.json", render.Numerics, render.PrintOptions{Crop: &crop}, "tide.crop--4,10,34,10.png"},
		{"tide.scale-8.crop--4,10,34,10.png", render.Numerics, render.PrintOptions{}, "tide.png"},
		{"tide.crop-1,2,3.frame.json", 0, render.PrintOptions{}, "tide.crop-1,2,3.png"}, // not our ending
		{"tide.png.suspect", render.Numerics, render.PrintOptions{Scale: 2, Crop: &crop}, "tide.scale-2.crop--4,10,34,10.png"},
		{"tide.sidecar.json.suspect", render.Numerics, render.PrintOptions{}, "tide.png"},
		{"tide.numerics-1.png", render.Numerics, render.PrintOptions{}, "tide.png"},
		{"tide.png", render.Numerics + 1, render.PrintOptions{Scale: 2}, fmt.Sprintf("tide.numerics-%d.scale-2.png", render.Numerics)},
		{".frame.json", 0, render.PrintOptions{}, ".frame.png"},
	} {
		if got := defaultName(c.path, loaded{numerics: c.numerics}, c.o); got != c.want {
			t.Errorf("%s gives %s, not %s", c.path, got, c.want)
		}
	}
}

func TestPair(t *testing.T) {
	for s, want := range map[string][2]int{"1,2": {1, 2}, "-4,0": {-4, 0}, "007,1": {7, 1}} {
		if a, b, ok := pair(s, ","); !ok || a != want[0] || b != want[1] {
			t.Errorf("%q gives %d, %d, %v", s, a, b, ok)
		}
	}
	for _, s := range []string{"", ",", "1,", ",1", "1,2,3", "1, 2", "1x2", "1.0,2", "99999999999999999999,1"} {
		if a, b, ok := pair(s, ","); ok {
			t.Errorf("%q gives %d, %d", s, a, b)
		}
	}
}
