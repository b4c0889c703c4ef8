package tui

import (
	"encoding/json"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render/frame"
	"leadline/render/printfile"
	"leadline/render/sheet"
	"leadline/tui/cells"
	"leadline/tui/kit"
	"leadline/tui/paper"
)

// sessionFormat names the session file's form.
const sessionFormat = "leadline.desk/1"

// keptSteps is how much of the history is kept in the session file.
const keptSteps = 100

// saveEvery is how long a change may be lost to a kill.
const saveEvery = time.Second

type saveTick struct{}

// session is the file that the desk is kept in: after a kill the program opens
// where it was.
type session struct {
	path  string // "": nothing is kept
	dirty bool
	busy  bool
	mesh  string // the maker's choice, where this terminal cannot show it
}

// kept is what the file holds.
type kept struct {
	Format string       `json:"format"`
	Frame  *frame.Frame `json:"frame"`
	Path   string       `json:"path,omitempty"`
	Pinned bool         `json:"pinned"`
	Screen string       `json:"screen"`
	Mesh   string       `json:"mesh"`
	Seen   sheet.Length `json:"seen_from,omitzero"` // the viewing distance
	Marks  []kit.Mark   `json:"marks,omitempty"`
	Past   []kit.Step   `json:"past,omitempty"`
	Future []kit.Step   `json:"future,omitempty"`
}

func (s *session) tick() tea.Cmd {
	return tea.Tick(saveEvery, func(time.Time) tea.Msg { return saveTick{} })
}

type sessionSaved struct{ err error }

// save writes the session off the loop if anything has changed.
func (s *session) save(m *model) tea.Cmd {
	if s.path == "" || !s.dirty || s.busy {
		return s.tick()
	}
	s.dirty, s.busy = false, true
	mesh := m.desk.Mesh.String()
	if m.desk.Depth == cells.None || m.desk.ASCII {
		mesh = s.mesh
	}
	past, future := m.desk.History()
	k := kept{Format: sessionFormat, Frame: m.desk.Frame, Path: m.desk.Path, Pinned: m.desk.Pinned, Screen: m.screen().Name(),
		Mesh: mesh, Seen: m.paper.Distance(), Marks: m.desk.Marks, Past: last(past, keptSteps), Future: last(future, keptSteps)}
	path := s.path
	return func() tea.Msg {
		doc, err := json.Marshal(k)
		if err == nil {
			err = printfile.WriteFile(path, doc)
		}
		if err == nil {
			err = os.Chmod(path, 0o600)
		}
		return sessionSaved{err}
	}
}

// last is a copy of the end of a history.
func last(steps []kit.Step, n int) []kit.Step {
	return append([]kit.Step(nil), steps[max(0, len(steps)-n):]...)
}

// wrote notes that a save ended, and waits for the next.
func (s *session) wrote(err error) tea.Cmd {
	s.busy = false
	if err != nil {
		s.dirty = true
		return tea.Batch(s.tick(), kit.Fail(fmt.Errorf("keeping the session: %w", err)))
	}
	return s.tick()
}

// reopen puts a kept session on the desk. A file that cannot be used is set
// aside, and the error says where.
func (s *session) reopen(d *kit.Desk, p *paper.Screen) (screen string, err error) {
	if s.path == "" {
		return "", nil
	}
	doc, err := os.ReadFile(s.path)
	if errors.Is(err, fs.ErrNotExist) {
		return "", nil
	}
	var k kept
	if err == nil {
		err = json.Unmarshal(doc, &k)
	}
	if err == nil && (k.Format != sessionFormat || k.Frame == nil) {
		err = fmt.Errorf("its form is %q, this release knows %q", k.Format, sessionFormat)
	}
	if err != nil {
		aside := s.path + ".unreadable"
		return "", errors.Join(fmt.Errorf("the last session could not be read and is kept as %s: %w", filepath.Base(aside), err),
			os.Rename(s.path, aside))
	}
	d.Frame, d.Path, d.Pinned, d.Marks = k.Frame, k.Path, k.Pinned, k.Marks
	s.mesh = k.Mesh
	if mesh, err := cells.ParseMesh(k.Mesh); err == nil && d.Depth != cells.None && !d.ASCII {
		d.Mesh = mesh // what this terminal cannot show is not taken over
	}
	if !k.Seen.IsZero() {
		p.SetDistance(k.Seen)
	}
	d.SetHistory(k.Past, k.Future)
	return k.Screen, nil
}
