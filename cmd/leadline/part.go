package main

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"

	"github.com/spf13/cobra"

	"leadline/jobs/parts"
	"leadline/render"
	"leadline/render/words"
)

// which reads --part, which comes with --parts and without --out.
func (g renderFlags) which(cmd *cobra.Command) (parts.Which, error) {
	part, folder := cmd.Flags().Changed("part"), cmd.Flags().Changed("parts")
	switch {
	case !part && !folder:
		return parts.Which{}, nil
	case !part || !folder || g.parts == "":
		return parts.Which{}, usage(errors.New("--part and --parts belong together"), "such as --part 7/40 --parts /shared/tide")
	case cmd.Flags().Changed("out"):
		return parts.Which{}, usage(errors.New("--part and --out exclude each other"), "leadline join takes --out")
	}
	w, err := parts.ParseWhich(g.part)
	if err != nil {
		return w, fmt.Errorf("--part %w", err)
	}
	return w, nil
}

// runPart renders one part of a print.
func runPart(cmd *cobra.Command, f loaded, o render.PrintOptions, w parts.Which, g renderFlags, meter *meter) error {
	d, err := parts.Render(cmd.Context(), f.Frame, parts.Task{Options: o.Options, Dir: g.parts, Which: w,
		Name: o.Out, Crop: o.Crop, Scale: o.Scale, Audit: o.Audit,
		Waiting: func() {
			fmt.Fprintln(cmd.ErrOrStderr(), "leadline: waiting for another task that computes what all parts share")
		}})
	meter.end()
	if err != nil {
		return err
	}
	return reportPart(cmd.OutOrStdout(), d, g.json)
}

// reportPart says what came out.
func reportPart(w io.Writer, d *parts.Done, asJSON bool) error {
	if asJSON {
		return json.NewEncoder(w).Encode(d)
	}
	how := "rendered in " + words.Clock(d.Seconds)
	if !d.Rendered {
		how = "there already, whole; nothing to do"
	}
	_, err := fmt.Fprintf(w, "%s\n  %d x %d px from row %d, %s, %s\n", d.File, d.Pixels.Width, d.Pixels.Height, d.Pixels.Y,
		words.Size(d.Bytes), how)
	return err
}
