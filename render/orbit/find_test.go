package orbit

import (
	"context"
	"errors"
	"math"
	"testing"
	"time"

	"leadline/precision"
)

// target asks for what lies around a point.
func target(t testing.TB, power int, re, im, radius string, limit int) Target {
	t.Helper()
	q := request(t, power, re, im, "1", limit)
	return Target{Map: q.Map, Near: q.Centre, Radius: decimal(t, radius).Ext(), Limit: limit}
}

// nucleusNear finds a nucleus or ends the test.
func nucleusNear(t testing.TB, q Target, period int) *NucleusPoint {
	t.Helper()
	p, err := FindNucleus(context.Background(), q, period)
	if err != nil {
		t.Fatalf("%.20s, %.20s within %v: %v", q.Near[0], q.Near[1], q.Radius, err)
	}
	return p
}

// TestPeriodAt: balls about known nuclei and about points whose orbits are
// known by hand. 1 escapes (0, 1, 2, 5, …); -1 has period 2.
func TestPeriodAt(t *testing.T) {
	for _, v := range []struct {
		re, im, radius string
		limit, want    int
	}{
		{"0.1", "0", "0.2", 100, 1},
		{"-1.05", "0.02", "0.1", 100, 2},
		{"-1.7549", "0.0001", "0.001", 100, 3},
		{"-1.7549", "0.0001", "0.001", 2, 0}, // the limit comes first
		{"-1.3107026413", "0", "1e-8", 100, 4},
		{"1", "0", "0.01", 100, 0},
		{"-0.1", "0.1", "1e-30", 5000, 0}, // inside, and nowhere near the middle
	} {
		got, ok, err := PeriodAt(context.Background(), target(t, 2, v.re, v.im, v.radius, v.limit))
		if err != nil || got != v.want || ok != (v.want > 0) {
			t.Errorf("%s + %si within %s: period %d, %t (%v), want %d", v.re, v.im, v.radius, got, ok, err, v.want)
		}
	}
}

// TestHalfWay: half way from 1e-10 to 4·1e-30 is the root of 4e-40, by hand.
func TestHalfWay(t *testing.T) {
	got := HalfWay(precision.ExtOf(1e-10), precision.ExtOf(-1e-30), 4).Float64()
	if math.Abs(got/2e-20-1) > 1e-14 {
		t.Errorf("got %g, want 2e-20", got)
	}
	deep := HalfWay(decimal(t, "1e-1000").Ext(), decimal(t, "1e-3000").Ext(), 1)
	want := decimal(t, "1e-2000").Ext()
	if deep.Sub(want).Abs().Cmp(want.Ldexp(-50)) > 0 {
		t.Errorf("got %v, want %v", deep, want)
	}
}

// TestFindRefuses: what cannot be found says why, and what may help.
func TestFindRefuses(t *testing.T) {
	good := target(t, 2, "-1", "0", "0.1", 100)
	julia, flat, tiny, none := good, good, good, good
	julia.Julia = true
	flat.Radius = precision.Ext{}
	tiny.Radius = precision.ExtOf(1).Ldexp(-70000)
	none.Near[0] = decimal(t, "1")
	for _, v := range []struct {
		name   string
		q      Target
		period int
		want   error
	}{
		{"a Julia set", julia, 0, ErrJulia}, {"no radius", flat, 0, ErrAsked}, {"too deep", tiny, 0, ErrDeep},
		{"outside", none, 0, ErrNone}, {"outside, period 2", none, 2, ErrNone}, {"period -1", good, -1, ErrAsked},
		{"a period above the limit", good, 101, ErrNone},
	} {
		_, err := FindNucleus(context.Background(), v.q, v.period)
		holdRefusal(t, "nucleus, "+v.name, err, v.want)
		if v.period == 0 {
			_, err = FindMisiurewicz(context.Background(), v.q)
			holdRefusal(t, "Misiurewicz point, "+v.name, err, v.want)
		}
	}
	if _, _, err := PeriodAt(context.Background(), julia); !errors.Is(err, ErrJulia) {
		t.Errorf("period of a Julia set: %v", err)
	}
}

func holdRefusal(t *testing.T, name string, err, want error) {
	t.Helper()
	var h interface{ Hint() string }
	if !errors.Is(err, want) || !errors.As(err, &h) || h.Hint() == "" {
		t.Errorf("%s: %v, want %v", name, err, want)
	}
}

// TestFindCancel: a search that would take minutes gives way at once, while it
// follows the ball as well as in Newton's method.
func TestFindCancel(t *testing.T) {
	for _, v := range []struct{ re, im, radius, stage string }{
		{"-0.1", "0.1", "1e-15000", "period"},
		{"0." + zeros(300) + "1", "1", "2e-301", "nucleus"},
		{"0." + zeros(300) + "1", "1", "2e-301", "atom"},
	} {
		ctx, stop := context.WithCancel(context.Background())
		defer stop()
		q := target(t, 2, v.re, v.im, v.radius, 1<<26)
		start, seen := time.Now(), false
		q.Progress = func(p Progress) {
			if p.Stage == v.stage {
				seen = true
				stop()
			}
			if p.Done <= 0 || p.Done > p.Of {
				t.Errorf("%+v", p)
			}
		}
		_, err := FindNucleus(ctx, q, 0)
		if !errors.Is(err, context.Canceled) || !seen {
			t.Errorf("cancelled in %q (seen %t): %v", v.stage, seen, err)
		}
		if d := time.Since(start); d > 3*time.Second {
			t.Errorf("%s: gave way after %v", v.stage, d)
		}
	}
}
