package main

import (
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"sync"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
)

// TestMain lets the scripts run the command out of the test binary, and takes
// away the real one if a test had it built.
func TestMain(m *testing.M) {
	testscript.Main(cleaner{m}, map[string]func(){"leadline": main})
}

type cleaner struct{ m *testing.M }

func (c cleaner) Run() int {
	code := c.m.Run()
	if built.dir != "" {
		os.RemoveAll(built.dir)
	}
	return code
}

// built is where the command is, once a test needs it.
var built struct {
	once sync.Once
	dir  string
	err  error
}

// executable builds the command once, as it is delivered, and returns its path.
func executable(t *testing.T) string {
	t.Helper()
	built.once.Do(func() {
		if built.dir, built.err = os.MkdirTemp("", "leadline-binary"); built.err != nil {
			return
		}
		out, err := exec.Command("go", "build", "-o", filepath.Join(built.dir, "leadline"), ".").CombinedOutput()
		if err != nil {
			built.err = fmt.Errorf("go build: %w\n%s", err, out)
		}
	})
	if built.err != nil {
		t.Fatal(built.err)
	}
	return filepath.Join(built.dir, "leadline")
}
