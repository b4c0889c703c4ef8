package inking

import (
	"math"
	"testing"

	"leadline/palette"
	"leadline/render/frame"
	"leadline/render/ink"
)

// A colour with less chroma than the limit lies in the space, one with more
// does not: for every space, over lightness and hue. Spaces have dents, so what
// lies far beyond is no business of the limit.
func TestChromaLimit(t *testing.T) {
	for _, space := range palette.Spaces() {
		for l := 0.1; l < 0.95; l += 0.1 {
			for h := 0.0; h < 360; h += 15 {
				m := mix{v: [3]float64{l, 0.1, h}}
				c := m.limit(space)
				if _, in := m.at(sliderC, c-1e-6).In(space); !in && c > 1e-6 {
					t.Errorf("%v, L %.1f, h %.0f: just below %.5f is outside", space, l, h, c)
				}
				if _, in := m.at(sliderC, c+1e-6).In(space); in && c < mostLimit {
					t.Errorf("%v, L %.1f, h %.0f: just above %.5f is inside", space, l, h, c)
				}
			}
		}
	}
}

// The sliders know every colour they make, keep the hue of a grey, go round
// with the hue and stop at their other ends.
func TestMix(t *testing.T) {
	m := mixOf(palette.MustColour("#a0522d"), mix{})
	grey := m.with(sliderC, 0)
	if grey.v[sliderH] != m.v[sliderH] || mixOf(grey.of, grey) != grey {
		t.Errorf("a grey's hue is %v, was %v", grey.v[sliderH], m.v[sliderH])
	}
	if back := grey.with(sliderC, 0.1); math.Abs(back.v[sliderH]-m.v[sliderH]) > 0.01 {
		t.Errorf("with chroma again the hue is %v", back.v[sliderH])
	}
	for _, c := range []struct {
		slider   int
		to, want float64
	}{{sliderL, -1, 0}, {sliderL, 2, 1}, {sliderC, 7, maxChroma}, {sliderH, 361, 1}, {sliderH, -3, 357}, {sliderH, 359.9, 0}, {sliderL, 0.5009, 0.5}} {
		if got := m.with(c.slider, c.to).v[c.slider]; math.Abs(got-c.want) > 1e-9 {
			t.Errorf("slider %d at %v stands at %v, want %v", c.slider, c.to, got, c.want)
		}
	}
	for l := 0.0; l <= 1; l += 0.125 {
		w := written(l, 0.0725, 201.25)
		got := mixOf(w, mix{}).v
		if math.Abs(got[0]-l) > 1e-9 || math.Abs(got[1]-0.0725) > 1e-9 || math.Abs(got[2]-201.25) > 1e-6 {
			t.Errorf("%s reads back as %v", w, got)
		}
	}
}

// A split leaves the colours of a straight ramp as they are, nearly: a stop's
// four decimals of OKLCH are finer than a 16-bit print shows.
func TestSplitKeepsColours(t *testing.T) {
	r := palette.DefaultRamp()
	r.Smooth = false
	for i := range len(r.Stops) {
		s, n, err := split(r, i)
		if err != nil || len(s.Stops) != len(r.Stops)+1 || s.Validate() != nil {
			t.Fatal(i, err)
		}
		if n <= 0 || n >= len(s.Stops)-1 {
			t.Errorf("a stop after %d has number %d", i, n)
		}
		for at := 0.0; at <= 1; at += 1.0 / 64 {
			if d := palette.DeltaE00(r.At(at), s.At(at)); d > 0.02 {
				t.Errorf("split at %d changes %.3f by ΔE00 %.3f", i, at, d)
			}
		}
	}
	full := palette.Ramp{}
	for i := range palette.MaxStops {
		full.Stops = append(full.Stops, palette.Stop{At: float64(i) / (palette.MaxStops - 1)})
	}
	if _, _, err := split(full, 3); err == nil {
		t.Error("a full ramp takes one more")
	}
	close := palette.Ramp{Stops: []palette.Stop{{At: 0}, {At: 1e-7}, {At: 1}}}
	if _, _, err := split(close, 0); err == nil {
		t.Error("a stop fits where there is no room")
	}
}

