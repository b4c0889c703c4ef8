package frame

import (
	"bytes"
	"encoding/json"
	"flag"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"leadline/palette"
	"leadline/precision"
	"leadline/render/sheet"
)

var update = flag.Bool("update", false, "rewrite the documents in testdata")

// leastFrame has what a frame must have and nothing more.
func leastFrame() *Frame {
	return &Frame{
		Format:    Format,
		Set:       Set{Kind: Mandelbrot},
		View:      View{Centre: Point{mustDecimal("-0.75"), mustDecimal("0.0")}, Height: mustDecimal("2.5")},
		Iteration: Iteration{Limit: 250000},
		Sheet:     Sheet{Width: sheet.MustLength("600mm"), Height: sheet.MustLength("400mm")},
	}
}

// mustTurn is ParseTurn for the tests' own texts.
func mustTurn(s string) Turn {
	t, err := ParseTurn(s)
	if err != nil {
		panic(err)
	}
	return t
}

// fullFrame gives every key a frame can have but the period, which excludes
// the fit.
func fullFrame() *Frame {
	f := leastFrame()
	f.Title, f.Maker, f.Rights = `Kelp stair, plate 4 <& "proof">`, "Añna Ōe", "© the maker"
	f.Set = Set{Kind: Julia, Power: 3, Parameter: &Point{mustDecimal("-0.4"), mustDecimal("6e-1")}}
	f.View = View{
		Centre: Point{mustDecimal("-1.7499999999999999999999999999999999999999999"), mustDecimal("1.0E-30")},
		Height: mustDecimal("2.50e-41"), Turn: mustTurn("-12.50deg"),
	}
	f.Iteration.Bailout = 1000
	f.Sampling = Sampling{Least: 4, Most: 32, Tolerance: new(0.004), Filter: Box}
	f.Ink = Ink{
		Ramp: &Ramp{Stops: []Stop{
			{0, palette.MustColour("#0b1d2a")},
			{0.25, palette.MustColour("oklch(0.8 0.15 160)")},
			{1, palette.MustColour("color(display-p3 1 0.5 0)")},
		}, Smooth: new(false)},
		Drive: Drive{
			Scale: Power, Exponent: 0.5, Base: new(0.0), Offset: new(-1e-7),
			Fit: &Fit{0.5, 99.5}, Fitted: &Fitted{1234.5, 0.1, 7.25},
		},
		Inside: new(palette.MustColour("Black")),
		Edge:   &Edge{sheet.MustLength("0.150mm"), palette.MustColour("#FFF")},
		Baked:  &Baked{Space: "display-p3", Inside: [3]uint16{1, 2, 65535}, Edge: &[3]uint16{0, 0, 9}},
	}
	for i := range f.Ink.Baked.Ramp {
		f.Ink.Baked.Ramp[i] = [3]uint16{uint16(i * 64), uint16(65535 - i*64), uint16(i * i)}
	}
	f.Sheet = Sheet{
		Width: sheet.MustLength("23.5in"), Height: sheet.MustLength("40.0cm"), PPI: 150,
		Bleed: sheet.MustLength("18px"), Safe: sheet.MustLength("5mm"), Space: "display-p3",
	}
	return f
}

// periodFrame is the other branch: a period in place of a fit.
func periodFrame() *Frame {
	f := leastFrame()
	f.Ink.Drive = Drive{Scale: Linear, Period: 40}
	f.Ink.Baked = &Baked{Space: "srgb"}
	return f
}

// fullSidecar gives every key a sidecar can have.
func fullSidecar() *Sidecar {
	return &Sidecar{
		Format: SidecarFormat,
		Frame:  *fullFrame(),
		Record: Record{
			Release: "1.0.0", Numerics: 1, File: "kelp-stair.png",
			Pixels: Pixels{-18, -18, 3561, 2398, 1},
			SHA256: strings.Repeat("0123456789abcdef", 4),
			Reference: Reference{
				Kind: Nucleus, Re: new(mustDecimal("-1.75")), Im: new(mustDecimal("0")),
				Period: 213, Length: 213, Bits: 232,
			},
			Geometry: Geometry{3525, 2362, 18},
			Counts:   Counts{8539278, 40000000, 39999000, 900, 100},
			Audit:    Audit{256, 255, 1, 250, 250, 5, 0},
		},
		Run: &Run{
			Started: time.Date(2026, 5, 4, 10, 11, 12, 500e6, time.UTC), Host: "press",
			Seconds: Seconds{0.09, 0.01, 6.8, 0.2, 0.3, 1.5, 8.9}, Workers: 7, Peak: 123456789,
			Queue: &Queued{Workers: 3, Tiles: 400, Attempts: 409, Rescued: 7, Seconds: 1234.5},
		},
	}
}

// leastSidecar leaves out everything a sidecar can do without.
func leastSidecar() *Sidecar {
	s := fullSidecar()
	s.Frame = *periodFrame()
	s.Record.Reference = Reference{Kind: NoReference}
	s.Run = nil
	return s
}

// marshaler is a frame or a sidecar.
type marshaler interface{ Marshal() ([]byte, error) }

// examples are the documents of testdata by name.
func examples() map[string]marshaler {
	return map[string]marshaler{
		"least.frame.json": leastFrame(), "full.frame.json": fullFrame(), "period.frame.json": periodFrame(),
		"full.sidecar.json": fullSidecar(), "least.sidecar.json": leastSidecar(),
	}
}

