package main

import (
	"encoding/json"
	"fmt"
	"runtime"
	"strings"

	"github.com/spf13/cobra"

	"leadline/render"
	"leadline/render/kernel"
)

// versionInfo is what version prints.
type versionInfo struct {
	Release  string   `json:"release"`
	Numerics int      `json:"numerics"`
	Kernels  []string `json:"kernels"`
	Go       string   `json:"go"`
	Platform string   `json:"platform"`
}

func versionCommand() *cobra.Command {
	var asJSON bool
	c := &cobra.Command{
		Use: "version", Short: "release, numerics and the kernels in use",
		Long: `Prints the release; numerics, the number that changes whenever any pixel would;
and the inner loops in use on this machine, none of which any pixel depends on.`,
		Args: func(cmd *cobra.Command, args []string) error {
			if len(args) > 0 {
				return usage(fmt.Errorf("version takes no arguments"), seeHelp(cmd))
			}
			return nil
		},
		ValidArgsFunction: cobra.NoFileCompletions,
		RunE: func(cmd *cobra.Command, args []string) error {
			v := versionInfo{render.Release, render.Numerics, kernel.Names(), runtime.Version(), runtime.GOOS + "/" + runtime.GOARCH}
			if asJSON {
				return json.NewEncoder(cmd.OutOrStdout()).Encode(v)
			}
			_, err := fmt.Fprintf(cmd.OutOrStdout(), "leadline %s\nnumerics %d\nkernels  %s\nbuilt by %s for %s\n",
				v.Release, v.Numerics, strings.Join(v.Kernels, ", "), v.Go, v.Platform)
			return err
		},
	}
	c.Flags().BoolVar(&asJSON, "json", false, "one line of JSON instead of words")
	return c
}
