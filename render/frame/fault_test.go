package frame

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"strings"
	"testing"
	"time"
)

// Every fault of a document comes in one go, each at its path and with the
// key or the range that cures it.
func TestAllFaultsTogether(t *testing.T) {
	doc := `{
	  "format": "leadline.frame/1", "tilte": "x", "maker": 7,
	  "set": {"kind": "mandlebrot", "power": 5},
	  "view": {"center": {"re": "0", "im": "0"}, "height": -1, "turn": "400deg"},
	  "iteration": {"limit": 1000000000, "bailout": 1},
	  "sampling": {"least": 8, "most": 4, "tolerance": 2, "Filter": "box"},
	  "ink": {"ramp": {"stops": [{"at": 0, "color": "red"}, {"at": 0, "colour": "redd"}]}},
	  "sheet": {"width": "600 mm", "height": "400mm", "ppi": 1e9, "dpi": 300, "something-else": 1}
	}`
	want := []struct{ path, message, hint string }{
		{"maker", "must be a string, not a number", ""},
		{"view.centre", "is required", ""},
		{"view.height", "must be a string, not a number", "quotation marks"},
		{"view.turn", `"400deg" is not a turn`, "-360"},
		{"view.center", "unknown key", "did you mean centre?"},
		{"sampling.Filter", "unknown key", "did you mean filter?"},
		{"ink.ramp.stops[0].colour", "is required", ""},
		{"ink.ramp.stops[0].color", "unknown key", "did you mean colour?"},
		{"ink.ramp.stops[1].colour", "redd", ""},
		{"sheet.width", `"600 mm" is not a length`, "such as 600mm"},
		{"sheet.dpi", "unknown key", "did you mean ppi?"},
		{`sheet["something-else"]`, "unknown key", "known here: width, height, ppi, bleed, safe, space"},
		{"tilte", "unknown key", "did you mean title?"},
		{"set.kind", `"mandlebrot" is not known`, "did you mean mandelbrot?"},
		{"set.power", "5 is out of range", "from 2 to 3"},
		{"iteration.limit", "1000000000 is out of range", "from 1 to 100000000"},
		{"iteration.bailout", "1 is out of range", "from 4 to 1e+06"},
		{"sampling.least", "8 is more than most, 4", "raise most"},
		{"sampling.tolerance", "2 is out of range", "from 0 to 1"},
		{"ink.ramp.stops[1].at", "0 does not come after 0", "ascend"},
		{"sheet.ppi", "1000000000 is out of range", "from 1 to 4800"},
	}
	_, err := Parse([]byte(doc))
	var fs Faults
	if !errors.As(err, &fs) {
		t.Fatalf("got %v", err)
	}
	for i, f := range fs {
		if i >= len(want) {
			t.Errorf("one fault more: %v", f)
			continue
		}
		if w := want[i]; f.Path != w.path || !strings.Contains(f.Message, w.message) || !strings.Contains(f.Hint, w.hint) {
			t.Errorf("fault %d is %q %q %q, want %q", i, f.Path, f.Message, f.Hint, w)
		}
		if !strings.Contains(fs.Error(), f.String()) || !strings.Contains(fs.Hint(), f.Hint) {
			t.Errorf("fault %v is not in the whole message or hint", f)
		}
	}
	if len(fs) < len(want) {
		t.Errorf("%d faults, want %d", len(fs), len(want))
	}
}

// A fault on its own is one line, and its hint stands without the path.
func TestOneFault(t *testing.T) {
	_, err := Parse(edited(t, mustMarshal(t, leastFrame()), "view.height", `"0.0"`))
	fs, _ := err.(Faults)
	if len(fs) != 1 || err.Error() != "view.height: must be greater than zero" ||
		fs.Hint() != "the height of the picture in the plane, such as 2.5e-41" {
		t.Errorf("got %v, hint %q", err, fs.Hint())
	}
}

