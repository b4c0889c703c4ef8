package main

import (
	"fmt"
	"strings"

	"github.com/spf13/cobra"
)

const exitHelp = `
Results go to standard output, talk to standard error. Exit codes:
  0 done      2 called wrongly    4 does not match
  1 failed    3 bad frame         5 work left undone    130 interrupted
`

// helpWidth is the width help is set for, the usual terminal's.
const helpWidth = 80

// showHelp prints a command's help.
func showHelp(cmd *cobra.Command, _ []string) {
	text := strings.TrimSpace(cmd.Long) + "\n"
	topic := cmd.IsAdditionalHelpTopicCommand()
	if cmd.HasParent() && !topic {
		text += "\nUsage\n  " + cmd.Parent().CommandPath() + " " + cmd.Use + "\n"
	}
	if cmd.HasExample() {
		text += "\nExamples\n" + cmd.Example + "\n"
	}
	switch {
	case topic:
	case cmd.HasParent():
		text += "\nFlags\n" + cmd.LocalFlags().FlagUsagesWrapped(helpWidth) + cmd.InheritedFlags().FlagUsagesWrapped(helpWidth)
	default:
		text += commandList(cmd) + exitHelp
	}
	fmt.Fprint(cmd.OutOrStdout(), text)
}

func commandList(root *cobra.Command) string {
	text := "\nCommands (leadline help COMMAND says more; help farm: under a scheduler)\n"
	for _, c := range root.Commands() {
		if c.IsAvailableCommand() || c.Name() == "help" {
			text += fmt.Sprintf("  %-11s %s\n", c.Name(), c.Short)
		}
	}
	return text
}

// addHelpFlag gives a command and all below it the flag in our words.
func addHelpFlag(c *cobra.Command) {
	c.Flags().BoolP("help", "h", false, "print this help")
	for _, sub := range c.Commands() {
		addHelpFlag(sub)
	}
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
			return about.Help()
		},
	}
}

func completeCommands(cmd *cobra.Command, args []string, _ string) ([]string, cobra.ShellCompDirective) {
	var names []string
	if len(args) == 0 {
		for _, c := range cmd.Root().Commands() {
			if c.IsAvailableCommand() || c.IsAdditionalHelpTopicCommand() {
				names = append(names, cobra.CompletionWithDesc(c.Name(), c.Short))
			}
		}
	}
	return names, cobra.ShellCompDirectiveNoFileComp
}
