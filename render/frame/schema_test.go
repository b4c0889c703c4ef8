package frame

import (
	"bytes"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"github.com/santhosh-tekuri/jsonschema/v6"
)

// compiled gives both schemas as an independent library reads them.
func compiled(t testing.TB) (frame, sidecar *jsonschema.Schema) {
	t.Helper()
	one := func(name string, text []byte) *jsonschema.Schema {
		doc, err := jsonschema.UnmarshalJSON(bytes.NewReader(text))
		if err != nil {
			t.Fatal(err)
		}
		c := jsonschema.NewCompiler()
		if err := c.AddResource(name, doc); err != nil {
			t.Fatal(err)
		}
		s, err := c.Compile(name)
		if err != nil {
			t.Fatal(err)
		}
		return s
	}
	return one("urn:leadline:frame:1", Schema()), one("urn:leadline:sidecar:1", SidecarSchema())
}

// valid asks the library.
func valid(t testing.TB, s *jsonschema.Schema, doc []byte) error {
	t.Helper()
	v, err := jsonschema.UnmarshalJSON(bytes.NewReader(doc))
	if err != nil {
		t.Fatalf("%v in\n%s", err, doc)
	}
	return s.Validate(v)
}

// verdict is what the program and the schema say of an edited example.
type verdict struct {
	doc, path, value string // the example, a path in it and the JSON to put there
	fault            string // the fault's path, "ok" for none
	beyond           bool   // a rule the schema cannot say: it accepts
}

