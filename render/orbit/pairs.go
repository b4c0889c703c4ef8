package orbit

import (
	"math"
	"slices"

	"leadline/precision"
)

// pairFinder keeps the orbit of a ball's centre and looks up which earlier
// points a new one may meet. Points are kept in squares of a grid; only the
// nine squares about a point are searched while the ball's image is small.
type pairFinder struct {
	w       *walker
	points  []*precision.Fixed
	slopes  []precision.ExtComplex
	doubles []Z
	squares map[[2]int32][]int
	largest precision.Ext // |dz_n/dc| so far
	work    int           // comparisons done
	bytes   int           // memory taken by points
}

const (
	gridSide    = 0x1p-8
	pairWork    = 1 << 31 // comparisons: some seconds
	pairBytes   = 1 << 28 // memory for points
	pairBallMax = 64      // radius of an image of the ball that covers everything
)

// pairs shows the pairs of preperiod and period whose Misiurewicz points the
// ball about the centre meets, to first order: |P| < radius·|dP/dc|. They come
// in order of their sum, those of one sum nearest first. It ends where the orbit
// escapes, where the ball's image has covered the set, or at a bound of work.
func (w *walker) pairs(centre *precision.Fixed, found func(k, p int) (done bool, err error)) error {
	f := &pairFinder{w: w, squares: map[[2]int32][]int{}}
	f.add(&precision.Fixed{Frac: w.frac}, precision.ExtComplex{}) // index 0, never met
	z, d := &precision.Fixed{Frac: w.frac}, precision.ExtComplex{}
	for n := 1; n <= w.q.Limit && f.work < pairWork && f.bytes < pairBytes; n++ {
		if err := w.pause("period", n, w.q.Limit); err != nil {
			return err
		}
		d = w.q.Map.Derivative(z.Ext()).Mul(d).Add(one)
		w.step(z, centre)
		if escaped(z) || d.Abs().Mul(w.q.Radius).Cmp(precision.ExtOf(pairBallMax)) > 0 {
			return nil
		}
		f.add(z, d)
		for _, m := range f.meets(n) {
			if done, err := found(m.j+1, n-m.j); done || err != nil {
				return err
			}
		}
	}
	return nil
}

// add keeps the next point of the orbit; index 0 is put in no square.
func (f *pairFinder) add(z *precision.Fixed, d precision.ExtComplex) {
	re, im := z.Complex()
	f.points = append(f.points, new(precision.Fixed).Set(z))
	f.slopes = append(f.slopes, d)
	f.doubles = append(f.doubles, Z{re, im})
	f.bytes += int(z.Frac)/4 + 256
	if n := len(f.points) - 1; n > 0 {
		at := square(re, im)
		f.squares[at] = append(f.squares[at], n)
		if a := d.Abs(); a.Cmp(f.largest) > 0 {
			f.largest = a
		}
	}
}

func square(re, im float64) [2]int32 {
	return [2]int32{int32(math.Floor(re / gridSide)), int32(math.Floor(im / gridSide))}
}

// meets returns the indices below n whose points, turned by a root of unity
// other than 1, the ball's image at n may meet, nearest first.
func (f *pairFinder) meets(n int) []near {
	reach := f.w.q.Radius.Mul(f.slopes[n].Abs().Add(f.largest)).Float64() + 0x1p-45
	var ns []near
	for _, turn := range turns[f.w.q.Map.Power()] {
		z := f.doubles[n]
		x := math.FMA(z.Re, turn.Re, -float64(z.Im*turn.Im))
		y := math.FMA(z.Re, turn.Im, float64(z.Im*turn.Re))
		if reach > gridSide {
			ns = f.compare(ns, n, x, y, reach, nil)
			continue
		}
		at := square(x, y)
		for dy := int32(-1); dy <= 1; dy++ {
			for dx := int32(-1); dx <= 1; dx++ {
				if js := f.squares[[2]int32{at[0] + dx, at[1] + dy}]; js != nil {
					ns = f.compare(ns, n, x, y, reach, js)
				}
			}
		}
	}
	sortNear(ns)
	return slices.Compact(ns) // both turns of power 3 may find one
}

// turns are the roots of unity of each power, 1 left out.
var turns = map[int][]Z{
	2: {{-1, 0}},
	3: {{-0.5, 0.8660254037844386}, {-0.5, -0.8660254037844386}},
}

// compare adds to ns the indices among js (all below n where js is nil) that
// meet n: by doubles first, then exactly.
func (f *pairFinder) compare(ns []near, n int, x, y, reach float64, js []int) []near {
	count := len(js)
	if js == nil {
		count = n - 1
	}
	f.work += count
	for i := range count {
		j := i + 1
		if js != nil {
			j = js[i]
		}
		if z := f.doubles[j]; j >= n || math.Abs(z.Re-x) > reach || math.Abs(z.Im-y) > reach {
			continue
		}
		if d, ok := f.distance(n, j); ok {
			ns = append(ns, near{j, d})
		}
	}
	return ns
}

// distance is how far from the centre the point lies at which n meets j, to
// first order, and whether that is within the radius.
func (f *pairFinder) distance(n, j int) (precision.Ext, bool) {
	u, v, power := f.points[n], f.points[j], f.w.q.Map.Power()
	slope := restSlope(power, u.Ext(), v.Ext(), f.slopes[n], f.slopes[j])
	if slope.IsZero() {
		return precision.Ext{}, false
	}
	d := rest(power, u, v, &f.w.scratch).Ext().Quo(slope).Abs()
	return d, d.Cmp(f.w.q.Radius) < 0
}
