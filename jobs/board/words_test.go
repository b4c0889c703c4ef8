package board

import (
	"testing"
	"time"

	"leadline/jobs"
)

func TestWords(t *testing.T) {
	t.Parallel()
	for got, want := range map[string]string{
		percent(0): "0.0 %", percent(0.9999): "99.9 %", percent(1): "100.0 %", percent(0.4): "40.0 %",
		when(time.Time{}): "",
	} {
		if got != want {
			t.Errorf("%q, not %q", got, want)
		}
	}
}

// TestLeft tells a time only where one is known.
func TestLeft(t *testing.T) {
	t.Parallel()
	p := rendering(1, "")
	check := func(want string) {
		t.Helper()
		if got := left(&p); got != want {
			t.Errorf("%q, not %q", got, want)
		}
	}
	check("5 min left, between 4.0 and 6.2 min")
	p.LeftLow, p.LeftHigh = 298, 302
	check("5 min left")
	p.LeftLow, p.LeftHigh = 0, 0
	check("5 min left")
	p.Left = 0
	check("")
	p.Left, p.Paused = 300, true
	check("")
	p.Paused, p.State = false, jobs.Assembling
	check("")
}

// TestScale is as long as the print is done.
func TestScale(t *testing.T) {
	t.Parallel()
	for share, want := range map[float64]int{0: 0, 0.0004: 0, 0.05: 50, 0.1: 100, 0.864: 864, 0.9999: 999, 1: 1000} {
		sum := 0
		for i, l := range newScale(share).Lengths {
			if l.X != i*100 || l.Dark != (i%2 == 0) || l.Width < 1 || l.Width > 100 {
				t.Errorf("%v: %+v", share, l)
			}
			sum += l.Width
		}
		if sum != want {
			t.Errorf("%v is %d long, not %d", share, sum, want)
		}
	}
}
