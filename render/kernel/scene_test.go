package kernel

import (
	"context"
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"leadline/precision"
	"leadline/render/exact"
	"leadline/render/formula"
	"leadline/render/orbit"
)

// scene is a view on a small lattice, for tests. Its pixels are squares of
// height/rows; power, rows, width and bailout have defaults.
type scene struct {
	name             string
	re, im, height   string
	width, rows      int // 48 × 32
	power, limit     int // power 2
	julia            bool
	paramRe, paramIm string
	bailout          float64 // 1000
	cos, sin         float64 // of the turn; both zero: no turn

	noTables   bool // step by step
	centreOnly bool // no search for a nucleus

	kernel *Kernel
	ref    *orbit.Reference
	pixel  precision.Ext
	centre point
	bits   uint
	set    exact.Set
}

// decimal parses a number, the empty text as 0.
func decimal(t testing.TB, s string) precision.Decimal {
	t.Helper()
	if s == "" {
		s = "0"
	}
	d, err := precision.ParseDecimal(s)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

func (s *scene) defaults() {
	if s.power == 0 {
		s.power = 2
	}
	if s.rows == 0 {
		s.width, s.rows = 48, 32
	}
	if s.bailout == 0 {
		s.bailout = 1000
	}
	if s.cos == 0 && s.sin == 0 {
		s.cos = 1
	}
}

// build computes the scene's reference, tables and kernel.
func (s *scene) build(t testing.TB) *scene {
	t.Helper()
	s.defaults()
	f, err := formula.ForPower(s.power)
	if err != nil {
		t.Fatal(err)
	}
	re, im, h := decimal(t, s.re), decimal(t, s.im), decimal(t, s.height)
	s.pixel = h.Ext().Quo(precision.ExtOf(float64(s.rows)))
	s.bits = precision.BitsFor(s.pixel) + 64
	s.centre = point{re.Float(s.bits), im.Float(s.bits)}
	cfg := Config{Map: f, Julia: s.julia, Limit: s.limit, Bailout: s.bailout,
		View: View{MidX: float64(s.width) / 2, MidY: float64(s.rows) / 2,
			Cos: s.cos, Sin: s.sin, Pixel: s.pixel}}
	cfg.Centre[0], _ = s.centre.re.Float64()
	cfg.Centre[1], _ = s.centre.im.Float64()
	s.set = exact.Set{Power: s.power, Julia: s.julia}
	if s.julia {
		s.set.Parameter = [2]precision.Decimal{decimal(t, s.paramRe), decimal(t, s.paramIm)}
		cfg.Parameter[0], _ = s.set.Parameter[0].Float(53).Float64()
		cfg.Parameter[1], _ = s.set.Parameter[1].Float(53).Float64()
	}
	if !Direct(s.pixel) {
		s.refer(t, &cfg, [2]precision.Decimal{re, im})
	}
	s.kernel = New(cfg)
	return s
}

// refer computes what a view too fine for direct iteration needs.
func (s *scene) refer(t testing.TB, cfg *Config, centre [2]precision.Decimal) {
	t.Helper()
	radius := s.pixel.Mul(precision.ExtOf(math.Sqrt(float64(s.width*s.width + s.rows*s.rows))))
	q := orbit.Request{Map: cfg.Map, Julia: s.julia, Parameter: s.set.Parameter, Centre: centre,
		Pixel: s.pixel, Radius: radius, Limit: s.limit, Bailout: s.bailout}
	if s.centreOnly {
		q.Radius = precision.Ext{} // no ball holds anything
	}
	ref, err := orbit.New(context.Background(), q)
	if err != nil {
		t.Fatal(err)
	}
	s.ref, cfg.Reference = ref, ref
	if s.noTables {
		return
	}
	far := precision.Ext{}
	if !s.julia {
		far = radius.Add(ref.Offset.Abs())
	}
	cfg.Tables = ref.Tables(far, s.pixel.E, s.bailout)
}

// regime names the regime that a scene's samples start in.
func (s *scene) regime() string {
	switch {
	case s.kernel.cfg.Reference == nil:
		return "direct"
	case s.kernel.deep:
		return "deep"
	}
	return "double"
}

// at returns the point of the plane at lattice coordinates x, y: centre +
// pixel · (offset turned back).
func (s *scene) at(x, y float64) point {
	u, w := s.big(x-float64(s.width)/2), s.big(float64(s.rows)/2-y)
	turn := point{s.big(s.cos), s.big(-s.sin)}
	off := point{u, w}.mul(turn)
	px := s.pixel.Big(s.bits)
	off = point{off.re.Mul(off.re, px), off.im.Mul(off.im, px)}
	return s.centre.add(off)
}

func (s *scene) big(x float64) *big.Float { return new(big.Float).SetPrec(s.bits).SetFloat64(x) }

// exact iterates a point of the lattice directly at full precision.
func (s *scene) exact(t testing.TB, x, y float64) exact.Result {
	t.Helper()
	return s.exactTo(t, x, y, s.limit)
}

func (s *scene) exactTo(t testing.TB, x, y float64, limit int) exact.Result {
	t.Helper()
	at := s.at(x, y)
	p := exact.Point{Pixel: s.pixel, Re: at.re, Im: at.im}
	r, err := exact.Iterate(context.Background(), s.set, p, limit, s.bailout, s.bits)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// spread returns n points of the lattice, always the same for a seed.
func (s *scene) spread(n int, seed uint64) [][2]float64 {
	r := rand.New(rand.NewPCG(seed, 20120))
	points := make([][2]float64, n)
	for i := range points {
		points[i] = [2]float64{r.Float64() * float64(s.width), r.Float64() * float64(s.rows)}
	}
	return points
}

func (s *scene) lnPower() float64 { return math.Log(float64(s.power)) }

// allowed is how far a smooth count may be from the truth: what a shift of
// 1e-9 of a pixel makes of it (the smooth count's slope is 1/(ln p·distance)),
// or rounding.
func (s *scene) allowed(smooth, distance float64) float64 {
	return math.Max(1e-9/(s.lnPower()*distance), smooth*0x1p-44)
}

// allowedShare is how far a distance may be from the truth, as a share of it:
// what leaps leave out of the derivative, and what a shift of 1e-9 of a pixel
// makes of a function that by Koebe's distortion theorem changes by a share of
// at most about 4 times that of its argument.
func allowedShare(distance float64) float64 { return 1e-7 + 4e-9/distance }

// robust reports whether a shift of 1e-8 of a pixel leaves the count as it is.
func (s *scene) robust(n int, smooth, distance float64) bool {
	margin := math.Min(smooth-float64(n), float64(n+1)-smooth)
	return margin > 1e-8/(s.lnPower()*distance)
}

// tally counts how samples stood against the truth.
type tally struct {
	asked, robust, equal, inside int
	worst                        float64 // error of a smooth count over what is allowed
}

// compare holds a field against direct iteration and complains where they
// part.
func (s *scene) compare(t testing.TB, n *tally, x, y float64, f Field, e exact.Result) {
	t.Helper()
	n.asked++
	if !e.Escaped {
		n.inside++
		if f.State == Escaped && s.robust(f.N, f.Smooth, f.Distance) {
			t.Errorf("%s (%g, %g): escaped at %d, never by direct iteration", s.name, x, y, f.N)
		}
		return
	}
	robust := s.robust(e.N, e.Smooth, e.Distance)
	if robust {
		n.robust++
	}
	if f.State != Escaped {
		if robust || e.N < s.limit {
			t.Errorf("%s (%g, %g): %v, but %d by direct iteration", s.name, x, y, f.State, e.N)
		}
		return
	}
	if f.N == e.N {
		n.equal++
	} else if robust {
		t.Errorf("%s (%g, %g): n = %d, %d by direct iteration", s.name, x, y, f.N, e.N)
	}
	off := math.Abs(f.Smooth-e.Smooth) / s.allowed(e.Smooth, e.Distance)
	n.worst = math.Max(n.worst, off)
	if off > 1 {
		t.Errorf("%s (%g, %g): smooth count %v, %v by direct iteration", s.name, x, y, f.Smooth, e.Smooth)
	}
	if q := math.Abs(f.Distance/e.Distance - 1); f.N == e.N && q > allowedShare(e.Distance) {
		t.Errorf("%s (%g, %g): distance %v, %v by direct iteration", s.name, x, y, f.Distance, e.Distance)
	}
}

// point is a complex number of arbitrary precision.
type point struct{ re, im *big.Float }

func newPoint(re, im float64, bits uint) point {
	return point{new(big.Float).SetPrec(bits).SetFloat64(re), new(big.Float).SetPrec(bits).SetFloat64(im)}
}

func (a point) prec(bits uint) point {
	return point{new(big.Float).SetPrec(bits).Set(a.re), new(big.Float).SetPrec(bits).Set(a.im)}
}

func (a point) add(b point) point {
	return point{new(big.Float).Add(a.re, b.re), new(big.Float).Add(a.im, b.im)}
}

func (a point) sub(b point) point {
	return point{new(big.Float).Sub(a.re, b.re), new(big.Float).Sub(a.im, b.im)}
}

func (a point) mul(b point) point {
	m := func(x, y *big.Float) *big.Float { return new(big.Float).Mul(x, y) }
	re, im := m(a.re, b.re), m(a.re, b.im)
	return point{re.Sub(re, m(a.im, b.im)), im.Add(im, m(a.im, b.re))}
}

// norm is |a|².
func (a point) norm() *big.Float {
	n := new(big.Float).Mul(a.re, a.re)
	return n.Add(n, new(big.Float).Mul(a.im, a.im))
}

func (a point) abs() *big.Float { n := a.norm(); return n.Sqrt(n) }

// sqrt is a root of a: with m = |a|, √((m+x)/2) ± i√((m-x)/2).
func (a point) sqrt() point {
	m := a.abs()
	half := func(x *big.Float) *big.Float {
		if x.Sign() <= 0 {
			return new(big.Float).SetPrec(x.Prec())
		}
		x.SetMantExp(x, -1)
		return x.Sqrt(x)
	}
	re := half(new(big.Float).Add(m, a.re))
	im := half(new(big.Float).Sub(m, a.re))
	if a.im.Sign() < 0 {
		im.Neg(im)
	}
	return point{re, im}
}

// lnAbs is ln|a|. Where |a|² = 1 + t with a small t, it is the start of
// Mercator's series, good to t³ of its value.
func (a point) lnAbs() *big.Float {
	n := a.norm()
	t := new(big.Float).Sub(n, big.NewFloat(1))
	if t.Sign() == 0 || t.MantExp(nil) > -40 {
		l := precision.BigLog(n, a.re.Prec())
		return l.SetMantExp(l, -1)
	}
	l := new(big.Float).Quo(t, big.NewFloat(3))
	l.Sub(l, big.NewFloat(0.5))
	l.Mul(l, t)
	l.Add(l, big.NewFloat(1))
	l.Mul(l, t)
	return l.SetMantExp(l, -1)
}
