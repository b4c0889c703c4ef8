//go:build unix

package main

import (
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
)

// TestFolderNotWritable renders into a folder that may only be read, as a user
// without privileges.
func TestFolderNotWritable(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	for _, d := range []string{filepath.Dir(dir), filepath.Dir(executable(t))} {
		if err := os.Chmod(d, 0o755); err != nil { // made for this process alone
			t.Fatal(err)
		}
	}
	frame := filepath.Join(dir, "small.frame.json")
	b, err := os.ReadFile(testdata(t, "small.frame.json"))
	if err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(frame, b, 0o644); err != nil {
		t.Fatal(err)
	}
	if err := os.Chmod(dir, 0o555); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { os.Chmod(dir, 0o755) })
	cmd := exec.Command(executable(t), "render", "small.frame.json", "--progress", "json")
	cmd.Dir = dir
	if os.Geteuid() == 0 {
		cmd.SysProcAttr = &syscall.SysProcAttr{Credential: &syscall.Credential{Uid: 65534, Gid: 65534}} // nobody
	}
	out, err := cmd.CombinedOutput()
	if code := cmd.ProcessState.ExitCode(); code != exitFailed {
		t.Errorf("exit code %d, not %d: %v", code, exitFailed, err)
	}
	const want = "leadline: error: create small.png: permission denied\nleadline: hint: "
	if !strings.HasPrefix(string(out), want) {
		t.Errorf("said %q, not %q and what to do", out, want)
	}
	if files := contents(t, dir); len(files) != 1 {
		t.Errorf("left %v", keys(files))
	}
}