// Whatever is done to a ramp, it stays one that can be printed, and the ramp at
// hand stays as it was.
func TestRampsStayValid(t *testing.T) {
	for _, n := range palette.Ramps() {
		r := n.Ramp
		last := len(r.Stops) - 1
		out := map[string]palette.Ramp{"reversed": reversed(r), "tied": recoloured(r, 0, palette.MustColour("red"), true)}
		out["no first"], _ = without(r, 0)
		out["no last"], _ = without(r, last)
		out["no second"], _ = without(r, 1)
		out["far left"], _ = moved(r, 1, -4)
		out["far right"], _ = moved(r, last-1, 4)
		for name, o := range out {
			if err := o.Validate(); err != nil {
				t.Errorf("%s, %s: %v", n.Name, name, err)
			}
		}
		if tied := out["tied"]; !tied.Cyclic() {
			t.Errorf("%s: tied ends come apart", n.Name)
		}
		if again := reversed(reversed(r)); !sameRamp(again, r) {
			t.Errorf("%s is another when reversed twice", n.Name)
		}
		if before, _ := palette.RampByName(n.Name); !sameRamp(before, r) {
			t.Errorf("%s was changed in place", n.Name)
		}
	}
}

// A fitted ramp made to repeat shows between the fit's ends what it did: places
// by the shader differ by the four figures of period and offset alone.
func TestRepeatKeepsThePicture(t *testing.T) {
	fit := frame.Fitted{Base: 146, Low: 1.3137, High: 4.7777}
	d := frame.Drive{Scale: frame.Log}
	repeat(&d, fit)
	place := func(v frame.ResolvedDrive) *ink.Shader {
		return ink.New(&frame.Baked{}, v, frame.ResolvedEdge{}, palette.SRGB)
	}
	a := place(frame.ResolvedDrive{Scale: frame.Log, Exponent: 1, Fitted: &fit})
	b := place(frame.ResolvedDrive{Scale: frame.Log, Exponent: 1, Base: *d.Base, Period: d.Period, Offset: *d.Offset})
	for v := 150.0; v < 260; v++ {
		p, q := a.Place(v), b.Place(v)
		if p > 0 && p < 1 && math.Abs(p-q) > 5e-4 {
			t.Errorf("count %v falls on %v, then on %v", v, p, q)
		}
	}
	fitAgain(&d)
	if d != (frame.Drive{Scale: frame.Log}) {
		t.Errorf("fitted again it is %+v", d)
	}
}

// Another scale keeps the number of times a period goes round over the picture.
func TestRescaleKeepsTheTurns(t *testing.T) {
	f := testFrame(t, `"drive":{"scale":"linear","base":100,"period":20}`, "srgb")
	p := testPicture(t, f)
	turns := func(f *frame.Frame) float64 {
		r, err := f.Resolve()
		if err != nil {
			t.Fatal(err)
		}
		s := ink.Scale{Kind: r.Drive.Scale, Exponent: r.Drive.Exponent, Base: r.Drive.Base}
		return (s.Of(260) - s.Of(150)) / r.Drive.Period
	}
	before := turns(f)
	for _, to := range []frame.Scale{frame.Log, frame.Power} {
		g := f.Clone()
		r, _ := f.Resolve()
		rescale(&g.Ink, r, to, p)
		if got := turns(g); math.Abs(got/before-1) > 0.15 {
			t.Errorf("%s goes round %.2f times, was %.2f", to, got, before)
		}
	}
}

func TestGrown(t *testing.T) {
	for _, c := range []struct {
		v, share float64
		by       int
		want     float64
	}{{2.5, 0.1, 1, 2.75}, {2.75, 0.1, -1, 2.5}, {1000, 0.01, 1, 1010}, {1, 0.001, 1, 1.01}, {0, 0.1, 1, 0}, {3e-7, 0.1, 2, 3.63e-7}} {
		if got := grown(c.v, c.share, c.by); math.Abs(got-c.want) > 1e-12*c.want {
			t.Errorf("%v grown by %v, %d times, is %v, want %v", c.v, c.share, c.by, got, c.want)
		}
	}
}
