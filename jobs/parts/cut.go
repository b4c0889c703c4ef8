package parts

import (
	"fmt"
	"image"
	"strconv"
	"strings"
)

// MaxParts bounds the number of parts, so that every name has four digits.
const MaxParts = 9999

// bandRows is the height of a render's bands and tiles.
const bandRows = 64

// alignFrom is the number of bands a part from which on cuts run between
// bands: then the parts differ by an eighth at most. With fewer, equal shares
// are worth more than whole tiles.
const alignFrom = 8

// Cut returns the stripes of a rectangle from the top down. Rows are shared as
// evenly as possible, in whole bands where a part has eight or more. n is from
// 1 to the number of rows.
func Cut(r image.Rectangle, n int) []image.Rectangle {
	stripes := make([]image.Rectangle, n)
	for i := range stripes {
		stripes[i] = Stripe(r, i+1, n)
	}
	return stripes
}

// Stripe returns the i-th of the stripes that Cut makes, counted from 1.
func Stripe(r image.Rectangle, i, n int) image.Rectangle {
	return image.Rect(r.Min.X, cutAt(r, i-1, n), r.Max.X, cutAt(r, i, n))
}

// cutAt is where the first i of n stripes end.
func cutAt(r image.Rectangle, i, n int) int {
	bands := (r.Dy() + bandRows - 1) / bandRows
	if bands < alignFrom*n {
		return r.Min.Y + share(r.Dy(), i, n)
	}
	return min(r.Min.Y+bandRows*share(bands, i, n), r.Max.Y)
}

// share is total*i/n rounded down, for totals that times n may not fit an int.
func share(total, i, n int) int { return total/n*i + total%n*i/n }

// Which is one part of how many.
type Which struct{ I, N int }

// String writes it as ParseWhich reads it.
func (w Which) String() string { return fmt.Sprintf("%d/%d", w.I, w.N) }

// name is the part's file in the folder.
func (w Which) name() string { return fmt.Sprintf("part-%04d-of-%04d", w.I, w.N) }

// WhichError says that a text does not name a part.
type WhichError struct{ Text, Cure string }

// Error says so.
func (e *WhichError) Error() string { return fmt.Sprintf("%q does not name a part", e.Text) }

// Hint says how a part is named.
func (e *WhichError) Hint() string { return e.Cure }

// ParseWhich reads i/n, such as 7/40, with i from 1 to n.
func ParseWhich(s string) (Which, error) {
	first, second, ok := strings.Cut(s, "/")
	i, errI := strconv.ParseUint(first, 10, 31)
	n, errN := strconv.ParseUint(second, 10, 31)
	switch {
	case !ok || errI != nil || errN != nil:
		return Which{}, &WhichError{s, "write i/n, such as 7/40 for the seventh of forty"}
	case n < 1 || n > MaxParts:
		return Which{}, &WhichError{s, fmt.Sprintf("a print has 1 to %d parts", MaxParts)}
	case i < 1 || i > n:
		return Which{}, &WhichError{s, fmt.Sprintf("the parts are numbered from 1: 1/%d to %d/%d", n, n, n)}
	}
	return Which{int(i), int(n)}, nil
}
