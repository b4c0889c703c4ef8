package jobs

import (
	"cmp"
	"context"
	"fmt"
	"log/slog"
	"path/filepath"
	"strings"
	"time"

	"leadline/render"
)

// Options are the choices in opening a queue. The zero value works.
type Options struct {
	// Spool is the folder of finished tiles. "" is one beside an SQLite file,
	// and the database itself on PostgreSQL. Every worker of a PostgreSQL queue
	// that is given one must be given the same.
	Spool string
	Log   *slog.Logger // what River and the workers say; nil: nothing

	busy time.Duration // tests: how long SQLite waits for a lock; 0: busyTime
}

// Queue is an open queue, safe for any number of goroutines and processes.
type Queue struct {
	e       engine
	spool   *spool // nil: tiles are kept in the database
	log     *slog.Logger
	release string // whose prints this process may work on
	numbers int
	time    timing
}

// timing holds the intervals of leases.
type timing struct {
	watch   time.Duration // between looks at what is still wanted
	beat    time.Duration // between signs of life
	silence time.Duration // after which a worker counts as gone
	reap    time.Duration // between looks for gone workers
}

// usual is every timing outside the tests: a killed worker's tile is queued
// again 10 to 11 s after its last sign of life.
var usual = timing{300 * time.Millisecond, 2500 * time.Millisecond, 10 * time.Second, time.Second}

// Open opens the queue at an address: "" is the desk's own, in the user's state
// folder; sqlite:FILE or a plain path another SQLite file; postgres://… a farm's
// database. SQLite tables are made and brought up to date by opening; those of
// PostgreSQL by Migrate.
func Open(ctx context.Context, where string, o Options) (*Queue, error) {
	q, err := open(ctx, where, o)
	if err != nil {
		return nil, err
	}
	err = q.e.check(ctx)
	if err == nil && q.spool != nil {
		var name string
		if err = one(ctx, q.e.read(), `SELECT id FROM leadline_name`, nil, &name); err == nil {
			err = q.spool.claim(name)
		}
	}
	if err != nil {
		q.Close()
		return nil, err
	}
	return q, nil
}

// Migrate makes the tables of the queue at an address, or brings them up to
// date. Any number of processes may do it at once.
func Migrate(ctx context.Context, where string) error {
	q, err := open(ctx, where, Options{})
	if err != nil {
		return err
	}
	defer q.Close()
	return q.e.migrate(ctx)
}

// open is Open without a look at PostgreSQL's tables.
func open(ctx context.Context, where string, o Options) (*Queue, error) {
	q := &Queue{log: o.Log, release: render.Release, numbers: render.Numerics, time: usual}
	if q.log == nil {
		q.log = slog.New(slog.DiscardHandler)
	}
	path, isFile, err := split(where)
	if err != nil {
		return nil, err
	}
	if isFile {
		if o.Spool == "" {
			o.Spool = strings.TrimSuffix(path, filepath.Ext(path)) + ".spool"
		}
		q.e, err = openLite(ctx, path, cmp.Or(o.busy, busyTime))
	} else {
		var b engine
		b, err = openFarm(ctx, where)
		q.e = b
	}
	if err != nil {
		return nil, err
	}
	if o.Spool != "" {
		if q.spool, err = newSpool(o.Spool); err != nil {
			q.Close()
			return nil, err
		}
	}
	return q, nil
}

// openFarm is openPostgres with a nil engine where there is an error.
func openFarm(ctx context.Context, where string) (engine, error) {
	b, err := openPostgres(ctx, where)
	if err != nil {
		return nil, err
	}
	return b, nil
}

// Close closes the queue. Prints go on where other processes work.
func (q *Queue) Close() { q.e.close() }

// split tells a file's address from a server's.
func split(where string) (path string, isFile bool, err error) {
	if where == "" {
		path, err = desk()
		return path, true, err
	}
	scheme, rest, found := strings.Cut(where, ":")
	switch {
	case scheme == "postgres" || scheme == "postgresql":
		return "", false, nil
	case scheme == "sqlite" && found:
		if rest = strings.TrimPrefix(rest, "//"); rest == "" {
			return "", false, &AddressError{"the queue's address names no file"}
		}
		return rest, true, nil
	case strings.Contains(where, "://"):
		return "", false, &AddressError{fmt.Sprintf("a queue cannot be at an address of the kind %s", scheme)}
	}
	return where, true, nil
}

// desk is the file of the desk's own queue.
func desk() (string, error) {
	dir, err := StateFolder()
	if err != nil {
		return "", err
	}
	return filepath.Join(dir, "queue.db"), nil
}
