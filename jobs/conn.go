package jobs

import (
	"context"
	"database/sql"
	"errors"
	"slices"
	"strconv"
	"strings"
	"sync"

	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgconn"
	"modernc.org/sqlite"
)

// conn runs queries, inside a transaction or outside. Queries are written once,
// with ? for values and {words} for what differs; see dialect.
type conn interface {
	exec(ctx context.Context, query string, args ...any) (int64, error)
	query(ctx context.Context, query string, args ...any) (rows, error)
}

// rows is what both database packages offer.
type rows interface {
	Next() bool
	Scan(...any) error
	Err() error
	close()
}

// errNoRow says that a query for one row found none.
var errNoRow = errors.New("no such row")

// storeError says that the database, not the work, is in trouble.
type storeError struct {
	doing string
	err   error
}

func (e *storeError) Error() string { return e.doing + ": " + e.err.Error() }
func (e *storeError) Unwrap() error { return e.err }

// Hint says what to look at.
func (e *storeError) Hint() string {
	return "check the database, its disk, and the way to it; nothing that was finished is lost"
}

// refuses says whether the database is there and does not want to: waiting will
// not help. The codes are PostgreSQL's class 42 (appendix A of its manual:
// syntax error or access rule violation) and SQLite's primary result codes
// PERM, READONLY, CORRUPT and NOTADB.
func refuses(err error) bool {
	var p *pgconn.PgError
	var s *sqlite.Error
	switch {
	case errors.As(err, &p):
		return strings.HasPrefix(p.Code, "42")
	case errors.As(err, &s):
		return slices.Contains([]int{3, 8, 11, 26}, s.Code()&0xff)
	}
	return false
}

// one reads the only row of a query.
func one(ctx context.Context, c conn, query string, args []any, to ...any) error {
	found := false
	err := each(ctx, c, query, args, func(scan func(...any) error) error {
		found = true
		return scan(to...)
	})
	if err == nil && !found {
		return errNoRow
	}
	return err
}

// each reads every row of a query. f must not use the same transaction.
func each(ctx context.Context, c conn, query string, args []any, f func(scan func(...any) error) error) error {
	r, err := c.query(ctx, query, args...)
	if err != nil {
		return err
	}
	defer r.close()
	for r.Next() {
		if err := f(r.Scan); err != nil {
			return &storeError{"reading the queue", err}
		}
	}
	if err := r.Err(); err != nil {
		return &storeError{"reading the queue", err}
	}
	return nil
}

// dialect is all that differs between the engines' SQL.
type dialect struct {
	numbered bool              // $1, $2 … instead of ?
	words    *strings.Replacer // {now}, {lock} …
	known    sync.Map          // queries already put into words
}

// sqliteWords and postgresWords: the present in milliseconds, locking a read
// row, the worker that took a River job last, and the present and five seconds
// later as River writes them.
var (
	sqliteWords = strings.NewReplacer(
		"{now}", "cast(unixepoch('subsec')*1000 as integer)",
		"{lock}", "",
		"{by}", "coalesce(json_extract(j.attempted_by, '$[#-1]'), '')",
		"{stamp}", "datetime('now', 'subsec')",
		"{ahead}", "datetime('now', 'subsec', '+5 seconds')")
	postgresWords = strings.NewReplacer(
		"{now}", "cast(extract(epoch from clock_timestamp())*1000 as bigint)",
		"{lock}", " FOR UPDATE",
		"{by}", "coalesce(j.attempted_by[array_upper(j.attempted_by, 1)], '')",
		"{stamp}", "now()",
		"{ahead}", "now() + interval '5 seconds'")
)

// say puts a query into the engine's words.
func (d *dialect) say(query string) string {
	if s, ok := d.known.Load(query); ok {
		return s.(string)
	}
	s := d.words.Replace(query)
	if d.numbered {
		var b strings.Builder
		n := 0
		for _, r := range s {
			if r != '?' {
				b.WriteRune(r)
				continue
			}
			n++
			b.WriteString("$" + strconv.Itoa(n))
		}
		s = b.String()
	}
	d.known.Store(query, s)
	return s
}

// sqlConn is a conn over database/sql.
type sqlConn struct {
	d *dialect
	c interface {
		ExecContext(context.Context, string, ...any) (sql.Result, error)
		QueryContext(context.Context, string, ...any) (*sql.Rows, error)
	}
}

type sqlRows struct{ *sql.Rows }

func (r sqlRows) close() { _ = r.Rows.Close() } // Err has told everything

func (c sqlConn) exec(ctx context.Context, query string, args ...any) (int64, error) {
	r, err := c.c.ExecContext(ctx, c.d.say(query), args...)
	if err != nil {
		return 0, &storeError{"writing the queue", err}
	}
	n, err := r.RowsAffected()
	if err != nil {
		return 0, &storeError{"writing the queue", err}
	}
	return n, nil
}

func (c sqlConn) query(ctx context.Context, query string, args ...any) (rows, error) {
	r, err := c.c.QueryContext(ctx, c.d.say(query), args...)
	if err != nil {
		return nil, &storeError{"reading the queue", err}
	}
	return sqlRows{r}, nil
}

// pgxConn is a conn over pgx.
type pgxConn struct {
	d *dialect
	c interface {
		Exec(context.Context, string, ...any) (pgconn.CommandTag, error)
		Query(context.Context, string, ...any) (pgx.Rows, error)
	}
}

type pgxRows struct{ pgx.Rows }

func (r pgxRows) close() { r.Rows.Close() }

func (c pgxConn) exec(ctx context.Context, query string, args ...any) (int64, error) {
	tag, err := c.c.Exec(ctx, c.d.say(query), args...)
	if err != nil {
		return 0, &storeError{"writing the queue", err}
	}
	return tag.RowsAffected(), nil
}

func (c pgxConn) query(ctx context.Context, query string, args ...any) (rows, error) {
	r, err := c.c.Query(ctx, c.d.say(query), args...)
	if err != nil {
		return nil, &storeError{"reading the queue", err}
	}
	return pgxRows{r}, nil
}
