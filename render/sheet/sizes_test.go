package sheet

import (
	"errors"
	"fmt"
	"math"
	"os/exec"
	"strings"
	"testing"
)

// sides gives a size's sides in millimetres, or inches for those of the US.
func sides(t *testing.T, name string) (w, h float64) {
	t.Helper()
	z, ok := SizeByName(name)
	if !ok {
		t.Fatalf("no size %q", name)
	}
	if z.Width.Unit() == In {
		return z.Width.PixelWidth(1), z.Height.PixelWidth(1)
	}
	return z.Width.MM(1), z.Height.MM(1)
}

// TestHalving holds each series to its standard's rule: the next size is the
// larger one halved across its long side, millimetres rounded down (ISO 216, which
// ISO 217 and DIN 476 follow; inches halve exactly, ANSI/ASME Y14.1; from memory).
func TestHalving(t *testing.T) {
	for _, row := range []string{"4A0 2A0 A0 A1 A2 A3 A4 A5 A6", "B0 B1 B2 B3 B4 B5 B6", "RA0 RA1 RA2 RA3 RA4",
		"SRA0 SRA1 SRA2 SRA3 SRA4"} {
		names := strings.Fields(row)
		for i, name := range names[1:] {
			w, h := sides(t, name)
			fromW, fromH := sides(t, names[i])
			if h != fromW || w != math.Floor(fromH/2) {
				t.Errorf("%s is %g x %g, half of %s is %g x %g", name, w, h, names[i], math.Floor(fromH/2), fromW)
			}
		}
	}
	for _, group := range []string{"ANSI ", "Arch "} {
		for _, pair := range []string{"ED", "DC", "CB", "BA"} {
			w, h := sides(t, group+pair[1:])
			fromW, fromH := sides(t, group+pair[:1])
			if h != fromW || w != fromH/2 {
				t.Errorf("%s%s is %g x %g, half of %s%s is %g x %g", group, pair[1:], w, h, group, pair[:1], fromH/2, fromW)
			}
		}
	}
}

// TestRoots: A0 is a square metre with sides as 1 to the root of 2, B0 has a
// short side of a metre, both rounded to millimetres (ISO 216, from memory).
func TestRoots(t *testing.T) {
	if w, h := sides(t, "A0"); w != math.Round(1000/math.Pow(2, 0.25)) || h != math.Round(1000*math.Pow(2, 0.25)) {
		t.Errorf("A0 is %g x %g", w, h)
	}
	if w, h := sides(t, "B0"); w != 1000 || h != math.Round(1000*math.Sqrt2) {
		t.Errorf("B0 is %g x %g", w, h)
	}
}

// TestTable compares with the figures of the standards, from memory; those of
// the last row are common practice, no source.
func TestTable(t *testing.T) {
	for name, want := range map[string][2]float64{
		"A0": {841, 1189}, "A4": {210, 297}, "A6": {105, 148}, "B1": {707, 1000}, "B5": {176, 250}, // ISO 216
		"2A0": {1189, 1682}, "4A0": {1682, 2378}, // DIN 476
		"RA0": {860, 1220}, "RA4": {215, 305}, "SRA0": {900, 1280}, "SRA3": {320, 450}, // ISO 217
		"ANSI A": {8.5, 11}, "ANSI C": {17, 22}, "ANSI E": {34, 44}, // ANSI/ASME Y14.1
		"Letter": {8.5, 11}, "Legal": {8.5, 14}, "Tabloid": {11, 17}, "Arch D": {24, 36}, "30x40 cm": {300, 400}, "16x20in": {16, 20},
	} {
		if w, h := sides(t, name); w != want[0] || h != want[1] {
			t.Errorf("%s is %g x %g, want %v", name, w, h, want)
		}
	}
}

func TestNames(t *testing.T) {
	seen := map[string]bool{}
	for _, z := range Sizes() {
		if plain := plainName(z.Name); seen[plain] {
			t.Errorf("two sizes are called %s", z.Name)
		} else {
			seen[plain] = true
		}
		if z.Standard == "" || z.Series == "" || z.Width.MM(1) > z.Height.MM(1) {
			t.Errorf("%+v", z)
		}
		for _, name := range []string{Name(z.Width, z.Height), Name(z.Height, z.Width)} {
			if back, ok := SizeByName(name); !ok || !same(back.Width, z.Width) || !same(back.Height, z.Height) {
				t.Errorf("%s has the name %q back", z.Name, name)
			}
		}
	}
	for _, c := range [][3]string{{"42cm", "594mm", "A2"}, {"36in", "24in", "Arch D"}, {"11in", "8.5in", "Letter"},
		{"421mm", "594mm", ""}, {"594px", "420px", ""}, {"40cm", "300mm", "30 x 40 cm"}} {
		if got := Name(MustLength(c[0]), MustLength(c[1])); got != c[2] {
			t.Errorf("%s x %s is %q, want %q", c[0], c[1], got, c[2])
		}
	}
	if got := Name(Length{}, MustLength("594mm")); got != "" {
		t.Errorf("no length has the name %q", got)
	}
}

