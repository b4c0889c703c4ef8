package main

import (
	"fmt"
	"strings"

	"github.com/spf13/cobra"
)

const exitHelp = `
Exit codes
  0    done
  1    failed
  2    called wrongly
  3    bad frame
  4    does not match
  130  interrupted
`

// helpWidth is the width help is set for, the usual terminal's.
const helpWidth = 80

// showHelp prints a command's help.
func showHelp(cmd *cobra.Command, _ []string) {
	var b strings.Builder
	b.WriteString(strings.TrimSpace(cmd.Long) + "\n\nUsage\n  ")
	if cmd.HasParent() {
		b.WriteString(cmd.Parent().CommandPath() + " " + cmd.Use + "\n")
	} else {
		b.WriteString("leadline COMMAND\n")
	}
	if cmd.HasExample() {
		b.WriteString("\nExamples\n" + cmd.Example + "\n")
	}
	if cmd.HasAvailableSubCommands() {
		b.WriteString("\nCommands\n")
		for _, c := range cmd.Commands() {
			if c.IsAvailableCommand() || c.Name() == "help" {
				fmt.Fprintf(&b, "  %-11s %s\n", c.Name(), c.Short)
			}
		}
	}
	if cmd.HasParent() {
		b.WriteString("\nFlags\n" + cmd.LocalFlags().FlagUsagesWrapped(helpWidth))
	} else {
		b.WriteString(exitHelp)
	}
	fmt.Fprint(cmd.OutOrStdout(), b.String())
}

func helpCommand() *cobra.Command {
	return &cobra.Command{
		Use: "help [COMMAND]", Short: "how a command is used",
		Long:              "Prints how a command is used, or what there is.",
		ValidArgsFunction: completeCommands,
		RunE: func(cmd *cobra.Command, args []string) error {
			about, rest, err := cmd.Root().Find(args)
			if err != nil || len(rest) > 0 {
				return unknownCommand(cmd.Root(), args[0])
			}
			about.InitDefaultHelpFlag() // so that it is listed
			return about.Help()
		},
	}
}

func completeCommands(cmd *cobra.Command, args []string, _ string) ([]string, cobra.ShellCompDirective) {
	var names []string
	if len(args) == 0 {
		for _, c := range cmd.Root().Commands() {
			if c.IsAvailableCommand() {
				names = append(names, cobra.CompletionWithDesc(c.Name(), c.Short))
			}
		}
	}
	return names, cobra.ShellCompDirectiveNoFileComp
}
