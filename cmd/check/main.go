// Command check is the project's one test command: it installs what the tests need where it may, runs every
// stage, and ends with the counts of tests. It holds no product code, and no product code may know of it.
//
//	go run ./cmd/check                      everything
//	go run ./cmd/check -quick               without the race and cross-architecture stages
//	go run ./cmd/check -stage vet,identity  some stages, a name before a hyphen standing for the whole family
//	go run ./cmd/check -list                the stages, their time limits and what they do
//
// It exits 0 when nothing failed, 1 when something did, 2 on a usage error and 130 when interrupted.
package main

import (
	"context"
	"errors"
	"flag"
	"fmt"
	"io"
	"os"
	"os/signal"
	"path/filepath"
	"strings"
	"syscall"
	"time"
)

const (
	exitDone        = 0
	exitFailed      = 1
	exitUsage       = 2
	exitInterrupted = 130
)

// budget bounds the whole run; a stage gets its own limit or what is left of this, whichever is less.
const budget = 25 * time.Minute

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	code := run(ctx, os.Args[1:], os.Stdout, os.Stderr)
	stop()
	os.Exit(code)
}

// run is main without the process: it parses args, runs the chosen stages and returns the exit code.
func run(ctx context.Context, args []string, stdout, stderr io.Writer) int {
	flags := flag.NewFlagSet("check", flag.ContinueOnError)
	flags.SetOutput(stderr)
	names := flags.String("stage", "", "run only these stages (comma-separated; see -list)")
	list := flags.Bool("list", false, "list the stages and stop")
	quick := flags.Bool("quick", false, "leave out the race and cross-architecture stages")
	if err := flags.Parse(args); err != nil {
		if errors.Is(err, flag.ErrHelp) {
			return exitDone
		}
		return exitUsage
	}
	if flags.NArg() > 0 {
		fmt.Fprintf(stderr, "check: unexpected argument %q\n", flags.Arg(0))
		return exitUsage
	}
	chosen, err := choose(plan(), *names, *quick)
	if err != nil {
		fmt.Fprintln(stderr, "check:", err)
		return exitUsage
	}
	if *list {
		listStages(stdout, chosen)
		return exitDone
	}
	root, err := moduleRoot(ctx)
	if err != nil {
		fmt.Fprintln(stderr, "check:", err)
		return exitFailed
	}
	return runStages(ctx, root, chosen, stdout)
}

// moduleRoot returns the folder of the go.mod that governs the working directory.
func moduleRoot(ctx context.Context) (string, error) {
	out, err := command{args: []string{"go", "env", "GOMOD"}}.output(ctx)
	if err != nil {
		return "", fmt.Errorf("finding the module: %w", err)
	}
	file := strings.TrimSpace(out)
	if filepath.Base(file) != "go.mod" {
		return "", errors.New("not inside a Go module")
	}
	return filepath.Dir(file), nil
}
