package kernel

import (
	"math"

	"leadline/precision"
	"leadline/render/formula"
	"leadline/render/orbit"
)

// DirectSpacing is the pixel spacing from which on a frame needs no reference:
// there a double holds a point of the plane to 2^-32 of a pixel.
const DirectSpacing = 0x1p-20

// deepSpacing is the pixel spacing below which differences may leave the
// comfortable range of doubles.
const deepSpacing = -340 // binary exponent

// View places the pixel lattice in the plane. Lattice coordinates count
// pixels right and down from the trim's top left corner.
type View struct {
	MidX, MidY float64       // the view's centre in lattice coordinates
	Cos, Sin   float64       // of the turn
	Pixel      precision.Ext // spacing
}

// Config is what a Kernel is made from.
type Config struct {
	Map       formula.Map
	Julia     bool
	Parameter [2]float64 // Julia sets: c, nearest doubles
	Centre    [2]float64 // view centre, nearest doubles (direct regime)
	View      View
	Limit     int
	Bailout   float64
	Reference *orbit.Reference // nil in the direct regime
	Tables    []*orbit.Table
}

// Direct reports whether frames of this pixel spacing need no reference.
func Direct(pixel precision.Ext) bool { return pixel.Float64() >= DirectSpacing }

// Kernel computes samples of one frame. It is read-only after New and safe for
// any number of goroutines.
type Kernel struct {
	cfg     Config
	loops   loops
	power   int
	bail2   float64 // bailout²
	lnBail  float64
	invLnP  float64
	spacing float64    // significand of the pixel spacing, scale 2^unit
	unit    int64      // δc, B and the derivative's source share this exponent
	pixel   float64    // the spacing as a double, 0 where it is below range
	offset  [2]float64 // centre minus reference, in pixels
	deep    bool       // δ may leave the range of doubles
	low     float64    // |δ|² under which a deep frame's step is redone
	traps   []trap     // Julia sets: discs that no orbit leaves
	segs    []segment
}

// segment joins a stretch of the reference with its leaps.
type segment struct {
	orbit.Segment
	first  int
	key    []int64 // radii of the shortest leaps
	levels []orbit.Level
}

// New prepares the kernel of a frame.
func New(c Config) *Kernel {
	k := &Kernel{
		cfg:    c,
		loops:  loopsFor(c.Map),
		power:  c.Map.Power(),
		bail2:  float64(c.Bailout * c.Bailout),
		lnBail: precision.Log(c.Bailout),
		invLnP: 1 / precision.Log(float64(c.Map.Power())),
	}
	k.spacing, k.unit = c.View.Pixel.M, c.View.Pixel.E
	k.pixel = c.View.Pixel.Float64()
	if c.Julia {
		k.traps = findTraps(c.Map, c.Parameter, c.Bailout)
	}
	if c.Reference == nil {
		return k
	}
	k.deep = c.View.Pixel.E < deepSpacing
	if k.deep {
		k.low = deepLow
	}
	off := c.Reference.Offset
	if !off.IsZero() {
		px := precision.NewExtComplex(c.View.Pixel.M, 0, c.View.Pixel.E)
		k.offset[0], k.offset[1] = off.Quo(px).Complex()
	}
	for i, s := range c.Reference.Segments {
		g := segment{Segment: s, first: s.Start + 1}
		if c.Tables != nil {
			g.levels = c.Tables[i].Levels
		}
		if len(g.levels) > 0 {
			g.key = g.levels[0].Key
		}
		k.segs = append(k.segs, g)
	}
	return k
}

// plane returns the offset from the view's centre, in pixels of the plane
// (right, up), of a lattice point. The picture is turned counter-clockwise on
// the paper, so the paper's axes are turned back to find the plane's.
func (k *Kernel) plane(x, y float64) (re, im float64) {
	v := &k.cfg.View
	u, w := x-v.MidX, v.MidY-y
	return math.FMA(u, v.Cos, float64(w*v.Sin)), math.FMA(w, v.Cos, -float64(u*v.Sin))
}

// Sample iterates the point at lattice coordinates x, y.
func (k *Kernel) Sample(x, y float64) Field {
	re, im := k.plane(x, y)
	if k.cfg.Reference == nil {
		return k.direct(re, im)
	}
	l := k.start(re+k.offset[0], im+k.offset[1])
	switch k.run(&l, k.cfg.Limit) {
	case Escaped:
		return k.escaped(l.n, l.zr, l.zi, l.gr, l.gi)
	case Inside:
		return Field{State: Inside}
	}
	return Field{State: Undecided}
}

// escaped turns the values at escape into a field. g is the derivative by
// pixels; the distance estimate |z| ln|z| / |g| is half the upper bound that
// Koebe's quarter theorem gives.
func (k *Kernel) escaped(n int, zr, zi, gr, gi float64) Field {
	z2 := math.FMA(zr, zr, float64(zi*zi))
	lnz := float64(0.5 * precision.Log(z2))
	f := Field{N: n}
	f.Smooth = float64(n+1) - float64(precision.Log(lnz/k.lnBail)*k.invLnP)
	f.Distance = float64(math.Sqrt(z2)*lnz) / modulus(gr, gi)
	return f
}

// modulus is |re + i·im| without overflow or underflow on the way.
func modulus(re, im float64) float64 {
	re, im = math.Abs(re), math.Abs(im)
	if re < im {
		re, im = im, re
	}
	if re == 0 || math.IsInf(re, 1) {
		return re
	}
	q := im / re
	return float64(re * math.Sqrt(math.FMA(q, q, 1)))
}
