package jobs

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"io/fs"
	"net/url"
	"os"
	"path/filepath"
	"time"

	"github.com/riverqueue/river/riverdriver/riversqlite"
	_ "modernc.org/sqlite" // the database of the desk
)

// pragmas let any number of processes share the file: writers wait for each
// other, and every commit is on the disk when it returns.
const pragmas = "_pragma=busy_timeout(%d)&_pragma=journal_mode(WAL)&_pragma=synchronous(FULL)" +
	"&_pragma=foreign_keys(1)&_txlock=immediate"

// busyTime is how long a writer waits for another at a time.
const busyTime = 10 * time.Second

// openLite opens, and makes where missing, the queue in an SQLite file. Folder
// and file are the owner's alone.
func openLite(ctx context.Context, path string, busy time.Duration) (engine, error) {
	path, err := filepath.Abs(path)
	if err != nil {
		return nil, fmt.Errorf("opening the queue: %w", err)
	}
	if err := os.MkdirAll(filepath.Dir(path), 0o700); err != nil {
		return nil, fmt.Errorf("making the queue's folder: %w", err)
	}
	if err := touch(path); err != nil {
		return nil, fmt.Errorf("opening the queue: %w", err)
	}
	u := url.URL{Scheme: "file", Path: path, RawQuery: fmt.Sprintf(pragmas, busy.Milliseconds())}
	db, err := sql.Open("sqlite", u.String())
	if err != nil {
		return nil, fmt.Errorf("opening the queue: %w", err)
	}
	db.SetMaxOpenConns(1) // as River asks
	db.SetConnMaxLifetime(0)
	e, err := newLite(ctx, db)
	if err != nil {
		db.Close()
		return nil, fmt.Errorf("%s: %w", path, err)
	}
	return e, nil
}

// touch makes the file where it is missing; SQLite's other files take over its
// mode. One that is there must not be opened: closing it would end all locks
// that this process has on it (fcntl(2)), those of another Queue too.
func touch(path string) error {
	f, err := os.OpenFile(path, os.O_RDWR|os.O_CREATE|os.O_EXCL, 0o600)
	if errors.Is(err, fs.ErrExist) {
		return nil
	}
	if err != nil {
		return err
	}
	return f.Close()
}

func newLite(ctx context.Context, db *sql.DB) (engine, error) {
	d := &dialect{words: sqliteWords}
	b := &base[*sql.Tx]{
		driver: riversqlite.New(db), plain: sqlConn{d, db}, tables: "sqlite",
		begin:   func(ctx context.Context) (*sql.Tx, error) { return db.BeginTx(ctx, nil) },
		commit:  func(_ context.Context, t *sql.Tx) error { return t.Commit() },
		abort:   func(t *sql.Tx) { _ = t.Rollback() }, // the first error is the one that counts
		over:    func(t *sql.Tx) conn { return sqlConn{d, t} },
		closing: func() { db.Close() },
	}
	b.update = b.migrateAtOnce
	if err := b.inserter(); err != nil {
		return nil, err
	}
	err := b.check(ctx)
	var s *SchemaError
	if !errors.As(err, &s) {
		return b, err
	}
	return b, b.migrate(ctx)
}
