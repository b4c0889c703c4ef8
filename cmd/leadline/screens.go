package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"leadline/jobs"
	"leadline/render/frame"
	"leadline/tui"
)

// screensOf opens the screens, with a frame where one is named. Where there is
// no terminal to show them on, help is shown, or the frame refused.
func screensOf(cmd *cobra.Command, args []string) error {
	if !isTerminal(cmd.OutOrStdout()) || !isTerminal(os.Stdin) {
		if len(args) == 0 {
			return cmd.Help()
		}
		return usage(errors.New("the screens need a terminal"), "leadline render makes the frame's print without one")
	}
	o := tui.Options{Input: os.Stdin, Output: os.Stdout, Load: func(path string) (*frame.Frame, error) {
		f, err := loadFrame(path, io.Discard)
		return f.Frame, err
	}}
	if len(args) > 0 {
		f, err := loadFrame(args[0], cmd.ErrOrStderr())
		if err != nil {
			return err
		}
		o.Frame, o.Path = f.Frame, args[0]
	}
	state, err := jobs.StateFolder()
	if err != nil {
		return err
	}
	o.Session = filepath.Join(state, "desk.json")
	q, err := jobs.Open(cmd.Context(), os.Getenv(queueVariable), jobs.Options{})
	if err != nil {
		o.NoQueue = err
	} else {
		o.Queue = q
		defer q.Close()
	}
	return tui.Run(cmd.Context(), o)
}

// screenArgs takes nothing, or one file: what looks like a file is no misspelt
// command.
func screenArgs(cmd *cobra.Command, args []string) error {
	switch {
	case len(args) == 0:
		return nil
	case !strings.ContainsAny(args[0], "./\\"):
		return unknownCommand(cmd, args[0])
	case len(args) > 1:
		return usage(fmt.Errorf("leadline opens one frame, not %d files", len(args)), seeHelp(cmd))
	}
	return nil
}
