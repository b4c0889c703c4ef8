package precision

import "math"

// Error-free transformations: a result and its rounding error as two doubles whose
// sum is exact (Knuth 1969, Dekker 1971), for finite operands without overflow.

// twoSum returns s = fl(a+b) and e with s + e = a + b.
func twoSum(a, b float64) (s, e float64) {
	s = a + b
	t := s - a
	return s, (a - (s - t)) + (b - t)
}

// fastTwoSum is twoSum for |a| >= |b| or a = 0.
func fastTwoSum(a, b float64) (s, e float64) {
	s = a + b
	return s, b - (s - a)
}

// twoProd returns p = fl(a·b) and e with p + e = a·b, unless e underflows.
func twoProd(a, b float64) (p, e float64) {
	p = float64(a * b)
	return p, math.FMA(a, b, -p)
}

// pow2 returns 2^n for -1022 <= n <= 1023.
func pow2(n int64) float64 { return math.Float64frombits(uint64(n+1023) << 52) }
