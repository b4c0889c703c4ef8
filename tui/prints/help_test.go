package prints

import (
	"context"
	"image"
	"io"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/lipgloss"
	"github.com/charmbracelet/x/ansi"
	"github.com/muesli/termenv"

	"leadline/jobs"
	"leadline/render/frame"
	"leadline/tui/cells"
	"leadline/tui/kit"
)

// TestMain makes written moments the same everywhere.
func TestMain(m *testing.M) {
	time.Local = time.UTC
	os.Exit(m.Run())
}

// small is a frame of 48 x 32 pixels.
func small(t testing.TB) *frame.Frame {
	t.Helper()
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","title":"Small Reef","set":{"kind":"mandelbrot"},
		"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},"iteration":{"limit":300},
		"sampling":{"least":1,"most":2},"sheet":{"width":"48px","height":"32px"}}`))
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// desk is a desk with small on it, drawn at a depth of colour.
func desk(t testing.TB, depth cells.Depth) *kit.Desk {
	t.Helper()
	d := kit.NewDesk(small(t))
	r := lipgloss.NewRenderer(io.Discard)
	r.SetColorProfile([]termenv.Profile{termenv.Ascii, termenv.ANSI, termenv.ANSI256, termenv.TrueColor}[depth])
	d.Depth, d.Style = depth, kit.NewStyle(r, true)
	if depth == cells.None {
		d.Mesh = cells.Plain
	}
	return d
}

// openQueue is a queue in a folder of the test's.
func openQueue(t testing.TB, where string) *jobs.Queue {
	t.Helper()
	q, err := jobs.Open(t.Context(), where, jobs.Options{})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(q.Close)
	return q
}

// add queues small with tiles of 16 pixels.
func add(t testing.TB, q *jobs.Queue, out string) int64 {
	t.Helper()
	id, err := q.Add(t.Context(), small(t), jobs.AddOptions{Out: out, Tile: 16, Audit: 4})
	if err != nil {
		t.Fatal(err)
	}
	return id
}

func show(t testing.TB, q *jobs.Queue, id int64) *jobs.Print {
	t.Helper()
	p, err := q.Show(t.Context(), id)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// driver is the program's loop around the screen: commands run beside it and
// their messages come back.
type driver struct {
	t    testing.TB
	s    *Screen
	in   chan tea.Msg
	said []kit.Say
	got  []tea.Msg // messages for other screens
}

// drive opens the screen on a queue and waits for the first answer.
func drive(t testing.TB, q *jobs.Queue) *driver {
	t.Helper()
	k := desk(t, cells.None)
	k.Queue = q
	d := &driver{t: t, s: New(k), in: make(chan tea.Msg, 1000)}
	t.Cleanup(func() { d.s.StopWorking(context.Background()) })
	d.send(kit.Opened(name))
	d.until("seen", func() bool { return d.s.look.first })
	return d
}

func (d *driver) run(c tea.Cmd) {
	if c != nil {
		go func() { d.in <- c() }()
	}
}

func (d *driver) send(m tea.Msg) {
	switch m := m.(type) {
	case nil:
	case tea.BatchMsg:
		for _, c := range m {
			d.run(c)
		}
	case kit.Say:
		d.said = append(d.said, m)
	default:
		if a, ok := m.(Added); ok {
			d.got = append(d.got, a)
		}
		d.run(d.s.Update(m))
	}
}

// until goes on until ok, looking at the queue more often than the screen does.
func (d *driver) until(what string, ok func() bool) {
	d.t.Helper()
	for end := time.Now().Add(time.Minute); !ok(); {
		select {
		case m := <-d.in:
			d.send(m)
		case <-time.After(30 * time.Millisecond):
			d.run(d.s.glance())
		}
		if time.Now().After(end) {
			d.t.Fatalf("never %s; said %v\n%s", what, d.said, ansi.Strip(d.s.View(120, 40)))
		}
	}
}

// says waits until something is said that holds a text.
func (d *driver) says(text string) {
	d.t.Helper()
	d.until("said "+text, func() bool {
		for _, s := range d.said {
			if strings.Contains(s.Text, text) {
				return true
			}
		}
		return false
	})
	d.said = nil
}

// press sends keys by their names, runes as they are.
func (d *driver) press(keys ...string) {
	for _, k := range keys {
		d.send(keyMsg(k))
	}
}

func keyMsg(k string) tea.KeyMsg {
	if t, ok := map[string]tea.KeyType{"up": tea.KeyUp, "down": tea.KeyDown, "home": tea.KeyHome, "end": tea.KeyEnd, "pgup": tea.KeyPgUp,
		"pgdown": tea.KeyPgDown, " ": tea.KeySpace, "enter": tea.KeyEnter, "esc": tea.KeyEsc, "ctrl+u": tea.KeyCtrlU}[k]; ok {
		return tea.KeyMsg{Type: t}
	}
	return tea.KeyMsg{Type: tea.KeyRunes, Runes: []rune(k)}
}

// fake is a queue with given answers.
type fake struct {
	Queue
	prints  []jobs.Print
	workers []jobs.Worker
	pass    func(context.Context) error // asked before each answer
	move    func(to int)
	work    error // what Work ends with
}

func (f *fake) List(ctx context.Context) ([]jobs.Print, error) {
	if f.pass != nil {
		if err := f.pass(ctx); err != nil {
			return nil, err
		}
	}
	return append([]jobs.Print{}, f.prints...), nil
}

func (f *fake) Workers(context.Context) ([]jobs.Worker, error) { return f.workers, nil }

func (f *fake) Move(_ context.Context, _ int64, to int) error { f.move(to); return nil }

func (f *fake) Work(context.Context, jobs.WorkOptions) error { return f.work }

func (f *fake) ThumbnailMark(context.Context, int64) (string, error) { return "1", nil }

// Thumbnail is half done: lighter to the right.
func (f *fake) Thumbnail(context.Context, int64) (*image.NRGBA, string, error) {
	img := image.NewNRGBA(image.Rect(0, 0, 48, 32))
	for i := 0; i < len(img.Pix)/2; i += 4 {
		v := uint8(i / 4 % 48 * 5)
		img.Pix[i], img.Pix[i+1], img.Pix[i+2], img.Pix[i+3] = v, v, v, 255
	}
	return img, "1", nil
}

// still is a screen that shows a fake's answers, with a fixed clock.
func still(t testing.TB, depth cells.Depth, f *fake) *Screen {
	t.Helper()
	s := New(desk(t, depth))
	s.q, s.host, s.pid, s.slots, s.open = f, "cove", 4211, 1, true
	v := s.looker()(t.Context())
	v.at = at(0)
	s.now = at(0)
	s.see(v)
	return s
}

// at is a moment some seconds after a fixed one, which is past.
func at(seconds float64) time.Time {
	return time.Date(2020, 3, 1, 12, 0, 0, 0, time.UTC).Add(time.Duration(seconds * float64(time.Second)))
}

// scene is one print in every state, and three workers.
func scene() *fake {
	print := func(id int64, title, out string, state jobs.State, done, tiles int) jobs.Print {
		return jobs.Print{ID: id, Title: title, Out: "/home/mara/prints/" + out, State: state, Done: done, Tiles: tiles, Priority: 2, Scale: 1,
			Width: 7200, Height: 4800, Release: "0.1.0", Numerics: 1, Attempts: int64(done) + 2, Added: at(-3600),
			Progress: jobs.Progress{Pixels: 7200 * 4800, Pixel: 7200 * 4800 * int64(done) / int64(tiles), Workers: 2}}
	}
	all := []jobs.Print{
		print(12, "Undertow", "undertow.png", jobs.Rendering, 61, 140),
		print(9, "Gull archipelago", "gull.png", jobs.Done, 140, 140),
		print(10, "Barnacle lamp", "barnacle-lamp.png", jobs.Failed, 33, 140),
		print(13, "", "samphire.png", jobs.Queued, 0, 96),
		print(14, "Skerry", "skerry.png", jobs.Rendering, 12, 96),
		print(15, "Wreck at low water", "wreck.png", jobs.Assembling, 96, 96),
		print(16, "Shoal", "shoal.png", jobs.Planning, 0, 2000),
		print(11, "Cliff", "cliff.png", jobs.Cancelled, 40, 96),
	}
	p := &all[0].Progress
	p.Rate, p.Left, p.LeftLow, p.LeftHigh = 412_345, 1234, 1010, 1458
	all[0].Priority, all[0].Rescued = 1, 2
	d := &all[1]
	d.Ended, d.File, d.Sidecar, d.Bytes = at(-60), d.Out, "/home/mara/prints/gull.sidecar.json", 182_345_678
	d.SHA256 = strings.Repeat("0123456789abcdef", 4)
	all[2].Ended, all[2].Reason, all[2].Hint = at(-600), "writing /home/mara/prints/barnacle-lamp.png: no space left on device",
		"when the cause is gone, queue again goes on from the tiles that are kept"
	all[4].Paused = true
	return &fake{prints: all, workers: []jobs.Worker{
		{Name: "cove/4211", Host: "cove", PID: 4211, Slots: 1, Running: 1, Holding: []string{"tile 63 of print 12"}, Rate: 101_234, Seen: at(-1)},
		{Name: "harbour/871", Host: "harbour", PID: 871, Slots: 4, Running: 4, Rate: 311_111, Seen: at(-2),
			Holding: []string{"tile 61 of print 12", "tile 62 of print 12", "tile 64 of print 12", "assembling print 15"}},
		{Name: "light/99", Host: "light", PID: 99, Slots: 2, Seen: at(-14)},
	}}
}

// inFolder makes a folder of the test's the current one.
func inFolder(t *testing.T) string {
	t.Helper()
	dir, err := filepath.EvalSymlinks(t.TempDir())
	if err != nil {
		t.Fatal(err)
	}
	t.Chdir(dir)
	return dir
}
