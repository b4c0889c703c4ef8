package main

import (
	"maps"
	"strings"
	"testing"
)

// The event lines follow `go doc test2json`, and `go help buildjson` for build-output.
func TestReadTests(t *testing.T) {
	const stream = `{"Action":"start","Package":"a"}
{"Action":"run","Package":"a","Test":"TestGood"}
{"Action":"output","Package":"a","Test":"TestGood","Output":"quiet please\n"}
{"Action":"pass","Package":"a","Test":"TestGood","Elapsed":0.1}
{"Action":"output","Package":"a","Test":"TestTool","Output":"=== RUN   TestTool\n"}
{"Action":"output","Package":"a","Test":"TestTool","Output":"    png_test.go:12: pngcheck is not installed\n"}
{"Action":"output","Package":"a","Test":"TestTool","Output":"--- SKIP: TestTool (0.00s)\n"}
{"Action":"skip","Package":"a","Test":"TestTool"}
{"Action":"output","Package":"a","Test":"TestBad/deep","Output":"    a_test.go:9: got 1, want 2\n"}
{"Action":"fail","Package":"a","Test":"TestBad/deep"}
{"Action":"fail","Package":"a","Test":"TestBad"}
{"Action":"output","Package":"a","Output":"FAIL\ta\t0.1s\n"}
{"Action":"fail","Package":"a"}
{"Action":"skip","Package":"notests"}
{"ImportPath":"b [b.test]","Action":"build-output","Output":"b.go:3:1: undefined: x\n"}
{"ImportPath":"b [b.test]","Action":"build-fail"}
{"Action":"fail","Package":"b","FailedBuild":"b [b.test]"}
{"Action":"output","Package":"c","Output":"panic: test timed out after 1s\n"}
{"Action":"fail","Package":"c"}
go: a plain complaint
{"Action":"pass","Package":"d","Test":"TestLast"}`
	got, shown, err := readTests(strings.NewReader(stream), "v1")
	if err != nil {
		t.Fatal(err)
	}
	want := tally{
		{"v1", "a", "TestGood"}:     {verdict: passed},
		{"v1", "a", "TestTool"}:     {skipped, "pngcheck is not installed"},
		{"v1", "a", "TestBad/deep"}: {verdict: failed},
		{"v1", "a", "TestBad"}:      {verdict: failed},
		{"v1", "b", ""}:             {verdict: failed},
		{"v1", "c", ""}:             {verdict: failed},
		{"v1", "d", "TestLast"}:     {verdict: passed},
	}
	if !maps.Equal(got, want) {
		t.Errorf("got  %v\nwant %v", got, want)
	}
	for _, part := range []string{"got 1, want 2", "undefined: x", "timed out", "a plain complaint"} {
		if !strings.Contains(shown, part) {
			t.Errorf("no %q in what is shown:\n%s", part, shown)
		}
	}
	if strings.Contains(shown, "quiet please") {
		t.Errorf("a passing test's output is shown:\n%s", shown)
	}
}

// TestAdd merges two runs of the same tests: the worse verdict holds, and a test skipped in one of them has run.
func TestAdd(t *testing.T) {
	a, b, c := testKey{pkg: "p", test: "TestA"}, testKey{pkg: "p", test: "TestB"}, testKey{pkg: "p", test: "TestC"}
	all := newTally()
	all.add(stage{name: "test"}, outcome{verdict: passed, tests: tally{a: {verdict: passed}, b: {verdict: passed}, c: {skipped, "no tmux"}}})
	all.add(stage{name: "race"}, outcome{verdict: failed, tests: tally{a: {skipped, "slow"}, b: {verdict: failed}, c: {skipped, "no tmux"}}})
	all.add(stage{name: "killed"}, outcome{verdict: failed, tests: tally{a: {verdict: passed}}})
	all.add(stage{name: "tools", setup: true}, outcome{verdict: skipped})
	all.add(stage{name: "vet"}, outcome{verdict: passed})
	want := tally{
		a: {verdict: passed}, b: {verdict: failed}, c: {skipped, "no tmux"},
		{group: "killed"}: {verdict: failed}, {group: "vet"}: {verdict: passed},
	}
	if !maps.Equal(all, want) {
		t.Errorf("got  %v\nwant %v", all, want)
	}
	if p, f, s := all.count(passed), all.count(failed), all.count(skipped); p != 2 || f != 2 || s != 1 {
		t.Errorf("counts %d, %d, %d; want 2, 2, 1", p, f, s)
	}
}
