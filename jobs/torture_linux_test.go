package jobs

import (
	"image"
	"math/rand/v2"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"

	"leadline/render"
	"leadline/render/frame"
)

// tortureVariable asks for the long form of TestTorture: 400 tiles.
const tortureVariable = "LEADLINE_TORTURE"

// TestTorture makes a print with three workers that are killed, stopped and let
// go on at random, and with PostgreSQL restarted in between. It ends with the
// pixels of render.Print and every tile counted once.
func TestTorture(t *testing.T) {
	if testing.Short() {
		t.Skip("left out by -short: it takes about twenty seconds")
	}
	t.Parallel()
	side, slow := "160px", "40ms"
	if os.Getenv(tortureVariable) != "" {
		side, slow = "320px", "700ms"
	}
	f, err := frame.Parse([]byte(strings.ReplaceAll(`{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},
		"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},"iteration":{"limit":300},
		"sampling":{"least":1,"most":2},"sheet":{"width":"SIDE","height":"SIDE"}}`, "SIDE", side)))
	if err != nil {
		t.Fatal(err)
	}
	want, err := render.Print(t.Context(), f, render.PrintOptions{Out: filepath.Join(t.TempDir(), "want.png")})
	if err != nil {
		t.Fatal(err)
	}
	t.Run("sqlite", func(t *testing.T) {
		t.Parallel()
		d := database{"sqlite", filepath.Join(t.TempDir(), "queue.db")}
		torture(t, d, f, slow, want.SHA256, nil)
		sound(t, d)
	})
	t.Run("postgres", func(t *testing.T) {
		t.Parallel()
		postgres(t) // or skip
		s, err := startServer()
		if err != nil {
			t.Fatal(err)
		}
		d := database{"postgres", s.url("postgres")}
		if err := Migrate(t.Context(), d.where); err != nil {
			t.Fatal(err)
		}
		torture(t, d, f, slow, want.SHA256, s)
	})
}

// torturer keeps three worker processes going, more or less.
type torturer struct {
	t    *testing.T
	d    database
	slow string
	r    *rand.Rand
	all  [3]*process
	held [3]bool // stopped by SIGSTOP
	log  map[string]int
}

// spawn starts worker i; what it says is read away.
func (w *torturer) spawn(i int) {
	p := spawn(w.t, w.d, childQuick+"=1", childSlow+"="+w.slow)
	go func() {
		for p.lines.Scan() {
		}
	}()
	w.all[i], w.held[i] = p, false
}

// step hurts one worker, or the server.
func (w *torturer) step(s *server) {
	i := w.r.IntN(3)
	switch n := w.r.IntN(10); {
	case w.held[i]:
		w.all[i].signal(syscall.SIGCONT)
		w.held[i] = false
		w.log["continued"]++
	case n < 4:
		w.all[i].signal(syscall.SIGKILL)
		w.spawn(i)
		w.log["killed"]++
	case n < 8:
		w.all[i].signal(syscall.SIGSTOP)
		w.held[i] = true
		w.log["stopped"]++
	case s != nil:
		if err := s.stop(); err != nil {
			w.t.Log(err) // its status after a fast shutdown
		}
		if err := s.start(); err != nil {
			w.t.Fatal(err)
		}
		w.log["server restarted"]++
	}
}

// look is Show as soon as the database answers: its restart ends connections.
func (w *torturer) look(q *Queue, id int64) *Print {
	var err error
	for range 100 {
		var p *Print
		if p, err = q.Show(w.t.Context(), id); err == nil {
			return p
		}
		time.Sleep(50 * time.Millisecond)
	}
	w.t.Fatal(err)
	return nil
}

// torture is TestTorture on one engine; s is the server, to be restarted.
func torture(t *testing.T, d database, f *frame.Frame, slow, hash string, s *server) {
	q := d.open(t)
	id, err := q.Add(t.Context(), f, AddOptions{Out: filepath.Join(t.TempDir(), "a.png"), Tile: 16})
	if err != nil {
		t.Fatal(err)
	}
	w := &torturer{t: t, d: d, slow: slow, r: rand.New(rand.NewPCG(3, 400)), log: map[string]int{}}
	for i := range w.all {
		w.spawn(i)
	}
	begun := time.Now()
	var p *Print
	for p = w.look(q, id); p.State != Done; p = w.look(q, id) {
		if p.State == Failed || time.Since(begun) > 10*time.Minute {
			t.Fatalf("%+v\n%s", p, dump(t, q))
		}
		w.step(s)
		time.Sleep(time.Duration(200+w.r.IntN(600)) * time.Millisecond)
	}
	t.Logf("%v: %v; %d attempts at %d tiles, %d rescued", time.Since(begun), w.log, p.Attempts, p.Tiles, p.Rescued)
	tiles := tilesOf(image.Rect(0, 0, p.Width, p.Height), 16).Count()
	if n, pixels := tally(t, q, id); p.SHA256 != hash || n != tiles || pixels != p.Pixels {
		t.Errorf("hash %s, not %s; %d tiles of %d pixels", p.SHA256, hash, n, pixels)
	}
	if w.log["killed"] == 0 || w.log["stopped"] == 0 || p.Rescued == 0 {
		t.Errorf("nothing happened: %v", w.log)
	}
}
