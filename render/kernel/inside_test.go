package kernel

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"strconv"
	"testing"
)

// Samples are Inside by the theorem of Fatou (1919): an attracting cycle draws
// the critical orbit to it, which then never escapes. A false claim would show
// under direct iteration, sooner or later: near a cusp at distance ε the orbit
// slips through in about π/√ε iterations (Boll's observation of 1991 at the
// neck and the cusp; Aaron Klebanoff, π in the Mandelbrot set, 2001), so the
// iterations below see everything that lies 1e-8 outside, at least.

// TestCusps claims nothing outside, close to cusps and at the neck of -3/4
// where orbits linger.
func TestCusps(t *testing.T) {
	limit, points := 100000, 1000
	if testing.Short() {
		limit, points = 20000, 300
	}
	places := []struct {
		name string
		at   complex128
	}{
		{"1/4", 0.25}, {"neck", -0.75}, {"-5/4", -1.25}, {"period 3", -1.75}, {"1/3", complex(-0.125, 0.649519052838329)},
		{"nothing", complex(0.3, 0.02)},
	}
	total := 0
	for _, v := range places {
		s := whole(t, 5000)
		r := rand.New(rand.NewPCG(20, 20))
		var inside, undecided int
		for range points {
			c := v.at + cmplx.Rect(powerOfTen(-6*r.Float64()-1), 6.283185307179586*r.Float64())
			if s.kernel.loops.interior(real(c), imag(c)) {
				continue
			}
			d := directLane{zr: real(c), zi: imag(c), cr: real(c), ci: imag(c), add: 1, gr: 1, w: 1, n: 1}
			switch s.kernel.runDirect(&d) {
			case Inside:
				inside++
				if n := escapes(c, 2, limit); n > 0 {
					t.Errorf("%s: %v escapes at %d, yet is Inside", v.name, c, n)
				}
			case Undecided:
				undecided++
			}
		}
		t.Logf("%-8s %d inside, %d undecided", v.name, inside, undecided)
		total += inside
	}
	if total < points {
		t.Errorf("only %d points were claimed to lie inside", total)
	}
}

func powerOfTen(x float64) float64 { return real(cmplx.Pow(10, complex(x, 0))) }

// escapes iterates in doubles, sharing nothing with the kernel: the index at
// which the orbit of c leaves |z| <= 4, 0 if it does not.
func escapes(c complex128, power, limit int) int { return leaves(c, c, power, limit) }

// leaves is the same for any start z.
func leaves(z, c complex128, power, limit int) int {
	for n := 1; n <= limit; n++ {
		if real(z)*real(z)+imag(z)*imag(z) > 16 {
			return n
		}
		if power == 2 {
			z = z*z + c
		} else {
			z = z*z*z + c
		}
	}
	return 0
}

// TestWholeSets: on a grid over the whole set, power 2 and 3, nothing Inside
// escapes, and of the points that direct iteration cannot get rid of most are
// found to be inside.
func TestWholeSets(t *testing.T) {
	grid := 120
	if testing.Short() {
		grid = 40
	}
	for _, power := range []int{2, 3} {
		s := scene{name: "whole", height: "4", width: 1 << 12, rows: 1 << 12, power: power, limit: 5000}
		s.build(t)
		var inside, bounded int
		for y := range grid {
			for x := range grid {
				c := complex(4*(float64(x)+0.31)/float64(grid)-2, 4*(float64(y)+0.47)/float64(grid)-2)
				f := s.kernel.Sample(s.lattice(c))
				n := escapes(c, power, 20000)
				if n == 0 {
					bounded++
				}
				if f.State == Inside {
					inside++
					if n > 0 {
						t.Errorf("power %d: %v escapes at %d, yet is Inside", power, c, n)
					}
				}
			}
		}
		t.Logf("power %d: %d of %d bounded points found", power, inside, bounded)
		if inside*100 < bounded*97 || bounded < grid*grid/20 {
			t.Errorf("power %d: %d of %d bounded points found", power, inside, bounded)
		}
	}
}

