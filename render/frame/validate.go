package frame

import (
	"fmt"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"leadline/precision"
	"leadline/render/sheet"
)

// The ends of what a height and a centre may be.
var (
	maxHeight = mustDecimal(strconv.Itoa(MaxHeight))
	minHeight = mustDecimal("1e-" + strconv.Itoa(MaxDepth))
	maxRadius = mustDecimal(strconv.Itoa(MaxRadius))
	minRadius = mustDecimal("-" + strconv.Itoa(MaxRadius))
)

// mustDecimal is for numbers written in the program.
func mustDecimal(s string) precision.Decimal {
	d, err := precision.ParseDecimal(s)
	if err != nil {
		panic(err)
	}
	return d
}

// spaces are the CSS names of the spaces a sheet can have.
var spaces = []string{"srgb", "display-p3", "a98-rgb", "prophoto-rgb"}

// Validate holds a frame against every rule a document must keep. The error is
// a Faults with everything that was found.
func (f *Frame) Validate() error {
	c := &collector{}
	f.check(c)
	return c.err()
}

// check is Validate into a collector.
func (f *Frame) check(c *collector) {
	if f.Format != Format {
		c.addf("format", fmt.Sprintf("write %q", Format), "%q is not the format of this release", brief(f.Format))
	}
	c.title("title", f.Title)
	c.title("maker", f.Maker)
	c.title("rights", f.Rights)
	f.Set.check(c)
	f.View.check(c)
	c.whole("iteration.limit", f.Iteration.Limit, 1, MaxLimit)
	if f.Iteration.Bailout != 0 {
		c.within("iteration.bailout", f.Iteration.Bailout, MinBailout, MaxBailout)
	}
	f.Sampling.check(c)
	f.Ink.check(c)
	f.Sheet.check(c)
	if b := f.Ink.Baked; b != nil && b.Space != or(f.Sheet.Space, DefaultSpace) {
		c.addf("ink.baked.space", "take ink.baked out; it is made again when the frame is rendered",
			"the ink is baked for %s, the sheet is %s", brief(b.Space), brief(or(f.Sheet.Space, DefaultSpace)))
	}
}

func (s Set) check(c *collector) {
	c.oneOf("set.kind", string(s.Kind), string(Mandelbrot), string(Julia))
	if s.Power != 0 {
		c.whole("set.power", s.Power, 2, 3)
	}
	switch {
	case s.Kind == Julia && s.Parameter == nil:
		c.add("set.parameter", "is required for a julia set", "give the c of the set as re and im")
	case s.Kind == Mandelbrot && s.Parameter != nil:
		c.add("set.parameter", "belongs to julia sets alone", "take it out, or set the kind to julia")
	case s.Parameter != nil:
		c.point("set.parameter", *s.Parameter)
	}
}

func (v View) check(c *collector) {
	c.point("view.centre", v.Centre)
	switch {
	case v.Height.Sign() <= 0:
		c.add("view.height", "must be greater than zero", "the height of the picture in the plane, such as 2.5e-41")
	case v.Height.Cmp(maxHeight) > 0:
		c.addf("view.height", "the whole set is about 2.5 high", "is above %d", MaxHeight)
	case v.Height.Cmp(minHeight) < 0:
		c.addf("view.height", fmt.Sprintf("the deepest view is %s high", minHeight), "is deeper than 1e-%d", MaxDepth)
	}
	if d := v.Turn.Degrees(); !(d >= -MaxTurn && d <= MaxTurn) {
		c.add("view.turn", (&TurnError{v.Turn.String()}).Error(), (&TurnError{}).Hint())
	}
}

func (s Sampling) check(c *collector) {
	if s.Least != 0 {
		c.whole("sampling.least", s.Least, 1, MaxSamples)
	}
	if s.Most != 0 {
		c.whole("sampling.most", s.Most, 1, MaxSamples)
	}
	if s.Least != 0 && s.Most != 0 && s.Least > s.Most {
		c.addf("sampling.least", "swap the two or raise most", "%d is more than most, %d", s.Least, s.Most)
	}
	if s.Tolerance != nil {
		c.within("sampling.tolerance", *s.Tolerance, 0, 1)
	}
	if s.Filter != "" {
		c.oneOf("sampling.filter", string(s.Filter), string(Gaussian), string(Box))
	}
}

