package main

import (
	"errors"
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"leadline/render"
)

const rootHelp = `leadline makes large 16-bit prints of escape-time sets (the Mandelbrot set and
its relatives) at any depth, each with a sidecar from which anybody can make the
very same pixels again.`

const rootExample = `  leadline render tide.frame.json --scale 1/8  a look at an eighth of the size
  leadline verify tide.png                     is it what the frame says?`

// newRoot builds the command tree.
func newRoot(stdout, stderr io.Writer) *cobra.Command {
	root := &cobra.Command{
		Use: "leadline", Short: "large prints of deep escape-time sets", Long: rootHelp, Example: rootExample,
		Version: render.Release, SuggestionsMinimumDistance: 2, SilenceErrors: true, SilenceUsage: true,
		Args: screenArgs,
		RunE: screensOf,
	}
	root.SetOut(stdout)
	root.SetErr(stderr)
	root.SetVersionTemplate("leadline {{.Version}}\n")
	root.SetFlagErrorFunc(flagError)
	root.SetHelpFunc(showHelp)
	help := helpCommand()
	root.SetHelpCommand(help)
	root.CompletionOptions.DisableDefaultCmd = true // we have our own
	root.AddCommand(renderCommand(), joinCommand(), queueCommand(), workCommand(), boardCommand(), probeCommand(), verifyCommand(), versionCommand(), completionCommand(), help, farmTopic())
	addHelpFlag(root)
	return root
}

func unknownCommand(root *cobra.Command, name string) error {
	hint := "leadline help lists the commands"
	if near := root.SuggestionsFor(name); len(near) > 0 {
		hint = "did you mean " + strings.Join(near, " or ") + "?"
	}
	return usage(fmt.Errorf("unknown command %q", name), hint)
}

// seeHelp points to a command's help.
func seeHelp(cmd *cobra.Command) string {
	if !cmd.HasParent() {
		return "see leadline help"
	}
	return "see leadline help " + cmd.Name()
}

// flagError puts the flag package's errors into plain words.
func flagError(cmd *cobra.Command, err error) error {
	var bad *pflag.InvalidValueError
	if errors.As(err, &bad) {
		what := "a whole number"
		switch bad.GetFlag().Value.Type() {
		case "uint64":
			what = "a whole number of 0 or more"
		case "bool":
			what = "true or false"
		}
		err = fmt.Errorf("--%s %q is not %s", bad.GetFlag().Name, bad.GetValue(), what)
	}
	return usage(err, seeHelp(cmd))
}

// oneFile asks for exactly one file name.
func oneFile(what string) cobra.PositionalArgs {
	return func(cmd *cobra.Command, args []string) error {
		if len(args) != 1 {
			return usage(fmt.Errorf("%s takes one %s, not %d", cmd.Name(), what, len(args)), seeHelp(cmd))
		}
		return nil
	}
}

// maxWorkers keeps a slip of the finger from taking all memory.
const maxWorkers = 1024

func checkWorkers(n int) error {
	if n < 0 || n > maxWorkers {
		return usage(fmt.Errorf("--workers %d is out of range", n), fmt.Sprintf("a number from 1 to %d, or 0 for one a core", maxWorkers))
	}
	return nil
}