func TestEditDistance(t *testing.T) {
	// The first three are the textbook examples of Levenshtein distance; a
	// swap counts one (Damerau 1964), and "ca" to "abc" is 3 in the restricted
	// form, 2 in the full one (from memory).
	for _, c := range []struct {
		a, b string
		want int
	}{{"kitten", "sitting", 3}, {"saturday", "sunday", 3}, {"flaw", "lawn", 2}, {"heigth", "height", 1},
		{"ca", "abc", 3}, {"", "abc", 3}, {"abc", "", 3}, {"", "", 0}, {"größe", "grosse", 3}} {
		if got := edits(c.a, c.b); got != c.want {
			t.Errorf("%q to %q: %d, want %d", c.a, c.b, got, c.want)
		}
		if edits(c.a, c.b) != edits(c.b, c.a) {
			t.Errorf("%q and %q: not symmetric", c.a, c.b)
		}
	}
}

func TestNewerFormats(t *testing.T) {
	frame := mustMarshal(t, leastFrame())
	for format, want := range map[string]string{
		`"leadline.frame/2"`:          "format: leadline.frame/2 is newer than this release",
		`"leadline.frame/999999999"`:  "format: leadline.frame/999999999 is newer than this release",
		`"leadline.frame/0"`:          `format: "leadline.frame/0" is no format known here`,
		`"leadline.frame/1 "`:         `format: "leadline.frame/1 " is no format known here`,
		`"leadline.frame/01"`:         `format: "leadline.frame/01" is no format known here`,
		`"leadline.frame/9999999999"`: `format: "leadline.frame/9999999999" is no format known here`,
		`"leadline.sidecar/1"`:        "format: this is a sidecar, not a frame",
		`"leadline.sidecar/2"`:        "format: this is a sidecar, not a frame",
		`""`:                          `format: "" is no format known here`,
	} {
		// What else a newer document holds is not held against it.
		_, err := Parse(edited(t, frame, "format", format, "novelty", "1"))
		if err == nil || err.Error() != want {
			t.Errorf("%s: %v, want %s", format, err, want)
		}
	}
	_, err := ParseSidecar(frame)
	if err == nil || err.Error() != "format: this is a frame, not a sidecar" {
		t.Errorf("a frame as a sidecar: %v", err)
	}
	_, err = ParseSidecar(edited(t, mustMarshal(t, fullSidecar()), "format", `"leadline.sidecar/2"`))
	if fs, ok := err.(Faults); !ok || fs[0].Message != "leadline.sidecar/2 is newer than this release" || fs.Hint() == "" {
		t.Errorf("a newer sidecar: %v", err)
	}
}

