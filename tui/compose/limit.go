package compose

import (
	"fmt"
	"strconv"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render/frame"
	"leadline/tui/kit"
)

// limitError says that a text is no limit.
type limitError struct{ text string }

func (e *limitError) Error() string { return fmt.Sprintf("%q is not a limit", e.text) }

// Hint says what a limit is.
func (e *limitError) Hint() string {
	return fmt.Sprintf("a whole number up to %d, or nothing to let the limit find itself", frame.MaxLimit)
}

// askLimit pins the iteration limit, or lets it find itself.
func (s *Screen) askLimit() tea.Cmd {
	text := ""
	if s.desk.Pinned {
		text = strconv.Itoa(s.desk.Frame.Iteration.Limit)
	}
	return s.ask.Ask("limit (empty: finds itself)", text, func(t string) error { _, err := parseLimit(t); return err },
		func(t string) tea.Cmd {
			n, err := parseLimit(t)
			if err != nil {
				return kit.Fail(err)
			}
			s.desk.Pinned = n > 0
			if n == 0 {
				return kit.Tell("the limit finds itself")
			}
			return kit.Fail(s.desk.Change("set the limit", func(f *frame.Frame) error {
				f.Iteration.Limit = n
				return nil
			}))
		})
}

// parseLimit reads a limit; 0 is none.
func parseLimit(t string) (int, error) {
	t = strings.NewReplacer(",", "", " ", "", "_", "").Replace(t)
	if t == "" {
		return 0, nil
	}
	n, err := strconv.Atoi(t)
	if err != nil || n < 1 || n > frame.MaxLimit {
		return 0, &limitError{t}
	}
	return n, nil
}
