package prints

import (
	"context"
	"fmt"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/jobs"
	"leadline/tui/kit"
)

// action is a change that was asked for.
type action struct {
	do   func(context.Context, Queue) error
	said string // when it is made
}

// acted says how a change went, and how the queue stands after it.
type acted struct {
	said  string
	err   error
	sight sight
}

// act makes a change. Changes are made one after the other, in the order of
// their keys.
func (s *Screen) act(a action) tea.Cmd {
	s.todo = append(s.todo, a)
	if len(s.todo) > 1 {
		return nil
	}
	return s.next()
}

// next makes the first change that waits. No look at the queue from before it
// counts any more.
func (s *Screen) next() tea.Cmd {
	a, q := s.todo[0], s.q
	s.look.gen++
	s.look.asked = true
	look := s.looker()
	return func() tea.Msg {
		ctx, cancel := context.WithTimeout(context.Background(), changeFor)
		defer cancel()
		m := acted{said: a.said, err: a.do(ctx, q)}
		m.sight = look(ctx)
		return m
	}
}

func (s *Screen) acted(m acted) tea.Cmd {
	s.todo = s.todo[1:]
	word := kit.Tell(m.said)
	if m.err != nil {
		word = kit.Fail(m.err)
	}
	if len(s.todo) > 0 {
		return tea.Batch(word, s.next())
	}
	return tea.Batch(word, s.see(m.sight))
}

// refusal says why a key does nothing for a print.
type refusal struct{ what, cure string }

func (e *refusal) Error() string { return e.what }

// Hint says what can be done instead.
func (e *refusal) Hint() string { return e.cure }

func refuse(p *jobs.Print, what, cure string) tea.Cmd {
	state := "is " + p.Word()
	if p.State == jobs.Failed {
		state = "has failed"
	}
	return kit.Fail(&refusal{fmt.Sprintf("print %d %s: %s", p.ID, state, what), cure})
}

// pause pauses a print or goes on with it.
func (s *Screen) pause(p *jobs.Print) tea.Cmd {
	if p.Over() {
		return refuse(p, "there is nothing to pause", "only what is still to be made can be paused")
	}
	id := p.ID
	if p.Paused = !p.Paused; p.Paused {
		return s.act(action{func(ctx context.Context, q Queue) error { return q.Pause(ctx, id) },
			fmt.Sprintf("print %d is paused; its finished tiles are kept", id)})
	}
	return s.act(action{func(ctx context.Context, q Queue) error { return q.Resume(ctx, id) }, fmt.Sprintf("print %d goes on", id)})
}

// cancel gives up a print after a question.
func (s *Screen) cancel(p *jobs.Print) tea.Cmd {
	if p.Over() {
		return refuse(p, "there is nothing to cancel", "r takes it off the list")
	}
	id := p.ID
	return s.ask(&question{fmt.Sprintf("Cancel print %d? Its finished tiles are kept.", id), "cancel it", func() tea.Cmd {
		return s.act(action{func(ctx context.Context, q Queue) error { return q.Cancel(ctx, id) },
			fmt.Sprintf("print %d is cancelled; a begins it again", id)})
	}})
}

// anew begins a failed or cancelled print again.
func (s *Screen) anew(p *jobs.Print) tea.Cmd {
	if p.State != jobs.Failed && p.State != jobs.Cancelled {
		return refuse(p, "there is nothing to begin again", "only a failed or cancelled print can be begun again")
	}
	id := p.ID
	return s.act(action{func(ctx context.Context, q Queue) error { return q.Again(ctx, id) },
		fmt.Sprintf("print %d goes on from the tiles that are kept", id)})
}

// move gives a print the priority before (-1) or after (+1).
func (s *Screen) move(p *jobs.Print, by int) tea.Cmd {
	if p.Over() {
		return refuse(p, "there is nothing to move", "only what is still to be made can be moved")
	}
	id, to := p.ID, p.Priority+by
	if to < 1 || to > 4 {
		return kit.Tell(fmt.Sprintf("print %d has priority %d already, 1 is first and 4 last", id, p.Priority))
	}
	p.Priority = to
	return s.act(action{func(ctx context.Context, q Queue) error { return q.Move(ctx, id, to) },
		fmt.Sprintf("print %d has priority %d now, 1 is first and 4 last", id, to)})
}

// remove takes a print off the list after a question.
func (s *Screen) remove(p *jobs.Print) tea.Cmd {
	if !p.Over() {
		return refuse(p, "it cannot be taken off the list", "x cancels it first")
	}
	id := p.ID
	text := fmt.Sprintf("Take print %d off the list? Its tiles go with it.", id)
	if p.State == jobs.Done {
		text = fmt.Sprintf("Take print %d off the list? Its file stays.", id)
	}
	return s.ask(&question{text, "take it off", func() tea.Cmd {
		return s.act(action{func(ctx context.Context, q Queue) error { return q.Remove(ctx, id) },
			fmt.Sprintf("print %d is off the list", id)})
	}})
}

// news tells of prints that have ended since the last look.
func (s *Screen) news(now []jobs.Print) tea.Cmd {
	was := map[int64]bool{}
	for i := range s.sight.prints {
		was[s.sight.prints[i].ID] = !s.sight.prints[i].Over()
	}
	var all []tea.Cmd
	for i := range now {
		p := &now[i]
		switch {
		case !was[p.ID]:
		case p.State == jobs.Done:
			all = append(all, kit.Tell(fmt.Sprintf("print %d is done: %s", p.ID, clean(p.File))))
		case p.State == jobs.Failed:
			all = append(all, kit.Fail(&refusal{fmt.Sprintf("print %d failed: %s", p.ID, clean(p.Reason)), clean(p.Hint)}))
		}
	}
	return tea.Batch(all...)
}
