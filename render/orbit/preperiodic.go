package orbit

import "leadline/precision"

// pair is a preperiod k >= 2 and a period p. With u = z_(k-1+p) and v = z_(k-1),
// z_(k+p) - z_k = u^d - v^d; the factor u - v stands for lower preperiods, and
// what is left, P(u, v) = (u^d - v^d)/(u - v), is 0 at all Misiurewicz points of
// preperiod k and a period that divides p. Where p divides k - 1 it is also 0
// (d - 1)-fold at the nuclei of period p and its divisors (Hutz and Towsley
// 2015).
type pair struct{ k, p int }

// rest returns P(u, v): u + v for power 2, u² + uv + v² for power 3.
func rest(power int, u, v *precision.Fixed, s *precision.FixedScratch) *precision.Fixed {
	sum := new(precision.Fixed).Set(u)
	sum.Add(u, v)
	if power == 2 {
		return sum
	}
	uv := new(precision.Fixed).Mul(u, v, s) // (u+v)² - uv
	sum.Sqr(sum, s)
	return sum.Sub(sum, uv)
}

// restSlope returns dP/dc from u, v and their derivatives.
func restSlope(power int, u, v, du, dv precision.ExtComplex) precision.ExtComplex {
	if power == 2 {
		return du.Add(dv)
	}
	return u.Ldexp(1).Add(v).Mul(du).Add(v.Ldexp(1).Add(u).Mul(dv))
}

// joined returns P at c.
func (w *walker) joined(c *precision.Fixed, r pair) (*precision.Fixed, bool, error) {
	u, v := new(precision.Fixed), new(precision.Fixed)
	ok, err := w.critical(misiurewiczStage, c, r.k-1+r.p, func(n int, z *precision.Fixed, _ precision.ExtComplex) {
		switch n {
		case r.k - 1:
			v.Set(z)
		case r.k - 1 + r.p:
			u.Set(z)
		}
	})
	if !ok {
		return nil, false, err
	}
	return rest(w.q.Map.Power(), u, v, &w.scratch), true, nil
}

const misiurewiczStage = "Misiurewicz point"

// preperiodic is Newton's step towards a Misiurewicz point of exactly that
// preperiod and period: on the product of P_q^μ(p/q) over the divisors q of p,
// divided where p divides k - 1 by the nuclei's. See factors.
func (w *walker) preperiodic(r pair) stepper {
	fs, power := factors(r.p), w.q.Map.Power()
	return func(c *precision.Fixed) (precision.ExtComplex, bool, error) {
		var sum, dv precision.ExtComplex
		v, hit, ends := new(precision.Fixed), false, false
		i, k := 0, 0 // next factors of nuclei and of P
		ok, err := w.critical(misiurewiczStage, c, r.k-1+r.p, func(n int, z *precision.Fixed, d precision.ExtComplex) {
			if (r.k-1)%r.p == 0 && i < len(fs) && n == fs[i].q {
				if x := z.Ext(); x.IsZero() {
					hit = true
				} else {
					sum = sum.Sub(d.Quo(x).Scale(float64(power-1) * fs[i].mu))
				}
				i++
			}
			if n == r.k-1 {
				v.Set(z)
				dv = d
			}
			if k < len(fs) && n == r.k-1+fs[k].q {
				x := rest(power, z, v, &w.scratch).Ext()
				if ends = x.IsZero() && n == r.k-1+r.p; x.IsZero() {
					hit = hit || !ends
				} else {
					sum = sum.Add(restSlope(power, z.Ext(), v.Ext(), d, dv).Quo(x).Scale(fs[k].mu))
				}
				k++
			}
		})
		switch {
		case !ok || hit || !ends && sum.IsZero():
			return sum, false, err // escaped, nowhere to go, or another kind of point
		case ends:
			return precision.ExtComplex{}, true, nil
		}
		return one.Quo(sum), true, nil
	}
}

// cycle returns the multiplier of the cycle at c, known within off, and whether
// preperiod and period are exact: neither is the point to first order a nucleus,
// nor does its orbit close after a divisor of the period.
func (w *walker) cycle(c *precision.Fixed, r pair, off precision.Ext) (multiplier precision.ExtComplex, exact bool, err error) {
	multiplier, exact = one, true
	power, off := w.q.Map.Power(), off.Ldexp(polishBits)
	v := new(precision.Fixed)
	var dv precision.ExtComplex
	ok, err := w.critical(misiurewiczStage, c, r.k-1+r.p, func(n int, z *precision.Fixed, d precision.ExtComplex) {
		x, q := z.Ext(), n-(r.k-1)
		switch {
		case q == 0:
			v.Set(z)
			dv = d
			exact = x.Key() > d.MulReal(off).Key()
		case q > 0:
			multiplier = multiplier.Mul(w.q.Map.Derivative(x))
		}
		if q > 0 && q < r.p && r.p%q == 0 {
			slope := restSlope(power, x, v.Ext(), d, dv)
			if rest(power, z, v, &w.scratch).Ext().Key() <= slope.MulReal(off).Key() {
				exact = false
			}
		}
	})
	return multiplier, ok && exact, err
}
