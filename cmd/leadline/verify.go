package main

import (
	"crypto/rand"
	"encoding/binary"
	"errors"
	"fmt"

	"github.com/spf13/cobra"

	"leadline/render"
	"leadline/render/printfile"
)

// verifyFlags are the flags of verify.
type verifyFlags struct {
	whole, json     bool
	sample, workers int
	seed            uint64
	progress        string
}

func verifyCommand() *cobra.Command {
	var g verifyFlags
	c := &cobra.Command{
		Use: "verify FILE", Short: "render a print again and compare",
		Long: `Renders again from a sidecar, or from a PNG alone (the frame travels inside),
and compares every pixel with the file and their hash with the record. --sample
compares a few random tiles only. Exit code 4 says that something differs, or
that the file is damaged or no print at all.`,
		Example: `  leadline verify tide.png
  leadline verify tide.sidecar.json --sample 20`,
		Args: oneFile("print or sidecar"), ValidArgsFunction: completeFiles,
		RunE: func(cmd *cobra.Command, args []string) error { return runVerify(cmd, args[0], g) },
	}
	f := c.Flags()
	f.SortFlags = false
	f.BoolVar(&g.whole, "whole", false, "compare everything (done unless --sample is given)")
	f.IntVar(&g.sample, "sample", 0, "compare `N` random tiles of 64 x 64 pixels")
	f.Uint64Var(&g.seed, "seed", 0, "`N` picks the tiles (by default drawn anew, and printed)")
	f.IntVar(&g.workers, "workers", 0, "compute on `N` cores (by default all)")
	f.BoolVar(&g.json, "json", false, "one line of JSON instead of words")
	progressFlag(c, &g.progress)
	for _, flag := range []string{"sample", "seed", "workers"} {
		completeFlag(c, flag)
	}
	return c
}

// check holds the flags against each other.
func (g verifyFlags) check(cmd *cobra.Command) error {
	sample, seed := cmd.Flags().Changed("sample"), cmd.Flags().Changed("seed")
	switch {
	case sample && g.sample < 1:
		return usage(fmt.Errorf("--sample %d is out of range", g.sample), "at least one tile; leave it out to compare everything")
	case sample && g.whole:
		return usage(errors.New("--whole and --sample exclude each other"), "leave one out")
	case seed && !sample:
		return usage(errors.New("--seed picks tiles, but none are asked for"), "add --sample N")
	}
	return checkWorkers(g.workers)
}

func runVerify(cmd *cobra.Command, path string, g verifyFlags) error {
	if err := g.check(cmd); err != nil {
		return err
	}
	meter, err := newMeter(cmd.ErrOrStderr(), g.progress)
	if err != nil {
		return err
	}
	if g.sample > 0 && !cmd.Flags().Changed("seed") {
		if g.seed, err = randomSeed(); err != nil {
			return err
		}
	}
	v := verdict{g: g}
	v.evidence, err = render.Gather(path)
	if err == nil {
		o := render.Options{Workers: g.workers, Progress: meter.tell}
		v.found, err = render.Verify(cmd.Context(), v.evidence, g.sample, g.seed, o)
		meter.end()
	}
	err = damaged(err)
	if said := v.say(cmd.OutOrStdout(), err); err == nil {
		return said
	}
	return err
}

// damaged makes a file that cannot be read as a print one that does not match.
func damaged(err error) error {
	var f *printfile.FormatError
	if errors.As(err, &f) {
		return &render.MismatchError{What: f.Error(), Cure: f.Hint()}
	}
	return err
}

func randomSeed() (uint64, error) {
	var b [8]byte
	_, err := rand.Read(b[:])
	return binary.BigEndian.Uint64(b[:]) >> 32, err // short enough to type again
}
