package frame

import (
	"math"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"
	"time"

	"leadline/palette"
	"leadline/render/sheet"
)

func TestDefaults(t *testing.T) {
	r, err := leastFrame().Resolve()
	if err != nil {
		t.Fatal(err)
	}
	if r.Kind != Mandelbrot || r.Power != 2 || r.Parameter != (Point{}) || r.Bailout != 1000 || r.Limit != 250000 {
		t.Errorf("iteration: %+v", r)
	}
	if r.Least != 4 || r.Most != 32 || r.Tolerance != 0.004 || r.Filter != Gaussian {
		t.Errorf("sampling: %d…%d at %g, %s", r.Least, r.Most, r.Tolerance, r.Filter)
	}
	want := ResolvedDrive{Scale: Log, Exponent: 1, Fit: Fit{0.5, 99.5}}
	if r.Drive != want {
		t.Errorf("drive %+v, want %+v", r.Drive, want)
	}
	if !reflect.DeepEqual(r.Ramp, palette.DefaultRamp()) || !r.Inside.Equal(palette.DefaultInside()) || r.Edge.Width != 0 {
		t.Errorf("ink: %+v, %v, %+v", r.Ramp, r.Inside, r.Edge)
	}
	if r.Turn.String() != "0deg" || r.Turn.Degrees() != 0 || r.Space != palette.SRGB || r.Baked != nil {
		t.Errorf("turn %v, space %v", r.Turn, r.Space)
	}
	// 600 x 400 mm at 300 ppi: 7086.6 x 4724.4; 5 mm are 59.06 px.
	if g := r.Sheet; g.TrimW != 7087 || g.TrimH != 4724 || g.Bleed != 0 || g.Margin != 59 || g.PixelsPerMetre != 11811 {
		t.Errorf("sheet: %+v", g)
	}
}

func TestGivenValues(t *testing.T) {
	f := fullFrame()
	r, err := f.Resolve()
	if err != nil {
		t.Fatal(err)
	}
	if r.Title != f.Title || r.Maker != f.Maker || r.Rights != f.Rights {
		t.Errorf("texts: %q %q %q", r.Title, r.Maker, r.Rights)
	}
	if r.Kind != Julia || r.Power != 3 || r.Parameter != *f.Set.Parameter || r.Centre != f.View.Centre ||
		r.Height != f.View.Height || r.Turn.Degrees() != -12.5 || r.Filter != Box {
		t.Errorf("set and view: %+v", r)
	}
	want := ResolvedDrive{Scale: Power, Exponent: 0.5, Offset: -1e-7, Fit: Fit{0.5, 99.5}, Fitted: f.Ink.Drive.Fitted}
	if r.Drive != want {
		t.Errorf("drive %+v, want %+v", r.Drive, want)
	}
	if len(r.Ramp.Stops) != 3 || r.Ramp.Smooth || r.Ramp.Stops[1].At != 0.25 || r.Ramp.Stops[1].Colour.String() != "oklch(0.8 0.15 160)" {
		t.Errorf("ramp %+v", r.Ramp)
	}
	if got, want := r.Edge.Width, 0.15*150/25.4; math.Abs(got-want) > 1e-15 { // 0.150mm at 150 ppi
		t.Errorf("edge %v px, want %v", got, want)
	}
	if r.Space != palette.DisplayP3 || r.Sheet.Bleed != 18 || r.Baked != f.Ink.Baked {
		t.Errorf("sheet %+v in %v", r.Sheet, r.Space)
	}
	f.Ink.Ramp.Smooth, f.Ink.Drive.Exponent = nil, 0
	if r, err = f.Resolve(); err != nil || !r.Ramp.Smooth || r.Drive.Exponent != DefaultExponent {
		t.Errorf("a ramp is smooth and a power scale a root unless told: %+v, %v", r, err)
	}
}

// A default for least or most gives way to the other.
func TestSampleBounds(t *testing.T) {
	for _, c := range [][4]int{{0, 0, 4, 32}, {1, 0, 1, 32}, {64, 0, 64, 64}, {0, 2, 2, 2}, {0, 16, 4, 16}, {8, 8, 8, 8}} {
		if least, most := (Sampling{Least: c[0], Most: c[1]}).bounds(); least != c[2] || most != c[3] {
			t.Errorf("%d…%d given: %d…%d, want %d…%d", c[0], c[1], least, most, c[2], c[3])
		}
	}
}

