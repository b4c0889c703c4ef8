package jobs

import (
	"context"
	"fmt"
	"log/slog"
	"net/http"

	"riverqueue.com/riverui"
)

// Console is the dispatcher's own page of its jobs. It asks for no login: who
// mounts it sees to that.
type Console interface {
	http.Handler
	// Start begins what counts in the background, until the context ends. It
	// comes before the first request.
	Start(context.Context) error
}

// Console returns River's page of this queue's jobs, which answers under prefix
// ("/river"). It shows and changes River's jobs, not prints; what it cancels or
// deletes of a print that is still wanted, the reaper queues again. A nil log
// says nothing.
func (q *Queue) Console(prefix string, log *slog.Logger) (Console, error) {
	if log == nil {
		log = slog.New(slog.DiscardHandler)
	}
	return q.e.console(prefix, log)
}

func (b *base[T]) console(prefix string, log *slog.Logger) (Console, error) {
	h, err := riverui.NewHandler(&riverui.HandlerOpts{
		Endpoints: riverui.NewEndpoints(b.client, nil), Logger: log, Prefix: prefix,
	})
	if err != nil {
		return nil, fmt.Errorf("opening River's page: %w", err)
	}
	return h, nil
}
