package main

import (
	"bytes"
	"context"
	"fmt"
	"io"
	"os"
	"os/exec"
	"strings"
	"time"
)

// grace is how long a stopped child may take to tidy up (a package manager half-way through, say) before it is killed.
const grace = 5 * time.Second

// A command is a child process to be run in a process group of its own, so that stopping it stops its children too.
type command struct {
	dir  string   // the caller's when empty
	env  []string // added to the caller's environment
	args []string
}

// run runs the command with its output going to the writers, until it ends or the context does.
func (c command) run(ctx context.Context, stdout, stderr io.Writer) error {
	cmd := exec.CommandContext(ctx, c.args[0], c.args[1:]...)
	cmd.Dir, cmd.Env = c.dir, append(os.Environ(), c.env...)
	cmd.Stdout, cmd.Stderr = stdout, stderr
	cmd.WaitDelay = grace
	ownGroup(cmd)
	cmd.Cancel = func() error { return stopGroup(cmd) }
	err := cmd.Run()
	if ctx.Err() != nil && cmd.Process != nil {
		killGroup(cmd) // whatever outlived the child that was asked to stop
	}
	if err != nil {
		return fmt.Errorf("%s: %w", strings.Join(c.args[:min(3, len(c.args))], " "), err)
	}
	return nil
}

// output returns what the command wrote to its standard output; the error carries what it wrote beside it.
func (c command) output(ctx context.Context) (string, error) {
	var out, talk bytes.Buffer
	if err := c.run(ctx, &out, &talk); err != nil {
		return out.String(), fmt.Errorf("%w\n%s", err, talk.String())
	}
	return out.String(), nil
}

// combined returns everything the command wrote, in order.
func (c command) combined(ctx context.Context) (string, error) {
	var out bytes.Buffer
	err := c.run(ctx, &out, &out)
	return out.String(), err
}
