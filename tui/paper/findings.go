package paper

import (
	"fmt"
	"math"
	"strings"

	"leadline/render/sheet"
	"leadline/render/words"
	"leadline/tui/engine"
)

// level is how much a finding matters.
type level uint8

const (
	note  level = iota // worth knowing
	care               // likely to be seen
	fault              // will spoil the print
)

// finding is what is to be looked at before printing.
type finding struct {
	level        level
	figure, cure string
	// Where Enter goes: a screen, or else a field.
	screen string
	field  int
	// u, v is where on the trim it can be looked at.
	placed bool
	u, v   float64
}

// Limits that findings go by.
const (
	mostUndecided = 0.001 // of the preview (common practice, no source)
	// leastLine is a quarter of a point in millimetres, the thinnest line that
	// print shops promise (common practice, no source); a point is 1/72 in.
	leastLine = 0.25 * 25.4 / 72
	rollWidth = 1118      // mm: 44 in, the widest roll of most print shops (common practice, no source)
	jpegSide  = 65_535    // pixels: ITU-T T.81, 16-bit X and Y of the frame header
	tiffSize  = 1<<32 - 1 // bytes: TIFF 6.0, 32-bit offsets
	usualEdge = "3mm"     // bleed (print shops' guides)
)

// findings looks at the set-up, what matters most first.
func (s *Screen) findings() []finding {
	var all []finding
	for _, rule := range []func(*Screen) (finding, bool){undecided, thinLine, outOfSpace, coarse, noSafe, wideRoll, noBleed, forJPEG, forTIFF, idle} {
		if f, found := rule(s); found {
			all = append(all, f)
		}
	}
	var sorted []finding
	for l := fault; ; l-- {
		for _, f := range all {
			if f.level == l {
				sorted = append(sorted, f)
			}
		}
		if l == note {
			return sorted
		}
	}
}

// undecided: samples that reached the iteration limit take the inside colour
// though they may not be inside.
func undecided(s *Screen) (finding, bool) {
	p := s.desk.Picture
	if p == nil || p.Err != nil || !p.Whole || p.Undecided <= mostUndecided {
		return finding{}, false
	}
	f := finding{level: care, screen: "Compose", figure: words.Percent(p.Undecided) + " of the picture is undecided at the iteration limit",
		cure: "Compose, l: a higher limit"}
	if s.desk.Pinned {
		f.level = fault
		f.figure = fmt.Sprintf("the pinned limit of %s is too low: %s of the picture is undecided", words.Count(int64(s.desk.Frame.Iteration.Limit)), words.Percent(p.Undecided))
		f.cure = "Compose, l: a higher limit, or none, and it finds itself"
	}
	f.u, f.v, f.placed = s.undecidedAt()
	return f, true
}

// thinLine: an edge line that is thinner than presses hold.
func thinLine(s *Screen) (finding, bool) {
	e := s.desk.Frame.Ink.Edge
	if e == nil {
		return finding{}, false
	}
	width := e.Width.MM(s.resolve().Sheet.PPI)
	if width == 0 || width >= leastLine {
		return finding{}, false
	}
	f := finding{level: care, screen: "Ink", figure: fmt.Sprintf("the edge line is %.2g mm wide; print shops hold %.3f mm, a quarter point", width, leastLine),
		cure: "Ink: a wider edge"}
	f.u, f.v, f.placed = s.edgeAt()
	return f, true
}

// outOfSpace: colours of the ramp that the sheet's space does not have.
func outOfSpace(s *Screen) (finding, bool) {
	n := s.outside.now(s)
	if n == 0 {
		return finding{}, false
	}
	return finding{level: note, field: atSpace, figure: fmt.Sprintf("%s of 1,024 ramp colours lie outside %s and are brought in", words.Count(int64(n)), s.resolve().Space),
		cure: "a wider space, or softer colours on Ink"}, true
}

// coarse: pixels that can be told apart from the viewing distance.
func coarse(s *Screen) (finding, bool) {
	ppi, eye := s.resolve().Sheet.PPI, math.Round(s.eye())
	if float64(ppi) >= eye {
		return finding{}, false
	}
	return finding{level: care, field: atPPI, figure: fmt.Sprintf("%d ppi: from %s the eye resolves %.0f", ppi, spaced(s.distance), eye),
		cure: fmt.Sprintf("%.0f ppi, or look from %s", eye, far(sheet.AcuityPPI(1)/float64(ppi)))}, true
}

