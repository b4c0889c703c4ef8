package palette

import (
	"math"
	"math/big"
)

// ratMatrix is a 3×3 matrix of exact fractions. All colour matrices are built
// in it from the decimals of the standards, so that a matrix and its inverse
// are both correctly rounded and no order of evaluation shows.
type ratMatrix [3][3]*big.Rat

// matrix is a ratMatrix rounded once, for use.
type matrix [3][3]float64

// rat reads a decimal; a malformed one is a mistake in this package.
func rat(s string) *big.Rat {
	r, ok := new(big.Rat).SetString(s)
	if !ok {
		panic("palette: malformed constant " + s)
	}
	return r
}

func ratRows(rows [3][3]string) (m ratMatrix) {
	for i := range m {
		for j := range m[i] {
			m[i][j] = rat(rows[i][j])
		}
	}
	return m
}

func diagonal(d [3]*big.Rat) (m ratMatrix) {
	for i := range m {
		for j := range m[i] {
			m[i][j] = new(big.Rat)
		}
		m[i][i].Set(d[i])
	}
	return m
}

// times returns m·n.
func (m ratMatrix) times(n ratMatrix) (p ratMatrix) {
	for i := range p {
		for j := range p[i] {
			p[i][j] = new(big.Rat)
			for k := range n {
				p[i][j].Add(p[i][j], new(big.Rat).Mul(m[i][k], n[k][j]))
			}
		}
	}
	return p
}

// apply returns m·v.
func (m ratMatrix) apply(v [3]*big.Rat) (w [3]*big.Rat) {
	for i := range w {
		w[i] = new(big.Rat)
		for k := range v {
			w[i].Add(w[i], new(big.Rat).Mul(m[i][k], v[k]))
		}
	}
	return w
}

// cofactor is the signed minor of entry (i, j); the cyclic choice of rows and
// columns carries the sign.
func (m ratMatrix) cofactor(i, j int) *big.Rat {
	a, b, c, d := (i+1)%3, (i+2)%3, (j+1)%3, (j+2)%3
	p := new(big.Rat).Mul(m[a][c], m[b][d])
	return p.Sub(p, new(big.Rat).Mul(m[a][d], m[b][c]))
}

// inverse returns m⁻¹ by cofactors; m must be regular.
func (m ratMatrix) inverse() (n ratMatrix) {
	det := new(big.Rat)
	for j := range 3 {
		det.Add(det, new(big.Rat).Mul(m[0][j], m.cofactor(0, j)))
	}
	for i := range n {
		for j := range n[i] {
			n[i][j] = new(big.Rat).Quo(m.cofactor(j, i), det)
		}
	}
	return n
}

// round gives the nearest float64 of every entry.
func (m ratMatrix) round() (f matrix) {
	for i := range f {
		for j := range f[i] {
			f[i][j], _ = m[i][j].Float64()
		}
	}
	return f
}

// apply returns m·v, two fused steps a component, always in the same order.
func (m *matrix) apply(v [3]float64) (w [3]float64) {
	for i := range w {
		w[i] = math.FMA(m[i][2], v[2], math.FMA(m[i][1], v[1], float64(m[i][0]*v[0])))
	}
	return w
}
