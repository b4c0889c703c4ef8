package board

import (
	"context"
	"image"
	"sync"
	"time"

	"leadline/jobs"
)

// Queue is what the board shows and changes. *jobs.Queue is one.
type Queue interface {
	List(context.Context) ([]jobs.Print, error)
	Show(context.Context, int64) (*jobs.Print, error)
	Workers(context.Context) ([]jobs.Worker, error)
	// Thumbnail is a print as far as it is done; mark changes whenever it does.
	Thumbnail(context.Context, int64) (img *image.NRGBA, mark string, err error)
	ThumbnailMark(context.Context, int64) (string, error)
	Pause(context.Context, int64) error
	Resume(context.Context, int64) error
	Cancel(context.Context, int64) error
	Again(context.Context, int64) error
	Remove(context.Context, int64) error
}

// sight is the queue at one moment.
type sight struct {
	Prints  []jobs.Print  `json:"prints"`
	Workers []jobs.Worker `json:"workers"`
	marks   map[int64]string
}

// sightAge is how long one look at the queue serves every page that is open.
const sightAge = time.Second

// lookout looks at the queue for all pages together.
type lookout struct {
	q    Queue
	mu   sync.Mutex
	last *sight
	at   time.Time
	done map[int64]string // marks of prints that are done: they stay
}

// look is the queue as it was at most sightAge ago.
func (l *lookout) look(ctx context.Context) (*sight, error) {
	l.mu.Lock()
	defer l.mu.Unlock()
	if l.last != nil && time.Since(l.at) < sightAge {
		return l.last, nil
	}
	s := &sight{marks: map[int64]string{}}
	var err error
	if s.Prints, err = l.q.List(ctx); err != nil {
		return nil, err
	}
	if s.Workers, err = l.q.Workers(ctx); err != nil {
		return nil, err
	}
	done := map[int64]string{}
	for i := range s.Prints {
		p := &s.Prints[i]
		mark := l.done[p.ID]
		if mark == "" {
			mark = l.mark(ctx, p.ID)
		}
		s.marks[p.ID] = mark
		if p.State == jobs.Done {
			done[p.ID] = mark
		}
	}
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	l.last, l.at, l.done = s, time.Now(), done
	return s, nil
}

// mark is a picture's mark; "" where there is no picture.
func (l *lookout) mark(ctx context.Context, id int64) string {
	mark, err := l.q.ThumbnailMark(ctx, id)
	if err != nil {
		return "" // a print that is gone meanwhile, or a picture that cannot be read: the facts are shown without
	}
	return mark
}

// forget makes the next look a fresh one, after a change.
func (l *lookout) forget() {
	l.mu.Lock()
	defer l.mu.Unlock()
	l.last = nil
}
