package jobs

import "testing"

// EachEngine runs a test of another package on a fresh queue of each engine.
func EachEngine(t *testing.T, f func(t *testing.T, where string)) {
	t.Helper()
	engines(t, func(t *testing.T, d database) { f(t, d.where) })
}
