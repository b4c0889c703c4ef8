package inking

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/palette"
	"leadline/render/frame"
	"leadline/render/printfile"
	"leadline/tui/kit"
)

// entry is a ramp in the locker.
type entry struct {
	name, note string
	ramp       palette.Ramp
	err        error // a file that holds no ramp
}

// locker is the paint locker: the ramps of the house and of the folder. The one
// under the cursor is tried on; it is the frame's only when it is taken.
type locker struct {
	entries  []entry
	at       int
	reading  bool
	proposal *frame.Frame // nil where the frame's own ramp is shown
}

// maxFiles bounds the ramp files that are read of a folder.
const maxFiles = 200

// Messages of the locker's work on files.
type (
	found struct {
		opened  int
		entries []entry
	}
	saved struct {
		entry entry
		path  string
	}
)

func (s *Screen) lockerActions() []action {
	turn := func(by int) func() tea.Cmd { return func() tea.Cmd { s.tryOn(s.locker.at + by); return nil } }
	return []action{
		{kit.Bind("↑", "ramp above", "up"), turn(-1)},
		{kit.Bind("↓", "ramp below", "down"), turn(1)},
		{kit.Bind("home", "first ramp", "home"), turn(-1 << 20)},
		{kit.Bind("end", "last ramp", "end"), turn(1 << 20)},
		{kit.Bind("enter", "take it", "enter"), s.take},
		{kit.Bind("esc", "leave it", "esc", "k"), func() tea.Cmd { s.shut(); return nil }},
	}
}

// openLocker shows the ramps of the house at once and reads the folder's.
func (s *Screen) openLocker() tea.Cmd {
	l := &locker{reading: true}
	for _, n := range palette.Ramps() {
		l.entries = append(l.entries, entry{name: n.Name, note: n.Note, ramp: n.Ramp})
	}
	for i, e := range l.entries {
		if sameRamp(e.ramp, s.now().ramp) {
			l.at = i
		}
	}
	s.locker, s.mixing = l, false
	s.opened++
	dir, opened := s.dir, s.opened
	return func() tea.Msg { return found{opened, readRamps(dir)} }
}

// stock puts the folder's ramps behind the house's.
func (s *Screen) stock(m found) {
	if m.opened != s.opened {
		return
	}
	s.named, s.cache.rows = m.entries, nil
	l := s.locker
	if l == nil {
		return
	}
	own := l.at
	for i, e := range m.entries {
		if l.proposal == nil && e.err == nil && sameRamp(e.ramp, s.now().ramp) {
			own = len(l.entries) + i
		}
	}
	l.entries, l.at, l.reading = append(l.entries, m.entries...), own, false
}

// tryOn moves the cursor and shows the frame with the ramp there.
func (s *Screen) tryOn(i int) {
	l := s.locker
	l.at = min(max(i, 0), len(l.entries)-1)
	l.proposal = nil
	if e := l.entries[l.at]; e.err == nil {
		l.proposal = s.desk.Frame.Clone()
		l.proposal.Ink.Ramp, l.proposal.Ink.Baked = new(frame.FromPalette(e.ramp)), nil
	}
}

// take makes the ramp under the cursor the frame's.
func (s *Screen) take() tea.Cmd {
	e := s.locker.entries[s.locker.at]
	if e.err != nil {
		return kit.Fail(e.err)
	}
	s.shut()
	s.hold(place{kind: aStop})
	s.at = place{kind: theRamp}
	if sameRamp(e.ramp, s.now().ramp) {
		return kit.Tell(e.name + " is the ramp already")
	}
	return s.takeRamp("", e.ramp)
}

func (s *Screen) shut() { s.locker = nil }

// readRamps reads the ramp files of a folder, in order of their names.
func readRamps(dir string) []entry {
	paths, _ := filepath.Glob(filepath.Join(globbed(dir), "*"+frame.RampSuffix)) // the pattern is sound
	slices.Sort(paths)
	var out []entry
	for _, path := range paths[:min(len(paths), maxFiles)] {
		file := filepath.Base(path)
		e := entry{name: strings.TrimSuffix(file, frame.RampSuffix), note: file}
		r, err := frame.LoadRamp(path)
		var faults frame.Faults
		switch {
		case errors.As(err, &faults):
			e.err = fmt.Errorf("%s: %w", file, faults)
		case err != nil:
			e.err = err
		default:
			e.ramp = r.Ramp
			if r.Name != "" {
				e.name = r.Name
			}
		}
		out = append(out, e)
	}
	return out
}

// globbed is a folder's name with the letters that patterns use made plain.
func globbed(dir string) string {
	return strings.NewReplacer(`\`, `\\`, `*`, `\*`, `?`, `\?`, `[`, `\[`).Replace(dir)
}

// askSave asks for the name of a ramp file.
func (s *Screen) askSave() tea.Cmd {
	r := s.now().ramp
	name := s.nameOf(r)
	if strings.HasPrefix(name, "own,") {
		name = s.desk.Frame.Title
	}
	return s.ask.Ask("save the ramp as:", slug(name)+frame.RampSuffix, named, func(text string) tea.Cmd {
		return save(s.dir, strings.TrimSpace(text), r)
	})
}

func named(text string) error {
	if base := strings.TrimSuffix(strings.TrimSpace(text), frame.RampSuffix); base == "" || strings.HasSuffix(base, "/") {
		return &refusal{"a file needs a name", "such as low-water" + frame.RampSuffix}
	}
	return nil
}

// slug is a file name made of a title.
func slug(title string) string {
	words := strings.FieldsFunc(strings.ToLower(title), func(r rune) bool {
		return (r < 'a' || r > 'z') && (r < '0' || r > '9')
	})
	if len(words) == 0 {
		return "ramp"
	}
	return strings.Join(words, "-")
}

// save writes a ramp's file, which must not be there yet.
func save(dir, name string, r palette.Ramp) tea.Cmd {
	return func() tea.Msg {
		title := strings.TrimSuffix(filepath.Base(name), frame.RampSuffix)
		path := name
		if !strings.HasSuffix(path, ".json") {
			path += frame.RampSuffix
		}
		if !filepath.IsAbs(path) {
			path = filepath.Join(dir, path)
		}
		doc, err := frame.RampFile{Name: strings.ReplaceAll(title, "-", " "), Ramp: r}.Marshal()
		if err == nil {
			if _, e := os.Lstat(path); !errors.Is(e, fs.ErrNotExist) {
				err = &refusal{path + " is there already", "choose another name"}
			}
		}
		if err == nil {
			err = printfile.WriteFile(path, doc)
		}
		if err != nil {
			return kit.Fail(fmt.Errorf("the ramp is not saved: %w", err))()
		}
		return saved{entry{name: strings.ReplaceAll(title, "-", " "), note: filepath.Base(path), ramp: r}, path}
	}
}

// wrote knows the new file's ramp by its name from now on.
func (s *Screen) wrote(m saved) tea.Cmd {
	s.named, s.cache.rows = append(s.named[:len(s.named):len(s.named)], m.entry), nil
	return kit.Tell("ramp saved as " + m.path)
}
