package main

import (
	"bytes"
	"context"
	"errors"
	"os/exec"
	"strings"
	"time"
)

// plainTests and raceTests run every test afresh (-count=1): tests that call other programs cannot be cached safely.

func plainTests(ctx context.Context, root string) outcome {
	return goTest(ctx, command{dir: root, args: []string{"./..."}}, "")
}

func raceTests(ctx context.Context, root string) outcome {
	if reason := noCompiler(ctx); reason != "" {
		return outcome{verdict: skipped, notes: []string{reason}}
	}
	return goTest(ctx, command{dir: root, env: []string{"CGO_ENABLED=1"}, args: []string{"-race", "-short", "./..."}}, "")
}

// noCompiler says why cgo, which the race detector needs, cannot work here, or "" when it can.
func noCompiler(ctx context.Context) string {
	out, err := command{args: []string{"go", "env", "CC"}}.output(ctx)
	fields := strings.Fields(out)
	if err != nil || len(fields) == 0 {
		return "the go command names no C compiler"
	}
	if _, err := exec.LookPath(fields[0]); err != nil {
		return "there is no C compiler (" + fields[0] + "), which the race detector needs"
	}
	return ""
}

// goTest runs `go test -json` with c's arguments and judges it. The tests' own time limit lies a little before the
// stage's, so that a hanging test is stopped by its own alarm, which names it and shows where it stands.
func goTest(ctx context.Context, c command, group string) outcome {
	args := []string{"go", "test", "-json", "-count=1"}
	if end, ok := ctx.Deadline(); ok {
		left := time.Until(end) - 15*time.Second
		args = append(args, "-timeout="+max(left, time.Second).Round(time.Second).String())
	}
	c.args = append(args, c.args...)
	var out, talk bytes.Buffer
	runErr := c.run(ctx, &out, &talk)
	tests, shown, err := readTests(&out, group)
	if err := errors.Join(runErr, err); err != nil {
		return outcome{verdict: failed, tests: tests, output: shown + talk.String() + err.Error()}
	}
	return outcome{verdict: passed, tests: tests}
}
