package jobs

import (
	"context"
	"errors"
	"fmt"
	"net/url"

	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgxpool"
	"github.com/riverqueue/river/riverdriver/riverpgxv5"
)

// migrateLock is the key of the advisory lock that migrations wait for.
const migrateLock = 0x6c6561646c696e65 // "leadline"

// openPostgres opens a queue in a PostgreSQL database. TLS, services and
// password files are taken from the URL and the environment as libpq does.
func openPostgres(ctx context.Context, where string) (*base[pgx.Tx], error) {
	if err := checkPasswords(where); err != nil {
		return nil, err
	}
	c, err := pgxpool.ParseConfig(where)
	if err != nil {
		return nil, &AddressError{"the queue's address is not a PostgreSQL URL that can be used"} // pgx's words repeat the address
	}
	patience(c)
	pool, err := pgxpool.NewWithConfig(ctx, c)
	if err != nil {
		return nil, fmt.Errorf("opening the queue: %w", err)
	}
	if err := pool.Ping(ctx); err != nil {
		pool.Close()
		return nil, &ReachError{redacted(where), err}
	}
	d := &dialect{words: postgresWords, numbered: true}
	b := &base[pgx.Tx]{
		driver: riverpgxv5.New(pool), plain: pgxConn{d, pool}, tables: "postgres",
		begin:   pool.Begin,
		commit:  func(ctx context.Context, t pgx.Tx) error { return t.Commit(ctx) },
		abort:   func(t pgx.Tx) { abortPostgres(t) },
		over:    func(t pgx.Tx) conn { return pgxConn{d, t} },
		closing: pool.Close,
	}
	b.update = func(ctx context.Context) error { return alone(ctx, pool, b.migrateInSteps) }
	if err := b.inserter(); err != nil {
		pool.Close()
		return nil, err
	}
	return b, nil
}

// abortPostgres rolls back even where the caller's context has ended.
func abortPostgres(t pgx.Tx) {
	ctx, cancel := context.WithTimeout(context.Background(), stopTime)
	defer cancel()
	_ = t.Rollback(ctx) // the first error is the one that counts
}

// alone runs f while no other process is in alone on the same database.
func alone(ctx context.Context, pool *pgxpool.Pool, f func(context.Context) error) (err error) {
	c, err := pool.Acquire(ctx)
	if err != nil {
		return fmt.Errorf("waiting to migrate: %w", err)
	}
	defer c.Release()
	if _, err := c.Exec(ctx, `SELECT pg_advisory_lock($1)`, int64(migrateLock)); err != nil {
		return fmt.Errorf("waiting to migrate: %w", err)
	}
	defer func() {
		_, e := c.Exec(context.WithoutCancel(ctx), `SELECT pg_advisory_unlock($1)`, int64(migrateLock))
		err = errors.Join(err, e)
	}()
	return f(ctx)
}

// redacted is an address without its password.
func redacted(where string) string {
	u, err := url.Parse(where)
	if err != nil {
		return "the database"
	}
	return u.Redacted()
}

// AddressError refuses an address of a queue.
type AddressError struct{ What string }

func (e *AddressError) Error() string { return e.What }

// Hint shows the forms there are.
func (e *AddressError) Hint() string {
	return "an address is postgres://USER@HOST/DATABASE, sqlite:FILE, or nothing for the desk's own queue"
}