// hostile documents, each with the path and a word of its only or first fault.
func hostile(t testing.TB) map[string]struct {
	doc        []byte
	path, word string
} {
	least, side := mustMarshal(t, leastFrame()), mustMarshal(t, fullSidecar())
	type attack = struct {
		doc        []byte
		path, word string
	}
	digits := strings.Repeat("7", 10<<20)
	manyKeys, manyFaults := &strings.Builder{}, &strings.Builder{}
	for i := range 9000 {
		fmt.Fprintf(manyKeys, `"%d": 0,`, i)
	}
	for i := range 2000 {
		fmt.Fprintf(manyFaults, `"key%d": 0,`, i)
	}
	within := func(field, value string) []byte { return edited(t, least, field, value) }
	return map[string]attack{
		"number of 10 MB":          {[]byte(`{"format": ` + digits + `}`), "", "larger than 4194304 bytes"},
		"string of 10 MB":          {within("title", `"`+digits+`"`), "", "larger than"},
		"number of 3 MB":           {within("iteration.bailout", digits[:3<<20]), "iteration.bailout", "more than 64 characters"},
		"decimal of 3 MB":          {within("view.height", `"`+digits[:3<<20]+`"`), "view.height", "longer than 20016 characters"},
		"decimal of 20001 digits":  {within("view.centre.re", `"0.`+digits[:20000]+`"`), "view.centre.re", "longer than 20000 digits"},
		"colour of 3 MB":           {within("ink.inside", `"`+digits[:3<<20]+`"`), "ink.inside", "has 3145728 characters"},
		"length of 3 MB":           {within("sheet.width", `"`+digits[:3<<20]+`mm"`), "sheet.width", "is not a length"},
		"turn of 3 MB":             {within("view.turn", `"`+digits[:3<<20]+`deg"`), "view.turn", "is not a turn"},
		"key of 3 MB":              {[]byte(`{"format": "leadline.frame/1", "` + digits[:3<<20] + `": 1}`), "set", "is required"},
		"tiny height":              {within("view.height", `"1e-999999999"`), "view.height", "powers of ten"},
		"vast height":              {within("view.height", `"1e999999999"`), "view.height", "powers of ten"},
		"vast exponent of 1 MB":    {within("view.height", `"1e-`+digits[:1<<20]+`"`), "view.height", "20016 characters"},
		"overflowing number":       {within("iteration.bailout", "1e999"), "iteration.bailout", "too large"},
		"overflowing whole":        {within("iteration.limit", "1e999"), "iteration.limit", "too large"},
		"not quite whole":          {within("iteration.limit", "4.00000000000000000001"), "iteration.limit", "not a whole number"},
		"whole beyond 53 bits":     {within("iteration.limit", "1e300"), "iteration.limit", "too large"},
		"a milliard iterations":    {within("iteration.limit", "1000000000"), "iteration.limit", "out of range"},
		"vast sheet":               {within("sheet.width", `"9999999px"`), "sheet.width", "too long"},
		"vast sheet both ways":     {within("sheet", `{"width": "9999999in", "height": "9999999in", "ppi": 4800}`), "sheet", "too long"},
		"vast ppi":                 {within("sheet.ppi", "1e15"), "sheet.ppi", "out of range"},
		"deep arrays":              {[]byte(strings.Repeat("[", 1<<20)), "", "nests deeper than 32"},
		"deep objects":             {[]byte(strings.Repeat(`{"a":`, 1<<19)), "", "nests deeper than 32"},
		"nesting of 33":            {within("ink", strings.Repeat("[", 32)+strings.Repeat("]", 32)), "", "nests deeper than 32"},
		"nesting of 32":            {within("ink", strings.Repeat("[", 31)+strings.Repeat("]", 31)), "ink", "must be an object, not an array"},
		"a million values":         {[]byte("[" + strings.Repeat("0,", 1<<20) + "0]"), "", "more than 10000 values"},
		"many keys":                {[]byte("{" + manyKeys.String() + `"a": 0}`), "", "more than 10000 values"},
		"many faults":              {within("ink", "{"+manyFaults.String()+`"drive": {}}`), "ink.key0", "unknown key"},
		"key twice":                {bytes.Replace(least, []byte(`"kind"`), []byte(`"kind": "julia", "kind"`), 1), "set.kind", "twice"},
		"key twice, escaped":       {bytes.Replace(least, []byte(`"kind"`), []byte(`"k\u0069nd": "julia", "kind"`), 1), "set.kind", "twice"},
		"format twice":             {bytes.Replace(least, []byte(`{`), []byte(`{"format": "x",`), 1), "format", "twice"},
		"key in another case":      {within("Title", `"x"`), "Title", "unknown key"},
		"prototype key":            {within("__proto__", `{}`), "__proto__", "unknown key"},
		"trailing data":            {append(bytes.Clone(least), "{}"...), "", "not JSON at line 21, column 1"},
		"trailing word":            {append(bytes.Clone(least), 'x'), "", "not JSON"},
		"cut short":                {least[:len(least)/2], "", "not JSON"},
		"empty":                    {nil, "", "not JSON at line 1, column 1"},
		"null":                     {[]byte("null"), "", "document is null, not an object"},
		"a string":                 {[]byte(`"leadline.frame/1"`), "", "document is a string, not an object"},
		"broken UTF-8":             {[]byte("{\"title\": \"\xff\"}"), "", "UTF-8"},
		"surrogates in UTF-8":      {[]byte("{\"title\": \"\xed\xa0\x80\"}"), "", "UTF-8"},
		"byte order mark":          {append([]byte("\xef\xbb\xbf"), least...), "", "byte order mark"},
		"NaN":                      {within2(least, "NaN"), "", "not JSON"},
		"Infinity":                 {within2(least, "Infinity"), "", "not JSON"},
		"hexadecimal":              {within2(least, "0x10"), "", "not JSON"},
		"leading zero":             {within2(least, "010"), "", "not JSON"},
		"comment":                  {within2(least, "1 /* one */"), "", "not JSON"},
		"trailing comma":           {within2(least, "1,"), "", "not JSON"},
		"raw control character":    {within2(least, "\"\x01\""), "", "not JSON"},
		"path in the file name":    {edited(t, side, "record.file", `"../../etc/passwd"`), "record.file", "without a folder"},
		"count beyond 53 bits":     {edited(t, side, "record.counts.samples", "1e18"), "record.counts.samples", "too large"},
		"broken frame inside":      {edited(t, side, "frame.iteration.limit", "1000000000"), "frame.iteration.limit", "out of range"},
		"sidecar inside a sidecar": {edited(t, side, "frame.format", `"leadline.sidecar/1"`), "frame.format", "not a frame"},
	}
}

