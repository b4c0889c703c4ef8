package orbit

import (
	"leadline/precision"
)

// factor is a divisor q of a period p with Möbius' μ(p/q), which is not 0.
type factor struct {
	q  int
	mu float64
}

// factors returns the divisors q of p with μ(p/q) ≠ 0, in rising order.
//
// The polynomial whose roots are the nuclei of period p exactly is the product
// of z_q^μ(p/q) over them (Gleason; Hutz and Towsley 2015), so its logarithmic
// derivative is the sum of μ(p/q)·z_q'/z_q. Newton's step on it is one over that
// sum, and is driven away from the nuclei of lower periods.
func factors(p int) []factor {
	var fs []factor
	for q := 1; q <= p; q++ {
		if p%q != 0 {
			continue
		}
		if mu := moebius(p / q); mu != 0 {
			fs = append(fs, factor{q, float64(mu)})
		}
	}
	return fs
}

// moebius is Möbius' μ: 0 where a square divides n, else 1 or -1 as the number
// of its prime factors is even or odd.
func moebius(n int) int {
	mu := 1
	for f := 2; f*f <= n; f++ {
		if n%f != 0 {
			continue
		}
		if n /= f; n%f == 0 {
			return 0
		}
		mu = -mu
	}
	if n > 1 {
		mu = -mu
	}
	return mu
}

// gleason is Newton's step towards a nucleus of exactly the given period.
func (w *walker) gleason(period int) stepper {
	fs := factors(period)
	return func(c *precision.Fixed) (step precision.ExtComplex, ok bool, err error) {
		sum, i, hit := precision.ExtComplex{}, 0, 0
		ok, err = w.critical("nucleus", c, period, func(n int, z *precision.Fixed, d precision.ExtComplex) {
			if n != fs[i].q {
				return
			}
			if x := z.Ext(); !x.IsZero() {
				sum = sum.Add(d.Quo(x).Scale(fs[i].mu))
			} else if hit == 0 {
				hit = n
			}
			i++
		})
		switch {
		case !ok || hit == 0 && sum.IsZero() || hit != 0 && hit != period:
			return step, false, err // escaped, nowhere to go, or a lower period's nucleus
		case hit == period:
			return step, true, nil
		}
		return one.Quo(sum), true, nil
	}
}
