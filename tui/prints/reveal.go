package prints

import (
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/jobs"
	"leadline/tui/kit"
)

// openFolder shows the folder of a print's file in the system's own program, or
// says where it is.
func (s *Screen) openFolder(p *jobs.Print) tea.Cmd {
	path, reveal := p.Out, s.reveal
	if p.File != "" {
		path = p.File
	}
	return func() tea.Msg {
		dir := filepath.Dir(path)
		if st, err := os.Stat(dir); err != nil || !st.IsDir() {
			return kit.Say{Text: dir + " is not on this machine", Bad: true}
		}
		if err := reveal(dir); err != nil {
			return kit.Say{Text: "it is in " + clean(dir)}
		}
		return kit.Say{Text: "opened " + clean(dir)}
	}
}

// revealWithin is how long a program that opens folders may take to fail.
const revealWithin = 3 * time.Second

var errNoDesktop = errors.New("no desktop to open folders on")

// revealFolder opens a folder in the system's own program, which goes on after
// this one. It returns once that runs, or could not be made to.
func revealFolder(dir string) error {
	var c *exec.Cmd
	switch runtime.GOOS {
	case "windows":
		c = exec.Command("rundll32", "url.dll,FileProtocolHandler", dir)
	case "darwin":
		c = exec.Command("open", dir)
	default:
		if os.Getenv("DISPLAY") == "" && os.Getenv("WAYLAND_DISPLAY") == "" {
			return errNoDesktop
		}
		c = exec.Command("xdg-open", dir)
	}
	if err := c.Start(); err != nil {
		return fmt.Errorf("opening the folder: %w", err)
	}
	failed := make(chan error, 1)
	go func() { failed <- c.Wait() }()
	select {
	case err := <-failed:
		return err
	case <-time.After(revealWithin):
		return nil
	}
}
