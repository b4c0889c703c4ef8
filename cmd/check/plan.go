package main

import (
	"context"
	"fmt"
	"io"
	"strings"
	"time"
)

// A stage is one named part of the check.
type stage struct {
	name  string
	does  string        // one line for -list
	limit time.Duration // the stage fails when it takes longer
	slow  bool          // left out by -quick
	setup bool          // prepares the machine: never counted as a test
	run   func(ctx context.Context, root string) outcome
}

// An outcome is what a stage came to.
type outcome struct {
	verdict verdict
	notes   []string // what was not done, and why
	output  string   // shown when the stage failed
	tests   tally    // empty for stages that run no tests
}

// plan returns every stage in the order of running: the cheap and telling ones first.
func plan() []stage {
	stages := []stage{
		{name: "tools", does: "installs the Debian packages the tests compare with", limit: 6 * time.Minute, setup: true, run: installTools},
		{name: "format", does: "every Go file is as gofmt writes it", limit: time.Minute, run: checkFormat},
		{name: "vet", does: "go vet", limit: 4 * time.Minute, run: goTool("vet", "./...")},
		{name: "staticcheck", does: "staticcheck", limit: 5 * time.Minute, run: goTool("tool", "staticcheck", "./...")},
		{name: "tidy", does: "go.mod and go.sum are as go mod tidy writes them", limit: 2 * time.Minute, run: goTool("mod", "tidy", "-diff")},
		{name: "contract", does: "no bare a*b+c, library logarithm or map order in the source that decides pixels", limit: 3 * time.Minute, run: checkSource},
		{name: "test", does: "all tests", limit: 8 * time.Minute, run: plainTests},
		{name: "race", does: "all tests in short form under the race detector", limit: 10 * time.Minute, slow: true, run: raceTests},
		{name: "fused", does: "no multiply-add instruction nobody asked for in the machine code that decides pixels", limit: 4 * time.Minute, slow: true, run: checkMachineCode},
	}
	for _, v := range variants() {
		stages = append(stages, stage{
			name: "identity-" + v.name, does: "the same pixels: " + v.does, limit: 5 * time.Minute, slow: true, run: v.run,
		})
	}
	return stages
}

// choose returns the stages named in the comma-separated names (all when empty), in plan order. A name before a
// hyphen stands for its family: "identity" for every identity-… stage. Quick drops the slow stages unless some are named.
func choose(stages []stage, names string, quick bool) ([]stage, error) {
	var chosen []stage
	if names == "" {
		for _, s := range stages {
			if !quick || !s.slow {
				chosen = append(chosen, s)
			}
		}
		return chosen, nil
	}
	wanted := strings.Split(names, ",")
	used := make([]bool, len(wanted))
	for _, s := range stages {
		take := false
		for i, w := range wanted {
			if s.name == w || strings.HasPrefix(s.name, w+"-") {
				used[i], take = true, true
			}
		}
		if take {
			chosen = append(chosen, s)
		}
	}
	for i, w := range wanted {
		if !used[i] {
			return nil, fmt.Errorf("no stage is named %q; there are %s", w, stageNames(stages))
		}
	}
	return chosen, nil
}

func stageNames(stages []stage) string {
	names := make([]string, len(stages))
	for i, s := range stages {
		names[i] = s.name
	}
	return strings.Join(names, ", ")
}

func listStages(w io.Writer, stages []stage) {
	for _, s := range stages {
		fmt.Fprintf(w, "%-16s at most %2.0f min  %s\n", s.name, s.limit.Minutes(), s.does)
	}
}
