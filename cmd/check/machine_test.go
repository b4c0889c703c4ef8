package main

import (
	"context"
	"errors"
	"os"
	"path/filepath"
	"runtime"
	"slices"
	"strings"
	"testing"
	"time"
)

func TestNotInstalled(t *testing.T) {
	// As dpkg-query -W -f '${Package} ${db:Status-Status}\n' writes it: removed packages keep a line.
	status := "gcc installed\ntmux config-files\nclang not-installed\nlibpng-dev installed\nlibpng-dev installed\n"
	got := notInstalled([]string{"gcc", "tmux", "clang", "libpng-dev", "argyll"}, status)
	if want := []string{"tmux", "clang", "argyll"}; !slices.Equal(got, want) {
		t.Errorf("got %v, want %v", got, want)
	}
}

// standIn puts a shell script in front of everything else in PATH under the given name.
func standIn(t *testing.T, name, script string) {
	t.Helper()
	if runtime.GOOS == "windows" {
		t.Skip("the stand-in is a shell script")
	}
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, name), []byte("#!/bin/sh\n"+script+"\n"), 0o777); err != nil {
		t.Fatal(err)
	}
	t.Setenv("PATH", dir+string(os.PathListSeparator)+os.Getenv("PATH"))
}

// TestInstallOneByOne has one unknown package spoil the joint installation, as apt-get does.
func TestInstallOneByOne(t *testing.T) {
	journal := filepath.Join(t.TempDir(), "journal")
	standIn(t, "apt-get", `shift 7; echo "$DEBIAN_FRONTEND $*" >> `+journal+`; case "$*" in *unknown*) exit 100;; esac`)
	aptInstall(t.Context(), []string{"tmux", "unknown", "gcc"})
	got, err := os.ReadFile(journal)
	if err != nil {
		t.Fatal(err)
	}
	want := "noninteractive update\nnoninteractive install tmux unknown gcc\n" +
		"noninteractive install tmux\nnoninteractive install unknown\nnoninteractive install gcc\n"
	if string(got) != want {
		t.Errorf("apt-get was asked\n%swant\n%s", got, want)
	}
}

// TestToolsDoNotFail has a package database that knows nothing and a package manager that can do nothing.
func TestToolsDoNotFail(t *testing.T) {
	standIn(t, "apt-get", "exit 100")
	standIn(t, "dpkg-query", "echo 'gcc installed'; exit 1")
	o := installTools(t.Context(), "")
	if o.verdict != skipped || len(o.notes) != 1 || !strings.Contains(o.notes[0], "tmux") || strings.Contains(o.notes[0], "gcc,") {
		t.Errorf("verdict %v, notes %q; want skipped, with tmux missing and gcc not", o.verdict, o.notes)
	}
}

func TestEmulator(t *testing.T) {
	found := func(name string) (string, error) { return "/usr/bin/" + name, nil }
	absent := func(string) (string, error) { return "", errors.New("not found") }
	foreign := map[string]string{"amd64": "arm64", "arm64": "amd64"}[runtime.GOARCH]
	cases := []struct {
		name, arch string
		look       func(string) (string, error)
		emulator   string // prefix
		reason     string // part
	}{
		{"native", runtime.GOARCH, absent, "", ""},
		{"foreign", foreign, found, "qemu-", ""},
		{"no qemu", foreign, absent, "", "qemu-user-static"},
	}
	for _, c := range cases {
		emulator, reason := variant{arch: c.arch}.emulator(c.look)
		if !strings.HasPrefix(emulator, c.emulator) || (c.emulator == "") != (emulator == "") || !strings.Contains(reason, c.reason) || (c.reason == "") != (reason == "") {
			t.Errorf("%s: emulator %q, reason %q; want %q, %q", c.name, emulator, reason, c.emulator, c.reason)
		}
	}
}

