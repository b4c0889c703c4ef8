package main

import (
	"context"
	"strings"
	"testing"
	"time"
)

func TestChoose(t *testing.T) {
	stages := []stage{{name: "vet"}, {name: "race", slow: true}, {name: "identity-v1", slow: true}, {name: "identity-arm64", slow: true}}
	cases := []struct {
		names string
		quick bool
		want  string // stage names, or the error in full
	}{
		{"", false, "vet, race, identity-v1, identity-arm64"},
		{"", true, "vet"},
		{"race,vet", false, "vet, race"},
		{"identity", false, "identity-v1, identity-arm64"},
		{"identity-v1", true, "identity-v1"},
		{"ident", false, `no stage is named "ident"; there are vet, race, identity-v1, identity-arm64`},
		{"vet,", false, `no stage is named ""; there are vet, race, identity-v1, identity-arm64`},
	}
	for _, c := range cases {
		chosen, err := choose(stages, c.names, c.quick)
		got := stageNames(chosen)
		if err != nil {
			got = err.Error()
		}
		if got != c.want {
			t.Errorf("choose(%q, quick %v) = %s, want %s", c.names, c.quick, got, c.want)
		}
	}
}

func TestPlanHasDistinctBoundedStages(t *testing.T) {
	seen := map[string]bool{}
	for _, s := range plan() {
		if seen[s.name] || s.limit <= 0 || s.limit > budget || s.does == "" || s.run == nil {
			t.Errorf("stage %q is a double or incomplete", s.name)
		}
		seen[s.name] = true
	}
}

func TestUsage(t *testing.T) {
	cases := []struct {
		args string
		code int
		want string
	}{
		{"-list", exitDone, "staticcheck"},
		{"-list -quick", exitDone, "contract"},
		{"-stage nothing", exitUsage, `no stage is named "nothing"`},
		{"leftover", exitUsage, `unexpected argument "leftover"`},
		{"-unknown", exitUsage, "not defined"},
	}
	for _, c := range cases {
		var out strings.Builder
		if code := run(t.Context(), strings.Fields(c.args), &out, &out); code != c.code || !strings.Contains(out.String(), c.want) {
			t.Errorf("check %s: exit %d, want %d and %q in\n%s", c.args, code, c.code, c.want, out.String())
		}
	}
}

// fixed makes a stage with a settled outcome.
func fixed(name string, o outcome) stage {
	return stage{name: name, limit: time.Minute, run: func(context.Context, string) outcome { return o }}
}

func TestRunStages(t *testing.T) {
	tests := tally{{pkg: "p", test: "TestA"}: {verdict: passed}, {pkg: "p", test: "TestB"}: {skipped, "pngcheck is not installed"}}
	good := []stage{
		fixed("vet", outcome{verdict: passed, output: "never shown"}),
		fixed("race", outcome{verdict: skipped, notes: []string{"no compiler"}}),
		fixed("test", outcome{verdict: passed, tests: tests}),
		{name: "tools", setup: true, limit: time.Minute, run: func(context.Context, string) outcome {
			return outcome{verdict: skipped, notes: []string{"tmux: only root may install"}}
		}},
	}
	slow := stage{name: "slow", limit: time.Millisecond, run: func(ctx context.Context, _ string) outcome {
		<-ctx.Done()
		return outcome{verdict: passed}
	}}
	cases := []struct {
		name   string
		stages []stage
		code   int
		want   []string
	}{
		{"good", good, exitDone, []string{"race: no compiler\n", "tools: tmux: only root may install\n", "p.TestB: pngcheck is not installed\n", "\n2 passed, 0 failed, 2 skipped\n"}},
		{"bad", append(good, fixed("bad", outcome{verdict: failed, output: "the reason"})), exitFailed, []string{"    the reason\n", "\n2 passed, 1 failed, 2 skipped\n"}},
		{"slow", []stage{slow}, exitFailed, []string{"took longer than 1ms", "\n0 passed, 1 failed, 0 skipped\n"}},
	}
	for _, c := range cases {
		var out strings.Builder
		code := runStages(t.Context(), "", c.stages, &out)
		if code != c.code {
			t.Errorf("%s: exit %d, want %d", c.name, code, c.code)
		}
		for _, w := range c.want {
			if !strings.Contains(out.String(), w) {
				t.Errorf("%s: no %q in\n%s", c.name, w, out.String())
			}
		}
		if strings.Contains(out.String(), "never shown") {
			t.Errorf("%s: a good stage's output was shown", c.name)
		}
		if lines := strings.Split(strings.TrimSpace(out.String()), "\n"); !strings.HasSuffix(lines[len(lines)-1], " skipped") {
			t.Errorf("%s: the counts are not the last line but %q", c.name, lines[len(lines)-1])
		}
	}
}

func TestInterrupted(t *testing.T) {
	ctx, cancel := context.WithCancel(t.Context())
	stages := []stage{
		{name: "first", limit: time.Minute, run: func(context.Context, string) outcome { cancel(); return outcome{verdict: passed} }},
		fixed("second", outcome{verdict: passed}),
	}
	var out strings.Builder
	if code := runStages(ctx, "", stages, &out); code != exitInterrupted || !strings.Contains(out.String(), "second: interrupted before it began") {
		t.Errorf("exit %d, want %d:\n%s", code, exitInterrupted, out.String())
	}
}