// TestMultiplier asks the cycle search itself, without the gate, on both sides
// of boundaries that have a formula: near w = exp(iθ) the fixed point w/2 of
// c = w/2 - w²/4 has the multiplier w, and the 2-cycle around 0 of c = -1 + w/4
// the multiplier w. Whatever the search is given to start from, it must never
// claim |w| >= 1, and near its margin of 2^-20 in |w|² it must claim |w| < 1.
func TestMultiplier(t *testing.T) {
	for _, angle := range []float64{0.3, 1, 2, 2.8} {
		w := cmplx.Rect(1, angle)
		for period, c := range map[int]complex128{1: w/2 - w*w/4, 2: -1 + w/4} {
			s := scene{re: short(real(c)), im: short(imag(c)), height: "2e-5", limit: 1000, centreOnly: true}
			s.build(t)
			var claimed, refused int
			for _, p := range s.spread(400, 24) {
				re, im := s.kernel.plane(p[0], p[1])
				l := s.kernel.start(re, im)
				l.m, l.nearN = s.ref.Rebase, period
				at := s.complexAt(p)
				start := (1 - cmplx.Sqrt(1-4*at)) / 2 // the fixed point
				if period == 2 {
					start = (-1 + cmplx.Sqrt(-3-4*at)) / 2 // z² + z + c + 1 = 0
				}
				m := cmplx.Abs(2 * start)
				if period == 2 {
					m = cmplx.Abs(4 * (at + 1))
				}
				l.dr, l.di = real(start)+0.001, imag(start)-0.002
				got := s.kernel.attracted(&l)
				switch {
				case got && m >= 1:
					t.Errorf("period %d at %v: multiplier %.9f is claimed to attract", period, at, m)
				case !got && m < 1-1e-6:
					t.Errorf("period %d at %v: multiplier %.9f is not found to attract", period, at, m)
				case got:
					claimed++
				default:
					refused++
				}
			}
			if claimed < 50 || refused < 50 {
				t.Errorf("period %d, angle %v: %d claimed, %d refused", period, angle, claimed, refused)
			}
		}
	}
}

// short writes a double as a decimal.
func short(x float64) string { return strconv.FormatFloat(x, 'f', -1, 64) }

// TestCopies: small copies of the set at depth. Of the points that stay bounded
// to the limit, which is where time goes, most must be proved to lie inside;
// and those claimed to lie inside close to the boundary, a third of them around
// the cusp, must stay bounded under direct iteration at full precision.
func TestCopies(t *testing.T) {
	checks, samples := 6, 1500
	if testing.Short() {
		checks, samples = 2, 500
	}
	tip30, tip100, deepest := tipSet(t, 26, 0), tipSet(t, 90, 0), tipSet(t, 280, 0)
	tip30.limit, tip100.limit, deepest.limit = 30000, 30000, 30000
	for _, v := range []struct {
		scene
		cusp  [2]float64 // pixels right of and above the view's centre
		share int        // per cent of bounded samples that must be proved inside
	}{
		// The tip's copies are about a third of the view and not turned, so
		// their cusp lies a quarter of that to the right of the nucleus; of the
		// other one any piece of the boundary must do.
		{tip30, [2]float64{2.9, 0}, 90}, {tip100, [2]float64{2.9, 0}, 85},
		{deepest, [2]float64{2.9, 0}, 75}, {tinySet(t), [2]float64{-4.8, 1}, 65},
	} {
		s := v.build(t)
		var inside, undecided, checked int
		for i, p := range s.spread(samples, 21) {
			// the middle of the view, where the copy is
			x, y := (p[0]-24)/1.5, (p[1]-16)/1.5
			if i%3 == 0 {
				x, y = v.cusp[0]+(p[0]-24)/30, v.cusp[1]+(p[1]-16)/30
			}
			x, y = x+24, y+16
			switch s.kernel.Sample(x, y).State {
			case Inside:
				inside++
				if checked < checks && s.atEdge(x, y) {
					checked++
					if e := s.exactTo(t, x, y, 2*s.limit); e.Escaped {
						t.Errorf("%s, sample %d: Inside, yet escapes at %d", s.name, i, e.N)
					}
				}
			case Undecided:
				undecided++
			}
		}
		t.Logf("%-20s %-6s %d inside, %d undecided", s.name, s.regime(), inside, undecided)
		if inside*100 < v.share*(inside+undecided) || inside < samples/50 || checked == 0 {
			t.Errorf("%s: of %d bounded samples only %d are proved inside, %d at the edge", s.name, inside+undecided, inside, checked)
		}
	}
}