// TestRefusal puts a stand-in for the go command first in PATH; the message is that of the Go runtime.
func TestRefusal(t *testing.T) {
	for _, c := range []struct {
		script, reason string
		fails          bool
	}{
		{"exit 0", "", false},
		{"echo 'This program can only be run on AMD64 processors with v3 microarchitecture support.' >&2; exit 1", "lacks features", false},
		{"echo 'syntax error' >&2; exit 1", "", true},
	} {
		standIn(t, "go", c.script)
		reason, err := refusal(t.Context(), command{}, nil)
		if (reason == "") != (c.reason == "") || !strings.Contains(reason, c.reason) || (err != nil) != c.fails {
			t.Errorf("%s: reason %q, error %v", c.script, reason, err)
		}
	}
}

func TestHasIdentityTest(t *testing.T) {
	for _, c := range []struct {
		file, text string
		want       bool
	}{
		{"a_test.go", "//go:build never\n\npackage a\n\nfunc TestIdentityOfPixels() {}\n", true},
		{"a_test.go", "package a\n\nfunc TestOther() {}\n\n// TestIdentity is spoken of only.\n", false},
		{"a_test.go", "package a\n\ntype s struct{}\n\nfunc (s) TestIdentity() {}\n", false},
		{"a.go", "package a\n\nfunc TestIdentity() {}\n", false},
	} {
		dir := t.TempDir()
		if err := os.WriteFile(filepath.Join(dir, c.file), []byte(c.text), 0o666); err != nil {
			t.Fatal(err)
		}
		if got, err := hasIdentityTest(dir); err != nil || got != c.want {
			t.Errorf("%s %q: %v, %v; want %v", c.file, c.text, got, err, c.want)
		}
	}
}

func TestDemandEach(t *testing.T) {
	ran := outcome{verdict: passed, tests: tally{{"v1", "a", "TestIdentity"}: {verdict: passed}}}
	if o := demandEach(ran, []string{"a"}); o.verdict != passed {
		t.Errorf("verdict %v, want ok", o.verdict)
	}
	if o := demandEach(ran, []string{"a", "b"}); o.verdict != failed || !strings.Contains(o.output, "b: its identity tests are not built") {
		t.Errorf("verdict %v, output %q", o.verdict, o.output)
	}
}

func TestFormat(t *testing.T) {
	root := t.TempDir()
	write := func(name, text string) {
		t.Helper()
		path := filepath.Join(root, name)
		if err := os.MkdirAll(filepath.Dir(path), 0o777); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	write("good/a.go", "package a\n\nvar x = 1\n")
	write(".hidden/a.go", "package   a\n")
	if o := checkFormat(t.Context(), root); o.verdict != passed {
		t.Errorf("good files: %v %s", o.verdict, o.output)
	}
	write("bad/b.go", "package b\nvar   x = 1\n")
	write("worse/c.go", "package\n")
	o := checkFormat(t.Context(), root)
	if o.verdict != failed || !strings.Contains(o.output, filepath.Join("bad", "b.go")+": not in gofmt form") || !strings.Contains(o.output, filepath.Join("worse", "c.go")+":") {
		t.Errorf("bad files: %v %s", o.verdict, o.output)
	}
}

// TestStoppedCommand ends a shell whose own child would write a file later, and waits to see that it never does.
func TestStoppedCommand(t *testing.T) {
	if runtime.GOOS == "windows" {
		t.Skip("there are no process groups to stop on this system")
	}
	dir := t.TempDir()
	ctx, cancel := context.WithCancel(t.Context())
	defer cancel()
	var start time.Time // of the stopping, once the command has begun
	go func() {
		for range 1000 {
			if _, err := os.Stat(filepath.Join(dir, "begun")); err == nil {
				break
			}
			time.Sleep(10 * time.Millisecond)
		}
		start = time.Now()
		cancel()
	}()
	err := command{dir: dir, args: []string{"sh", "-c", "touch begun; (sleep 1; touch survived) & wait"}}.run(ctx, nil, nil)
	if err == nil || time.Since(start) > grace {
		t.Errorf("error %v after %v, want an early end", err, time.Since(start))
	}
	time.Sleep(1200 * time.Millisecond)
	if _, err := os.Stat(filepath.Join(dir, "begun")); err != nil {
		t.Error("the command never began:", err)
	}
	if _, err := os.Stat(filepath.Join(dir, "survived")); err == nil {
		t.Error("a child outlived its stopped parent")
	}
}
