package parts

import (
	"errors"
	"image"
	"testing"
)

// TestCutCoversEveryRowOnce: the stripes follow each other without gap or
// overlap, none is empty, and none is much higher than another.
func TestCutCoversEveryRowOnce(t *testing.T) {
	for _, height := range []int{1, 2, 7, 63, 64, 65, 512, 513, 1000, 4097, 40_003} {
		for _, n := range []int{1, 2, 3, 7, 8, 40, 63, 64, 625, 626, 1000, MaxParts} {
			if n > height {
				continue
			}
			r := image.Rect(-35, -17, 100, height-17)
			y, least, most := r.Min.Y, height, 0
			for i, s := range Cut(r, n) {
				if s.Min.X != r.Min.X || s.Max.X != r.Max.X || s.Min.Y != y || s.Empty() {
					t.Fatalf("%d rows in %d: stripe %d is %v, should begin at row %d", height, n, i+1, s, y)
				}
				y = s.Max.Y
				least, most = min(least, s.Dy()), max(most, s.Dy())
			}
			if y != r.Max.Y {
				t.Fatalf("%d rows in %d: the last ends at %d", height, n, y)
			}
			aligned := (height+63)/64 >= 8*n
			if !aligned && most-least > 1 {
				t.Errorf("%d rows in %d: from %d to %d rows", height, n, least, most)
			}
			if aligned && most-least >= 2*64 { // one band, and the last band's missing rows
				t.Errorf("%d rows in %d: from %d to %d rows", height, n, least, most)
			}
		}
	}
}

// TestCutsRunBetweenBands, where there are eight bands a part.
func TestCutsRunBetweenBands(t *testing.T) {
	r := image.Rect(0, -5, 10, 64*80-5)
	for n := 1; n <= 10; n++ {
		for i, s := range Cut(r, n) {
			if (s.Min.Y-r.Min.Y)%64 != 0 {
				t.Errorf("stripe %d of %d begins at %d, inside a band", i+1, n, s.Min.Y)
			}
		}
	}
}

// TestCutOfTheTallest: the height of a PNG, times the parts, leaves 32 bits.
func TestCutOfTheTallest(t *testing.T) {
	const height = 1<<31 - 1 // PNG, third edition, 7.1
	y := 0
	for _, s := range Cut(image.Rect(0, 0, 1, height), MaxParts) {
		if s.Min.Y != y || s.Empty() {
			t.Fatalf("%v after row %d", s, y)
		}
		y = s.Max.Y
	}
	if y != height {
		t.Errorf("ends at %d", y)
	}
}

func TestParseWhich(t *testing.T) {
	for s, want := range map[string]Which{"1/1": {1, 1}, "7/40": {7, 40}, "0007/0040": {7, 40}, "9999/9999": {9999, 9999}} {
		if got, err := ParseWhich(s); got != want || err != nil {
			t.Errorf("%q is %v, %v", s, got, err)
		}
	}
	for _, s := range []string{"", "/", "7", "7/", "/40", "0/40", "41/40", "-1/40", "+1/40", "1/0", "1/10000", "1.0/2", " 1/2",
		"1/2/3", "7 of 40", "99999999999999999999/2"} {
		got, err := ParseWhich(s)
		var e *WhichError
		if !errors.As(err, &e) || e.Hint() == "" || got != (Which{}) {
			t.Errorf("%q is %v, %v", s, got, err)
		}
	}
	if got := (Which{7, 40}).name(); got != "part-0007-of-0040" {
		t.Errorf("named %s", got)
	}
}

// TestRanges: the form sbatch(1) gives for --array ("--array=0,6,16-32").
func TestRanges(t *testing.T) {
	for want, n := range map[string][]int{
		"": nil, "3": {3}, "3,5": {3, 5}, "3-4": {3, 4}, "1-3,7,9-10": {1, 2, 3, 7, 9, 10}, "0,6,16-18": {0, 6, 16, 17, 18},
	} {
		if got := Ranges(n); got != want {
			t.Errorf("%v is %q, not %q", n, got, want)
		}
	}
	e := &UndoneError{Missing: []int{2, 5}, Damaged: []int{1, 3, 9}}
	if got := Ranges(e.Todo()); got != "1-3,5,9" {
		t.Errorf("to do: %s", got)
	}
}