// atEdge reports whether something escapes a fifth of a pixel away.
func (s *scene) atEdge(x, y float64) bool {
	for _, d := range [][2]float64{{0.2, 0}, {-0.2, 0}, {0, 0.2}, {0, -0.2}} {
		if s.kernel.Sample(x+d[0], y+d[1]).State == Escaped {
			return true
		}
	}
	return false
}

// TestTraps: filled Julia sets of parameters with attracting cycles of several
// periods (centres and near-centres of hyperbolic components; from memory and
// by the multipliers computed here). Nothing that a trap holds escapes, and
// most of the filled set is found.
func TestTraps(t *testing.T) {
	samples := 2000
	if testing.Short() {
		samples = 400
	}
	for _, v := range []struct {
		power  int
		re, im string
		period int
	}{
		{2, "-0.1", "0.2", 1}, {2, "0.2", "0", 1}, {2, "-1", "0", 2}, {2, "-1.05", "0.1", 2},
		{2, "-0.122561166876654", "0.744861766619744", 3}, {2, "-1.7549", "0", 3},
		{2, "-0.504340175446244", "0.562765761452982", 5}, {3, "0.2", "0.1", 1}, {3, "0.1", "1.02", 2},
	} {
		s := scene{name: v.re + " + " + v.im + "i", height: "3", power: v.power, julia: true,
			paramRe: v.re, paramIm: v.im, limit: 5000}
		s.build(t)
		if len(s.kernel.traps) != v.period {
			t.Errorf("z^%d + %s: %d traps, period %d", v.power, s.name, len(s.kernel.traps), v.period)
		}
		var inside, undecided int
		for _, p := range s.spread(samples, 22) {
			switch f := s.kernel.Sample(p[0], p[1]); f.State {
			case Inside:
				inside++
				if n := leaves(s.complexAt(p), s.parameter(), v.power, 2000); n > 0 {
					t.Errorf("%s %v: trapped, yet escapes at %d", s.name, p, n)
				}
			case Undecided:
				undecided++
			}
		}
		t.Logf("z^%d + %s: %d inside, %d undecided", v.power, s.name, inside, undecided)
		if undecided*50 > inside || inside < samples/400 {
			t.Errorf("%s: %d inside, %d undecided", s.name, inside, undecided)
		}
	}
}

// TestTrapsHold: the map carries each trap into the next and the last into the
// first, so no orbit leaves. The edge is enough (maximum modulus principle).
func TestTrapsHold(t *testing.T) {
	for _, v := range []struct {
		power  int
		re, im string
	}{{2, "0.2", "0"}, {2, "0.24", "0"}, {2, "-0.1", "0.6"}, {2, "-1.1", "0.1"}, {2, "-0.1226", "0.7449"}, {2, "-1.7549", "0"},
		{2, "-0.5043", "0.5628"}, {2, "-1.3107", "0"}, {3, "0.2", "0.1"}, {3, "0.1", "1.02"}} {
		s := (&scene{height: "3", power: v.power, julia: true, paramRe: v.re, paramIm: v.im, limit: 500}).build(t)
		traps := s.kernel.traps
		if len(traps) == 0 {
			t.Errorf("z^%d + %s + %si: no traps", v.power, v.re, v.im)
		}
		for i, a := range traps {
			b := traps[(i+1)%len(traps)]
			for k := range 360 {
				z := complex(a.re, a.im) + cmplx.Rect(math.Sqrt(a.r2), float64(k)*math.Pi/180)
				w := cmplx.Pow(z, complex(float64(v.power), 0)) + s.parameter()
				if d := cmplx.Abs(w - complex(b.re, b.im)); d > math.Sqrt(b.r2)*(1+1e-9) {
					t.Fatalf("z^%d + %s + %si: trap %d is carried to %v from the middle of the next, whose radius is %v",
						v.power, v.re, v.im, i, d, math.Sqrt(b.r2))
				}
			}
		}
	}
}