// verdicts is the table the two are held against each other on: each limit
// from both sides, each key missing or misspelt, each wrong type.
func verdicts() []verdict {
	text := func(n int) string { return `"` + strings.Repeat("é", n) + `"` }
	stops := func(s string) string { return `{"stops": [` + s + `]}` }
	many := func(n int) string {
		var b []string
		for i := range n {
			b = append(b, `{"at": `+short(float64(i)/float64(n-1))+`, "colour": "red"}`)
		}
		return stops(strings.Join(b, ","))
	}
	const full, least, side, lside = "full.frame.json", "least.frame.json", "full.sidecar.json", "least.sidecar.json"
	return []verdict{
		{least, "format", ``, "format", false},
		{least, "format", `"leadline.frame/2"`, "format", false},
		{least, "format", `"junk"`, "format", false},
		{least, "format", `1`, "format", false},
		{least, "extra", `1`, "extra", false},
		{least, "title", text(1000), "ok", false},
		{least, "title", text(1001), "title", false},
		{least, "title", `""`, "ok", false},
		{least, "title", `"a\tb"`, "title", false},
		{least, "title", `"a\u2028b"`, "title", false},
		{least, "maker", `"a\u0085b"`, "maker", false},
		{least, "rights", `"a\u0000b"`, "rights", false},
		{least, "rights", `null`, "rights", false},
		{least, "set", ``, "set", false},
		{least, "set", `[]`, "set", false},
		{least, "set.kind", ``, "set.kind", false},
		{least, "set.kind", `"Mandelbrot"`, "set.kind", false},
		{least, "set.kind", `"julia"`, "set.parameter", false},
		{least, "set.parameter", `{"re": "0", "im": "0"}`, "set.parameter", false},
		{least, "set.power", `3`, "ok", false},
		{least, "set.power", `2.0`, "ok", false},
		{least, "set.power", `4`, "set.power", false},
		{least, "set.power", `0`, "set.power", false},
		{least, "set.power", `2.5`, "set.power", false},
		{least, "set.power", `"2"`, "set.power", false},
		{full, "set.parameter.im", ``, "set.parameter.im", false},
		{full, "set.parameter.im", `"4.1"`, "set.parameter.im", true},
		{least, "view.centre.re", `"-4.0"`, "ok", false},
		{least, "view.centre.re", `"-4.00000000000000000000000000001"`, "view.centre.re", true},
		{least, "view.centre.re", `-0.75`, "view.centre.re", false},
		{least, "view.centre.re", `"+1"`, "view.centre.re", false},
		{least, "view.centre.re", `"01"`, "view.centre.re", false},
		{least, "view.centre.re", `""`, "view.centre.re", false},
		{least, "view.centre.re", `"0x1"`, "view.centre.re", false},
		{least, "view.centre.re", `"1e-999999999"`, "view.centre.re", true},
		{least, "view.centre.x", `"0"`, "view.centre.x", false},
		{least, "view.height", ``, "view.height", false},
		{least, "view.height", `"0"`, "view.height", true},
		{least, "view.height", `"-1"`, "view.height", true},
		{least, "view.height", `"1000"`, "ok", false},
		{least, "view.height", `"1000.1"`, "view.height", true},
		{least, "view.height", `"1e-19900"`, "ok", false},
		{least, "view.height", `"0.9e-19900"`, "view.height", true},
		{least, "view.turn", `"360deg"`, "ok", false},
		{least, "view.turn", `"-360.0deg"`, "ok", false},
		{least, "view.turn", `"360.1deg"`, "view.turn", true},
		{least, "view.turn", `"1e2deg"`, "view.turn", false},
		{least, "view.turn", `"12"`, "view.turn", false},
		{least, "view.turn", `12`, "view.turn", false},
		{least, "iteration.limit", `1`, "ok", false},
		{least, "iteration.limit", `0`, "iteration.limit", false},
		{least, "iteration.limit", `100000000`, "ok", false},
		{least, "iteration.limit", `100000001`, "iteration.limit", false},
		{least, "iteration.limit", `1e-400`, "iteration.limit", false},
		{least, "iteration.limit", `25.0e1`, "ok", false},
		{least, "iteration.limit", `1.5`, "iteration.limit", false},
		{least, "iteration.bailout", `4`, "ok", false},
		{least, "iteration.bailout", `3.99`, "iteration.bailout", false},
		{least, "iteration.bailout", `0`, "iteration.bailout", false},
		{least, "iteration.bailout", `1e6`, "ok", false},
		{least, "iteration.bailout", `1000000.1`, "iteration.bailout", false},
		{least, "sampling", `{}`, "ok", false},
		{least, "sampling.least", `1`, "ok", false},
		{least, "sampling.least", `0`, "sampling.least", false},
		{least, "sampling.most", `4096`, "ok", false},
		{least, "sampling.most", `4097`, "sampling.most", false},
		{full, "sampling.least", `33`, "sampling.least", true},
		{least, "sampling.least", `64`, "ok", false},
		{least, "sampling.tolerance", `0`, "ok", false},
		{least, "sampling.tolerance", `1`, "ok", false},
		{least, "sampling.tolerance", `1.01`, "sampling.tolerance", false},
		{least, "sampling.tolerance", `-0.01`, "sampling.tolerance", false},
		{least, "sampling.filter", `""`, "sampling.filter", false},
		{least, "sampling.filter", `"lanczos"`, "sampling.filter", false},
		{least, "ink", `{}`, "ok", false},
		{least, "ink.ramp", `{}`, "ink.ramp.stops", false},
		{least, "ink.ramp", stops(`{"at": 0, "colour": "red"}`), "ink.ramp.stops", false},
		{least, "ink.ramp", stops(`{"at": 0, "colour": "red"}, {"at": 1, "colour": "#123"}`), "ok", false},
		{least, "ink.ramp", stops(`{"at": 0.5, "colour": "red"}, {"at": 0.5, "colour": "#123"}`), "ink.ramp.stops[1].at", true},
		{least, "ink.ramp", stops(`{"at": 0, "colour": "red"}, {"at": 1.1, "colour": "#123"}`), "ink.ramp.stops[1].at", false},
		{least, "ink.ramp", stops(`{"at": -0.1, "colour": "red"}, {"at": 1, "colour": "#123"}`), "ink.ramp.stops[0].at", false},
		{least, "ink.ramp", stops(`{"colour": "red"}, {"at": 1, "colour": "#123"}`), "ink.ramp.stops[0].at", false},
		{least, "ink.ramp", stops(`{"at": 0}, {"at": 1, "colour": "#123"}`), "ink.ramp.stops[0].colour", false},
		{least, "ink.ramp", stops(`7, {"at": 1, "colour": "#123"}`), "ink.ramp.stops[0]", false},
		{least, "ink.ramp", stops(`{"at": 0, "colour": "reddish"}, {"at": 1, "colour": "#123"}`), "ink.ramp.stops[0].colour", true},
		{least, "ink.ramp", many(256), "ok", false},
		{least, "ink.ramp", many(257), "ink.ramp.stops", false},
		{full, "ink.ramp.smooth", `1`, "ink.ramp.smooth", false},
		{least, "ink.inside", `""`, "ink.inside", false},
		{least, "ink.inside", `"#00000080"`, "ink.inside", true},
		{least, "ink.inside", `"rgb(` + strings.Repeat(" ", 112) + `1 2 3)"`, "ok", false},
		{least, "ink.inside", `"rgb(` + strings.Repeat(" ", 119) + `1 2 3)"`, "ink.inside", false},
		{least, "ink.drive", `{}`, "ok", false},
		{least, "ink.drive.scale", `"loglog"`, "ink.drive.scale", false},
		{least, "ink.drive.scale", `""`, "ink.drive.scale", false},
		{least, "ink.drive.exponent", `0.5`, "ink.drive.exponent", false},
		{full, "ink.drive.exponent", `16`, "ok", false},
		{full, "ink.drive.exponent", `16.1`, "ink.drive.exponent", false},
		{full, "ink.drive.exponent", `0`, "ink.drive.exponent", false},
		{full, "ink.drive.exponent", `-1`, "ink.drive.exponent", false},
		{least, "ink.drive.base", `1e9`, "ok", false},
		{least, "ink.drive.base", `-1.1e9`, "ink.drive.base", false},
		{least, "ink.drive.offset", `1.1e9`, "ink.drive.offset", false},
		{least, "ink.drive.period", `0`, "ink.drive.period", false},
		{least, "ink.drive.period", `1e-300`, "ok", false},
		{least, "ink.drive.period", `1e9`, "ok", false},
		{least, "ink.drive.period", `1.1e9`, "ink.drive.period", false},
		{least, "ink.drive", `{"period": 1, "fit": {"low": 0, "high": 100}}`, "ink.drive.fit", false},
		{least, "ink.drive", `{"period": 1, "fitted": {"base": 0, "low": 0, "high": 100}}`, "ink.drive.fitted", false},
		{least, "ink.drive.fit", `{"low": 0, "high": 100}`, "ok", false},
		{least, "ink.drive.fit", `{"low": 0, "high": 100.5}`, "ink.drive.fit.high", false},
		{least, "ink.drive.fit", `{"low": 50, "high": 50}`, "ink.drive.fit.low", true},
		{least, "ink.drive.fit", `{"low": 50}`, "ink.drive.fit.high", false},
		{least, "ink.drive.fitted", `{"base": 0, "low": 1, "high": 1}`, "ok", false},
		{least, "ink.drive.fitted", `{"base": 0, "low": 2, "high": 1}`, "ink.drive.fitted.low", true},
		{least, "ink.drive.fitted", `{"low": 2, "high": 3}`, "ink.drive.fitted.base", false},
		{full, "ink.edge.width", ``, "ink.edge.width", false},
		{full, "ink.edge.colour", ``, "ink.edge.colour", false},
		{full, "ink.edge.width", `"0mm"`, "ok", false},
		{full, "ink.edge.width", `"-1mm"`, "ink.edge.width", false},
		{full, "ink.baked.space", `"srgb"`, "ink.baked.space", true},
		{full, "ink.baked.space", ``, "ink.baked.space", false},
		{full, "ink.baked.ramp", `"` + strings.Repeat("A", 8192) + `"`, "ok", false},
		{full, "ink.baked.ramp", `"` + strings.Repeat("A", 8188) + `"`, "ink.baked.ramp", false},
		{full, "ink.baked.ramp", `"` + strings.Repeat("A", 8196) + `"`, "ink.baked.ramp", false},
		{full, "ink.baked.ramp", `"` + strings.Repeat("A", 8191) + `="`, "ink.baked.ramp", false},
		{full, "ink.baked.ramp", `"` + strings.Repeat("A", 8190) + `\n\n"`, "ink.baked.ramp", false},
		{full, "ink.baked.inside", `[0, 1, 65535]`, "ok", false},
		{full, "ink.baked.inside", `[0, 1, 65536]`, "ink.baked.inside[2]", false},
		{full, "ink.baked.inside", `[0, -1, 0]`, "ink.baked.inside[1]", false},
		{full, "ink.baked.inside", `["0", 1, 0]`, "ink.baked.inside[0]", false},
		{full, "ink.baked.inside", `[0, 1]`, "ink.baked.inside", false},
		{full, "ink.baked.edge", ``, "ink.baked.edge", false},
		{full, "ink.edge", ``, "ok", false},
		{least, "sheet.width", ``, "sheet.width", false},
		{least, "sheet.width", `600`, "sheet.width", false},
		{least, "sheet.width", `"600"`, "sheet.width", false},
		{least, "sheet.width", `"0mm"`, "sheet.width", true},
		{least, "sheet.height", `"400000px"`, "ok", false},
		{least, "sheet", `{"width": "200000px", "height": "100000px"}`, "ok", false},
		{least, "sheet", `{"width": "200000px", "height": "100001px"}`, "sheet", true},
		{least, "sheet.height", `"400001px"`, "sheet.height", true},
		{least, "sheet.bleed", `"200001px"`, "sheet.bleed", true},
		{least, "sheet.ppi", `1`, "ok", false},
		{least, "sheet.ppi", `0`, "sheet.ppi", false},
		{least, "sheet.ppi", `4800`, "ok", false},
		{least, "sheet.ppi", `4801`, "sheet.ppi", false},
		{least, "sheet.ppi", `299.5`, "sheet.ppi", false},
		{least, "sheet.space", `"cmyk"`, "sheet.space", false},
		{least, "sheet.space", `""`, "sheet.space", false},
		{least, "sheet.space", `"SRGB"`, "sheet.space", false},

		{side, "format", `"leadline.sidecar/9"`, "format", false},
		{side, "frame", ``, "frame", false},
		{side, "frame.format", `"leadline.frame/2"`, "frame.format", false},
		{side, "frame.view.height", `2.5`, "frame.view.height", false},
		{side, "frame.colour", `2.5`, "frame.colour", false},
		{side, "frame.ink.baked", ``, "frame.ink.baked", false},
		{side, "frame.ink.drive.fitted", ``, "frame.ink.drive.fitted", false},
		{lside, "frame.ink.drive.period", ``, "frame.ink.drive.fitted", false},
		{side, "record", ``, "record", false},
		{side, "record.release", `""`, "record.release", false},
		{side, "record.numerics", `0`, "record.numerics", false},
		{side, "record.file", `"a/b.png"`, "record.file", false},
		{side, "record.file", `"..\\b.png"`, "record.file", false},
		{side, "record.file", `".."`, "record.file", false},
		{side, "record.file", `""`, "record.file", false},
		{side, "record.file", `"` + strings.Repeat("a", 255) + `"`, "ok", false},
		{side, "record.file", `"` + strings.Repeat("a", 256) + `"`, "record.file", false},
		{side, "record.file", text(200), "record.file", true},
		{side, "record.pixels.scale", `4097`, "record.pixels.scale", false},
		{side, "record.pixels.width", `0`, "record.pixels.width", false},
		{side, "record.pixels.x", `-400001`, "record.pixels.x", false},
		{side, "record.pixels.y", ``, "record.pixels.y", false},
		{side, "record.sha256", `"` + strings.Repeat("A", 64) + `"`, "record.sha256", false},
		{side, "record.reference.period", ``, "record.reference.period", false},
		{side, "record.reference.re", ``, "record.reference.re", false},
		{side, "record.reference.im", `null`, "record.reference.im", false},
		{side, "record.reference.kind", `"none"`, "record.reference", false},
		{side, "record.reference.kind", `"centre"`, "ok", false},
		{side, "record.reference.length", `0`, "record.reference.length", false},
		{lside, "record.reference.kind", `"centre"`, "record.reference.re", false},
		{side, "record.geometry.bleed", `-1`, "record.geometry.bleed", false},
		{side, "record.counts.inside", `-1`, "record.counts.inside", false},
		{side, "record.counts.samples", `9007199254740992`, "ok", false},
		{side, "record.counts.samples", `9007199254740994`, "record.counts.samples", false},
		{side, "record.audit.within", ``, "record.audit.within", false},
		{side, "record.audit.wthin", `0`, "record.audit.wthin", false},
		{side, "run", ``, "ok", false},
		{side, "run.host", ``, "ok", false},
		{side, "run.started", `"2026-05-04 10:11:12Z"`, "run.started", false},
		{side, "run.started", `"2026-05-04T10:11:12,5Z"`, "run.started", false},
		{side, "run.started", `"2026-05-04T10:11:12.5+02:00"`, "ok", false},
		{side, "run.started", `"2026-02-30T10:11:12Z"`, "run.started", true},
		{side, "run.seconds.total", `-1`, "run.seconds.total", false},
		{side, "run.seconds.total", ``, "run.seconds.total", false},
		{side, "run.workers", `1.5`, "run.workers", false},
	}
}