// mustMarshal is Marshal for examples.
func mustMarshal(t testing.TB, m marshaler) []byte {
	t.Helper()
	b, err := m.Marshal()
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// again reads a document and writes it, as a frame or a sidecar.
func again(data []byte) ([]byte, error) {
	doc, err := ParseAny(data)
	if err != nil {
		return nil, err
	}
	if doc.Sidecar != nil {
		return doc.Sidecar.Marshal()
	}
	return doc.Frame.Marshal()
}

// The canonical form is pinned by the files; a change of a byte shows here.
func TestExamplesAreCanonical(t *testing.T) {
	for name, m := range examples() {
		got := mustMarshal(t, m)
		path := filepath.Join("testdata", name)
		if *update {
			if err := os.WriteFile(path, got, 0o644); err != nil {
				t.Fatal(err)
			}
		}
		want, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(got, want) {
			t.Errorf("%s: written\n%s\nwant\n%s", name, got, want)
		}
		if back, err := again(want); err != nil || !bytes.Equal(back, want) {
			t.Errorf("%s: does not come back the same (%v)", name, err)
		}
	}
}

// Any JSON spelling of a document is written in the one canonical form, and
// what was absent stays absent.
func TestOtherSpellings(t *testing.T) {
	for name, m := range examples() {
		want := mustMarshal(t, m)
		var loose bytes.Buffer
		if err := json.Compact(&loose, want); err != nil {
			t.Fatal(err)
		}
		spellings := map[string][]byte{
			"compact":  loose.Bytes(),
			"escaped":  escapeSome(loose.Bytes()),
			"reversed": edited(t, want), // by way of a map: keys in alphabetical order
		}
		for how, s := range spellings {
			if got, err := again(s); err != nil || !bytes.Equal(got, want) {
				t.Errorf("%s, %s: %v\n%s", name, how, err, got)
			}
		}
	}
}

// escapeSome writes every lower-case m inside the document as \u006d; JSON
// gives both the same meaning inside strings, and m stands nowhere else.
func escapeSome(b []byte) []byte { return bytes.ReplaceAll(b, []byte("m"), []byte(`\u006d`)) }

// Numbers have one form whatever their spelling.
func TestNumberForms(t *testing.T) {
	base := mustMarshal(t, fullFrame())
	for spelt, want := range map[string]string{
		"4e-3": "0.004", "0.0040": "0.004", "1E0": "1", "1.0": "1", "-0": "0", "-0.0": "0", "0e5": "0", "1e-400": "0",
		"0.1000000000000000055511151231257827": "0.1", "0.0000001": "1e-7",
	} {
		got, err := again(edited(t, base, "sampling.tolerance", spelt))
		if err != nil || !bytes.Contains(got, []byte(`"tolerance": `+want+",")) {
			t.Errorf("%s: %v, not written as %s", spelt, err, want)
		}
	}
	got, err := again(edited(t, base, "iteration.limit", "2.5e5"))
	if err != nil || !bytes.Contains(got, []byte(`"limit": 250000`)) {
		t.Errorf("2.5e5 iterations: %v", err)
	}
}

// edited is a document with the values at some paths replaced by JSON text;
// an empty text takes the key out. The path's objects must be there. Keys come
// out in alphabetical order.
func edited(t testing.TB, doc []byte, pathsAndValues ...string) []byte {
	t.Helper()
	var tree map[string]any
	dec := json.NewDecoder(bytes.NewReader(doc))
	dec.UseNumber()
	if err := dec.Decode(&tree); err != nil {
		t.Fatal(err)
	}
	for i := 0; i < len(pathsAndValues); i += 2 {
		keys := strings.Split(pathsAndValues[i], ".")
		at := tree
		for _, k := range keys[:len(keys)-1] {
			next, ok := at[k].(map[string]any)
			if !ok {
				next = map[string]any{}
				at[k] = next
			}
			at = next
		}
		last := keys[len(keys)-1]
		if v := pathsAndValues[i+1]; v == "" {
			delete(at, last)
		} else {
			at[last] = json.RawMessage(v)
		}
	}
	b, err := json.Marshal(tree)
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func TestClone(t *testing.T) {
	f := fullFrame()
	before := mustMarshal(t, f)
	g := f.Clone()
	if !bytes.Equal(mustMarshal(t, g), before) {
		t.Fatal("a clone is written otherwise")
	}
	g.Set.Parameter.Re = precision.Decimal{}
	*g.Sampling.Tolerance = 1
	g.Ink.Ramp.Stops[0].At, *g.Ink.Ramp.Smooth = 0.125, true
	*g.Ink.Drive.Base, *g.Ink.Drive.Offset = 5, 5
	g.Ink.Drive.Fit.Low, g.Ink.Drive.Fitted.Base = 5, 5
	*g.Ink.Inside, g.Ink.Edge.Width = palette.MustColour("red"), sheet.MustLength("1mm")
	g.Ink.Baked.Ramp[0][0], g.Ink.Baked.Edge[0] = 99, 99
	if !bytes.Equal(mustMarshal(t, f), before) {
		t.Error("changing a clone changed the frame")
	}
	if least := leastFrame(); !bytes.Equal(mustMarshal(t, least.Clone()), mustMarshal(t, least)) {
		t.Error("the clone of a least frame is written otherwise")
	}
}

func TestFrozen(t *testing.T) {
	f := fullFrame()
	if !f.Frozen() || !periodFrame().Frozen() || leastFrame().Frozen() {
		t.Error("frozen frames are those with baked ink and a period or fitted numbers")
	}
	f.Ink.Drive.Fitted = nil
	if f.Frozen() {
		t.Error("a frame without fitted numbers counts as frozen")
	}
}
