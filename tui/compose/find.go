package compose

import (
	"context"
	"errors"
	"fmt"
	"strconv"
	"sync/atomic"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/precision"
	"leadline/render"
	"leadline/render/formula"
	"leadline/render/frame"
	"leadline/render/orbit"
	"leadline/render/words"
	"leadline/tui/kit"
)

// atom is the last nucleus found: what "half way down" and "the whole atom" go by.
type atom struct {
	at     frame.Point
	period int
	size   precision.Ext
}

// search is a search under way.
type search struct {
	what   string
	cancel context.CancelFunc
	seen   atomic.Pointer[orbit.Progress]
}

// Messages of searches.
type (
	found struct {
		of    *search
		point frame.Point
		atom  *atom // of a nucleus
		said  string
		err   error
	}
	searchTick struct{ of *search }
)

// atomRoom is the view's height over the size of an atom that is shown whole.
const atomRoom = 6

// openFind lists what can be found.
func (s *Screen) openFind() tea.Cmd {
	if s.search != nil {
		return kit.Tell("a search is running; esc stops it")
	}
	m := &menu{title: "find", items: []item{
		{"n", "nearest nucleus", func() tea.Cmd { return s.findNucleus(0) }},
		{"w", "of one period", s.askPeriod},
		{"m", "Misiurewicz point", s.findMisiurewicz},
	}}
	if s.atom != nil {
		m.items = append(m.items,
			item{"h", "half way down", s.halfWay},
			item{"a", "the whole atom", s.wholeAtom})
	}
	s.menu = m
	return nil
}

// target is where to look: around the spot, as far as a third of the trim.
func (s *Screen) target(run *search) (orbit.Target, error) {
	x, y := s.spot()
	return targetAt(s.desk.Frame, x, y, 1.0/3, run)
}

// targetAt is a target of a radius that is a share of the trim's height.
func targetAt(f *frame.Frame, x, y, share float64, run *search) (orbit.Target, error) {
	r, err := f.Resolve()
	if err != nil {
		return orbit.Target{}, err
	}
	at, err := render.Point(f, x, y)
	if err != nil {
		return orbit.Target{}, err
	}
	m, err := formula.ForPower(r.Power)
	if err != nil {
		return orbit.Target{}, err
	}
	t := orbit.Target{Map: m, Julia: r.Kind == frame.Julia, Near: [2]precision.Decimal{at.Re, at.Im},
		Radius: r.Height.Ext().Mul(precision.ExtOf(share)), Limit: r.Limit}
	if run != nil {
		t.Progress = func(p orbit.Progress) { run.seen.Store(&p) }
	}
	return t, nil
}

// begin runs a search off the loop, with a tick that shows how far it is.
func (s *Screen) begin(what string, f func(context.Context, orbit.Target) found) tea.Cmd {
	ctx, cancel := context.WithCancel(context.Background())
	run := &search{what: what, cancel: cancel}
	t, err := s.target(run)
	if err != nil {
		cancel()
		return kit.Fail(err)
	}
	s.search = run
	return tea.Batch(func() tea.Msg {
		defer cancel()
		m := f(ctx, t)
		m.of = run
		return m
	}, run.tick())
}

func (r *search) tick() tea.Cmd {
	return tea.Tick(150*time.Millisecond, func(time.Time) tea.Msg { return searchTick{r} })
}

func (r *search) stop() { r.cancel() }

// searching keeps the status moving while a search runs.
func (s *Screen) searching(t searchTick) tea.Cmd {
	if s.search != t.of {
		return nil
	}
	return t.of.tick()
}

// line says what is looked for and how far it is.
func (r *search) line(s *Screen) string {
	text := "looking for " + r.what
	if p := r.seen.Load(); p != nil && p.Of > 0 {
		text += fmt.Sprintf(": %s, %s of %s iterations", p.Stage, words.Count(int64(p.Done)), words.Count(int64(p.Of)))
	}
	return s.desk.Style.Lead.Render(text) + s.desk.Style.Faint.Render("  esc stops")
}

func (s *Screen) findNucleus(period int) tea.Cmd {
	what := "a nucleus"
	if period > 0 {
		what = fmt.Sprintf("a nucleus of period %d", period)
	}
	return s.begin(what, func(ctx context.Context, t orbit.Target) found { return nucleus(ctx, t, period) })
}

