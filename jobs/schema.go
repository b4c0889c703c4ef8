package jobs

import (
	"context"
	"crypto/rand"
	"embed"
	"errors"
	"fmt"
	"strings"
)

// migrations holds our tables' steps, NNN.sql, for each engine. A step is never
// changed once released.
//
//go:embed sql
var migrations embed.FS

// schemaVersion is the last step this release knows.
const schemaVersion = 2

const migrateHint = "run leadline queue migrate with the same --queue"

// SchemaError says that a database's tables are not this release's.
type SchemaError struct{ What, Cure string }

func (e *SchemaError) Error() string { return e.What }

// Hint says how to get the right tables.
func (e *SchemaError) Hint() string { return e.Cure }

// version reads the last step taken; 0 where there are no tables.
func version(ctx context.Context, c conn) (n int, err error) {
	err = one(ctx, c, `SELECT max(version) FROM leadline_schema`, nil, &n)
	return n, err
}

// check compares our tables, then River's, with what this release needs.
func (b *base[T]) check(ctx context.Context) error {
	var n int
	if err := one(ctx, b.plain, b.has(), nil, &n); err != nil {
		return err
	}
	if n == 0 {
		return &SchemaError{"this database holds no queue yet", migrateHint}
	}
	switch n, err := version(ctx, b.plain); {
	case err != nil:
		return err
	case n < schemaVersion:
		return &SchemaError{fmt.Sprintf("the queue's tables are of version %d, this release needs %d", n, schemaVersion), migrateHint}
	case n > schemaVersion:
		return newer(n)
	}
	return b.riverState(ctx)
}

func newer(n int) error {
	return &SchemaError{fmt.Sprintf("the queue's tables are of version %d, which this release does not know (it knows %d)", n, schemaVersion),
		"use the release that made them, or a later one"}
}

// has counts the table that tells the version.
func (b *base[T]) has() string {
	if b.tables == "sqlite" {
		return `SELECT count(*) FROM sqlite_master WHERE type = 'table' AND name = 'leadline_schema'`
	}
	return `SELECT count(*) FROM pg_catalog.pg_class WHERE oid = to_regclass('leadline_schema')`
}

// migrateOwn takes the steps that are missing.
func migrateOwn(ctx context.Context, t conn, engine string) error {
	if _, err := t.exec(ctx, `CREATE TABLE IF NOT EXISTS leadline_schema (version integer PRIMARY KEY)`); err != nil {
		return err
	}
	var n int
	err := one(ctx, t, `SELECT coalesce(max(version), 0) FROM leadline_schema`, nil, &n)
	if err != nil && !errors.Is(err, errNoRow) {
		return err
	}
	if n > schemaVersion {
		return newer(n)
	}
	for n++; n <= schemaVersion; n++ {
		text, err := migrations.ReadFile(fmt.Sprintf("sql/%s/%03d.sql", engine, n))
		if err != nil {
			return err
		}
		for step := range strings.SplitSeq(string(text), ";\n") {
			if strings.TrimSpace(step) == "" {
				continue
			}
			if _, err := t.exec(ctx, step); err != nil {
				return fmt.Errorf("step %d: %w", n, err)
			}
		}
		if _, err := t.exec(ctx, `INSERT INTO leadline_schema (version) VALUES (?)`, n); err != nil {
			return err
		}
	}
	// The queue's name, which its spool folder bears.
	_, err = t.exec(ctx, `INSERT INTO leadline_name (id) SELECT ? WHERE NOT EXISTS (SELECT 1 FROM leadline_name)`, rand.Text())
	return err
}
