package jobs

import (
	"errors"
	"path/filepath"
	"testing"
)

// TestTwoQueuesOneSpool refuses a folder that is another queue's; the queue's
// own may be opened by any number.
func TestTwoQueuesOneSpool(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	folder := filepath.Join(dir, "spool")
	for range 2 {
		q, err := Open(t.Context(), filepath.Join(dir, "a.db"), Options{Spool: folder})
		if err != nil {
			t.Fatal(err)
		}
		t.Cleanup(q.Close)
	}
	var option *OptionError
	if _, err := Open(t.Context(), filepath.Join(dir, "b.db"), Options{Spool: folder}); !errors.As(err, &option) || option.Hint() == "" {
		t.Errorf("another queue: %v", err)
	}
}
