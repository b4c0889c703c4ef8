package cells

import (
	"fmt"
	"image"
	"math/bits"
	"strings"
)

// Mesh is how finely a cell is divided. The zero value is Half.
type Mesh uint8

// The meshes. Sextants came with Unicode 13 (2020), so not every font has them;
// the others are older.
const (
	Half     Mesh = iota // one sample across, two down: every sample its own colour
	Quadrant             // two across, two down, two colours
	Sextant              // two across, three down, two colours
	Plain                // one sample: an ASCII character of more or less ink, never coloured
	meshCount
)

var meshes = [meshCount]struct {
	name string
	size image.Point
}{
	Half:     {"half", image.Pt(1, 2)},
	Quadrant: {"quadrant", image.Pt(2, 2)},
	Sextant:  {"sextant", image.Pt(2, 3)},
	Plain:    {"plain", image.Pt(1, 1)},
}

// Meshes lists the meshes, coarse blocks first, Plain last.
func Meshes() []Mesh { return []Mesh{Half, Quadrant, Sextant, Plain} }

// Size is the number of samples in a cell, across and down.
func (m Mesh) Size() image.Point { return meshes[m].size }

// String is the name ParseMesh reads.
func (m Mesh) String() string {
	if m >= meshCount {
		return fmt.Sprintf("Mesh(%d)", uint8(m))
	}
	return meshes[m].name
}

// ParseMesh finds a mesh by its name, in any letter case.
func ParseMesh(name string) (Mesh, error) {
	for _, m := range Meshes() {
		if strings.EqualFold(name, m.String()) {
			return m, nil
		}
	}
	return Half, fmt.Errorf("unknown mesh %q (half, quadrant, sextant or plain)", name)
}

// glyph is the character that shows the samples of the mask in the letter's
// colour. Bit 0 is the sample at the top left, the rest follow in reading order.
func (m Mesh) glyph(mask uint8) rune {
	switch m {
	case Half:
		return quadrants[(mask&1)*3|(mask>>1&1)*12]
	case Quadrant:
		return quadrants[mask&15]
	default:
		return sextant(mask & 63)
	}
}

// quadrants are the block elements U+2580…U+259F made of quarters of a cell:
// bit 0 upper left, bit 1 upper right, bit 2 lower left, bit 3 lower right.
var quadrants = [16]rune{
	' ', '▘', '▝', '▀', '▖', '▌', '▞', '▛',
	'▗', '▚', '▐', '▜', '▄', '▙', '▟', '█',
}

// sextant is the character of sixths of a cell. Unicode 13 numbers them from
// U+1FB00 by the mask itself, leaving out the four that it had already: blank,
// left half, right half and full block.
func sextant(mask uint8) rune {
	r := 0x1FB00 + rune(mask) - 1
	switch {
	case mask == 0:
		return ' '
	case mask < leftSixths:
		return r
	case mask == leftSixths:
		return '▌'
	case mask < rightSixths:
		return r - 1
	case mask == rightSixths:
		return '▐'
	case mask < 63:
		return r - 2
	}
	return '█'
}

const leftSixths, rightSixths = 0b010101, 0b101010

// coverage is how many of the parts of a block character are in the letter's
// colour; parts is 0 for any other character.
func coverage(r rune) (on, parts int) {
	switch r {
	case ' ', 0:
		return 0, 1
	case '█':
		return 1, 1
	case '▀', '▄', '▌', '▐', '▚', '▞':
		return 1, 2
	case '▘', '▝', '▖', '▗':
		return 1, 4
	case '▛', '▜', '▙', '▟':
		return 3, 4
	}
	if r < 0x1FB00 || r > 0x1FB3B {
		return 0, 0
	}
	return sixths(r), 6
}

// sixths counts the parts of a sextant character, U+1FB00…U+1FB3B.
func sixths(r rune) int {
	mask := uint8(r-0x1FB00) + 1
	if mask >= leftSixths {
		mask++
	}
	if mask >= rightSixths {
		mask++
	}
	return bits.OnesCount8(mask)
}
