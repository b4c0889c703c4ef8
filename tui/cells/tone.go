package cells

// ramp are the characters of Plain, by growing ink. The share of the cell that
// their ink covers grows in nearly even steps, 0, .02, .04, .07, .09, .12, .13,
// .16, .19, .21, .24 and .26, as measured in DejaVu Sans Mono and Noto Sans Mono.
const ramp = " .:^+cxo%#W@"

// Range is a range of lightness in OKLab, 0 black to 255 white, that is stretched
// over what a terminal can show without colour. The zero value is no range.
type Range struct{ Low, High uint8 }

// The stretch leaves one sample in 100 at either end to saturate, and is at most
// fourfold, so that a flat picture stays flat and its noise quiet.
const (
	leftOut   = 100
	leastSpan = 64
)

// Measure finds the range that a picture without colour is drawn over. Fields of
// deep sets often keep to a narrow band of tones, of which a dozen characters would
// else show two or three. A caller whose picture sharpens in passes can measure
// once and keep the range, so that no pass shifts the tones of what is drawn.
func (p Picture) Measure(mat *Mat) Range {
	if p.W <= 0 || p.H <= 0 {
		return Range{}
	}
	s, t := sampler{p: p, mat: mat}, tables()
	var count [256]int
	total := 0
	for y := range p.H {
		for x := range p.W {
			if !s.matted(x, y) {
				count[t.lab(p.Pix[y*p.W+x]).lightness()]++
				total++
			}
		}
	}
	low, high := 0, 255
	for sum := count[low]; sum <= total/leftOut && low < 255; sum += count[low] {
		low++
	}
	for sum := count[high]; sum <= total/leftOut && high > 0; sum += count[high] {
		high--
	}
	return widen(low, high)
}

// widen gives a range its least span, within 0…255.
func widen(low, high int) Range {
	if short := leastSpan - (high - low); short > 0 {
		low = min(max(low-short/2, 0), 255-leastSpan)
		high = low + leastSpan
	}
	return Range{uint8(low), uint8(high)}
}

// stretch is the table from lightness to 0…255 within the range.
func (r Range) stretch() (tone [256]uint8) {
	r = widen(int(r.Low), int(r.High))
	low, span := int(r.Low), int(r.High)-int(r.Low)
	for i := range tone {
		tone[i] = uint8((min(max(i-low, 0), span)*255 + span/2) / span)
	}
	return tone
}

// drawTones draws by lightness alone, in the terminal's own colours. On a dark
// ground ink is light, on a light one it is dark; either way bright is bright.
func drawTones(g *Grid, s *sampler, m Mesh, o Options) {
	if o.Range == (Range{}) {
		o.Range = s.p.Measure(o.Mat)
	}
	tone := o.Range.stretch()
	if o.Light {
		for i := range tone {
			tone[i] = 255 - tone[i]
		}
	}
	t := tables()
	var c samples
	for y := range g.rows {
		row := g.row(y)
		for x := range row {
			s.take(x, y, &c)
			switch {
			case s.allMat(x, y):
				row[x] = Cell{Rune: matRune(s.mat.Rune)}
			case m == Plain:
				ink := int(tone[t.lab(c[0]).lightness()])
				row[x] = Cell{Rune: rune(ramp[(ink*(len(ramp)-1)+127)/255])}
			default:
				row[x] = Cell{Rune: m.glyph(s.screen(x, y, &c, &tone))}
			}
		}
	}
}

// matRune is the rune itself where it is one cell wide and draws something.
func matRune(r rune) rune {
	if runeWidth(r) != 1 {
		return ' '
	}
	return r
}

// screen says which samples of a cell have ink: those whose tone is above the
// threshold of their place. The tone is squared first: shares of ink add up in
// linear light, the cube of OKLab's lightness, but the cube leaves too little of
// dark parts at the few dots a terminal has.
func (s *sampler) screen(x, y int, c *samples, tone *[256]uint8) (mask uint8) {
	t := tables()
	for i := range s.size.X * s.size.Y {
		at := tone[t.lab(c[i]).lightness()]
		share := int(at) * int(at) / 255
		if share > 4*threshold(x*s.size.X+i%s.size.X, y*s.size.Y+i/s.size.X)+1 {
			mask |= 1 << i
		}
	}
	return mask
}
