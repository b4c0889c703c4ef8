package prints

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"leadline/jobs"
	"leadline/tui/cells"
	"leadline/tui/kit"
)

// TestReveal opens the folder of the result with what stands in for the desktop's
// program, and says where it is when that fails or there is no desktop.
func TestReveal(t *testing.T) {
	dir := t.TempDir()
	program := func(script string) {
		if err := os.WriteFile(filepath.Join(dir, "xdg-open"), []byte("#!/bin/sh\n"+script), 0o700); err != nil {
			t.Fatal(err)
		}
	}
	t.Setenv("PATH", dir+string(os.PathListSeparator)+os.Getenv("PATH"))
	t.Setenv("WAYLAND_DISPLAY", "")
	s := still(t, cells.None, scene())
	p := &jobs.Print{Out: filepath.Join(dir, "asked.png"), File: filepath.Join(dir, "made.png")}
	for _, c := range []struct {
		display, script string
		want            kit.Say
	}{
		{":7", `echo "$1" > ` + filepath.Join(dir, "got"), kit.Say{Text: "opened " + dir}},
		{":7", "exit 3", kit.Say{Text: "it is in " + dir}},
		{"", "echo never > " + filepath.Join(dir, "got"), kit.Say{Text: "it is in " + dir}},
	} {
		t.Setenv("DISPLAY", c.display)
		program(c.script)
		if got := s.openFolder(p)(); got != c.want {
			t.Errorf("said %v, not %v", got, c.want)
		}
	}
	if got, err := os.ReadFile(filepath.Join(dir, "got")); err != nil || strings.TrimSpace(string(got)) != dir {
		t.Errorf("opened %q, %v", got, err)
	}
	p.File = ""
	p.Out = filepath.Join(dir, "gone", "a.png")
	if got := s.openFolder(p)().(kit.Say); !got.Bad || !strings.Contains(got.Text, "is not on this machine") {
		t.Errorf("said %v", got)
	}
}