// The published schema and the program's own rules are two hands' work on one
// format; an independent library (santhosh-tekuri/jsonschema) reads the first.
func TestSchemaAgrees(t *testing.T) {
	frameSchema, sidecarSchema := compiled(t)
	base := map[string][]byte{}
	for name, m := range examples() {
		base[name] = mustMarshal(t, m)
	}
	for _, v := range verdicts() {
		doc := edited(t, base[v.doc], v.path, v.value)
		name := v.doc + " " + v.path + "=" + brief(v.value)
		_, err := ParseAny(doc)
		if got := firstPath(err); got != v.fault {
			t.Errorf("%s: fault at %s, want %s: %v", name, got, v.fault, err)
		}
		schema := frameSchema
		if strings.HasSuffix(v.doc, ".sidecar.json") {
			schema = sidecarSchema
		}
		accepts := v.fault == "ok" || v.beyond
		if err := valid(t, schema, doc); (err == nil) != accepts {
			t.Errorf("%s: the schema says %v, want acceptance %v", name, err, accepts)
		}
	}
}

// firstPath is where the first fault of an error stands, "ok" for no error.
func firstPath(err error) string {
	if err == nil {
		return "ok"
	}
	fs, ok := err.(Faults)
	if !ok || len(fs) == 0 {
		return "not a Faults"
	}
	return fs[0].Path
}