// What JSON cannot say Go can: these frames are refused by all three ways out.
func TestBadValuesInGo(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	cases := map[string]func(*Frame){
		"format":                   func(f *Frame) { f.Format = "" },
		"title":                    func(f *Frame) { f.Title = "\xff" },
		"set.kind":                 func(f *Frame) { f.Set.Kind = "" },
		"view.height":              func(f *Frame) { f.View.Height = mustDecimal("0") },
		"iteration.limit":          func(f *Frame) { f.Iteration.Limit = 0 },
		"iteration.bailout":        func(f *Frame) { f.Iteration.Bailout = nan },
		"sampling.tolerance":       func(f *Frame) { f.Sampling.Tolerance = &nan },
		"ink.drive.base":           func(f *Frame) { f.Ink.Drive.Base = &nan },
		"ink.drive.offset":         func(f *Frame) { f.Ink.Drive.Offset = &inf },
		"ink.drive.period":         func(f *Frame) { f.Ink.Drive.Fit, f.Ink.Drive.Fitted, f.Ink.Drive.Period = nil, nil, inf },
		"ink.drive.exponent":       func(f *Frame) { f.Ink.Drive.Exponent = nan },
		"ink.drive.fit.low":        func(f *Frame) { f.Ink.Drive.Fit.Low = nan },
		"ink.drive.fitted.high":    func(f *Frame) { f.Ink.Drive.Fitted.High = nan },
		"ink.ramp.stops":           func(f *Frame) { f.Ink.Ramp.Stops = nil },
		"ink.ramp.stops[1].at":     func(f *Frame) { f.Ink.Ramp.Stops[1].At = nan },
		"ink.edge.width":           func(f *Frame) { f.Ink.Edge.Width = sheet.Length{} },
		"ink.baked.space":          func(f *Frame) { f.Ink.Baked.Space = "" },
		"sheet.width":              func(f *Frame) { f.Sheet.Width = sheet.Length{} },
		"sheet.ppi":                func(f *Frame) { f.Sheet.PPI = -1 },
		"ink.ramp.stops[0].colour": func(f *Frame) { f.Ink.Ramp.Stops[0].Colour = palette.FromOKLab(nan, 0, 0) },
	}
	for path, spoil := range cases {
		f := fullFrame()
		spoil(f)
		if got := firstPath(f.Validate()); got != path {
			t.Errorf("%s: fault at %s: %v", path, got, f.Validate())
		}
		if b, err := f.Marshal(); err == nil || b != nil {
			t.Errorf("%s: written all the same", path)
		}
		if r, err := f.Resolve(); err == nil || r != nil {
			t.Errorf("%s: resolved all the same", path)
		}
	}
	if err := fullFrame().Validate(); err != nil {
		t.Errorf("the frame before it was spoilt: %v", err)
	}
	s := fullSidecar()
	s.Run.Started = time.Date(12345, 1, 1, 0, 0, 0, 0, time.UTC)
	s.Record.SHA256 = ""
	if _, err := s.Marshal(); err == nil || !strings.Contains(err.Error(), "run.started") || firstPath(err) != "record.sha256" {
		t.Errorf("a sidecar of the year 12345: %v", err)
	}
}

// A colour that was computed has no text of its own and still comes back as
// exactly itself.
func TestComputedColour(t *testing.T) {
	f := leastFrame()
	f.Ink.Inside = new(palette.FromOKLab(1.0/3, -0.1, 0.07))
	back, err := Parse(mustMarshal(t, f))
	if err != nil || !back.Ink.Inside.Equal(*f.Ink.Inside) {
		t.Errorf("%v came back as %v, %v", f.Ink.Inside, back, err)
	}
}

func TestTurn(t *testing.T) {
	for s, want := range map[string]float64{"0deg": 0, "-0deg": 0, "90deg": 90, "-12.50deg": -12.5, "360deg": 360,
		"-360.000deg": -360, "0.1deg": 0.1, "359.999999999999999999999deg": 360} {
		v, err := ParseTurn(s)
		if err != nil || v.Degrees() != want || v.String() != s || math.Signbit(v.Degrees()) != (want < 0) {
			t.Errorf("%s: %v, %v, %v", s, v.Degrees(), v, err)
		}
	}
	for _, s := range []string{"", "deg", "0", "90 deg", "+1deg", "1e2deg", "01deg", "1.deg", ".5deg", "360.1deg",
		"-361deg", "NaNdeg", "Infdeg", "1rad", "90deg\n", "0." + strings.Repeat("1", 31) + "deg"} {
		v, err := ParseTurn(s)
		if err == nil || !v.IsZero() || hintOf(err) == "" {
			t.Errorf("%q: %v, %v", s, v, err)
		}
	}
}

func TestLoad(t *testing.T) {
	for name, m := range examples() {
		doc, err := Load(filepath.Join("testdata", name))
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		got := marshaler(doc.Frame)
		if doc.Sidecar != nil {
			got = doc.Sidecar
			if doc.Frame != &doc.Sidecar.Frame {
				t.Errorf("%s: the frame is not the sidecar's", name)
			}
		}
		if string(mustMarshal(t, got)) != string(mustMarshal(t, m)) {
			t.Errorf("%s: another document", name)
		}
	}
	dir := t.TempDir()
	big, bad := filepath.Join(dir, "big"), filepath.Join(dir, "bad")
	if err := os.WriteFile(big, make([]byte, MaxDocument+2), 0o600); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(bad, []byte(`{"format": "leadline.frame/1"}`), 0o600); err != nil {
		t.Fatal(err)
	}
	for path, word := range map[string]string{big: "larger than", bad: bad, dir: "reading a document",
		filepath.Join(dir, "none"): "no such file"} {
		if doc, err := Load(path); err == nil || doc != nil || !strings.Contains(err.Error(), word) {
			t.Errorf("%s: %v, %v", path, doc, err)
		}
	}
	_, err := Load(big)
	if !strings.Contains(hintOf(err), "right file") {
		t.Errorf("the hint is lost on the way: %q", hintOf(err))
	}
}