func (s Sheet) check(c *collector) {
	for _, l := range []struct {
		path string
		l    sheet.Length
	}{{"sheet.width", s.Width}, {"sheet.height", s.Height}} {
		if l.l.IsZero() {
			c.add(l.path, "is required", "")
		}
	}
	if s.PPI != 0 {
		c.whole("sheet.ppi", s.PPI, 1, sheet.MaxPPI)
	}
	if s.Space != "" {
		c.oneOf("sheet.space", s.Space, spaces...)
	}
	if s.Width.IsZero() || s.Height.IsZero() || or(s.PPI, 1) < 1 || s.PPI > sheet.MaxPPI {
		return
	}
	if _, err := s.Geometry(); err != nil {
		c.add(s.culprit(), err.Error(), hintOf(err))
	}
}

// culprit is the path of the length that by itself spoils the sheet's size.
func (s Sheet) culprit() string {
	ppi := or(s.PPI, DefaultPPI)
	bleed := s.Bleed.Pixels(ppi)
	bad := func(l sheet.Length) bool { n := l.Pixels(ppi); return n < 1 || n+2*bleed > sheet.MaxSide }
	switch w, h := bad(s.Width), bad(s.Height); {
	case 2*bleed > sheet.MaxSide:
		return "sheet.bleed"
	case w && !h:
		return "sheet.width"
	case h && !w:
		return "sheet.height"
	}
	return "sheet"
}

// title checks a free text: its length and that it holds no control
// characters or line breaks of any sort.
func (c *collector) title(path, s string) {
	switch n := utf8.RuneCountInString(s); {
	case n > MaxText:
		c.addf(path, fmt.Sprintf("at most %d characters", MaxText), "has %d characters", n)
	case !utf8.ValidString(s):
		c.add(path, "is not valid UTF-8", "")
	case strings.ContainsFunc(s, breaks):
		c.add(path, "holds a control character or a line break", "write it as one plain line")
	}
}

// breaks reports whether r is a control character or a line or paragraph
// separator.
func breaks(r rune) bool { return unicode.IsControl(r) || r == '\u2028' || r == '\u2029' }

// whole checks a whole number's range.
func (c *collector) whole(path string, v, least, most int) {
	if v < least || v > most {
		c.addf(path, fmt.Sprintf("a whole number from %d to %d", least, most), "%d is out of range", v)
	}
}

// within checks a number's range; NaN is in none.
func (c *collector) within(path string, v, least, most float64) {
	if !(v >= least && v <= most) {
		c.addf(path, fmt.Sprintf("a number from %s to %s", short(least), short(most)), "%s is out of range", short(v))
	}
}

// above checks that a number is over zero and at most most.
func (c *collector) above(path string, v, most float64) {
	if !(v > 0 && v <= most) {
		c.addf(path, fmt.Sprintf("a number above 0, at most %s", short(most)), "%s is out of range", short(v))
	}
}

// short is the shortest decimal of a double.
func short(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }

// oneOf checks a word against a list.
func (c *collector) oneOf(path, v string, words ...string) {
	switch {
	case contains(words, v):
	case v == "":
		c.add(path, "is required", "one of "+strings.Join(words, ", "))
	default:
		c.addf(path, nearest(v, words), "%q is not known", brief(v))
	}
}

// point checks that a point is near enough to matter.
func (c *collector) point(path string, p Point) {
	for _, v := range []struct {
		key string
		d   precision.Decimal
	}{{"re", p.Re}, {"im", p.Im}} {
		if v.d.Cmp(maxRadius) > 0 || v.d.Cmp(minRadius) < 0 {
			c.addf(join(path, v.key), fmt.Sprintf("a number from -%d to %d", MaxRadius, MaxRadius),
				"%s is out of range", brief(v.d.String()))
		}
	}
}
