package main

import (
	"context"
	"errors"
	"os"

	"leadline/jobs"
	"leadline/jobs/parts"
	"leadline/render"
	"leadline/render/frame"
	"leadline/render/sheet"
)

// Exit codes. The help of the root command lists them.
const (
	exitDone        = 0
	exitFailed      = 1
	exitUsage       = 2
	exitFrame       = 3
	exitMismatch    = 4
	exitUndone      = 5
	exitInterrupted = 130
)

// exitCode sorts an error into the documented codes.
func exitCode(ctx context.Context, err error) int {
	var call *usageError
	var scale *render.ScaleError
	var crop *sheet.CropError
	var faults frame.Faults
	var mismatch *render.MismatchError
	var which *parts.WhichError
	var undone *parts.UndoneError
	var option *jobs.OptionError
	var where *jobs.AddressError
	switch {
	case err == nil:
		return exitDone
	case interrupted(ctx, err):
		return exitInterrupted
	case errors.As(err, &call), errors.As(err, &scale), errors.As(err, &crop), errors.As(err, &which),
		errors.As(err, &option), errors.As(err, &where):
		return exitUsage
	case errors.As(err, &faults):
		return exitFrame
	case errors.As(err, &mismatch):
		return exitMismatch
	case errors.As(err, &undone):
		return exitUndone
	}
	return exitFailed
}

// usageError says that the command was called wrongly.
type usageError struct {
	err  error
	hint string // "" takes the cause's own
}

func (e *usageError) Error() string { return e.err.Error() }
func (e *usageError) Unwrap() error { return e.err }

// Hint says how to call the command.
func (e *usageError) Hint() string {
	if e.hint != "" {
		return e.hint
	}
	return hintOf(e.err)
}

// usage makes err a usage error, nil stays nil.
func usage(err error, hint string) error {
	if err == nil {
		return nil
	}
	return &usageError{err, hint}
}

// hintOf finds the cure that the failing package knows.
func hintOf(err error) string {
	var h interface{ Hint() string }
	switch {
	case errors.As(err, &h):
		return h.Hint()
	case errors.Is(err, os.ErrNotExist):
		return "check the spelling, and the folder this was started in"
	}
	return ""
}
