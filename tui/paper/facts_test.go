package paper

import (
	"strings"
	"testing"

	"leadline/jobs"
	"leadline/render/frame"
)

// TestFacts: a sheet of A2 at 300 ppi has 4961 x 7016 pixels (print shops' tables),
// of 6 bytes each.
func TestFacts(t *testing.T) {
	r := newRig(t, document)
	r.write(atBleed, "")
	r.write(atSize, "A2 portrait")
	r.write(atMost, "16")
	r.s.sample = 1e-6
	want := map[string]string{
		"sheet":  "A2 ISO 216",
		"pixels": "4,961 × 7,016 34.8 Mpx",
		"file":   "48.0 to 194.2 MB raw 208.8 MB", // 0.23 and 0.93 of 4961·7016·6
		// 34.8 M samples of 1 µs and 16 times that; the file at 44 and at 24 MB/s on
		// two cores: 34.8 + 2.4 s, 556.9 + 4.4 s.
		"time":  "37 s to 9 min 21 s 2 cores, 1 µs a sample",
		"pixel": "0.0847 mm in double precision", // 25.4 / 300
		// Two tiles of 512² with copies, three times 6 bytes, and a row of tiles:
		// 2·3·6·512² + 6·4961·512.
		"memory": "up to 24.7 MB ",
	}
	for _, f := range r.s.facts() {
		if got := f.value + " " + f.aside; got != want[f.label] {
			t.Errorf("%s: %q, want %q", f.label, got, want[f.label])
		}
	}
}

// TestDeepFacts: a pixel of 1e-40 / 4724 takes 146 bits and 64 of guard; the
// reference takes 44 bytes an iteration with its tables, two of them twice that.
func TestDeepFacts(t *testing.T) {
	deep := strings.Replace(strings.Replace(document, `"2.6"`, `"1e-40"`, 1), `"limit":500`, `"limit":10000000`, 1)
	r := newRig(t, deep)
	m := r.s.resolve()
	if got := bits(m); got != "210 bits deep" {
		t.Errorf("%q", got)
	}
	with := jobs.Memory(m, 2)
	shallow := *m
	shallow.Limit = 0
	if got := with - jobs.Memory(&shallow, 2); got != 44*10_000_000 {
		t.Errorf("the reference takes %d bytes", got)
	}
	shallow = *m
	shallow.Kind = frame.Julia
	if got := jobs.Memory(&shallow, 2) - with; got != 44*10_000_000 {
		t.Errorf("the second reference takes %d bytes", got)
	}
}

func TestBetween(t *testing.T) {
	for _, c := range [][3]string{{"1.0 MB", "2.0 MB", "1.0 to 2.0 MB"}, {"900.0 kB", "2.0 MB", "900.0 kB to 2.0 MB"}, {"5 s", "5 s", "5 s"},
		{"2 min 05 s", "3 min 05 s", "2 min 05 s to 3 min 05 s"}} {
		if got := between(c[0], c[1]); got != c[2] {
			t.Errorf("%q, want %q", got, c[2])
		}
	}
}

func TestStanding(t *testing.T) {
	for text, want := range map[string]string{"A2": "A2 ISO 216", "2A0": "2A0 DIN 476", "600x401mm": "a size of its own A1 holds it",
		"24x36in": "Arch D common practice", "2400x100mm": "a size of its own beyond 4A0", "11x17in": "Tabloid common practice", "ANSI C": "ANSI C ANSI/ASME Y14.1",
		"1000x1000px": "a size of its own A6 holds it"} {
		r := newRig(t, document)
		r.write(atSize, text)
		if name, aside := r.s.standing(); name+" "+aside != want {
			t.Errorf("%s: %s %s, want %s", text, name, aside, want)
		}
	}
}
