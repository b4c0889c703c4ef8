package words

import "testing"

// TestWords holds every form to what a person would write.
func TestWords(t *testing.T) {
	for _, c := range [][2]string{
		{Size(999), "1.0 kB"}, {Size(1_500_000), "1.5 MB"}, {Size(2_345_000_000), "2.35 GB"},
		{Clock(3.14), "3.1 s"}, {Clock(59.6), "60 s"}, {Clock(150), "2 min 30 s"}, {Clock(86400), "24 h 00 min"},
		{Count(0), "0"}, {Count(999), "999"}, {Count(73_000), "73,000"}, {Count(-1_234_567), "-1,234,567"},
		{Percent(0), "0 %"}, {Percent(1), "100 %"}, {Percent(0.0001), "under 0.1 %"}, {Percent(0.99999), "over 99.9 %"}, {Percent(0.123), "12.3 %"},
		{Digits("-0.84001", 12), "-0.84001"}, {Digits("-0.8400187427391", 8), "-0.8400…"}, {Digits("2.96123456e-316", 10), "2.96…e-316"},
	} {
		if c[0] != c[1] {
			t.Errorf("%q, not %q", c[0], c[1])
		}
	}
}

func TestClocks(t *testing.T) {
	for s, want := range map[float64]string{0: "0.0 s", 9.94: "9.9 s", 10: "10 s", 119: "119 s", 120: "2 min 00 s",
		3725: "62 min 05 s", 7200: "2 h 00 min", 90061: "25 h 01 min"} {
		if got := Clock(s); got != want {
			t.Errorf("%v s is %q, not %q", s, got, want)
		}
	}
}
