package frame

import (
	"bytes"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"leadline/palette"
)

const smallRamp = `{
  "format": "leadline.ramp/1",
  "name": "Two stones",
  "smooth": false,
  "stops": [
    {
      "at": 0,
      "colour": "#0b1d2a"
    },
    {
      "at": 0.25,
      "colour": "oklch(0.6 0.1 210)"
    },
    {
      "at": 1,
      "colour": "ivory"
    }
  ]
}
`

// A ramp goes to its document and back to the same ramp and the same bytes.
func TestRampRoundTrip(t *testing.T) {
	r, err := ParseRamp([]byte(smallRamp))
	if err != nil {
		t.Fatal(err)
	}
	if r.Name != "Two stones" || r.Ramp.Smooth || len(r.Ramp.Stops) != 3 || r.Ramp.Stops[1].Colour.String() != "oklch(0.6 0.1 210)" {
		t.Errorf("read as %+v", r)
	}
	if doc, err := r.Marshal(); err != nil || string(doc) != smallRamp {
		t.Errorf("written as %s, %v", doc, err)
	}
	for _, n := range palette.Ramps() {
		doc, err := RampFile{n.Name, n.Ramp}.Marshal()
		if err != nil {
			t.Fatal(n.Name, err)
		}
		path := filepath.Join(t.TempDir(), "a"+RampSuffix)
		if err := os.WriteFile(path, doc, 0o600); err != nil {
			t.Fatal(err)
		}
		back, err := LoadRamp(path)
		if err != nil || !reflect.DeepEqual(*back, RampFile{n.Name, n.Ramp}) {
			t.Errorf("%s came back as %+v, %v", n.Name, back, err)
		}
	}
}

// A frame holds a ramp as a ramp's document does: the same colours and places.
func TestRampOfFrame(t *testing.T) {
	r, err := ParseRamp([]byte(smallRamp))
	if err != nil {
		t.Fatal(err)
	}
	f := leastFrame()
	f.Ink.Ramp = new(FromPalette(r.Ramp))
	v, err := f.Resolve()
	if err != nil || !reflect.DeepEqual(v.Ramp, r.Ramp) {
		t.Errorf("a frame resolves it to %+v, %v", v, err)
	}
	f.Ink.Ramp.Stops[0].At = 0.5
	if r.Ramp.Stops[0].At != 0 {
		t.Error("a frame's ramp shares its stops with the palette's")
	}
	if s := FromPalette(palette.DefaultRamp()).Smooth; s != nil {
		t.Errorf("smooth, the default, is written out as %v", *s)
	}
}

// Smooth is the default, a name is not needed, and the order of keys and the
// spaces between them mean nothing.
func TestRampDefaults(t *testing.T) {
	r, err := ParseRamp([]byte(`{"stops":[{"colour":"red","at":0},{"colour":"navy","at":1}],"format":"leadline.ramp/1"}`))
	if err != nil || !r.Ramp.Smooth || r.Name != "" {
		t.Fatalf("%+v, %v", r, err)
	}
	if doc, err := r.Marshal(); err != nil || bytes.Contains(doc, []byte("name")) {
		t.Errorf("written as %s, %v", doc, err)
	}
}