// far writes a distance in millimetres, rounded up.
func far(mm float64) string { return fmt.Sprintf("%.0f cm", math.Ceil(mm/10)) }

// idle: pixels that nobody sees from the viewing distance.
func idle(s *Screen) (finding, bool) {
	ppi, eye := s.resolve().Sheet.PPI, math.Round(s.eye())
	if float64(ppi) <= eye {
		return finding{}, false
	}
	more := math.Pow(float64(ppi)/eye, 2)
	return finding{level: note, field: atPPI, figure: fmt.Sprintf("%d ppi: from %s the eye resolves %.0f; more ppi shows nothing at this distance", ppi, spaced(s.distance), eye),
		cure: fmt.Sprintf("%.0f ppi has %.2g times fewer pixels; stay if people step closer", eye, more)}, true
}

// noSafe: margins that meet leave no safe area.
func noSafe(s *Screen) (finding, bool) {
	g := s.resolve().Sheet
	if g.Margin == 0 || !g.Safe().Empty() {
		return finding{}, false
	}
	return finding{level: care, field: atSafe, figure: "the safe margins meet: nothing of the sheet is safe", cure: "a smaller safe margin"}, true
}

// wideRoll: a sheet that is wider than rolls of paper, whichever way it lies.
func wideRoll(s *Screen) (finding, bool) {
	g := s.resolve().Sheet
	full := g.Full()
	side := mm(g, min(full.Dx(), full.Dy()))
	if side <= rollWidth {
		return finding{}, false
	}
	return finding{level: care, field: atSize, figure: fmt.Sprintf("the shorter side is %.0f mm with bleed, a roll of 44 in %d mm wide", math.Ceil(side), rollWidth),
		cure: "a smaller size, or ask for a wider roll"}, true
}

// noBleed: without it a cut beside the line leaves bare paper.
func noBleed(s *Screen) (finding, bool) {
	if s.resolve().Sheet.Bleed > 0 {
		return finding{}, false
	}
	return finding{level: note, field: atBleed, figure: "no bleed: a cut beside the trim's line shows bare paper",
		cure: usualEdge[:1] + " mm of bleed, if the sheet is cut to its edge"}, true
}

// forJPEG and forTIFF: what shops may convert the print to.
func forJPEG(s *Screen) (finding, bool) {
	full := s.resolve().Sheet.Full()
	side := max(full.Dx(), full.Dy())
	if side <= jpegSide {
		return finding{}, false
	}
	return finding{level: note, field: atPPI, figure: fmt.Sprintf("%s px: a JPEG holds %s a side", words.Count(int64(side)), words.Count(jpegSide)),
		cure: "fewer ppi, if the shop takes JPEG only"}, true
}

func forTIFF(s *Screen) (finding, bool) {
	size := raw(s.resolve().Sheet)
	if size <= tiffSize {
		return finding{}, false
	}
	return finding{level: note, field: atPPI, figure: fmt.Sprintf("%s of pixels: a TIFF holds 4 GiB", words.Size(size)),
		cure: "fewer ppi, if the shop takes TIFF and not BigTIFF"}, true
}

// seen is what was looked up in a picture.
type seen struct {
	picture             *engine.Picture
	undecided, edge     [2]float64
	hasUndecided, edged bool
}

// lookUp finds the samples nearest to the middle that are undecided, and nearest
// to the set's edge.
func (s *Screen) lookUp() *seen {
	p := s.desk.Picture
	if p == nil || s.seen.picture == p || len(p.Fields) == 0 {
		return &s.seen
	}
	s.seen = seen{picture: p}
	s.seen.undecided, s.seen.hasUndecided = nearest(p, isUndecided)
	s.seen.edge, s.seen.edged = nearest(p, onEdge)
	return &s.seen
}

func (s *Screen) undecidedAt() (u, v float64, ok bool) {
	at := s.lookUp()
	return at.undecided[0], at.undecided[1], at.hasUndecided
}

func (s *Screen) edgeAt() (u, v float64, ok bool) {
	at := s.lookUp()
	return at.edge[0], at.edge[1], at.edged
}

// title is the findings' heading.
func title(list []finding) string {
	if len(list) == 0 {
		return "Findings"
	}
	return "Findings " + strings.TrimSpace(words.Count(int64(len(list))))
}
