package jobs

import (
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestUpgrade has a queue whose tables are of the step before, with a print
// half done, brought up to date.
func TestUpgrade(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		old := d.open(t)
		id := add(t, old, AddOptions{})
		for _, step := range []string{`DROP TABLE leadline_loss`, `DROP TABLE leadline_name`, `DROP INDEX leadline_tile_recent`,
			`ALTER TABLE leadline_tile DROP COLUMN look`, `DELETE FROM leadline_schema WHERE version = 2`} {
			if _, err := old.e.read().exec(t.Context(), step); err != nil {
				t.Fatal(err)
			}
		}
		if old.spool != nil {
			if err := os.Remove(filepath.Join(old.spool.dir, nameFile)); err != nil {
				t.Fatal(err)
			}
		}
		if d.kind == "postgres" {
			var schema *SchemaError
			if _, err := Open(t.Context(), d.where, Options{}); !errors.As(err, &schema) ||
				!strings.Contains(err.Error(), "version 1, this release needs 2") || schema.Hint() == "" {
				t.Errorf("before the migration: %v", err)
			}
			if err := Migrate(t.Context(), d.where); err != nil {
				t.Fatal(err)
			}
		}
		q := d.open(t)
		start(t, q, WorkOptions{Slots: 1})
		whole(t, q, until(t, q, id, "done", inState(Done)))
	})
}