// nucleus looks for a nucleus, of any period where none is asked for.
func nucleus(ctx context.Context, t orbit.Target, period int) found {
	n, err := nearest(ctx, t, period)
	if err != nil {
		return found{err: err}
	}
	a := &atom{frame.Point{Re: n.Re, Im: n.Im}, n.Period, n.Size.Abs()}
	return found{point: a.at, atom: a, said: fmt.Sprintf("nucleus of period %s; f a shows its whole atom, at depth %.2f, f h goes half way there",
		words.Count(int64(n.Period)), -a.size.Mul(precision.ExtOf(atomRoom)).Log2()*0.30103)}
}

// nearest looks around the spot in circles that grow to the target's, so that
// what lies under the plumb is found before what has a lower period farther off.
func nearest(ctx context.Context, t orbit.Target, period int) (n *orbit.NucleusPoint, err error) {
	if period > 0 {
		return orbit.FindNucleus(ctx, t, period)
	}
	whole := t.Radius
	for _, part := range []float64{1.0 / 14, 1.0 / 4, 1} {
		t.Radius = whole.Mul(precision.ExtOf(part))
		if n, err = orbit.FindNucleus(ctx, t, 0); err == nil || !errors.Is(err, orbit.ErrNone) {
			return n, err
		}
	}
	return nil, err
}

func (s *Screen) findMisiurewicz() tea.Cmd {
	return s.begin("a Misiurewicz point", func(ctx context.Context, t orbit.Target) found {
		p, err := orbit.FindMisiurewicz(ctx, t)
		if err != nil {
			return found{err: err}
		}
		return found{point: frame.Point{Re: p.Re, Im: p.Im},
			said: fmt.Sprintf("Misiurewicz point, preperiod %d, period %d; from g d 50, say, f n finds a deep nucleus beside it", p.Preperiod, p.Period)}
	})
}

func (s *Screen) askPeriod() tea.Cmd {
	check := func(t string) error {
		if n, err := strconv.Atoi(t); err != nil || n < 1 || n > frame.MaxLimit {
			return errors.New("a period is a whole number of 1 or more")
		}
		return nil
	}
	return s.ask.Ask("period", "", check, func(t string) tea.Cmd {
		n, err := strconv.Atoi(t)
		if err != nil {
			return kit.Fail(err)
		}
		return s.findNucleus(n)
	})
}

// arrive goes to what was found; the height stays.
func (s *Screen) arrive(m found) tea.Cmd {
	if m.of != s.search {
		return nil
	}
	s.search = nil
	switch {
	case errors.Is(m.err, context.Canceled):
		return kit.Tell("the search was stopped")
	case m.err != nil:
		s.atom = nil
		return kit.Fail(m.err)
	}
	if m.atom != nil {
		s.atom = m.atom
	}
	s.plumb, s.under.text = plumb{}, ""
	err := s.desk.Change("went to what was found", func(f *frame.Frame) error {
		f.View.Centre, f.Ink.Drive.Fitted = m.point, nil
		return nil
	})
	if err != nil {
		return kit.Fail(err)
	}
	return kit.Tell(m.said)
}

// halfWay goes to the depth half way between here and the atom.
func (s *Screen) halfWay() tea.Cmd {
	if s.desk.Frame.View.Height.Ext().Cmp(s.atom.size.Mul(precision.ExtOf(atomRoom))) <= 0 {
		return kit.Tell("this is as deep as the atom already; move aside, and f n finds another")
	}
	h := orbit.HalfWay(s.desk.Frame.View.Height.Ext(), s.atom.size, atomRoom)
	return s.toAtom("went half way down", h)
}

// wholeAtom shows all of the atom.
func (s *Screen) wholeAtom() tea.Cmd {
	return s.toAtom("went to the atom", s.atom.size.Mul(precision.ExtOf(atomRoom)))
}

func (s *Screen) toAtom(what string, height precision.Ext) tea.Cmd {
	return kit.Fail(s.desk.Change(what, func(f *frame.Frame) error {
		f.View.Centre, f.Ink.Drive.Fitted = s.atom.at, nil
		f.View.Height = precision.DecimalNear(height.Big(64), height.Ldexp(-20))
		return nil
	}))
}
