package paper

import (
	"fmt"
	"strings"

	"leadline/jobs"
	"leadline/precision"
	"leadline/render"
	"leadline/render/frame"
	"leadline/render/kernel"
	"leadline/render/sheet"
	"leadline/render/words"
)

// What a PNG of this program takes of its raw bytes, and how many raw bytes a
// core writes a second: from smooth to detailed pictures, as DEVELOPERS.md has
// them under Measured.
const (
	leastOfRaw, mostOfRaw = 0.23, 0.93
	fastFile, slowFile    = 44e6, 24e6
)

// raw is a sheet's pixels in bytes, uncompressed.
func raw(g sheet.Geometry) int64 {
	full := g.Full()
	return int64(full.Dx()) * int64(full.Dy()) * render.BytesPerPixel
}

// seconds is how long a print takes by the clock where all cores work: its
// pixels with the least and with the most samples, and its file. sample is a
// sample's share of that time.
func seconds(r *frame.Resolved, sample float64, cores int) (least, most float64) {
	full := r.Sheet.Full()
	pixels, bytes := float64(full.Dx())*float64(full.Dy()), float64(raw(r.Sheet))/float64(cores)
	least = pixels*float64(r.Least)*sample + bytes/fastFile
	most = pixels*float64(r.Most)*sample + bytes/slowFile
	return least, most
}

// pixelOf is a pixel's side in the plane.
func pixelOf(r *frame.Resolved) precision.Ext {
	return r.Height.Ext().Quo(precision.ExtOf(float64(r.Sheet.TrimH)))
}

// fact is a line of consequences.
type fact struct{ label, value, aside string }

// facts says what the set-up comes to.
func (s *Screen) facts() []fact {
	r := s.resolve()
	g := r.Sheet
	full := g.Full()
	size := int64(full.Dx()) * int64(full.Dy())
	name, aside := s.standing()
	return []fact{
		{"sheet", name, aside},
		{"pixels", fmt.Sprintf("%s%s%s", words.Count(int64(full.Dx())), s.glyph(" × ", " x "), words.Count(int64(full.Dy()))), s.pixelAside(g, size)},
		{"file", between(words.Size(int64(leastOfRaw*float64(raw(g)))), words.Size(int64(mostOfRaw*float64(raw(g))))), "raw " + words.Size(raw(g))},
		{"memory", "up to " + words.Size(jobs.Memory(r, s.cores)), ""},
		s.timeFact(r),
		{"pixel", fmt.Sprintf("%.3g mm", mm(g, 1)), bits(r)},
	}
}

// area writes how many pixels there are.
func area(pixels int64) string {
	if pixels < 1e5 {
		return words.Count(pixels) + " px"
	}
	return fmt.Sprintf("%.1f Mpx", float64(pixels)/1e6)
}

// pixelAside tells how many pixels there are, and those of the trim where a
// bleed is added.
func (s *Screen) pixelAside(g sheet.Geometry, size int64) string {
	if g.Bleed == 0 {
		return area(size)
	}
	return fmt.Sprintf("trim %s%s%s", words.Count(int64(g.TrimW)), s.glyph(" × ", " x "), words.Count(int64(g.TrimH)))
}

func (s *Screen) timeFact(r *frame.Resolved) fact {
	if s.sample == 0 {
		return fact{"time", "not known before the picture is", ""}
	}
	least, most := seconds(r, s.sample, s.cores)
	return fact{"time", between(words.Clock(least), words.Clock(most)), fmt.Sprintf("%s, %s a sample", cores(s.cores), small(s.sample))}
}

func cores(n int) string {
	if n == 1 {
		return "1 core"
	}
	return fmt.Sprintf("%d cores", n)
}

// small writes a short time.
func small(seconds float64) string {
	if seconds < 1e-3 {
		return fmt.Sprintf("%.2g µs", seconds*1e6)
	}
	return fmt.Sprintf("%.2g ms", seconds*1e3)
}

// between joins two quantities, with their unit once where they share it.
func between(a, b string) string {
	if a == b {
		return a
	}
	n, unit, _ := strings.Cut(a, " ")
	_, other, _ := strings.Cut(b, " ")
	if unit == other && !strings.Contains(unit, " ") {
		a = n
	}
	return a + " to " + b
}

// bits is what the orbits are computed with.
func bits(r *frame.Resolved) string {
	pixel := pixelOf(r)
	if kernel.Direct(pixel) {
		return "in double precision"
	}
	return fmt.Sprintf("%s bits deep", words.Count(int64(precision.BitsFor(pixel))))
}
