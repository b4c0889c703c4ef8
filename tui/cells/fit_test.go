package cells

import (
	"math"
	"math/bits"
	"math/rand/v2"
	"testing"
)

// parting is the squared error of a mask, straight from its definition.
func parting(p [][3]float64, mask int) float64 {
	sum := 0.0
	for side := range 2 {
		var mean [3]float64
		n := 0.0
		for i := range p {
			if mask>>i&1 == side {
				n++
				for k := range mean {
					mean[k] += p[i][k]
				}
			}
		}
		for i := range p {
			if mask>>i&1 == side {
				for k := range mean {
					sum += (p[i][k] - mean[k]/n) * (p[i][k] - mean[k]/n)
				}
			}
		}
	}
	return sum
}

func labsOf(s samples, n int) [][3]float64 {
	p := make([][3]float64, n)
	for i := range p {
		l := tables().lab(s[i])
		p[i] = [3]float64{float64(l.l), float64(l.a), float64(l.b)}
	}
	return p
}

// randomCell mixes free colours, shades of one colour, and cells of two or three.
func randomCell(rng *rand.Rand) (s samples) {
	base, few := randomRGB(rng), [3]RGB{randomRGB(rng), randomRGB(rng), randomRGB(rng)}
	kind := rng.IntN(4)
	for i := range s {
		switch kind {
		case 0:
			s[i] = randomRGB(rng)
		case 1:
			near := func(v uint8) uint8 { return uint8(min(max(int(v)+rng.IntN(13)-6, 0), 255)) }
			s[i] = RGB{near(base.R), near(base.G), near(base.B)}
		default:
			s[i] = few[rng.IntN(kind)]
		}
	}
	return s
}

// TestFitIsOptimal: no parting of all 2^n has less error than the chosen one, to
// the 18 bits that gains are compared in, and the colours are the means of its sets.
func TestFitIsOptimal(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 8))
	for round := range 20000 {
		n := 4 + 2*(round%2)
		s := randomCell(rng)
		mask, fg, bg := tables().fit(&s, n)
		p := labsOf(s, n)
		whole, least := parting(p, 0), math.Inf(1)
		for m := range 1 << n {
			least = min(least, parting(p, m))
		}
		if got := parting(p, int(mask)); got > least+1e-5*whole+1e-12 {
			t.Fatalf("%v of %d: mask %b has error %g, the best %g of %g", s[:n], n, mask, got, least, whole)
		}
		k := bits.OnesCount8(mask)
		if k > n-k || 2*k == n && mask>>(n-1) == 1 {
			t.Fatalf("%v: the letter has %d of %d samples, mask %b", s[:n], k, n, mask)
		}
		checkMean(t, p, int(mask), 1, fg)
		checkMean(t, p, int(mask), 0, bg)
	}
}

// checkMean wants the colour of one side within rounding of its mean in OKLab.
func checkMean(t *testing.T, p [][3]float64, mask, side int, got RGB) {
	t.Helper()
	var mean lab
	n := 0
	for i := range p {
		if mask>>i&1 == side {
			mean = mean.plus(lab{float32(p[i][0]), float32(p[i][1]), float32(p[i][2])})
			n++
		}
	}
	if n == 0 {
		return
	}
	want := tables().rgb(mean.times(1 / float32(n)))
	off := func(a, b uint8) bool { return max(a, b)-min(a, b) > 1 }
	if off(got.R, want.R) || off(got.G, want.G) || off(got.B, want.B) {
		t.Fatalf("side %d of %b is painted %v, its mean is %v", side, mask, got, want)
	}
}

// TestFitOfTwoColours: where a cell has two colours it is drawn without loss, in
// every pattern there is.
func TestFitOfTwoColours(t *testing.T) {
	a, b := RGB{250, 240, 214}, RGB{6, 10, 18}
	for _, n := range []int{4, 6} {
		for pattern := 1; pattern < 1<<n-1; pattern++ {
			var s samples
			for i := range n {
				s[i] = b
				if pattern>>i&1 == 1 {
					s[i] = a
				}
			}
			mask, fg, bg := tables().fit(&s, n)
			for i := range n {
				got := bg
				if mask>>i&1 == 1 {
					got = fg
				}
				if got != s[i] {
					t.Fatalf("pattern %b of %d: sample %d is %v, want %v", pattern, n, i, got, s[i])
				}
			}
		}
	}
}

// TestFitKeepsToOneChoice: samples on the corners of a square can be parted in
// several equally good ways; the choice does not depend on rounding of the mean.
func TestFitKeepsToOneChoice(t *testing.T) {
	p := [6]lab{{0.1, 0, 0}, {-0.1, 0, 0}, {0, 0.1, 0}, {0, -0.1, 0}}
	first, _ := part(&p, 4)
	for i := range 50 {
		q := p
		for k := range q[:4] {
			q[k].b += float32(i) * 1e-9
		}
		if got, _ := part(&q, 4); got != first {
			t.Fatalf("a shift of %de-9 turns mask %b into %b", i, first, got)
		}
	}
}
