package board

import (
	"context"
	"fmt"
	"image"
	"image/color"
	"io"
	"log/slog"
	"net/http"
	"net/http/cookiejar"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"

	"leadline/jobs"
	"leadline/render/frame"
)

var discard = slog.New(slog.DiscardHandler)

const testToken = "a-token-of-the-tests.0123456789"

// fake is a queue in memory.
type fake struct {
	mu     sync.Mutex
	prints []jobs.Print
	hands  []jobs.Worker
	tiles  int   // finished ones of every picture
	drawn  int   // pictures made
	err    error // of List
	did    []string
}

func (f *fake) List(context.Context) ([]jobs.Print, error) {
	f.mu.Lock()
	defer f.mu.Unlock()
	return append([]jobs.Print(nil), f.prints...), f.err
}

func (f *fake) Show(_ context.Context, id int64) (*jobs.Print, error) {
	f.mu.Lock()
	defer f.mu.Unlock()
	for _, p := range f.prints {
		if p.ID == id {
			return &p, nil
		}
	}
	return nil, &jobs.NoPrintError{ID: id}
}

func (f *fake) Workers(context.Context) ([]jobs.Worker, error) { return f.hands, nil }

// Thumbnail is ten tiles of ten by ten pixels, side by side.
func (f *fake) Thumbnail(ctx context.Context, id int64) (*image.NRGBA, string, error) {
	if _, err := f.Show(ctx, id); err != nil {
		return nil, "", err
	}
	f.mu.Lock()
	defer f.mu.Unlock()
	f.drawn++
	img := image.NewNRGBA(image.Rect(0, 0, 100, 10))
	for i := range f.tiles * 100 {
		img.SetNRGBA(i/10, i%10, color.NRGBA{200, 100, 50, 255})
	}
	return img, fmt.Sprintf(`mark "%d" & more`, f.tiles), nil
}

func (f *fake) ThumbnailMark(context.Context, int64) (string, error) {
	f.mu.Lock()
	defer f.mu.Unlock()
	return fmt.Sprintf(`mark "%d" & more`, f.tiles), nil
}

func (f *fake) note(what string, id int64) error {
	f.mu.Lock()
	defer f.mu.Unlock()
	f.did = append(f.did, fmt.Sprint(what, " ", id))
	return nil
}

func (f *fake) Pause(_ context.Context, id int64) error  { return f.note("pause", id) }
func (f *fake) Resume(_ context.Context, id int64) error { return f.note("resume", id) }
func (f *fake) Cancel(_ context.Context, id int64) error { return f.note("cancel", id) }
func (f *fake) Again(_ context.Context, id int64) error  { return f.note("again", id) }
func (f *fake) Remove(_ context.Context, id int64) error { return f.note("remove", id) }

// set changes the fake under its lock.
func (f *fake) set(change func()) {
	f.mu.Lock()
	defer f.mu.Unlock()
	change()
}

// deeds are the changes that were asked for since the last call.
func (f *fake) deeds() []string {
	f.mu.Lock()
	defer f.mu.Unlock()
	did := f.did
	f.did = nil
	return did
}

// desk is a real queue in a file, with one print of 48 x 32 pixels in tiles of 16.
func desk(t *testing.T, title string) (*jobs.Queue, int64) {
	t.Helper()
	q, err := jobs.Open(t.Context(), "sqlite:"+filepath.Join(t.TempDir(), "queue.db"), jobs.Options{})
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(q.Close)
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},
		"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},"iteration":{"limit":300},
		"sampling":{"least":1,"most":2},"sheet":{"width":"48px","height":"32px"}}`))
	if err != nil {
		t.Fatal(err)
	}
	f.Title = title
	id, err := q.Add(t.Context(), f, jobs.AddOptions{Out: filepath.Join(t.TempDir(), `<b>&"small".png`), Tile: 16, Audit: 2})
	if err != nil {
		t.Fatal(err)
	}
	return q, id
}

// served is a board that answers.
type served struct {
	t      *testing.T
	at     string // without a path
	client *http.Client
}

// serve runs a board to the end of the test. Its client follows no redirect.
func serve(t *testing.T, q Queue, o Options) *served {
	t.Helper()
	o.Listen = "127.0.0.1:0"
	if o.Token == "" {
		o.Token = testToken
	}
	s, err := Listen(t.Context(), q, o)
	if err != nil {
		t.Fatal(err)
	}
	ctx, stop := context.WithCancel(context.Background())
	ended := make(chan error, 1)
	go func() { ended <- s.Serve(ctx) }()
	t.Cleanup(func() {
		stop()
		if err := <-ended; err != nil {
			t.Error(err)
		}
	})
	return &served{t, strings.TrimSuffix(s.Address(), "/"), &http.Client{
		Timeout:       20 * time.Second,
		Transport:     &http.Transport{DisableKeepAlives: true},
		CheckRedirect: func(*http.Request, []*http.Request) error { return http.ErrUseLastResponse },
	}}
}

// answer is what came back.
type answer struct {
	*http.Response
	body string
}

// ask sends a request with headers, in pairs.
func (s *served) ask(method, path string, headers ...string) answer {
	s.t.Helper()
	r, err := http.NewRequest(method, s.at+path, nil)
	if err != nil {
		s.t.Fatal(err)
	}
	for i := 0; i < len(headers); i += 2 {
		if headers[i] == "Host" {
			r.Host = headers[i+1]
			continue
		}
		r.Header.Set(headers[i], headers[i+1])
	}
	return s.do(r)
}

func (s *served) do(r *http.Request) answer {
	s.t.Helper()
	a, err := s.client.Do(r)
	if err != nil {
		s.t.Fatal(err)
	}
	defer a.Body.Close()
	b, err := io.ReadAll(a.Body)
	if err != nil {
		s.t.Fatal(err)
	}
	return answer{a, string(b)}
}

// in asks with the token.
func (s *served) in(method, path string, headers ...string) answer {
	s.t.Helper()
	return s.ask(method, path, append([]string{"Authorization", "Bearer " + testToken}, headers...)...)
}

// page is an answer that must be good and holds each of the texts.
func (s *served) page(path string, texts ...string) answer {
	s.t.Helper()
	a := s.in("GET", path)
	if a.StatusCode != http.StatusOK {
		s.t.Fatalf("%s: %s\n%s", path, a.Status, a.body)
	}
	for _, text := range texts {
		if !strings.Contains(a.body, text) {
			s.t.Errorf("%s does not hold %q:\n%s", path, text, a.body)
		}
	}
	return a
}

// browser gives the client cookies, and lets it follow redirects.
func (s *served) browser() {
	s.t.Helper()
	jar, err := cookiejar.New(nil)
	if err != nil {
		s.t.Fatal(err)
	}
	s.client.Jar, s.client.CheckRedirect = jar, nil
}

// rendering is a print in the middle.
func rendering(id int64, title string) jobs.Print {
	p := jobs.Print{ID: id, Title: title, Out: "/prints/a.png", State: jobs.Rendering, Priority: 2, Scale: 1, Width: 1000, Height: 100,
		Tiles: 10, Done: 4, Release: "0.1.0", Numerics: 1}
	p.Progress = jobs.Progress{Pixels: 100_000, Pixel: 40_000, Rate: 1_500_000, Workers: 2, Left: 300, LeftLow: 240, LeftHigh: 372}
	return p
}
