package jobs

import (
	"fmt"
	"strings"
	"testing"
)

// TestLosses tells a task that takes its workers with it from one that is in
// hand whenever workers happen to be lost.
func TestLosses(t *testing.T) {
	t.Parallel()
	engines(t, func(t *testing.T, d database) {
		q := d.open(t)
		lost := func(id int64, index int, worker string) (failed bool) {
			t.Helper()
			err := q.e.do(t.Context(), func(x tx) (err error) {
				failed, err = lose(t.Context(), x, ticket{id, index, 0}, worker)
				return err
			})
			if err != nil {
				t.Fatal(err)
			}
			return failed
		}
		// Alone at fault, with innocent tiles in the same workers' other slots.
		deadly := add(t, q, AddOptions{})
		for i := range maxFaults {
			w := fmt.Sprint("w", i+1)
			lost(deadly, 0, w)
			if failed := lost(deadly, 2, w); failed != (i == maxFaults-1) {
				t.Errorf("the deadly tile, time %d: %v", i, failed)
			}
		}
		if p := show(t, q, deadly); p.State != Failed || !strings.Contains(p.Reason, "in hand 3 times") || p.Hint == "" || p.Rescued != 6 {
			t.Errorf("%+v", p)
		}
		// The same where another worker was lost before: it takes twice as many.
		doubted := add(t, q, AddOptions{})
		lost(doubted, 5, "v")
		for i := range 2 * maxFaults {
			if failed := lost(doubted, 2, fmt.Sprint("v", i)); failed != (i == 2*maxFaults-1) {
				t.Errorf("the doubted tile, time %d: %v", i, failed)
			}
		}
		// One of many that are lost at random.
		storm := add(t, q, AddOptions{})
		n := 0
		for i := range maxLosses {
			for range 3 {
				n++
				lost(storm, 3+i%2, fmt.Sprint("s", n))
			}
			if failed := lost(storm, 2, fmt.Sprint("t", i)); failed != (i == maxLosses-1) {
				t.Fatalf("the unlucky tile, time %d: %v", i, failed)
			}
		}
		// Again counts anew.
		if err := q.Again(t.Context(), storm); err != nil {
			t.Fatal(err)
		}
		if lost(storm, 2, "u0") || lost(storm, 2, "u1") {
			t.Error("losses from before again were counted")
		}
		if !lost(storm, 2, "u2") {
			t.Error("three losses of three were not enough")
		}
	})
}
