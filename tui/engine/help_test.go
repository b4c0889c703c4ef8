package engine

import (
	"image"
	"math"
	"path/filepath"
	"sync"
	"testing"
	"time"

	"leadline/precision"
	"leadline/render"
	"leadline/render/frame"
	"leadline/render/kernel"
	"leadline/render/sheet"
)

// shared are the test frames at depths from 1e-8 to 1e-1195.
var shared = []string{"gull-archipelago", "barnacle-lamp", "undertow", "slack-water-pinwheel", "samphire-star"}

func load(t testing.TB, name string) *frame.Frame {
	t.Helper()
	d, err := frame.Load(filepath.Join("..", "..", "testdata", "frames", name+".frame.json"))
	if err != nil {
		t.Fatal(err)
	}
	return d.Frame
}

// whole is the whole set on a small sheet.
func wholeSet(t testing.TB) *frame.Frame {
	t.Helper()
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},
		"iteration":{"limit":1000},"sheet":{"width":"420mm","height":"297mm"}}`))
	if err != nil {
		t.Fatal(err)
	}
	return f
}

func moved(t testing.TB, f *frame.Frame, m render.Move) *frame.Frame {
	t.Helper()
	g, err := render.Moved(f, m)
	if err != nil {
		t.Fatal(err)
	}
	return g
}

func geometry(t testing.TB, f *frame.Frame) (w, h float64) {
	t.Helper()
	g, err := f.Sheet.Geometry()
	if err != nil {
		t.Fatal(err)
	}
	return float64(g.TrimW), float64(g.TrimH)
}

// desk collects what an engine sends.
type desk struct {
	*Engine
	mu   sync.Mutex
	got  []*Picture
	more chan struct{}
}

func newDesk(t testing.TB) *desk {
	d := &desk{more: make(chan struct{}, 1)}
	d.Engine = New(func(p *Picture) {
		d.mu.Lock()
		d.got = append(d.got, p)
		d.mu.Unlock()
		select {
		case d.more <- struct{}{}:
		default:
		}
	})
	t.Cleanup(d.Close)
	return d
}

// take hands over what has come so far.
func (d *desk) take() []*Picture {
	d.mu.Lock()
	defer d.mu.Unlock()
	got := d.got
	d.got = nil
	return got
}

// wait is everything sent up to the first picture of a request for which ok.
func (d *desk) wait(t testing.TB, r Request, ok func(*Picture) bool) (p *Picture, all []*Picture) {
	t.Helper()
	late := time.After(60 * time.Second)
	for {
		got := d.take()
		for i, p := range got {
			all = append(all, p)
			if p.Request == r && ok(p) {
				d.mu.Lock()
				d.got = append(got[i+1:], d.got...)
				d.mu.Unlock()
				return p, all
			}
		}
		select {
		case <-d.more:
		case <-late:
			t.Fatal("no such picture came within a minute")
		}
	}
}

// finish shows a request and waits for the whole picture.
func (d *desk) finish(t testing.TB, r Request) (*Picture, []*Picture) {
	t.Helper()
	d.Show(r)
	p, all := d.wait(t, r, func(p *Picture) bool { return p.Whole || p.Err != nil })
	if p.Err != nil {
		t.Fatal(p.Err)
	}
	return p, all
}

// probe is a plan of a picture's frame with its limit, made as the print makes it.
func probe(t testing.TB, p *Picture) *render.Plan {
	t.Helper()
	plan, err := render.NewProbe(t.Context(), withLimit(p.Frame, p.Limit), render.Options{Workers: 2})
	if err != nil {
		t.Fatal(err)
	}
	return plan
}

// shift is what a reference of another view may move a sample by, in pixels.
const shift = 0x1p-19

// holds compares a picture with the print's own fields at its lattice points:
// bit for bit, or, around another view's reference, but for a shift. Whether a
// point that does not escape is proved inside may turn on the last bit.
func holds(t *testing.T, p *Picture, exactly bool) {
	t.Helper()
	plan := probe(t, p)
	power := math.Log(float64(power(p.Frame.Set)))
	bad := 0
	for k, f := range p.Fields {
		if p.From[k] != Computed {
			t.Fatalf("sample %d of a whole picture is not its own", k)
		}
		x, y := p.At(k%p.Size.X, k/p.Size.X)
		want := plan.Field(x, y)
		same := f == want
		if !exactly && f.State != kernel.Escaped {
			same = want.State != kernel.Escaped
		} else if !exactly && want.State == kernel.Escaped {
			slack := shift/(power*want.Distance) + want.Smooth*0x1p-44
			margin := math.Min(want.Smooth-float64(want.N), float64(want.N+1)-want.Smooth)
			same = math.Abs(f.Smooth-want.Smooth) <= slack && (f.N == want.N || margin <= slack)
		}
		if !same {
			if bad++; bad < 4 {
				t.Errorf("%v, %v: %+v, the print has %+v", x, y, f, want)
			}
		}
	}
	if bad > 0 {
		t.Errorf("%d of %d samples differ", bad, len(p.Fields))
	}
}

func size(x, y int) image.Point { return image.Pt(x, y) }

func decimal(t testing.TB, s string) precision.Decimal {
	t.Helper()
	d, err := precision.ParseDecimal(s)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

func length(t testing.TB, s string) sheet.Length {
	t.Helper()
	return sheet.MustLength(s)
}
