package orbit

import (
	"math"
	"runtime"
	"sync"

	"leadline/precision"
)

// Epsilon is the share of a step's linear part below which its nonlinear part
// is dropped, 2^-48: as good as 2^-53 in every count measured, while 2^-40
// already shows.
const Epsilon = 0x1p-48

// ShortestLeap is log2 of the shortest leap kept, 4 iterations.
const ShortestLeap = 2

// flat is the modulus beyond which the reference is about to escape and no
// leap may pass.
const flat = 16

// Leap is a bilinear approximation of some iterations:
// δ → A·δ + B·δc, A = (Ar + i·Ai)·2^Ae, B = (Br + i·Bi)·2^Be, where δc is
// given in units of 2^s, the table's scale. Exponents are zero wherever the
// value is a comfortable double.
type Leap struct {
	Ar, Ai, Br, Bi float64
	Ae, Be         int32
}

// A and B return the coefficients in extended range.
func (l *Leap) A() precision.ExtComplex {
	return precision.NewExtComplex(l.Ar, l.Ai, int64(l.Ae))
}

// B returns the coefficient of δc.
func (l *Leap) B() precision.ExtComplex {
	return precision.NewExtComplex(l.Br, l.Bi, int64(l.Be))
}

// Level holds the leaps of one length; leap k starts k lengths after the
// table's first index. Key is the squared radius within which it holds, on
// the scale of precision.ExtComplex.Key.
type Level struct {
	Key  []int64
	Leap []Leap
}

// Table holds the leaps over one segment of the reference. Levels[i] leaps
// 2^(ShortestLeap+i) iterations.
type Table struct {
	First  int // leaps start at First + k·2^ShortestLeap
	Levels []Level
}

// Far is the largest |δc| of the frame, Scale the exponent its δc are given
// in; a Julia set has neither.
type tableMaker struct {
	r     *Reference
	far   precision.Ext
	scale int64
	stop  float64
}

// linear is a leap in the making.
type linear struct {
	a, b   precision.ExtComplex
	radius precision.Ext
}

// Tables builds the leaps over every segment. far bounds |δc| over the frame
// (zero for Julia sets), scale is the binary exponent of the unit that δc will
// be given in, bailout the frame's: leaps do not look for escape on their way.
func (r *Reference) Tables(far precision.Ext, scale int64, bailout float64) []*Table {
	t := &tableMaker{r: r, far: far, scale: scale, stop: math.Min(flat, bailout/2)}
	tables := make([]*Table, len(r.Segments))
	for i, s := range r.Segments {
		tables[i] = t.build(s)
	}
	return tables
}

// build makes the levels of one segment from the shortest up, until no leap
// of a level holds anywhere.
func (t *tableMaker) build(s Segment) *Table {
	table := &Table{First: s.Start + 1}
	count := (s.End - table.First) >> ShortestLeap
	if count <= 0 {
		return table
	}
	current := make([]linear, count)
	parallel(count, func(k int) {
		m := table.First + k<<ShortestLeap
		l := t.single(m)
		for i := 1; i < 1<<ShortestLeap; i++ {
			l = t.merge(l, t.single(m+i))
		}
		current[k] = l
	})
	for len(current) > 0 && anyHolds(current) {
		table.Levels = append(table.Levels, t.level(current))
		next := make([]linear, len(current)/2)
		parallel(len(next), func(k int) { next[k] = t.merge(current[2*k], current[2*k+1]) })
		current = next
	}
	return table
}

// single is one iteration at index m: A = f'(Z), B = 1, and the radius within
// which the nonlinear part stays below Epsilon of the linear one.
func (t *tableMaker) single(m int) linear {
	z := t.r.At(m)
	a := t.r.Map.Derivative(z)
	l := linear{a: a, b: precision.NewExtComplex(1, 0, t.scale)}
	p := t.r.Points[m]
	if a.IsZero() || math.FMA(p.Re, p.Re, float64(p.Im*p.Im)) > float64(t.stop*t.stop) {
		return l
	}
	l.radius = t.r.Map.LinearReach(z).Mul(precision.ExtOf(Epsilon))
	if t.far.M != 0 {
		l.radius = l.radius.Sub(t.far.Quo(a.Abs()))
	}
	return l
}

// merge joins x and then y: A = AyAx, B = AyBx + By, and the radius is what
// keeps x in its own and x's image in y's.
func (t *tableMaker) merge(x, y linear) linear {
	l := linear{a: y.a.Mul(x.a), b: y.a.Mul(x.b).Add(y.b)}
	if x.radius.M <= 0 || y.radius.M <= 0 {
		return l
	}
	// x.b carries 2^scale; far does not.
	room := y.radius.Sub(x.b.Abs().Ldexp(-t.scale).Mul(t.far)).Quo(x.a.Abs())
	l.radius = x.radius
	if room.Cmp(l.radius) < 0 {
		l.radius = room
	}
	return l
}

// level packs leaps for the inner loops.
func (t *tableMaker) level(ls []linear) Level {
	v := Level{Key: make([]int64, len(ls)), Leap: make([]Leap, len(ls))}
	parallel(len(ls), func(k int) {
		l := &ls[k]
		v.Key[k] = precision.KeyOfSquare(l.radius)
		p := &v.Leap[k]
		p.Ar, p.Ai, p.Ae = pack(l.a)
		p.Br, p.Bi, p.Be = pack(l.b)
	})
	return v
}

// pack gives plain doubles wherever they are comfortable.
func pack(z precision.ExtComplex) (re, im float64, e int32) {
	if z.E > -600 && z.E < 500 {
		re, im = z.Complex()
		return re, im, 0
	}
	return z.Re, z.Im, int32(z.E)
}

func anyHolds(ls []linear) bool {
	for i := range ls {
		if ls[i].radius.M > 0 {
			return true
		}
	}
	return false
}

// parallel runs f(0) … f(n-1) over the cores; each call writes only its own
// index, so the order does not matter.
func parallel(n int, f func(int)) {
	const chunk = 1024
	workers := runtime.GOMAXPROCS(0)
	if n <= chunk || workers == 1 {
		for i := range n {
			f(i)
		}
		return
	}
	var wg sync.WaitGroup
	for w := range workers {
		wg.Go(func() {
			for start := w * chunk; start < n; start += workers * chunk {
				for i := start; i < min(start+chunk, n); i++ {
					f(i)
				}
			}
		})
	}
	wg.Wait()
}
