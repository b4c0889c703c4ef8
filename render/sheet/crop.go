package sheet

import (
	"fmt"
	"image"
	"strconv"
	"strings"
)

// CropError says that a text is not a crop of the sheet at hand.
type CropError struct {
	Text   string
	Reason string
	Full   image.Rectangle // what may be cropped from
}

// Error names the text and the reason.
func (e *CropError) Error() string { return fmt.Sprintf("crop %q %s", brief(e.Text), e.Reason) }

// Hint says what a crop looks like and what the sheet holds.
func (e *CropError) Hint() string {
	return fmt.Sprintf("write X,Y,W,H in pixels from the trim's top left; "+
		"this sheet is %d,%d,%d,%d with its bleed",
		e.Full.Min.X, e.Full.Min.Y, e.Full.Dx(), e.Full.Dy())
}

// ParseCrop reads "X,Y,W,H": whole pixels in lattice coordinates, where X and
// Y are negative in the bleed and W and H at least 1. The rectangle must lie
// wholly inside Full. The error is a *CropError.
func (g Geometry) ParseCrop(s string) (image.Rectangle, error) {
	fail := func(reason string) (image.Rectangle, error) {
		return image.Rectangle{}, &CropError{Text: s, Reason: reason, Full: g.Full()}
	}
	if len(s) > 64 {
		return fail("is not four whole numbers")
	}
	parts := strings.Split(s, ",")
	if len(parts) != 4 {
		return fail("is not four whole numbers")
	}
	var v [4]int
	for i, p := range parts {
		n, err := strconv.ParseInt(p, 10, 32)
		if err != nil || strings.HasPrefix(p, "+") {
			return fail("is not four whole numbers")
		}
		v[i] = int(n)
	}
	if v[2] < 1 || v[3] < 1 {
		return fail("is empty")
	}
	r := image.Rect(v[0], v[1], v[0]+v[2], v[1]+v[3])
	if !r.In(g.Full()) {
		return fail("reaches beyond the sheet")
	}
	return r, nil
}

// FormatCrop writes a rectangle the way ParseCrop reads it.
func FormatCrop(r image.Rectangle) string {
	return fmt.Sprintf("%d,%d,%d,%d", r.Min.X, r.Min.Y, r.Dx(), r.Dy())
}

// ScaleError says that a text is not a scale.
type ScaleError struct{ Text string }

// Error names the text.
func (e *ScaleError) Error() string { return fmt.Sprintf("%q is not a scale", brief(e.Text)) }

// Hint says what a scale looks like.
func (e *ScaleError) Hint() string {
	return fmt.Sprintf("write 1/k with a whole k from 1 to %d, such as 1/8", MaxScale)
}

// ParseScale reads "1/k", or "1" for the sheet itself, and gives k, from 1 to
// MaxScale. The error is a *ScaleError.
func ParseScale(s string) (int, error) {
	if s == "1" {
		return 1, nil
	}
	digits, ok := strings.CutPrefix(s, "1/")
	if !ok || len(digits) > 4 || digits == "" || digits[0] < '1' || digits[0] > '9' {
		return 0, &ScaleError{Text: s}
	}
	k, err := strconv.Atoi(digits)
	if err != nil || k > MaxScale {
		return 0, &ScaleError{Text: s}
	}
	return k, nil
}
