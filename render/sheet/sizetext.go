package sheet

import (
	"fmt"
	"strings"
)

// SizeTextError says that a text names no sheet.
type SizeTextError struct {
	Text   string
	Reason string
}

// Error names the text and what is wrong with it.
func (e *SizeTextError) Error() string { return fmt.Sprintf("%q %s", brief(e.Text), e.Reason) }

// Hint says what a size looks like.
func (e *SizeTextError) Hint() string {
	return "write a name such as A2 or Arch D, or two sides such as 600x400 mm, 24x36in or 4000 x 3000 px"
}

// ParseSize reads the size of a sheet: a name that SizeByName knows, with
// "landscape" or "portrait" behind it if it is to lie or stand; or two sides
// with an x between them, each with its unit or both with the last one's.
// named says that it was a name alone, whose sides may be turned. The error is
// a *SizeTextError.
func ParseSize(s string) (w, h Length, named bool, err error) {
	text := strings.ToLower(strings.TrimSpace(s))
	base, way := text, ""
	for _, end := range []string{"landscape", "portrait"} {
		if rest, ok := strings.CutSuffix(text, end); ok {
			base, way = strings.TrimSpace(rest), end
		}
	}
	if w, h, err = parseSides(s, plainName(base)); err == nil {
		if way == "landscape" && longer(h, w) || way == "portrait" && longer(w, h) {
			w, h = h, w
		}
		return w, h, false, nil
	}
	z, ok := SizeByName(base)
	switch {
	case !ok:
		return Length{}, Length{}, false, err
	case way == "landscape":
		return z.Height, z.Width, false, nil
	}
	return z.Width, z.Height, way == "", nil
}

// longer compares two lengths of one unit or of paper.
func longer(a, b Length) bool { return a.RatMM(DefaultPPI).Cmp(b.RatMM(DefaultPPI)) > 0 }

// parseSides reads "600x400mm", all small letters and without spaces; s is the
// text as given.
func parseSides(s, plain string) (w, h Length, err error) {
	first, second, ok := strings.Cut(plain, "x")
	if second == "" || first == "" {
		ok = false
	}
	if !ok {
		return w, h, &SizeTextError{s, "is no size that has a name, and has not two sides"}
	}
	if unitOf(second) == "" {
		return w, h, &SizeTextError{s, "has no unit"}
	}
	if unitOf(first) == "" {
		first += string(unitOf(second))
	}
	if h, err = ParseLength(second); err == nil {
		w, err = ParseLength(first)
	}
	if err != nil {
		return Length{}, Length{}, &SizeTextError{s, "is no size: " + err.Error()}
	}
	return w, h, nil
}

// unitOf is the unit that a text ends in, "" where it has none.
func unitOf(s string) Unit {
	for _, u := range []Unit{MM, CM, In, Px} {
		if strings.HasSuffix(s, string(u)) {
			return u
		}
	}
	return ""
}