func TestBadRamps(t *testing.T) {
	const stops = `"stops":[{"at":0,"colour":"red"},{"at":1,"colour":"navy"}]`
	for _, c := range []struct{ name, doc, message, hint string }{
		{"nothing", ``, "not JSON", ""},
		{"a list", `[]`, "document is an array, not an object", ""},
		{"no format", `{` + stops + `}`, "format: is required", ""},
		{"a frame", `{"format":"leadline.frame/1",` + stops + `}`, "format: this is a frame, not a ramp", ""},
		{"another's", `{"format":"gradient/3",` + stops + `}`, `"gradient/3" is no format known here`, `write "leadline.ramp/1"`},
		{"newer", `{"format":"leadline.ramp/2",` + stops + `}`, "leadline.ramp/2 is newer", "use a newer release"},
		{"misspelt", `{"format":"leadline.ramp/1","smoth":true,` + stops + `}`, "smoth: unknown key", "did you mean smooth?"},
		{"twice", `{"format":"leadline.ramp/1",` + stops + `,` + stops + `}`, "stops: key is given twice", "keep one"},
		{"no stops", `{"format":"leadline.ramp/1"}`, "stops: is required", ""},
		{"one stop", `{"format":"leadline.ramp/1","stops":[{"at":0,"colour":"red"}]}`, "stops: has 1 entries, not from 2 to 256", ""},
		{"starts late", `{"format":"leadline.ramp/1","stops":[{"at":0.1,"colour":"red"},{"at":1,"colour":"navy"}]}`, "the first must be at 0", "repeat its colour at 0"},
		{"ends early", `{"format":"leadline.ramp/1","stops":[{"at":0,"colour":"red"},{"at":0.9,"colour":"navy"}]}`, "the last must be at 1", "repeat its colour at 1"},
		{"backwards", `{"format":"leadline.ramp/1","stops":[{"at":1,"colour":"red"},{"at":0,"colour":"navy"}]}`, "stops[1].at: 0 does not come after 1", "stops ascend"},
		{"beyond", `{"format":"leadline.ramp/1","stops":[{"at":0,"colour":"red"},{"at":1.5,"colour":"navy"}]}`, "stops[1].at: 1.5 is out of range", "from 0 to 1"},
		{"no colour", `{"format":"leadline.ramp/1","stops":[{"at":0,"colour":"redd"},{"at":1,"colour":"navy"}]}`, "stops[0].colour", "did you mean red?"},
		{"alpha", `{"format":"leadline.ramp/1","stops":[{"at":0,"colour":"#12345678"},{"at":1,"colour":"navy"}]}`, "has an alpha value", "opaque"},
		{"a place in quotes", `{"format":"leadline.ramp/1","stops":[{"at":"0","colour":"red"},{"at":1,"colour":"navy"}]}`, "stops[0].at: must be a number", "without quotation marks"},
		{"two lines of name", `{"format":"leadline.ramp/1","name":"a\nb",` + stops + `}`, "name: holds a control character", "one plain line"},
	} {
		_, err := ParseRamp([]byte(c.doc))
		var fs Faults
		if !errors.As(err, &fs) {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		if !strings.Contains(fs.Error(), c.message) || !strings.Contains(fs.Hint(), c.hint) {
			t.Errorf("%s: %q, hint %q; want %q, %q", c.name, fs.Error(), fs.Hint(), c.message, c.hint)
		}
	}
}

// What is not to be read is not written either.
func TestBadRampIsNotWritten(t *testing.T) {
	short := palette.Ramp{Stops: palette.DefaultRamp().Stops[:3]}
	for name, r := range map[string]RampFile{
		"no stops":  {},
		"no end":    {Ramp: short},
		"bad name":  {"a\x00b", palette.DefaultRamp()},
		"long name": {strings.Repeat("a", MaxText+1), palette.DefaultRamp()},
	} {
		var fs Faults
		if doc, err := r.Marshal(); !errors.As(err, &fs) || doc != nil {
			t.Errorf("%s: %s, %v", name, doc, err)
		}
	}
}

func TestLoadRampFails(t *testing.T) {
	if _, err := LoadRamp(filepath.Join(t.TempDir(), "none"+RampSuffix)); !errors.Is(err, fs.ErrNotExist) {
		t.Errorf("a file that is not there: %v", err)
	}
	path := filepath.Join(t.TempDir(), "bad"+RampSuffix)
	if err := os.WriteFile(path, []byte(`{"format":"leadline.frame/1"}`), 0o600); err != nil {
		t.Fatal(err)
	}
	if _, err := LoadRamp(path); err == nil || !strings.HasPrefix(err.Error(), path+": ") {
		t.Errorf("the message does not name the file: %v", err)
	}
}
