package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"syscall"
)

var errInterrupted = errors.New("interrupted")

// withInterrupt cancels the context at the first interrupt; a second ends the
// process at once. The hidden part file of a print so ended is recognised and
// removed by the next print of that name.
func withInterrupt(ctx context.Context, stderr io.Writer) (context.Context, func()) {
	ctx, cancel := context.WithCancelCause(ctx)
	signals := make(chan os.Signal, 2)
	signal.Notify(signals, os.Interrupt, syscall.SIGTERM)
	done := make(chan struct{})
	go func() {
		select {
		case <-signals:
		case <-done:
			return
		}
		if isTerminal(stderr) {
			fmt.Fprintln(stderr) // leave the bar, and the terminal's own ^C
		}
		fmt.Fprintln(stderr, "leadline: stopping cleanly; interrupt again to stop at once")
		cancel(errInterrupted)
		select {
		case <-signals:
			os.Exit(exitInterrupted)
		case <-done:
		}
	}()
	return ctx, func() { signal.Stop(signals); close(done); cancel(nil) }
}

// interrupted reports whether err came of an interrupt and of nothing else.
func interrupted(ctx context.Context, err error) bool {
	return errors.Is(context.Cause(ctx), errInterrupted) &&
		(errors.Is(err, context.Canceled) || errors.Is(err, errInterrupted))
}

// untouched adds to an interrupted print's error what there is now under its
// name. Other errors stay as they are.
func untouched(ctx context.Context, err error, out string) error {
	if !interrupted(ctx, err) {
		return err
	}
	if _, e := os.Lstat(out); e == nil {
		return fmt.Errorf("%w; %s is the earlier print, untouched", errInterrupted, out)
	}
	return fmt.Errorf("%w; nothing is kept of %s", errInterrupted, out)
}
