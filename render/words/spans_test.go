package words

import (
	"math"
	"testing"
)

// TestSpans holds rates and rough times to what a person would write.
func TestSpans(t *testing.T) {
	for got, want := range map[string]string{
		Span(0.2): "1 s", Span(99.4): "99 s", Span(99.6): "2 min", Span(300): "5 min", Span(5969): "99 min", Span(6000): "1 h 40 min",
		Span(47 * 3600): "47 h 00 min", Span(50.4 * 3600): "2 d 2 h", Span(1e12): "years", Span(math.NaN()): "years", Span(math.Inf(1)): "years",
		Count(0): "0", Count(999): "999", Count(1000): "1,000", Count(1234567): "1,234,567", Count(-1234): "-1,234", Count(-123): "-123",
		Amount(0, "px/s"): "0 px/s", Amount(999.4, "px/s"): "999 px/s", Amount(999.6, "px/s"): "1.0 kpx/s", Amount(12_345, "px/s"): "12.3 kpx/s",
		Amount(99_960, "B"): "100 kB", Amount(2.5e9, "B"): "2.5 GB", Amount(5e15, "B"): "5000 TB", Amount(12_345, "steps"): "12.3 k steps", Amount(950, "steps"): "950 steps",
		Between(65, 90): "between 65 and 90 s", Between(94, 124): "between 1.6 and 2.1 min", Between(600, 1200): "between 10 and 20 min",
		Between(5400, 90000):       "between 90 min and 25 h 00 min",
		Plural(1, "tile", "tiles"): "1 tile", Plural(0, "tile", "tiles"): "0 tiles", Plural(1000, "tile", "tiles"): "1,000 tiles",
	} {
		if got != want {
			t.Errorf("%q, not %q", got, want)
		}
	}
}
