package jobs

import (
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"leadline/render/printfile"
)

// TestRoom refuses paths that are taken or cannot be written, before any work.
func TestRoom(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		ctx := t.Context()
		out := filepath.Join(t.TempDir(), "a.png")
		first := add(t, q, AddOptions{Out: out})
		var taken *TakenError
		again := func(o AddOptions) error {
			o.Tile, o.Audit = 16, 4
			_, err := q.Add(ctx, small(t, ""), o)
			return err
		}
		if err := again(AddOptions{Out: out}); !errors.As(err, &taken) || !strings.Contains(err.Error(), "print 1") || taken.Hint() == "" {
			t.Errorf("a path of an unfinished print: %v", err)
		}
		if err := q.Work(ctx, WorkOptions{Slots: 1, Drain: true}); err != nil {
			t.Fatal(err)
		}
		whole(t, q, show(t, q, first))
		if err := again(AddOptions{Out: out}); !errors.As(err, &taken) || !strings.Contains(err.Error(), "is there already") {
			t.Errorf("a path of a file: %v", err)
		}
		if err := again(AddOptions{Out: out, Replace: true}); err != nil {
			t.Errorf("to be replaced: %v", err)
		}
		if all, err := q.List(ctx); err != nil || len(all) != 2 {
			t.Errorf("%d prints, %v", len(all), err)
		}
		// A folder that is missing is found out by whoever shares the disk, else
		// by who makes the plan: no tile is rendered.
		nowhere := filepath.Join(t.TempDir(), "nowhere", "a.png")
		err := again(AddOptions{Out: nowhere})
		var file *printfile.WriteError
		if d.kind == "sqlite" {
			if !errors.As(err, &file) || file.Hint() == "" {
				t.Errorf("a missing folder: %v", err)
			}
			return
		}
		if err != nil {
			t.Fatal(err)
		}
		if err := q.Work(ctx, WorkOptions{Slots: 1, Drain: true}); err != nil {
			t.Fatal(err)
		}
		p := show(t, q, 3)
		if p.State != Failed || p.Done != 0 || !strings.Contains(p.Hint, "make the folder") || !strings.Contains(p.Hint, "queue again") {
			t.Errorf("%+v", p)
		}
		if err := os.Mkdir(filepath.Dir(nowhere), 0o700); err != nil {
			t.Fatal(err)
		}
		if err := q.Again(ctx, 3); err != nil {
			t.Fatal(err)
		}
		if err := q.Work(ctx, WorkOptions{Slots: 1, Drain: true}); err != nil {
			t.Fatal(err)
		}
		whole(t, q, show(t, q, 3))
	})
}

// TestRefusals has the server's own words in one line, with the cure; and a
// password file that others can read refused, as libpq refuses it.
func TestRefusals(t *testing.T) {
	where := freshPostgres(t, false)
	file := filepath.Join(t.TempDir(), "passwords")
	t.Setenv("PGPASSFILE", file)
	for address, want := range map[string][2]string{
		strings.Replace(where, "/postgres?", "/no_such_queue?", 1): {"does not exist", "createdb"},
		strings.Replace(where, "127.0.0.1", "nobody.invalid", 1):   {"nobody.invalid", "server runs"}, // RFC 2606
	} {
		var reach *ReachError
		_, err := Open(t.Context(), address, Options{})
		if !errors.As(err, &reach) || strings.Contains(err.Error(), "\n") || !strings.Contains(err.Error(), want[0]) || !strings.Contains(reach.Hint(), want[1]) {
			t.Errorf("%s: %v", address, err)
		}
	}
	if err := os.WriteFile(file, []byte("*:*:*:*:secret"), 0o644); err != nil {
		t.Fatal(err)
	}
	if err := os.Chmod(file, 0o644); err != nil {
		t.Fatal(err)
	}
	var option *OptionError
	if _, err := Open(t.Context(), where, Options{}); !errors.As(err, &option) || !strings.Contains(option.Hint(), "chmod 600") {
		t.Errorf("an open password file: %v", err)
	}
	if err := os.Chmod(file, 0o600); err != nil {
		t.Fatal(err)
	}
	if _, err := Open(t.Context(), where, Options{}); errors.As(err, &option) {
		t.Errorf("a private password file: %v", err)
	}
}