// within2 puts text that may not be JSON where the iteration limit stands.
func within2(doc []byte, text string) []byte {
	return bytes.Replace(doc, []byte("250000"), []byte(text), 1)
}

// Hostile documents are refused at once, with short messages. The time allowed
// is far above what any takes, so that a slow machine passes.
func TestHostile(t *testing.T) {
	for name, h := range hostile(t) {
		start := time.Now()
		doc, err := ParseAny(h.doc)
		if spent := time.Since(start); spent > 2*time.Second {
			t.Errorf("%s: took %v", name, spent)
		}
		fs, ok := err.(Faults)
		if !ok || doc != nil {
			t.Errorf("%s: got %v, %v", name, doc, err)
			continue
		}
		if fs[0].Path != h.path || !strings.Contains(fs[0].Message, h.word) {
			t.Errorf("%s: %q at %q, want %q at %q", name, fs[0].Message, fs[0].Path, h.word, h.path)
		}
		if len(fs) > MaxFaults+1 || len(err.Error()) > 300*len(fs) || len(fs.Hint()) > 300*len(fs) {
			t.Errorf("%s: %d faults in %d bytes", name, len(fs), len(err.Error()))
		}
	}
}

// The numbers and texts that JSON's own decoder would let through differently
// cannot reach a frame by way of it either.
func TestDecodersAreStrict(t *testing.T) {
	good := mustMarshal(t, leastFrame())
	var f Frame
	if err := json.Unmarshal(good, &f); err != nil || !bytes.Equal(mustMarshal(t, &f), good) {
		t.Errorf("a frame by json.Unmarshal: %v", err)
	}
	if err := json.Unmarshal(edited(t, good, "Title", `"x"`), &f); firstPath(err) != "Title" {
		t.Errorf("an unknown key by json.Unmarshal: %v", err)
	}
	side := mustMarshal(t, fullSidecar())
	var s Sidecar
	if err := json.Unmarshal(side, &s); err != nil || !bytes.Equal(mustMarshal(t, &s), side) {
		t.Errorf("a sidecar by json.Unmarshal: %v", err)
	}
	if err := json.Unmarshal(good, &s); firstPath(err) != "format" || !bytes.Equal(mustMarshal(t, &s), side) {
		t.Errorf("a frame as a sidecar by json.Unmarshal: %v", err)
	}
}
