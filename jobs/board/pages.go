package board

import (
	"context"
	"encoding/json"
	"errors"
	"log/slog"
	"net/http"
	"strconv"
	"strings"

	"leadline/jobs"
)

// RiverPrefix is where River's own page is mounted.
const RiverPrefix = "/river"

// riverPolicy is what River's page needs: styles that its script adds, and
// pictures written into them. It runs no script but its own files.
const riverPolicy = "default-src 'none'; script-src 'self'; style-src 'self' 'unsafe-inline'; img-src 'self' data:; connect-src 'self'; form-action 'none'; base-uri 'none'; frame-ancestors 'none'"

// pages is the board behind its guard.
type pages struct {
	q       Queue
	sees    *lookout
	thumbs  *thumbs
	console bool
	log     *slog.Logger
}

// newPages routes the board.
func newPages(q Queue, river http.Handler, log *slog.Logger) http.Handler {
	p := &pages{q: q, sees: &lookout{q: q}, thumbs: newThumbs(q), console: river != nil, log: log}
	mux := http.NewServeMux()
	mux.HandleFunc("GET /{$}", p.home)
	mux.HandleFunc("GET /prints.json", p.homeJSON)
	mux.HandleFunc("GET /prints/{id}", p.print)
	mux.HandleFunc("GET /prints/{id}/thumbnail.png", p.thumbnail)
	mux.HandleFunc("GET /prints/{id}/{action}", p.ask)
	mux.HandleFunc("POST /prints/{id}/{action}", p.change)
	mux.HandleFunc("GET "+assetPrefix+"{name}", asset)
	if river != nil {
		relaxed := http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
			w.Header().Set("Content-Security-Policy", riverPolicy)
			river.ServeHTTP(w, r)
		})
		mux.Handle(RiverPrefix, relaxed)
		mux.Handle(RiverPrefix+"/", relaxed)
	}
	mux.HandleFunc("/", func(w http.ResponseWriter, r *http.Request) { p.fail(w, r, errNoPage) })
	return mux
}

// home is all prints and the workers.
func (p *pages) home(w http.ResponseWriter, r *http.Request) {
	s, err := p.sees.look(r.Context())
	if err != nil {
		p.fail(w, r, err)
		return
	}
	h := newHome(s, r.URL.Query().Get("over") == "all")
	h.Console = p.console
	show(w, http.StatusOK, "home", h)
}

// homeJSON is the same for programs.
func (p *pages) homeJSON(w http.ResponseWriter, r *http.Request) {
	s, err := p.sees.look(r.Context())
	if err != nil {
		p.fail(w, r, err)
		return
	}
	whole := *s
	if whole.Prints == nil {
		whole.Prints = []jobs.Print{}
	}
	if whole.Workers == nil {
		whole.Workers = []jobs.Worker{}
	}
	writeJSON(w, http.StatusOK, whole)
}

// print is one print, or with .json behind the number the same for programs.
func (p *pages) print(w http.ResponseWriter, r *http.Request) {
	id, err := number(r)
	if err != nil {
		p.fail(w, r, err)
		return
	}
	one, err := p.q.Show(r.Context(), id)
	if err != nil {
		p.fail(w, r, err)
		return
	}
	if wantsJSON(r) {
		writeJSON(w, http.StatusOK, one)
		return
	}
	c := newCard(one, p.sees.mark(r.Context(), id))
	c.Facts = facts(one)
	show(w, http.StatusOK, "print", struct {
		Title string
		Live  bool
		card
	}{c.Share + " " + c.Name, true, c})
}

// number is the print that a path names.
func number(r *http.Request) (int64, error) {
	id, err := strconv.ParseInt(strings.TrimSuffix(r.PathValue("id"), ".json"), 10, 64)
	if err != nil || id < 1 {
		return 0, errNoPage
	}
	return id, nil
}

func wantsJSON(r *http.Request) bool { return strings.HasSuffix(r.URL.Path, ".json") }

func writeJSON(w http.ResponseWriter, code int, v any) {
	b, err := json.Marshal(v)
	if err != nil { // a slip in this program: everything shown has a JSON form
		code, b = http.StatusInternalServerError, []byte(`{"error":"no JSON form"}`)
	}
	w.Header().Set("Content-Type", "application/json")
	w.WriteHeader(code)
	_, _ = w.Write(append(b, '\n')) // a reader that has left misses nothing
}

// fail says what went wrong, and the cure where one is known.
func (p *pages) fail(w http.ResponseWriter, r *http.Request, err error) {
	if r.Context().Err() != nil && errors.Is(err, context.Canceled) {
		return // nobody listens any more
	}
	var gone *jobs.NoPrintError
	var state *jobs.StateError
	t := trouble{Title: "This did not work", What: err.Error()}
	code := http.StatusInternalServerError
	switch {
	case errors.As(err, &gone), errors.Is(err, errNoPage):
		code, t.Title = http.StatusNotFound, "Not there"
	case errors.As(err, &state):
		code, t.Title = http.StatusConflict, "Not now"
	default:
		p.log.Error("a page could not be made", "path", r.URL.Path, "error", err)
	}
	var hint interface{ Hint() string }
	if errors.As(err, &hint) {
		t.Cure = hint.Hint()
	}
	if wantsJSON(r) {
		writeJSON(w, code, map[string]string{"error": t.What, "hint": t.Cure})
		return
	}
	show(w, code, "trouble", t)
}
