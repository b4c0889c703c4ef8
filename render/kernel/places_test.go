package kernel

import (
	"fmt"
	"math"
	"math/big"
	"testing"

	"leadline/precision"
)

// small is a truth file's view on a lattice of 48 by 32 pixels.
func small(t testing.TB, name string) scene {
	s := *known(t, name)
	s.width, s.rows = 48, 32
	return s
}

// tinySet shows a small copy of the Mandelbrot set at 5e-31 (doubles).
func tinySet(t testing.TB) scene { return small(t, "minibrot-1e-30") }

// deepSet shows a small copy at 1e-339, below the range of doubles.
func deepSet(t testing.TB) scene {
	s := tipSet(t, 280, 0)
	s.limit = 30000
	return s
}

// tipSet shows the small copy of the Mandelbrot set on the real axis that lies
// nearest to -2 among those of a period. Its nucleus is the zero of z_period
// next to -2 + (3/2)π²·4^-period (z_n = 2 cosh(2^(n-2)·√(-8δ/3)) near the tip, see
// TestTip), found by Newton's method in big floats. The copy is about
// 0.3 times the square of its distance from the tip. The view is three times as
// high as the copy, and moved to the right by aside of its height.
func tipSet(t testing.TB, period int, aside float64) scene {
	t.Helper()
	bits := uint(4*period + 128)
	big1 := func(x float64) *big.Float { return new(big.Float).SetPrec(bits).SetFloat64(x) }
	off := big1(1.5 * math.Pi * math.Pi)
	off.SetMantExp(off, -2*period)
	c := new(big.Float).Add(big1(-2), off)
	for range 12 {
		z, d := new(big.Float).Set(c), big1(1)
		for range period - 1 {
			d.Mul(d, z).SetMantExp(d, 1)
			d.Add(d, big1(1))
			z.Mul(z, z).Add(z, c)
		}
		c.Sub(c, z.Quo(z, d))
	}
	off.Add(c, big1(2))
	size := off.Mul(off, off)
	size.Mul(size, big1(0.9))
	c.Add(c, new(big.Float).Mul(size, big1(aside)))
	return scene{
		name:   fmt.Sprintf("tip, period %d", period),
		re:     precision.DecimalOf(c, int(float64(bits)*0.301)).String(),
		height: precision.DecimalOf(size, 4).String(),
	}
}