// complexAt and parameter give a point of a direct view, and its c, in doubles.
func (s *scene) complexAt(p [2]float64) complex128 {
	z := s.at(p[0], p[1])
	re, _ := z.re.Float64()
	im, _ := z.im.Float64()
	return complex(re, im)
}

func (s *scene) parameter() complex128 {
	return complex(s.kernel.cfg.Parameter[0], s.kernel.cfg.Parameter[1])
}

// TestNoTraps: parameters without an attracting cycle get no trap: outside the
// set, at a parabolic one (1/4), at dendrites (i and -2).
func TestNoTraps(t *testing.T) {
	for _, c := range [][2]string{{"0.4", "0.5"}, {"0.25", "0"}, {"0", "1"}, {"-2", "0"}, {"-0.75", "0"}} {
		s := scene{height: "3", julia: true, paramRe: c[0], paramIm: c[1], limit: 500}
		if s.build(t); len(s.kernel.traps) != 0 {
			t.Errorf("c = %s + %si has no attracting cycle, but %d traps", c[0], c[1], len(s.kernel.traps))
		}
	}
}

// TestJuliaTrapsDeep: a trap works below a reference, too: the filled Julia set
// of -1 around its repelling fixed point (1-√5)/2, at depth.
func TestJuliaTrapsDeep(t *testing.T) {
	const alpha = "-0.61803398874989484820458683436563811772030917980576286213544862270526046281890244970720720418939113748475408807538689175212663386222353693179318006076672635443338908659593958290563832266131992829026788067520876689250171169620703222104321626954862629631361443814975870122034080588795445474924618569536486444924104432077134494704956584678850987433944221254487706647809158846074998871240076521705751797883416625624940758906970400028121042762177111777805315317141011704666599146697987317613560067087480710131795236894275219484353056783002287856997829778347845878228911097625003026961561700250464338243776486102838312683303724292675263116533924731671112115881863851331620384005222165791286675294654906811317159934323597349498509040947621322298101726107059611645629909816290555208524790352406020172799747175342777592778625619432082750513121815628551222480939471234145170223735805772786160086883829523045926478780178899219902707769038953219681986151437803149974110692608867429622675756052317277752035361393621"
	for height, limit := range map[string]int{"1e-30": 1000, "1e-340": 6000} {
		s := (&scene{name: "basilica " + height, re: alpha, height: height, julia: true, paramRe: "-1", limit: limit}).build(t)
		var n [3]int
		for _, p := range s.spread(300, 23) {
			f := s.kernel.Sample(p[0], p[1])
			n[f.State]++
			if n[f.State] > 12 {
				continue // direct iteration of all would take long
			}
			if e := s.exact(t, p[0], p[1]); e.Escaped != (f.State == Escaped) {
				t.Errorf("%s %v: %v, but escaped = %v by direct iteration", s.name, p, f.State, e.Escaped)
			}
		}
		t.Logf("%s: %d escaped, %d inside, %d undecided", s.name, n[Escaped], n[Inside], n[Undecided])
		if n[Escaped] < 50 || n[Inside] < 50 || n[Undecided] > 5 {
			t.Errorf("%s: %d escaped, %d inside, %d undecided", s.name, n[Escaped], n[Inside], n[Undecided])
		}
	}
}
