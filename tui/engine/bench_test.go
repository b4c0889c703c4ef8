package engine

import (
	"fmt"
	"testing"

	"leadline/palette"
	"leadline/render"
	"leadline/render/frame"
)

var benchNames = []string{"gull-archipelago", "barnacle-lamp", "undertow", "samphire-star"}

// BenchmarkFirstPaint is what stands between a key and the first picture:
// Carry from a dozen pictures and Colours, on one core.
func BenchmarkFirstPaint(b *testing.B) {
	for _, name := range benchNames {
		f := load(b, name)
		w, h := geometry(b, f)
		var old []*Picture
		for i := range keptPictures {
			g := moved(b, f, render.Move{X: w / 2, Y: h / 2, Zoom: 1 / (1 + float64(i)/2)})
			old = append(old, numbered(b, g, size(200, 120)))
		}
		r := Request{Frame: moved(b, f, render.Move{X: 0.6 * w, Y: 0.4 * h, Zoom: 1.5, Turn: 5}), Size: size(200, 120)}
		b.Run("carry/"+name, func(b *testing.B) {
			for b.Loop() {
				Carry(old, r)
			}
		})
		p := Carry(old, r)
		b.Run("colours/"+name, func(b *testing.B) {
			for b.Loop() {
				k, err := NewInker(f, p)
				if err != nil {
					b.Fatal(err)
				}
				k.Colours(p)
			}
		})
	}
}

// BenchmarkWhole is a whole picture of 200 x 120 samples: from nothing, and of a
// view beside the last, around the same reference.
func BenchmarkWhole(b *testing.B) {
	for _, name := range benchNames {
		f := load(b, name)
		w, h := geometry(b, f)
		b.Run("fresh/"+name, func(b *testing.B) {
			for b.Loop() {
				d := newDesk(b)
				p, _ := d.finish(b, Request{Frame: f, Size: size(200, 120), Pinned: true})
				b.ReportMetric(p.Seconds/24000*1e6, "µs/sample")
				d.Close()
			}
		})
		b.Run("beside/"+name, func(b *testing.B) {
			d := newDesk(b)
			d.finish(b, Request{Frame: f, Size: size(200, 120), Pinned: true})
			i := 0
			for b.Loop() {
				i++
				g := moved(b, f, render.Move{X: w/2 + float64(i%7)*100, Y: h / 2, Zoom: 1 + float64(i%5)*0.1})
				d.finish(b, Request{Frame: g, Size: size(200, 120), Pinned: true})
			}
		})
	}
}

// BenchmarkRecolour is a change of the ink: baking, fitting and colouring 24,000
// samples.
func BenchmarkRecolour(b *testing.B) {
	f := load(b, "gull-archipelago")
	p := painted(b, f, 200, 120)
	for _, scale := range []frame.Scale{frame.Log, frame.Power} {
		for _, space := range []string{"srgb", "display-p3"} {
			b.Run(fmt.Sprint(scale, "/", space), func(b *testing.B) {
				i := 0
				for b.Loop() {
					i++
					g := f.Clone()
					g.Sheet.Space = space
					g.Ink.Drive.Scale = scale
					g.Ink.Ramp = &frame.Ramp{Stops: []frame.Stop{{At: 0, Colour: palette.FromOKLCH(0.2, 0.05, float64(i%360))},
						{At: 0.4, Colour: palette.FromOKLCH(0.6, 0.2, float64((i+100)%360))}, {At: 1, Colour: palette.MustColour("#f0e8d8")}}}
					k, err := NewInker(g, p)
					if err != nil {
						b.Fatal(err)
					}
					k.Colours(p)
				}
			})
		}
	}
}
