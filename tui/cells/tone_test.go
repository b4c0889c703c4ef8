package cells

import (
	"image"
	"strings"
	"testing"
)

// wash is a grey wash from black at the left to white at the right.
func wash(m Mesh, cols, rows int) Picture {
	p := NewPicture(cols, rows, m)
	for i := range p.Pix {
		v := uint8(i % p.W * 255 / (p.W - 1))
		p.Pix[i] = RGB{v, v, v}
	}
	return p
}

// TestBrightIsBright: along a wash the ink grows on a dark ground and shrinks on a
// light one, from none to most.
func TestBrightIsBright(t *testing.T) {
	line := Render(wash(Plain, 64, 1), Plain, None, Options{})[0]
	light := Render(wash(Plain, 64, 1), Plain, None, Options{Light: true})[0]
	for i := range line {
		ink, darker := strings.IndexByte(ramp, line[i]), strings.IndexByte(ramp, light[i])
		if ink < 0 || ink+darker < len(ramp)-2 || ink+darker > len(ramp) {
			t.Errorf("column %d: %q on dark, %q on light", i, line[i], light[i])
		}
		if i > 0 && ink < strings.IndexByte(ramp, line[i-1]) {
			t.Errorf("column %d: less ink than before in %q", i, line)
		}
	}
	if line[0] != ' ' || line[63] != '@' || light[0] != '@' || light[63] != ' ' {
		t.Errorf("ends: %q, %q", line, light)
	}
}

// TestScreenedWash: blocks without colour cover a growing share of a wash, none of
// black and all of white.
func TestScreenedWash(t *testing.T) {
	for _, m := range []Mesh{Half, Quadrant, Sextant} {
		p := NewPicture(8, 8, m)
		before := -1
		for v := 0; v < 256; v += 15 {
			for i := range p.Pix {
				p.Pix[i] = RGB{uint8(v), uint8(v), uint8(v)}
			}
			on := 0
			g := Draw(p, m, None, Options{Range: Range{0, 255}})
			for i := range 64 {
				a, parts := coverage(g.At(i%8, i/8).Rune)
				on += 12 * a / parts
			}
			if on < before || v == 0 && on != 0 || v == 255 && on != 12*64 {
				t.Errorf("%s: grey %d covers %d/768, the one before %d", m, v, on, before)
			}
			before = on
		}
	}
}

func TestMeasure(t *testing.T) {
	p := wash(Plain, 256, 4)
	r := p.Measure(nil)
	if r.Low > 30 || r.High < 250 {
		t.Errorf("the range of a full wash is %v", r)
	}
	grey := Picture{2, 1, []RGB{{99, 99, 99}, {100, 100, 100}}}
	if r := grey.Measure(nil); int(r.High)-int(r.Low) != leastSpan {
		t.Errorf("the range of a flat picture is %v", r)
	}
	right := &Mat{Sheet: image.Rect(200, 0, 256, 4)}
	if r := p.Measure(right); r.Low < 190 {
		t.Errorf("the range beside the mat is %v", r)
	}
	nothing := &Mat{}
	if r := p.Measure(nothing); int(r.High)-int(r.Low) < leastSpan {
		t.Errorf("the range of no samples is %v", r)
	}
	if r := (Picture{}).Measure(nil); r != (Range{}) {
		t.Errorf("the range of no picture is %v", r)
	}
}
