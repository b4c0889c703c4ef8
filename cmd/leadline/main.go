// Command leadline makes large 16-bit prints of escape-time sets at depths
// where ordinary floating point fails. Only flags, signals and exit codes live
// here; the work is done by the packages below.
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"strings"
)

func main() {
	os.Exit(run(context.Background(), os.Args[1:], os.Stdout, os.Stderr))
}

// run is main without the process: it reads args, does the work and returns
// the exit code.
func run(ctx context.Context, args []string, stdout, stderr io.Writer) int {
	ctx, stop := withInterrupt(ctx, stderr)
	defer stop()
	root := newRoot(stdout, stderr)
	root.SetArgs(args)
	err := root.ExecuteContext(ctx)
	code := exitCode(ctx, err)
	switch code {
	case exitDone:
	case exitInterrupted:
		if !errors.Is(err, errInterrupted) {
			err = errInterrupted // whatever the work below made of it
		}
		fmt.Fprintln(stderr, "leadline:", err)
	default:
		complain(stderr, err)
	}
	return code
}

// complain says what went wrong and, where somebody knows it, the cure.
func complain(stderr io.Writer, err error) {
	fmt.Fprintln(stderr, "leadline: error:", err)
	hint := hintOf(err)
	if hint == "" {
		return
	}
	for line := range strings.SplitSeq(hint, "\n") {
		fmt.Fprintln(stderr, "leadline: hint:", line)
	}
}
