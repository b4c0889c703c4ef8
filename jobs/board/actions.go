package board

import (
	"context"
	"errors"
	"fmt"
	"net/http"

	"leadline/jobs"
)

// action is a change that a page offers.
type action struct {
	Name, Label string
	Question    string // asked first; "" where nothing is
	Yes, No     string // the answers
}

var (
	pause  = action{Name: "pause", Label: "Pause"}
	resume = action{Name: "resume", Label: "Resume"}
	again  = action{Name: "again", Label: "Begin again"}
	cancel = action{"cancel", "Cancel…", "Give this print up? Finished tiles are kept, so that it can be begun again.",
		"Cancel the print", "Go on with it"}
	remove = action{"remove", "Remove…", "Take this print off the list? What is kept of it in the queue goes; a finished file stays where it is.",
		"Remove the print", "Keep it"}
)

// actions are those that a print's state allows.
func actions(p *jobs.Print) []action {
	switch {
	case p.State == jobs.Done:
		return []action{remove}
	case p.Over():
		return []action{again, remove}
	case p.Paused:
		return []action{resume, cancel}
	}
	return []action{pause, cancel}
}

// question is the page that asks before a change.
type question struct {
	Title string
	Print card
	Ask   action
}

// act makes the change of a path's action.
func act(ctx context.Context, q Queue, name string, id int64) error {
	switch name {
	case pause.Name:
		return q.Pause(ctx, id)
	case resume.Name:
		return q.Resume(ctx, id)
	case cancel.Name:
		return q.Cancel(ctx, id)
	case again.Name:
		return q.Again(ctx, id)
	case remove.Name:
		return q.Remove(ctx, id)
	}
	return errNoPage
}

// errNoPage says that the address leads nowhere.
var errNoPage = errors.New("the board has no such page")

// change is POST /prints/{id}/{action}.
func (p *pages) change(w http.ResponseWriter, r *http.Request) {
	id, err := number(r)
	if err == nil {
		err = act(r.Context(), p.q, r.PathValue("action"), id)
	}
	if err != nil {
		p.fail(w, r, err)
		return
	}
	p.sees.forget()
	to := fmt.Sprintf("/prints/%d", id)
	if r.PathValue("action") == remove.Name {
		to = "/"
	}
	http.Redirect(w, r, to, http.StatusSeeOther)
}

// ask is GET /prints/{id}/{action}: the question before a change.
func (p *pages) ask(w http.ResponseWriter, r *http.Request) {
	id, err := number(r)
	if err != nil {
		p.fail(w, r, err)
		return
	}
	for _, a := range []action{cancel, remove} {
		if a.Name != r.PathValue("action") {
			continue
		}
		print, err := p.q.Show(r.Context(), id)
		if err != nil {
			p.fail(w, r, err)
			return
		}
		show(w, http.StatusOK, "ask", question{a.Yes, newCard(print, ""), a})
		return
	}
	p.fail(w, r, errNoPage)
}
