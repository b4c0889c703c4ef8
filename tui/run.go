package tui

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/lipgloss"

	"leadline/jobs"
	"leadline/render/frame"
	"leadline/tui/cells"
	"leadline/tui/compose"
	"leadline/tui/engine"
	"leadline/tui/inking"
	"leadline/tui/kit"
	"leadline/tui/paper"
	"leadline/tui/prints"
)

// Options say how the screens begin. The zero value works.
type Options struct {
	Frame   *frame.Frame // nil: the last session's, or the whole set
	Path    string       // the frame's file
	Queue   *jobs.Queue  // nil: NoQueue says why
	NoQueue error
	// Load reads the frame of a frame file, a sidecar or a print; nil: of the
	// first two.
	Load    func(path string) (*frame.Frame, error)
	Session string // the session's file; "": nothing is kept
	Input   io.Reader
	Output  io.Writer
	Getenv  func(string) string
	Light   *bool // the terminal's background; nil: asked for
}

// Run shows the screens until the user leaves or the context ends.
func Run(ctx context.Context, o Options) error {
	m, err := newModel(o)
	if err != nil {
		return err
	}
	p := tea.NewProgram(m, tea.WithContext(ctx), tea.WithAltScreen(), tea.WithMouseCellMotion(),
		tea.WithInput(o.Input), tea.WithOutput(o.Output), tea.WithoutSignalHandler())
	m.desk.Engine = engine.New(func(pic *engine.Picture) { p.Send(kit.Drawn{Picture: pic}) })
	defer m.desk.Engine.Close()
	_, err = p.Run()
	m.prints.StopWorking(context.WithoutCancel(ctx))
	if errors.Is(err, tea.ErrProgramKilled) && ctx.Err() != nil {
		return ctx.Err()
	}
	if err != nil {
		return fmt.Errorf("the screens ended: %w", err)
	}
	return nil
}

// newModel sets the desk and its screens up.
func newModel(o Options) (*model, error) {
	if o.Getenv == nil {
		o.Getenv = os.Getenv
	}
	d := kit.NewDesk(Start())
	d.Queue, d.NoQueue = o.Queue, o.NoQueue
	t := cells.Detect(o.Getenv)
	d.Depth, d.Mesh, d.ASCII = t.Depth, t.Mesh, t.ASCII
	r := lipgloss.NewRenderer(o.Output)
	r.SetColorProfile(profile(d.Depth))
	dark := o.Light == nil || !*o.Light
	if o.Light == nil {
		dark = r.HasDarkBackground()
	}
	d.Style = kit.NewStyle(r, dark)
	m := &model{desk: d, session: &session{path: o.Session}, load: o.Load}
	if m.load == nil {
		m.load = func(path string) (*frame.Frame, error) {
			doc, err := frame.Load(path)
			if err != nil {
				return nil, err
			}
			return doc.Frame, nil
		}
	}
	m.paper, m.prints = paper.New(d), prints.New(d)
	screen, err := m.session.reopen(d, m.paper)
	if err != nil {
		m.said = kit.Say{Text: err.Error(), Bad: true}
	}
	if o.Frame != nil {
		if err := d.Put("opened "+filepath.Base(o.Path), o.Frame); err != nil {
			return nil, err
		}
		d.Pinned = true
		d.Opened(home(o.Path))
	}
	m.screens = []kit.Screen{compose.New(d), inking.New(d), m.paper, m.prints}
	for i, s := range m.screens {
		if s.Name() == screen && o.Frame == nil {
			m.open = i
		}
	}
	return m, nil
}

// Start is the frame that a new desk holds: the whole set on an A3 sheet.
func Start() *frame.Frame {
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},
		"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},"iteration":{"limit":1000},
		"sheet":{"width":"420mm","height":"297mm"}}`))
	if err != nil {
		panic(err) // written above
	}
	return f
}
