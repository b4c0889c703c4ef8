package tui

import (
	"errors"
	"io/fs"
	"os"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render/frame"
	"leadline/render/printfile"
	"leadline/tui/kit"
)

// frameSuffix ends the names of frame files.
const frameSuffix = ".frame.json"

// Messages of the file commands.
type (
	saved  struct{ path string }
	opened struct {
		path  string
		frame *frame.Frame
	}
	notOpened struct {
		path string
		err  error
	}
)

// slug is a file name made of a title.
func slug(title string) string {
	words := strings.FieldsFunc(strings.ToLower(title), func(r rune) bool {
		return (r < 'a' || r > 'z') && (r < '0' || r > '9')
	})
	if len(words) == 0 {
		return "untitled"
	}
	return strings.Join(words, "-")
}

// askSave asks for the file's name, with the last one as its proposal.
func (m *model) askSave() tea.Cmd {
	path := m.desk.Path
	if path == "" {
		path = slug(m.desk.Frame.Title) + frameSuffix
	}
	was := m.desk.Path
	return m.file.Ask("save as", path, notEmpty, func(path string) tea.Cmd {
		return save(m.desk.Frame, withSuffix(path), path != was)
	})
}

var errNoName = errors.New("a file needs a name")

func notEmpty(s string) error {
	if strings.TrimSpace(s) == "" {
		return errNoName
	}
	return nil
}

func withSuffix(path string) string {
	if strings.HasSuffix(path, ".json") {
		return path
	}
	return path + frameSuffix
}

// existsError refuses to write over a file that is not the frame's own.
type existsError struct{ path string }

func (e *existsError) Error() string { return e.path + " is there already" }

// Hint says how to replace it.
func (e *existsError) Hint() string { return "choose another name, or open that file first" }

// save writes the frame's file off the loop. A file that the frame did not come
// from is not written over.
func save(f *frame.Frame, path string, fresh bool) tea.Cmd {
	return func() tea.Msg {
		doc, err := f.Marshal()
		if err == nil && fresh {
			if _, e := os.Lstat(path); !errors.Is(e, fs.ErrNotExist) {
				err = &existsError{path}
			}
		}
		if err == nil {
			err = printfile.WriteFile(path, doc)
		}
		if err != nil {
			return kit.Fail(err)()
		}
		return saved{path}
	}
}

// askOpen asks for a frame, a sidecar or a print.
func (m *model) askOpen(path string) tea.Cmd {
	load := m.load
	return m.file.Ask("open", path, notEmpty, func(path string) tea.Cmd {
		return func() tea.Msg {
			f, err := load(path)
			if err != nil {
				return notOpened{path, err}
			}
			return opened{path, f}
		}
	})
}

// filed takes what the file commands bring back.
func (m *model) filed(msg tea.Msg) tea.Cmd {
	switch msg := msg.(type) {
	case saved:
		m.desk.Opened(msg.path)
		return kit.Tell("saved as " + msg.path)
	case notOpened: // the question stays, with what was wrong
		if m.screen().Typing() || m.file.Open() {
			return kit.Fail(msg.err)
		}
		return tea.Batch(m.askOpen(msg.path), kit.Fail(msg.err))
	case opened:
		if err := m.desk.Put("opened another frame", msg.frame); err != nil {
			return kit.Fail(err)
		}
		m.desk.Pinned = true // a frame from a file says what it wants
		m.desk.Opened(home(msg.path))
		return kit.Tell("opened " + msg.path)
	}
	return nil
}

// home is the path where a frame may be saved again: its file's, but not that
// of a print or a sidecar, which are records.
func home(path string) string {
	if strings.HasSuffix(path, frameSuffix) {
		return path
	}
	return ""
}

// askPrint queues the frame, on the queue's screen.
func (m *model) askPrint() tea.Cmd {
	return tea.Batch(m.show(m.prints.Name()), m.prints.Ask())
}
