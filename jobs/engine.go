package jobs

import (
	"context"
	"errors"
	"fmt"
	"log/slog"
	"maps"
	"slices"
	"time"

	"github.com/riverqueue/river"
	"github.com/riverqueue/river/riverdriver"
	"github.com/riverqueue/river/rivermigrate"
	"github.com/riverqueue/river/rivertype"
)

// engine is a database with River on it.
type engine interface {
	// read runs queries outside a transaction.
	read() conn
	// do runs f in one transaction, which is committed where f returns nil.
	do(ctx context.Context, f func(tx) error) error
	// worker returns a River client that works; Start begins.
	worker(c *river.Config) (client, error)
	console(prefix string, log *slog.Logger) (Console, error)
	migrate(ctx context.Context) error
	// check says whether the tables are those of this release.
	check(ctx context.Context) error
	// local says that the queue lies on this machine's own disk.
	local() bool
	close()
}

// tx is a transaction of our tables and River's.
type tx interface {
	conn
	// insert adds River jobs and returns their numbers.
	insert(ctx context.Context, jobs []river.InsertManyParams) ([]int64, error)
	// complete marks a River job done; errNotRunning where it is not running.
	complete(ctx context.Context, job *rivertype.JobRow) error
}

// client is the part of a working River client that is used.
type client interface {
	Start(context.Context) error
	StopAndCancel(context.Context) error
}

// errNotRunning says that River no longer counts a job as running.
var errNotRunning = errors.New("the job is no longer running")

// base is an engine over transactions of type T.
type base[T any] struct {
	driver  riverdriver.Driver[T]
	client  *river.Client[T] // inserts only
	plain   conn
	begin   func(context.Context) (T, error)
	commit  func(context.Context, T) error
	abort   func(T)
	over    func(T) conn
	update  func(context.Context) error // migrates
	tables  string                      // folder of our migrations
	closing func()
}

func (b *base[T]) read() conn  { return b.plain }
func (b *base[T]) local() bool { return b.tables == "sqlite" }
func (b *base[T]) close()      { b.closing() }

func (b *base[T]) migrate(ctx context.Context) error { return b.update(ctx) }

func (b *base[T]) do(ctx context.Context, f func(tx) error) error {
	t, err := b.begin(ctx)
	if err != nil {
		return &storeError{"opening a transaction", err}
	}
	if err := f(&transaction[T]{b.over(t), b, t}); err != nil {
		b.abort(t)
		return err
	}
	if err := b.commit(ctx, t); err != nil {
		b.abort(t)
		return &storeError{"closing a transaction", err}
	}
	return nil
}

// transaction is a tx over a T.
type transaction[T any] struct {
	conn
	b *base[T]
	t T
}

func (t *transaction[T]) insert(ctx context.Context, jobs []river.InsertManyParams) ([]int64, error) {
	if len(jobs) == 0 {
		return nil, nil
	}
	done, err := t.b.client.InsertManyTx(ctx, t.t, jobs)
	if err != nil {
		return nil, &storeError{"queueing", err}
	}
	ids := make([]int64, len(done))
	for i, d := range done {
		ids[i] = d.Job.ID
	}
	return ids, nil
}

func (t *transaction[T]) complete(ctx context.Context, row *rivertype.JobRow) error {
	job, err := river.JobCompleteTx[riverdriver.Driver[T]](ctx, t.t, &river.Job[tileArgs]{JobRow: row})
	switch {
	case errors.Is(err, rivertype.ErrNotFound):
		return errNotRunning
	case err != nil:
		return &storeError{"completing a job", err}
	case job == nil || job.State != rivertype.JobStateCompleted:
		return errNotRunning
	}
	return nil
}

func (b *base[T]) worker(c *river.Config) (client, error) {
	k, err := river.NewClient(b.driver, c)
	if err != nil {
		return nil, fmt.Errorf("starting a worker: %w", err)
	}
	return k, nil
}

// inserter makes the client that inserts.
func (b *base[T]) inserter() (err error) {
	b.client, err = river.NewClient(b.driver, &river.Config{Logger: slog.New(slog.DiscardHandler)})
	return err
}

// riverState compares River's tables with what this release needs.
func (b *base[T]) riverState(ctx context.Context) error {
	m, err := b.migrator()
	if err != nil {
		return err
	}
	missing := map[int]bool{}
	for _, v := range m.AllVersions() {
		missing[v.Version] = true
	}
	// River's own Validate begins a transaction, and would wait here for writers.
	err = each(ctx, b.plain, `SELECT version FROM river_migration WHERE line = 'main'`, nil, func(scan func(...any) error) error {
		var n int
		err := scan(&n)
		delete(missing, n)
		return err
	})
	if err != nil {
		return err
	}
	if len(missing) > 0 {
		return &SchemaError{What: fmt.Sprintf("River's tables are those of another release: steps %v are missing", slices.Sorted(maps.Keys(missing))),
			Cure: migrateHint}
	}
	return nil
}

// migrator is River's.
func (b *base[T]) migrator() (*rivermigrate.Migrator[T], error) {
	return rivermigrate.New(b.driver, &rivermigrate.Config{Logger: slog.New(slog.DiscardHandler)})
}

// migrateAtOnce brings River's tables and ours up to date in one transaction.
func (b *base[T]) migrateAtOnce(ctx context.Context) error {
	m, err := b.migrator()
	if err != nil {
		return err
	}
	t, err := b.begin(ctx)
	if err != nil {
		return fmt.Errorf("opening a transaction: %w", err)
	}
	//lint:ignore SA1019 only PostgreSQL has steps that one transaction cannot hold; SQLite's files are opened by many at once
	if _, err = m.MigrateTx(ctx, t, rivermigrate.DirectionUp, nil); err != nil {
		err = fmt.Errorf("making River's tables: %w", err)
	} else {
		err = migrateOwn(ctx, b.over(t), b.tables)
	}
	if err != nil {
		b.abort(t)
		return err
	}
	return b.commit(ctx, t)
}

// migrateInSteps does the same where River's steps must be committed one by
// one; the caller sees to it that nobody else migrates.
func (b *base[T]) migrateInSteps(ctx context.Context) error {
	m, err := b.migrator()
	if err != nil {
		return err
	}
	if _, err := m.Migrate(ctx, rivermigrate.DirectionUp, nil); err != nil {
		return fmt.Errorf("making River's tables: %w", err)
	}
	return b.do(ctx, func(t tx) error { return migrateOwn(ctx, t, b.tables) })
}

// stopTime bounds how long writing goes on after the work was told to stop.
const stopTime = 10 * time.Second
