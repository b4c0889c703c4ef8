package jobs

import (
	"context"
	"crypto/rand"
	"fmt"
	"os"
	"runtime"
	"sync"
	"time"

	"github.com/riverqueue/river"

	"leadline/render/words"
)

// WorkOptions are the choices of a worker. The zero value works.
type WorkOptions struct {
	Slots  int    // tasks at a time; 0: one a core
	Drain  bool   // return when no print is left that could be worked on
	Name   string // shown to people; "": host and process
	Limits Limits // what a print may claim here
	// Say is told, in words, what becomes of prints here; nil: nothing is said.
	Say func(string)

	before func(context.Context, ticket) // tests: called as a task begins
}

// worker is one process' part in the work, under one lease.
type worker struct {
	q     *Queue
	o     WorkOptions
	id    string
	host  string
	beats int64 // signs of life given; used by one goroutine
	plans *plans

	mu   sync.Mutex
	held map[ticket]*task
}

// task is a ticket in hand.
type task struct {
	cancel context.CancelCauseFunc
	begun  bool // the lease stands in the database
}

// Work does the queue's tasks until the context ends, whose error it returns
// then; what is in hand is put back. With Drain it returns nil when every print
// of this release is done, failed, cancelled or paused.
func (q *Queue) Work(ctx context.Context, o WorkOptions) error {
	w := q.newWorker(o)
	k, err := w.enter(ctx)
	if err != nil {
		return err
	}
	w.say("%s works on %s at a time", w.o.Name, words.Plural(w.o.Slots, "task", "tasks"))
	err = w.keep(ctx)
	stop, cancel := context.WithTimeout(context.WithoutCancel(ctx), stopTime)
	defer cancel()
	w.letGo(errStopped)
	if e := k.StopAndCancel(stop); e != nil && err == nil {
		err = fmt.Errorf("stopping the worker: %w", e)
	}
	w.leave(stop)
	return err
}

// startTime bounds how long a worker tries to start while the database is away.
const startTime = time.Minute

// enter takes the lease and starts River.
func (w *worker) enter(ctx context.Context) (k client, err error) {
	patient, cancel := context.WithTimeout(ctx, startTime)
	defer cancel()
	err = persist(patient, func() error {
		err := w.beat(ctx)
		if refuses(err) {
			cancel()
		}
		return err
	})
	if err != nil {
		return nil, err
	}
	w.q.tidy(ctx)
	err = persist(patient, func() error {
		if k, err = w.q.e.worker(w.config()); err != nil {
			return err
		}
		// River gets a context of its own: it stops after the lease's keeping has.
		if err := k.Start(context.WithoutCancel(ctx)); err != nil {
			return &storeError{"starting a worker", err}
		}
		return nil
	})
	return k, err
}

func (w *worker) say(format string, a ...any) {
	if w.o.Say != nil {
		w.o.Say(fmt.Sprintf(format, a...))
	}
}

func (q *Queue) newWorker(o WorkOptions) *worker {
	if o.Slots <= 0 {
		o.Slots = runtime.GOMAXPROCS(0)
	}
	host, _ := os.Hostname() // a name for people; absent if unknown
	if o.Name == "" {
		o.Name = fmt.Sprintf("%s/%d", host, os.Getpid())
	}
	return &worker{q: q, o: o, id: rand.Text(), host: host, plans: newPlans(), held: map[ticket]*task{}}
}

// config is River's part of a worker. No job has a deadline and none is
// retried or rescued by River; see lease.go.
func (w *worker) config() *river.Config {
	workers := river.NewWorkers()
	river.AddWorker(workers, river.WorkFunc(func(ctx context.Context, j *river.Job[planArgs]) error {
		return w.do(ctx, j.JobRow, j.Args.ticket)
	}))
	river.AddWorker(workers, river.WorkFunc(func(ctx context.Context, j *river.Job[tileArgs]) error {
		return w.do(ctx, j.JobRow, j.Args.ticket)
	}))
	river.AddWorker(workers, river.WorkFunc(func(ctx context.Context, j *river.Job[assemblyArgs]) error {
		return w.do(ctx, j.JobRow, j.Args.ticket)
	}))
	return &river.Config{
		ID: w.id, Logger: w.q.log, Workers: workers,
		Queues:                      map[string]river.QueueConfig{queueName(w.q.release, w.q.numbers): {MaxWorkers: w.o.Slots}},
		JobTimeout:                  -1,
		FetchCooldown:               2 * time.Millisecond,
		FetchPollInterval:           500 * time.Millisecond,
		CompletedJobRetentionPeriod: time.Hour,
		DiscardedJobRetentionPeriod: time.Hour,
	}
}

// hold notes a task in hand; false where the worker has it already.
func (w *worker) hold(k ticket, cancel context.CancelCauseFunc) bool {
	w.mu.Lock()
	defer w.mu.Unlock()
	if w.held[k] != nil {
		return false
	}
	w.held[k] = &task{cancel: cancel}
	return true
}

func (w *worker) begun(k ticket) {
	w.mu.Lock()
	defer w.mu.Unlock()
	w.held[k].begun = true
}

func (w *worker) drop(k ticket) {
	w.mu.Lock()
	defer w.mu.Unlock()
	delete(w.held, k)
}

// letGo stops all that is in hand.
func (w *worker) letGo(cause error) {
	w.mu.Lock()
	defer w.mu.Unlock()
	for _, t := range w.held {
		t.cancel(cause)
	}
}

// leave gives up the lease; whatever is still in hand is anybody's then.
func (w *worker) leave(ctx context.Context) {
	if _, err := w.q.e.read().exec(ctx, `DELETE FROM leadline_worker WHERE id = ?`, w.id); err != nil {
		w.q.log.Warn("leaving the queue", "error", err)
	}
}

// tidy removes the spool's remains of prints that are done or gone.
func (q *Queue) tidy(ctx context.Context) {
	if q.spool == nil {
		return
	}
	ids, err := q.spool.prints()
	for _, id := range ids {
		var n int
		if err = one(ctx, q.e.read(), `SELECT count(*) FROM leadline_print WHERE id = ? AND state <> 'done'`, []any{id}, &n); err != nil {
			break
		}
		if n == 0 {
			err = q.spool.dropPrint(id)
		}
	}
	if err != nil {
		q.log.Warn("tidying the spool", "error", err)
	}
}
