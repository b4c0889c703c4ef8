package main

import (
	"fmt"
	"slices"
	"strings"

	"github.com/spf13/cobra"
)

var shells = []string{"bash", "zsh", "fish", "powershell"}

func completionCommand() *cobra.Command {
	return &cobra.Command{
		Use: "completion SHELL", Short: "let the shell complete commands, flags and files",
		Long: `Prints a script for bash, zsh, fish or powershell that lets the Tab key complete
leadline's commands and flags, and offers only such files as a command reads.`,
		Example: `  source <(leadline completion bash)       for this bash session
  source <(leadline completion zsh)        for this zsh session
  leadline completion fish | source        for this fish session
  leadline completion fish > ~/.config/fish/completions/leadline.fish`,
		ValidArgs: shells,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) != 1 || !slices.Contains(shells, args[0]) {
				return usage(fmt.Errorf("completion takes the name of one shell"), "one of "+strings.Join(shells, ", "))
			}
			return nil
		},
		RunE: func(cmd *cobra.Command, args []string) error {
			root, w := cmd.Root(), cmd.OutOrStdout()
			switch args[0] {
			case "bash":
				return root.GenBashCompletionV2(w, true)
			case "zsh":
				return root.GenZshCompletion(w)
			case "fish":
				return root.GenFishCompletion(w, true)
			}
			return root.GenPowerShellCompletionWithDesc(w)
		},
	}
}

// completeFiles offers the files that hold a frame: one of them, no more.
func completeFiles(_ *cobra.Command, args []string, _ string) ([]string, cobra.ShellCompDirective) {
	if len(args) > 0 {
		return nil, cobra.ShellCompDirectiveNoFileComp
	}
	return []string{"json", "png"}, cobra.ShellCompDirectiveFilterFileExt
}

// completeFlag completes a flag: with words, or with nothing at all.
func completeFlag(c *cobra.Command, flag string, words ...string) {
	registerCompletion(c, flag, cobra.FixedCompletions(words, cobra.ShellCompDirectiveNoFileComp))
}

// completePNG completes a flag with the names of PNGs.
func completePNG(c *cobra.Command, flag string) {
	registerCompletion(c, flag, cobra.FixedCompletions([]string{"png"}, cobra.ShellCompDirectiveFilterFileExt))
}

// completeFolder completes a flag with the names of folders.
func completeFolder(c *cobra.Command, flag string) {
	registerCompletion(c, flag, cobra.FixedCompletions(nil, cobra.ShellCompDirectiveFilterDirs))
}

func registerCompletion(c *cobra.Command, flag string, f cobra.CompletionFunc) {
	// The only error is a flag that does not exist, a slip in this program.
	if err := c.RegisterFlagCompletionFunc(flag, f); err != nil {
		panic(err)
	}
}
