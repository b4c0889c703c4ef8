package cells

import (
	"math/bits"
	"strings"
	"testing"

	"golang.org/x/text/unicode/runenames"
)

// Names of the block elements by mask (1 upper left, 2 upper right, 4 lower left, 8
// lower right): the Unicode 13.0 code chart of U+2580–259F.
var quadrantNames = [16]string{
	"SPACE",
	"QUADRANT UPPER LEFT",
	"QUADRANT UPPER RIGHT",
	"UPPER HALF BLOCK",
	"QUADRANT LOWER LEFT",
	"LEFT HALF BLOCK",
	"QUADRANT UPPER RIGHT AND LOWER LEFT",
	"QUADRANT UPPER LEFT AND UPPER RIGHT AND LOWER LEFT",
	"QUADRANT LOWER RIGHT",
	"QUADRANT UPPER LEFT AND LOWER RIGHT",
	"RIGHT HALF BLOCK",
	"QUADRANT UPPER LEFT AND UPPER RIGHT AND LOWER RIGHT",
	"LOWER HALF BLOCK",
	"QUADRANT UPPER LEFT AND LOWER LEFT AND LOWER RIGHT",
	"QUADRANT UPPER RIGHT AND LOWER LEFT AND LOWER RIGHT",
	"FULL BLOCK",
}

func TestQuadrantNames(t *testing.T) {
	for mask, want := range quadrantNames {
		if got := runenames.Name(Quadrant.glyph(uint8(mask))); got != want {
			t.Errorf("quadrants %04b: %s, want %s", mask, got, want)
		}
	}
	for mask, want := range []string{"SPACE", "UPPER HALF BLOCK", "LOWER HALF BLOCK", "FULL BLOCK"} {
		if got := runenames.Name(Half.glyph(uint8(mask))); got != want {
			t.Errorf("halves %02b: %s, want %s", mask, got, want)
		}
	}
}

// sextantName is the name that Unicode 13.0 gives the pattern: the numbers of the
// filled sixths, 1 upper left to 6 lower right in reading order, but for the four
// patterns that were there before (code chart of U+1FB00–1FBFF).
func sextantName(mask int) string {
	switch mask {
	case 0:
		return "SPACE"
	case 1 | 4 | 16:
		return "LEFT HALF BLOCK"
	case 2 | 8 | 32:
		return "RIGHT HALF BLOCK"
	case 63:
		return "FULL BLOCK"
	}
	name := "BLOCK SEXTANT-"
	for i := range 6 {
		if mask>>i&1 == 1 {
			name += string(rune('1' + i))
		}
	}
	return name
}

func TestSextantNames(t *testing.T) {
	for mask := range 64 {
		r := Sextant.glyph(uint8(mask))
		if got, want := runenames.Name(r), sextantName(mask); got != want {
			t.Errorf("sextants %06b: %U %s, want %s", mask, r, got, want)
		}
	}
	// The ends of the block in the chart.
	if a, z := sextant(1), sextant(62); a != 0x1FB00 || z != 0x1FB3B {
		t.Errorf("sextants run from %U to %U, want U+1FB00 to U+1FB3B", a, z)
	}
}

func TestCoverageCountsTheMask(t *testing.T) {
	for _, m := range []Mesh{Half, Quadrant, Sextant} {
		n := m.Size().X * m.Size().Y
		for mask := range 1 << n {
			on, parts := coverage(m.glyph(uint8(mask)))
			if parts == 0 || on*n != bits.OnesCount(uint(mask))*parts {
				t.Errorf("%s %b: coverage %d/%d", m, mask, on, parts)
			}
		}
	}
	for _, r := range "A─│@\U0001FB3C\U0001FAFF" {
		if on, parts := coverage(r); on != 0 || parts != 0 {
			t.Errorf("%q has coverage %d/%d, want none", r, on, parts)
		}
	}
}

func TestMeshNames(t *testing.T) {
	for _, m := range Meshes() {
		got, err := ParseMesh(strings.ToUpper(m.String()))
		if err != nil || got != m {
			t.Errorf("ParseMesh(%s) = %v, %v", m, got, err)
		}
	}
	if _, err := ParseMesh("octant"); err == nil || !strings.Contains(err.Error(), "octant") {
		t.Errorf("an unknown mesh gives %v", err)
	}
}
