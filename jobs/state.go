package jobs

import (
	"fmt"
	"os"
	"path/filepath"
)

// StateFolder is the user's folder of what the program keeps between runs, made
// where it is missing, for the user's eyes alone.
func StateFolder() (string, error) {
	state := os.Getenv("XDG_STATE_HOME")
	if !filepath.IsAbs(state) { // relative ones are invalid: XDG Base Directory Specification
		home, err := os.UserHomeDir()
		if err != nil {
			return "", fmt.Errorf("finding the state folder: %w", err)
		}
		state = filepath.Join(home, ".local", "state")
	}
	dir := filepath.Join(state, "leadline")
	if err := os.MkdirAll(dir, 0o700); err != nil {
		return "", fmt.Errorf("making the state folder: %w", err)
	}
	if err := os.Chmod(dir, 0o700); err != nil {
		return "", fmt.Errorf("keeping the state folder private: %w", err)
	}
	return dir, nil
}
