package palette

import "math"

// Monotone piecewise cubic interpolation: Fritsch and Carlson (SIAM J. Numer.
// Anal. 17, 1980) with the slopes of Fritsch and Butland (SIAM J. Sci. Stat.
// Comput. 5, 1984), a weighted harmonic mean of the two neighbouring chords.
// Where the data rise the curve rises, where they turn it turns at the stop,
// so that no colour appears between two stops that neither of them announced.

// monotoneSlopes gives the slope at every point. x increases strictly. In a
// cyclic curve the two ends share one slope, as if the data went on.
func monotoneSlopes(x, y []float64, cyclic bool) []float64 {
	n := len(x)
	d := make([]float64, n)
	step := func(i int) (h, chord float64) {
		h = x[i+1] - x[i]
		return h, (y[i+1] - y[i]) / h
	}
	for i := 1; i < n-1; i++ {
		h0, c0 := step(i - 1)
		h1, c1 := step(i)
		d[i] = harmonic(h0, c0, h1, c1)
	}
	h0, c0 := step(0)
	h1, c1 := step(n - 2)
	switch {
	case cyclic:
		d[0] = harmonic(h1, c1, h0, c0)
		d[n-1] = d[0]
	case n == 2:
		d[0], d[1] = c0, c0
	default:
		hn, cn := step(1)
		d[0] = endSlope(h0, c0, hn, cn)
		hn, cn = step(n - 3)
		d[n-1] = endSlope(h1, c1, hn, cn)
	}
	return d
}

// harmonic is the slope between two chords of lengths h0, h1: 0 where they
// differ in sign, else their harmonic mean, the shorter interval weighing
// more.
func harmonic(h0, c0, h1, c1 float64) float64 {
	if c0 == 0 || c1 == 0 || (c0 < 0) != (c1 < 0) {
		return 0
	}
	w0 := math.FMA(2, h1, h0)
	w1 := math.FMA(2, h0, h1)
	return (w0 + w1) / (w0/c0 + w1/c1)
}

// endSlope is the three-point slope at an end, bent back where it would break
// monotonicity (the end formula of PCHIP; Moler, Numerical Computing with
// MATLAB, §3.6). h0, c0 belong to the end interval.
func endSlope(h0, c0, h1, c1 float64) float64 {
	d := (float64(math.FMA(2, h0, h1)*c0) - float64(h0*c1)) / (h0 + h1)
	switch {
	case c0 == 0 || d == 0 || (d < 0) != (c0 < 0):
		return 0
	case (c0 < 0) != (c1 < 0) && math.Abs(d) > 3*math.Abs(c0):
		return 3 * c0
	}
	return d
}

// interval finds i with x[i] <= t < x[i+1], the last interval taking its right
// end too.
func interval(x []float64, t float64) int {
	low, high := 0, len(x)-1
	for high-low > 1 {
		if mid := (low + high) / 2; t < x[mid] {
			high = mid
		} else {
			low = mid
		}
	}
	return low
}

// straight is linear interpolation in interval i; it meets both ends exactly.
func straight(x, y []float64, i int, t float64) float64 {
	s := (t - x[i]) / (x[i+1] - x[i])
	return math.FMA(s, y[i+1], float64((1-s)*y[i]))
}

// hermite is the cubic of interval i with the slopes d; it meets both ends
// exactly.
func hermite(x, y, d []float64, i int, t float64) float64 {
	h := x[i+1] - x[i]
	s := (t - x[i]) / h
	r := 1 - s
	// y0·r²(1+2s) + y1·s²(1+2r) + h·s·r·(d0·r − d1·s)
	value := float64(y[i] * (r * r * math.FMA(2, s, 1)))
	value = math.FMA(y[i+1], s*s*math.FMA(2, r, 1), value)
	bend := float64(d[i]*r) - float64(d[i+1]*s)
	return math.FMA(h*s*r, bend, value)
}
