package prints

import (
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/jobs"
	"leadline/render/frame"
	"leadline/tui/kit"
)

// auditPixels is what leadline queue add audits unless told otherwise.
const auditPixels = 32

// Added says that a print was queued.
type Added struct {
	ID  int64
	Out string // the PNG's path, absolute

	alone bool // no worker is alive that could make it
}

// taken says that another print is, or will be, where one is to be.
type taken struct {
	frame *frame.Frame
	out   string
	by    *jobs.TakenError
}

// taken asks whether to print over it.
func (s *Screen) taken(t taken) tea.Cmd {
	why := clean(t.by.What)
	return s.ask(&question{strings.ToUpper(why[:1]) + why[1:] + ". Print over it?", "print over it",
		func() tea.Cmd { return s.add(t.frame, t.out, true) }})
}

var (
	errNoQueue = errors.New("there is no queue")
	errNoPath  = errors.New("the print needs a name")
	errNotPNG  = &refusal{"a print is a PNG", "the name ends in .png"}
)

// Ask asks for the path of a print of the desk's frame and queues it.
func (s *Screen) Ask() tea.Cmd {
	if s.q == nil {
		return s.none()
	}
	s.question = nil
	return s.editor.Ask("print to", proposal(s.desk), checkPath, func(path string) tea.Cmd {
		return s.Add(s.desk.Frame, path)
	})
}

// checkPath is what can be said of a path without looking at the disk.
func checkPath(path string) error {
	base := filepath.Base(path)
	ext := filepath.Ext(base)
	switch {
	case strings.TrimSpace(path) == "":
		return errNoPath
	case !strings.EqualFold(ext, ".png") || ext == base || os.IsPathSeparator(path[len(path)-1]):
		return errNotPNG
	}
	return nil
}

// proposal is a name for the desk's print, in the current folder: that of the
// frame's file, else the title's.
func proposal(d *kit.Desk) string {
	base := filepath.Base(d.Path)
	for _, end := range []string{".frame.json", ".sidecar.json", ".json", ".png"} {
		if t, ok := strings.CutSuffix(base, end); ok && t != "" {
			return t + ".png"
		}
	}
	if d.Path != "" {
		return base + ".png"
	}
	words := strings.FieldsFunc(strings.ToLower(d.Frame.Title), func(r rune) bool {
		return (r < 'a' || r > 'z') && (r < '0' || r > '9')
	})
	if len(words) == 0 {
		return "print.png"
	}
	return strings.Join(words, "-") + ".png"
}

// absolute is a path from the root; ~/ is the user's folder.
func absolute(path string) (string, error) {
	if rest, ok := strings.CutPrefix(path, "~/"); ok {
		home, err := os.UserHomeDir()
		if err != nil {
			return "", fmt.Errorf("finding your folder: %w", err)
		}
		path = filepath.Join(home, rest)
	}
	out, err := filepath.Abs(path)
	if err != nil {
		return "", fmt.Errorf("naming the print: %w", err)
	}
	return out, nil
}

// Add queues a print of a frame; Added comes back. Where no worker is alive that
// could make it, the work begins here; where another print is in the way, the
// screen asks.
func (s *Screen) Add(f *frame.Frame, out string) tea.Cmd { return s.add(f, out, false) }

func (s *Screen) add(f *frame.Frame, out string, replace bool) tea.Cmd {
	q := s.q
	if q == nil {
		return s.none()
	}
	return func() tea.Msg {
		ctx, cancel := context.WithTimeout(context.Background(), changeFor)
		defer cancel()
		out, err := absolute(out)
		var id int64
		if err == nil {
			id, err = q.Add(ctx, f, jobs.AddOptions{Out: out, Audit: auditPixels, Replace: replace})
		}
		var by *jobs.TakenError
		switch {
		case errors.As(err, &by):
			return taken{f, out, by}
		case err != nil:
			return kit.Fail(fmt.Errorf("queueing the print: %w", err))()
		}
		p, err := q.Show(ctx, id) // counts the workers; the print is queued whatever it says
		return Added{ID: id, Out: out, alone: err == nil && p.Progress.Workers == 0}
	}
}

// added shows the new print, and begins to work where nobody does.
func (s *Screen) added(a Added) tea.Cmd {
	s.chosen, s.follow, s.below = a.ID, true, 0
	said := fmt.Sprintf("print %d is queued: %s", a.ID, clean(a.Out))
	var work tea.Cmd
	if a.alone && s.hand == nil {
		work = s.startWork()
		said = fmt.Sprintf("print %d is queued; %s", a.ID, s.workWords())
	}
	return tea.Batch(kit.Tell(said), work, s.again())
}
