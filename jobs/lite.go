package jobs

import (
	"context"
	"database/sql"
	"errors"
	"fmt"
	"net/url"
	"os"
	"path/filepath"

	"github.com/riverqueue/river/riverdriver/riversqlite"
	_ "modernc.org/sqlite" // the database of the desk
)

// pragmas let any number of processes share the file: writers wait for each
// other, and every commit is on the disk when it returns.
const pragmas = "_pragma=busy_timeout(10000)&_pragma=journal_mode(WAL)&_pragma=synchronous(FULL)" +
	"&_pragma=foreign_keys(1)&_txlock=immediate"

// openLite opens, and makes where missing, the queue in an SQLite file. Folder
// and file are the owner's alone.
func openLite(ctx context.Context, path string) (engine, error) {
	path, err := filepath.Abs(path)
	if err != nil {
		return nil, fmt.Errorf("opening the queue: %w", err)
	}
	if err := os.MkdirAll(filepath.Dir(path), 0o700); err != nil {
		return nil, fmt.Errorf("making the queue's folder: %w", err)
	}
	f, err := os.OpenFile(path, os.O_RDWR|os.O_CREATE, 0o600) // SQLite's other files take over its mode
	if err != nil {
		return nil, fmt.Errorf("opening the queue: %w", err)
	}
	f.Close()
	u := url.URL{Scheme: "file", Path: path, RawQuery: pragmas}
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
