package sheet

import (
	"slices"
	"strings"
	"sync"
)

// Size is a sheet with a name. Width is the shorter side, as the standards
// write them.
type Size struct {
	Name          string
	Series        string // what it stands among: "ISO A", "Arch", …
	Width, Height Length
	Standard      string // where the figures come from
}

// series is a row of sizes with one source, largest first.
type series struct {
	name, standard, unit string
	sizes                [][3]string // name, width, height
}

// noSource marks sizes that are sold everywhere and stand in no standard known
// here.
const noSource = "common practice"

// known is every size. Where two are alike, the first gives the pair its name.
var known = []series{
	{"ISO A", "DIN 476", "mm", [][3]string{{"4A0", "1682", "2378"}, {"2A0", "1189", "1682"}}},
	{"ISO A", "ISO 216", "mm", [][3]string{{"A0", "841", "1189"}, {"A1", "594", "841"}, {"A2", "420", "594"},
		{"A3", "297", "420"}, {"A4", "210", "297"}, {"A5", "148", "210"}, {"A6", "105", "148"}}},
	{"ISO B", "ISO 216", "mm", [][3]string{{"B0", "1000", "1414"}, {"B1", "707", "1000"}, {"B2", "500", "707"},
		{"B3", "353", "500"}, {"B4", "250", "353"}, {"B5", "176", "250"}, {"B6", "125", "176"}}},
	{"ISO RA", "ISO 217", "mm", [][3]string{{"RA0", "860", "1220"}, {"RA1", "610", "860"}, {"RA2", "430", "610"},
		{"RA3", "305", "430"}, {"RA4", "215", "305"}}},
	{"ISO SRA", "ISO 217", "mm", [][3]string{{"SRA0", "900", "1280"}, {"SRA1", "640", "900"}, {"SRA2", "450", "640"},
		{"SRA3", "320", "450"}, {"SRA4", "225", "320"}}},
	{"US", noSource, "in", [][3]string{{"Letter", "8.5", "11"}, {"Legal", "8.5", "14"}, {"Tabloid", "11", "17"}}},
	{"ANSI", "ANSI/ASME Y14.1", "in", [][3]string{{"ANSI E", "34", "44"}, {"ANSI D", "22", "34"}, {"ANSI C", "17", "22"},
		{"ANSI B", "11", "17"}, {"ANSI A", "8.5", "11"}}},
	{"Arch", noSource, "in", [][3]string{{"Arch E", "36", "48"}, {"Arch D", "24", "36"}, {"Arch C", "18", "24"},
		{"Arch B", "12", "18"}, {"Arch A", "9", "12"}}},
	{"Art cm", noSource, "cm", [][3]string{{"100 x 150 cm", "100", "150"}, {"70 x 100 cm", "70", "100"},
		{"60 x 90 cm", "60", "90"}, {"50 x 70 cm", "50", "70"}, {"40 x 60 cm", "40", "60"}, {"40 x 50 cm", "40", "50"},
		{"30 x 40 cm", "30", "40"}}},
	{"Art in", noSource, "in", [][3]string{{"24 x 36 in", "24", "36"}, {"20 x 24 in", "20", "24"},
		{"16 x 20 in", "16", "20"}, {"11 x 14 in", "11", "14"}, {"8 x 10 in", "8", "10"}}},
}

// Sizes lists the known sizes, series by series.
func Sizes() []Size { return slices.Clone(sizes()) }

// sizes is the list, made at first use; it is not changed.
var sizes = sync.OnceValue(func() (all []Size) {
	for _, s := range known {
		for _, z := range s.sizes {
			all = append(all, Size{z[0], s.name, MustLength(z[1] + s.unit), MustLength(z[2] + s.unit), s.standard})
		}
	}
	return all
})

// SizeByName finds a size by its name, in any letter case and with or without
// the spaces in it.
func SizeByName(name string) (Size, bool) {
	for _, z := range sizes() {
		if plainName(z.Name) == plainName(name) {
			return z, true
		}
	}
	return Size{}, false
}

// plainName is a name without what people write differently.
func plainName(s string) string {
	return strings.NewReplacer(" ", "", "×", "x").Replace(strings.ToLower(s))
}

// Name is the name of the known size with these sides, either way round; ""
// where there is none. Pixels have no length of their own, so a sheet measured
// in them has no name.
func Name(w, h Length) string {
	for _, z := range sizes() {
		if same(z.Width, w) && same(z.Height, h) || same(z.Width, h) && same(z.Height, w) {
			return z.Name
		}
	}
	return ""
}

// same compares two lengths of paper exactly.
func same(a, b Length) bool {
	if a.IsZero() || b.IsZero() || a.unit == Px || b.unit == Px {
		return false
	}
	return a.RatMM(1).Cmp(b.RatMM(1)) == 0
}

// Holder is the smallest ISO A sheet, 4A0 to A6, that a sheet of w x h
// millimetres can be cut from, either way round.
func Holder(w, h float64) (Size, bool) {
	var best Size
	for _, z := range sizes() {
		if z.Series != "ISO A" || z.Width.MM(1) < min(w, h) || z.Height.MM(1) < max(w, h) {
			continue
		}
		if best.Name == "" || z.Width.MM(1) < best.Width.MM(1) {
			best = z
		}
	}
	return best, best.Name != ""
}