// The same table through Debian's python3-jsonschema, a second reading of the
// standard. One run a schema takes every document; the names of the refused
// ones are in what it prints.
func TestSchemaAgreesDebian(t *testing.T) {
	tool, err := exec.LookPath("/usr/bin/jsonschema")
	if err != nil {
		t.Skip("package python3-jsonschema is missing")
	}
	if testing.Short() {
		t.Skip("left out by -short: it starts another program")
	}
	dir := t.TempDir()
	args := map[string][]string{"frame": nil, "sidecar": nil}
	accepts := map[string]bool{}
	add := func(family, name string, doc []byte, ok bool) {
		path := filepath.Join(dir, name)
		if err := os.WriteFile(path, doc, 0o644); err != nil {
			t.Fatal(err)
		}
		args[family] = append(args[family], "-i", path)
		accepts[path] = ok
	}
	base := map[string][]byte{}
	for name, m := range examples() {
		base[name] = mustMarshal(t, m)
		add(strings.Split(name, ".")[1], name, base[name], true)
	}
	for i, v := range verdicts() {
		add(strings.Split(v.doc, ".")[1], "edited-"+short(float64(i))+".json",
			edited(t, base[v.doc], v.path, v.value), v.fault == "ok" || v.beyond)
	}
	said := ""
	for family, schema := range map[string][]byte{"frame": Schema(), "sidecar": SidecarSchema()} {
		path := filepath.Join(dir, family+".schema.json")
		if err := os.WriteFile(path, schema, 0o644); err != nil {
			t.Fatal(err)
		}
		out, err := exec.Command(tool, append(append([]string{"--output", "pretty"}, args[family]...), path)...).CombinedOutput()
		if _, exited := err.(*exec.ExitError); !exited {
			t.Fatalf("%s: %v, want exit 1 for the bad documents\n%s", tool, err, out)
		}
		said += string(out)
	}
	for path, ok := range accepts {
		refused := strings.Contains(said, "[ValidationError]===("+path+")")
		passed := strings.Contains(said, "[SUCCESS]===("+path+")")
		if refused == ok || passed != ok {
			doc, _ := os.ReadFile(path)
			t.Errorf("%s: refused %v, passed %v, want acceptance %v\n%.120s", filepath.Base(path), refused, passed, ok, doc)
		}
	}
}

// The canonical form is also what Python's json module writes with
// indent=2, ensure_ascii=False: two spaces, ": ", no HTML escapes.
func TestCanonicalFormPython(t *testing.T) {
	tool, err := exec.LookPath("python3")
	if err != nil {
		t.Skip("package python3 is missing")
	}
	const program = "import json,sys\nd=json.loads(sys.stdin.buffer.read())\n" +
		"sys.stdout.buffer.write((json.dumps(d,indent=2,ensure_ascii=False)+'\\n').encode())"
	f := fullFrame()
	f.Ink.Drive.Offset = new(-0.25) // Python writes 1e-07
	doc := mustMarshal(t, f)
	cmd := exec.Command(tool, "-c", program)
	cmd.Stdin = bytes.NewReader(doc)
	out, err := cmd.Output()
	if err != nil || !bytes.Equal(out, doc) {
		t.Errorf("python3 writes (%v)\n%s\nthe program\n%s", err, out, doc)
	}
}

func TestSchemaIsACopy(t *testing.T) {
	Schema()[0] = 'x'
	if Schema()[0] != '{' {
		t.Error("writing to the schema changed it for everyone")
	}
}
