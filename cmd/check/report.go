package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"
	"time"
)

// runStages runs the stages one after another, writes a line for each and the summary, and returns the exit code.
func runStages(ctx context.Context, root string, stages []stage, w io.Writer) int {
	whole, cancel := context.WithTimeout(ctx, budget)
	defer cancel()
	all, notes := newTally(), []string(nil)
	for _, s := range stages {
		if ctx.Err() != nil {
			notes = append(notes, s.name+": interrupted before it began")
			continue
		}
		fmt.Fprintf(w, "%-16s ", s.name) // the verdict follows on the same line, so a slow stage can be seen at work
		start := time.Now()
		o := runStage(whole, root, s)
		fmt.Fprintf(w, "%-7s %6.1fs\n", o.verdict, time.Since(start).Seconds())
		if o.verdict == failed {
			writeIndented(w, o.output)
		}
		for _, n := range o.notes {
			notes = append(notes, s.name+": "+n)
		}
		all.add(s, o)
	}
	summarise(w, all, notes)
	switch {
	case ctx.Err() != nil:
		return exitInterrupted
	case all.count(failed) > 0:
		return exitFailed
	}
	return exitDone
}

// runStage runs one stage within its limit; running out of time is a failure that says so.
func runStage(ctx context.Context, root string, s stage) outcome {
	limited, cancel := context.WithTimeout(ctx, s.limit)
	defer cancel()
	o := s.run(limited, root)
	switch {
	case errors.Is(ctx.Err(), context.Canceled):
		o.verdict, o.output = failed, o.output+"\ninterrupted"
	case ctx.Err() != nil:
		o.verdict, o.output = failed, o.output+fmt.Sprintf("\nthe whole check has used up its %v", budget)
	case limited.Err() != nil:
		o.verdict, o.output = failed, o.output+fmt.Sprintf("\nstopped: took longer than %v", s.limit)
	}
	return o
}

func writeIndented(w io.Writer, text string) {
	for line := range strings.Lines(strings.Trim(text, "\n")) {
		fmt.Fprintf(w, "    %s\n", strings.TrimRight(line, "\n"))
	}
}

// summarise writes what was left out and why, then the counts in the form scripts look for.
func summarise(w io.Writer, all tally, notes []string) {
	notes = append(notes, skippedTests(all)...)
	if len(notes) > 0 {
		fmt.Fprintln(w, "\nnot done:")
		for _, n := range notes {
			fmt.Fprintf(w, "    %s\n", n)
		}
	}
	fmt.Fprintf(w, "\n%d passed, %d failed, %d skipped\n", all.count(passed), all.count(failed), all.count(skipped))
}

// skippedTests names the tests that ran nowhere, those with one reason together.
func skippedTests(all tally) []string {
	byReason := map[string][]string{}
	for key, e := range all {
		if e.verdict == skipped && key.test != "" {
			byReason[e.reason] = append(byReason[e.reason], key.String())
		}
	}
	var lines []string
	for reason, names := range byReason {
		slices.Sort(names)
		lines = append(lines, strings.Join(names, ", ")+": "+reason)
	}
	slices.Sort(lines)
	return lines
}
