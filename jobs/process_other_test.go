//go:build !linux

package jobs

import (
	"os/exec"
	"testing"
)

// The tests with processes of their own, and with Debian's PostgreSQL, run on
// Linux only.

func unprivileged(string) error { return errNoPostgres }

func lower(*exec.Cmd) {}

func TestMain(m *testing.M) { m.Run() }