func TestHolder(t *testing.T) {
	for _, c := range []struct {
		w, h float64
		want string
	}{{420, 594, "A2"}, {594, 421, "A1"}, {600, 400, "A1"}, {10, 10, "A6"}, {1500, 1000, "2A0"}, {1682, 2378, "4A0"}, {1683, 100, "4A0"}, {2379, 10, ""}} {
		if z, ok := Holder(c.w, c.h); z.Name != c.want || ok != (c.want != "") {
			t.Errorf("%g x %g goes on %q, want %q", c.w, c.h, z.Name, c.want)
		}
	}
}

func TestParseSize(t *testing.T) {
	for text, want := range map[string]string{
		"A2": "420mm 594mm named", " a2 ": "420mm 594mm named", "arch d": "24in 36in named", "ARCHD": "24in 36in named",
		"A2 landscape": "594mm 420mm", "a2 portrait": "420mm 594mm", "600x400 mm": "600mm 400mm", "600 × 400mm": "600mm 400mm",
		"24x36in": "24in 36in", "24in x 914.4mm": "24in 914.4mm", "60.5 x 40 cm": "60.5cm 40cm", "4000x3000px": "4000px 3000px",
		"600x400mm portrait": "400mm 600mm", "400x600mm portrait": "400mm 600mm", "60x40 cm": "60cm 40cm", "40x60 cm": "40cm 60cm",
		"40x60 cm landscape": "60cm 40cm",
	} {
		w, h, named, err := ParseSize(text)
		got := w.String() + " " + h.String()
		if named {
			got += " named"
		}
		if err != nil || got != want {
			t.Errorf("%q is %s, %v, want %s", text, got, err, want)
		}
	}
	for _, text := range []string{"", "A99", "600x400", "600mm", "x", "x400mm", "600x", "600x-4mm", "1e3x4mm", "a2 sideways",
		"600x400x3mm", "600x400furlong", strings.Repeat("9", 1000) + "x1mm"} {
		w, h, _, err := ParseSize(text)
		var se *SizeTextError
		if !errors.As(err, &se) || se.Hint() == "" || !w.IsZero() || !h.IsZero() || len(err.Error()) > 160 {
			t.Errorf("%q: %s x %s, %v", brief(text), w, h, err)
		}
	}
}

func FuzzSize(f *testing.F) {
	for _, s := range []string{"A2", "600x400 mm", "24x36in landscape", "x", "×mm"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		w, h, _, err := ParseSize(s)
		if (err == nil) == (w.IsZero() || h.IsZero()) {
			t.Fatalf("%q is %s x %s, %v", s, w, h, err)
		}
	})
}

// TestPaperconf compares with libpaper's table of sizes, which is another's.
func TestPaperconf(t *testing.T) {
	if _, err := exec.LookPath("paperconf"); err != nil {
		t.Skip("paperconf is missing: Debian package libpaper-utils")
	}
	names := map[string]string{"Letter": "letter", "Legal": "legal", "Tabloid": "tabloid", "Arch A": "archA", "Arch B": "archB",
		"Arch C": "archC", "ANSI C": "csheet", "ANSI D": "dsheet", "ANSI E": "esheet", "Arch D": "archD", "Arch E": "archE"}
	for _, z := range Sizes() {
		if strings.HasPrefix(z.Standard, "ISO 216") {
			names[z.Name] = strings.ToLower(z.Name)
		}
	}
	for name, theirs := range names {
		z, ok := SizeByName(name)
		out, err := exec.Command("paperconf", "-p", theirs, "-s", "-m").Output()
		if !ok || err != nil {
			t.Errorf("%s: %v, %v", name, ok, err)
			continue
		}
		want := fmt.Sprintf("%g mm %g mm", math.Round(z.Width.MM(1)*10)/10, math.Round(z.Height.MM(1)*10)/10)
		if got := strings.TrimSpace(string(out)); got != want {
			t.Errorf("%s is %s, libpaper has %s", name, want, got)
		}
	}
}
