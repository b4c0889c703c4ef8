package jobs

import (
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"leadline/render"
	"leadline/render/frame"
)

// square is a frame of 100 tiles of 16 pixels, and what render.Print makes of
// it.
func square(t testing.TB) (*frame.Frame, *render.Result) {
	t.Helper()
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},
		"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},"iteration":{"limit":300},
		"sampling":{"least":1,"most":2},"sheet":{"width":"160px","height":"160px"}}`))
	if err != nil {
		t.Fatal(err)
	}
	r, err := render.Print(t.Context(), f, render.PrintOptions{Out: filepath.Join(t.TempDir(), "want.png")})
	if err != nil {
		t.Fatal(err)
	}
	return f, r
}

// once checks that a print of square is render's, every tile counted once.
func once(t *testing.T, q *Queue, p *Print, want *render.Result) {
	t.Helper()
	if n, pixels := tally(t, q, p.ID); p.SHA256 != want.SHA256 || n != p.Tiles || pixels != p.Pixels {
		t.Errorf("hash %s, not %s; %d of %d tiles of %d pixels", p.SHA256, want.SHA256, n, p.Tiles, pixels)
	}
}

// TestDatabaseAway has three workers whose database is away for a while, a
// minute in the long form, and a fourth that starts meanwhile. They go on by
// themselves, and only what was in hand may have to be rendered again.
func TestDatabaseAway(t *testing.T) {
	if testing.Short() {
		t.Skip("left out by -short: it starts a server of its own")
	}
	postgres(t) // or skip
	t.Parallel()
	away := 5 * time.Second
	if os.Getenv(tortureVariable) != "" {
		away = 65 * time.Second
	}
	f, want := square(t)
	s, err := startServer()
	if err != nil {
		t.Fatal(err)
	}
	d := database{"postgres", s.url("postgres")}
	if err := Migrate(t.Context(), d.where); err != nil {
		t.Fatal(err)
	}
	q, late := d.open(t), d.open(t)
	id, err := q.Add(t.Context(), f, AddOptions{Out: filepath.Join(t.TempDir(), "a.png"), Tile: 16})
	if err != nil {
		t.Fatal(err)
	}
	slow := WorkOptions{Slots: 2, before: func(ctx context.Context, _ ticket) {
		select {
		case <-time.After(60 * time.Millisecond):
		case <-ctx.Done():
		}
	}}
	for range 3 {
		start(t, d.open(t), slow)
	}
	until(t, q, id, "begun", func(p *Print) bool { return p.Done > 20 })
	if err := s.stop(); err != nil {
		t.Log(err) // its exit status after a fast shutdown
	}
	start(t, late, slow)
	if _, err := Open(t.Context(), d.where, Options{}); err == nil || !strings.Contains(err.Error(), "refused") || !strings.Contains(hintOf(err), "server runs") {
		t.Errorf("opening it: %v, hint %q", err, hintOf(err))
	}
	time.Sleep(away)
	if err := s.start(); err != nil {
		t.Fatal(err)
	}
	back := time.Now()
	p := until(t, q, id, "done", inState(Done))
	t.Logf("done %v after the server was back; %d attempts", time.Since(back), p.Attempts)
	once(t, q, p, want)
	if most := int64(p.Tiles + 2 + 2*8); p.Rescued != 0 || p.Attempts > most {
		t.Errorf("%d rescued, %d attempts of at most %d", p.Rescued, p.Attempts, most)
	}
}
