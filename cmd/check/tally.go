package main

import (
	"bufio"
	"encoding/json"
	"fmt"
	"io"
	"regexp"
	"strings"
)

// A verdict on a test or stage; a greater one outweighs a smaller where the same test ran more than once.
type verdict int

const (
	skipped verdict = iota
	passed
	failed
)

func (v verdict) String() string { return [...]string{"skipped", "ok", "FAILED"}[v] }

// A testKey names a test or subtest. The group keeps runs apart that check different things: it is empty for the
// plain and race runs of a test and names the variant for an identity run. A failing package that blames no test
// of its own has an empty test name, and so has a stage without tests.
type testKey struct{ group, pkg, test string }

func (k testKey) String() string {
	name := k.pkg + "." + k.test
	if k.group != "" {
		name += " (" + k.group + ")"
	}
	return name
}

type entry struct {
	verdict verdict
	reason  string // of a skip
}

// A tally holds one verdict a test. A test skipped in one run and passed in another has passed.
type tally map[testKey]entry

func newTally() tally { return tally{} }

func (t tally) record(k testKey, e entry) {
	if old, ok := t[k]; !ok || e.verdict > old.verdict {
		t[k] = e
	}
}

// add enters a stage's tests. A stage counts as one test itself where it ran none, or failed with no test to blame.
func (t tally) add(s stage, o outcome) {
	for k, e := range o.tests {
		t.record(k, e)
	}
	blameless := o.verdict == failed && o.tests.count(failed) == 0
	if blameless || (len(o.tests) == 0 && !s.setup) {
		t.record(testKey{group: s.name}, entry{verdict: o.verdict})
	}
}

func (t tally) count(v verdict) int {
	n := 0
	for _, e := range t {
		if e.verdict == v {
			n++
		}
	}
	return n
}

// event is the part used here of a line of `go test -json` (go doc test2json).
type event struct{ Action, Package, ImportPath, Test, Output string }

// readTests reads the output of `go test -json` and returns the verdicts with the output of whatever failed.
func readTests(r io.Reader, group string) (tally, string, error) {
	s := suite{group: group, tests: newTally(), output: map[testKey]*strings.Builder{}, broken: map[string]bool{}}
	lines := bufio.NewReader(r)
	for {
		line, err := lines.ReadBytes('\n')
		if len(strings.TrimSpace(string(line))) > 0 {
			var e event
			if json.Unmarshal(line, &e) != nil {
				s.shown.Write(line) // the go command's own complaints are plain text
			} else {
				s.take(e)
			}
		}
		if err == io.EOF {
			return s.tests, s.shown.String(), nil
		} else if err != nil {
			return s.tests, s.shown.String(), fmt.Errorf("reading test output: %w", err)
		}
	}
}

// suite is the state of reading one run.
type suite struct {
	group  string
	tests  tally
	output map[testKey]*strings.Builder // of tests and packages still running
	broken map[string]bool              // packages with a failed test
	shown  strings.Builder
}

func (s *suite) take(e event) {
	key := testKey{s.group, e.Package, e.Test}
	switch e.Action {
	case "output":
		if s.output[key] == nil {
			s.output[key] = new(strings.Builder)
		}
		s.output[key].WriteString(e.Output)
	case "build-output":
		s.shown.WriteString(e.Output)
	case "pass", "fail", "skip":
		s.finish(key, e.Action)
	}
}

func (s *suite) finish(key testKey, action string) {
	text := ""
	if b := s.output[key]; b != nil {
		text = b.String()
		delete(s.output, key)
	}
	switch {
	case action == "fail":
		s.shown.WriteString(text)
		if key.test != "" || !s.broken[key.pkg] {
			s.tests.record(key, entry{verdict: failed})
		}
		s.broken[key.pkg] = true
	case key.test == "": // a package that passed or has no tests is not a test
	case action == "skip":
		s.tests.record(key, entry{skipped, skipReason(text)})
	default:
		s.tests.record(key, entry{verdict: passed})
	}
}

var skipLine = regexp.MustCompile(`(?m)^\s+\S+\.go:\d+: (.+)$`)

// skipReason finds the message a test gave to t.Skip: the last line that carries a file position.
func skipReason(output string) string {
	found := skipLine.FindAllStringSubmatch(output, -1)
	if len(found) == 0 {
		return "no reason given"
	}
	return found[len(found)-1][1]
}
