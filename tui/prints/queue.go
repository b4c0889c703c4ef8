package prints

import (
	"context"
	"image"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/jobs"
	"leadline/render/frame"
)

// Queue is what the screen shows, changes and works on. *jobs.Queue is one.
type Queue interface {
	List(context.Context) ([]jobs.Print, error)
	Show(context.Context, int64) (*jobs.Print, error)
	Workers(context.Context) ([]jobs.Worker, error)
	// Thumbnail is a print as far as it is done; mark changes whenever it does.
	Thumbnail(context.Context, int64) (img *image.NRGBA, mark string, err error)
	ThumbnailMark(context.Context, int64) (string, error)
	Add(context.Context, *frame.Frame, jobs.AddOptions) (int64, error)
	Pause(context.Context, int64) error
	Resume(context.Context, int64) error
	Cancel(context.Context, int64) error
	Again(context.Context, int64) error
	Move(ctx context.Context, id int64, priority int) error
	Remove(context.Context, int64) error
	Work(context.Context, jobs.WorkOptions) error
}

var _ Queue = (*jobs.Queue)(nil)

// How often the queue is asked, and how long an answer may take. A change may
// have to wait for another process' transaction; jobs waits ten seconds.
const (
	oftenEvery  = time.Second
	seldomEvery = 5 * time.Second
	lookFor     = 5 * time.Second
	changeFor   = 15 * time.Second
)

// tick brings the time.
type tick struct {
	gen int
	at  time.Time
}

// sight is the queue at one moment, or why it could not be seen.
type sight struct {
	gen     int
	at      time.Time
	prints  []jobs.Print
	workers []jobs.Worker
	picture picture
	err     error
}

// picture is a print's thumbnail.
type picture struct {
	id   int64
	mark string
	img  *image.NRGBA // nil: none yet
}

// lookout keeps the questions to the queue in order.
type lookout struct {
	gen   int       // answers of an earlier one are dropped
	asked bool      // an answer of gen is awaited
	since time.Time // of the last answer; before the first, of the first tick
	first bool      // an answer has come
	err   error     // what went wrong last
}

// beat asks for the next tick.
func (s *Screen) beat() tea.Cmd {
	gen, every := s.beating, seldomEvery
	if s.open {
		every = oftenEvery
	}
	return tea.Tick(every, func(at time.Time) tea.Msg { return tick{gen, at} })
}

// tick asks the queue again, unless it still owes an answer.
func (s *Screen) tick(t tick) tea.Cmd {
	if t.gen != s.beating {
		return nil
	}
	s.now = t.at
	if s.look.since.IsZero() {
		s.look.since = t.at
	}
	return tea.Batch(s.beat(), s.glance())
}

// glance asks how the queue stands; nil while an answer is awaited.
func (s *Screen) glance() tea.Cmd {
	if s.q == nil || s.look.asked {
		return nil
	}
	s.look.asked = true
	f := s.looker()
	return func() tea.Msg {
		ctx, cancel := context.WithTimeout(context.Background(), lookFor)
		defer cancel()
		return f(ctx)
	}
}

// again drops what is on its way and asks anew.
func (s *Screen) again() tea.Cmd {
	s.look.gen++
	s.look.asked = false
	return s.glance()
}

// looker is the look at the queue, of the present generation.
func (s *Screen) looker() func(context.Context) sight {
	q, gen, id, have := s.q, s.look.gen, s.chosen, s.sight.picture
	return func(ctx context.Context) sight {
		v := sight{gen: gen}
		if v.prints, v.err = q.List(ctx); v.err == nil {
			v.workers, v.err = q.Workers(ctx)
		}
		if v.err == nil {
			if id == 0 && len(v.prints) > 0 {
				id = v.prints[0].ID
			}
			v.picture = developed(ctx, q, id, have)
		}
		v.at = time.Now()
		return v
	}
}

// developed is a print's thumbnail, read only where it has changed. One that
// cannot be read leaves what there was: the facts are shown without.
func developed(ctx context.Context, q Queue, id int64, have picture) picture {
	if have.id != id {
		have = picture{id: id}
	}
	if id == 0 {
		return have
	}
	mark, err := q.ThumbnailMark(ctx, id)
	if err != nil || mark == have.mark {
		return have
	}
	img, mark, err := q.Thumbnail(ctx, id)
	if err != nil {
		return have
	}
	return picture{id, mark, img}
}

// see takes an answer.
func (s *Screen) see(v sight) tea.Cmd {
	if v.gen != s.look.gen {
		return nil
	}
	s.look.asked = false
	if s.look.err = v.err; v.err != nil {
		return nil
	}
	s.look.since, s.look.first = v.at, true
	if v.at.After(s.now) {
		s.now = v.at
	}
	news := s.news(v.prints)
	s.sight = v
	if s.settle() != v.picture.id {
		return tea.Batch(news, s.again()) // for the picture of the print that is chosen now
	}
	return news
}

// settle keeps the choice on the print that was chosen, or where it was gone, on
// the one in its place, and returns its number.
func (s *Screen) settle() int64 {
	all := s.sight.prints
	at := -1
	for i := range all {
		if all[i].ID == s.chosen {
			at = i
		}
	}
	if at < 0 {
		at = max(0, min(s.at, len(all)-1))
		s.below = 0
	}
	if at != s.at {
		s.at, s.follow = at, true
	}
	s.chosen = 0
	if len(all) > 0 {
		s.chosen = all[at].ID
	}
	return s.chosen
}

// print is the chosen print; nil where there is none.
func (s *Screen) print() *jobs.Print {
	if s.at >= len(s.sight.prints) {
		return nil
	}
	return &s.sight.prints[s.at]
}

// choose takes the print in another place of the list.
func (s *Screen) choose(at int) tea.Cmd {
	at = max(0, min(at, len(s.sight.prints)-1))
	s.follow = true
	if at == s.at || len(s.sight.prints) == 0 {
		return nil
	}
	s.at, s.below = at, 0
	s.chosen = s.sight.prints[at].ID
	return s.again()
}
