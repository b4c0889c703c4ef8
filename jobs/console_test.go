package jobs_test

import (
	"context"
	"encoding/json"
	"io"
	"net/http"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"leadline/jobs"
	"leadline/jobs/board"
	"leadline/render/frame"
)

const consoleToken = "a-token-of-the-tests.0123456789"

// TestConsole asks River's page, mounted on a board as the command does it, on
// each engine: strangers are refused, the token shows the jobs, and a job that
// is cancelled there does not cost the print.
func TestConsole(t *testing.T) {
	t.Parallel()
	jobs.EachEngine(t, func(t *testing.T, where string) {
		q, err := jobs.Open(t.Context(), where, jobs.Options{})
		if err != nil {
			t.Fatal(err)
		}
		t.Cleanup(q.Close)
		id := addConsole(t, q)
		at := serveConsole(t, q)
		consolePage(t, at)
		all := consoleJobs(t, at, "available")
		if len(all) != 1 || all[0].Kind != "leadline_plan" {
			t.Fatalf("the jobs are %+v", all)
		}
		body := `{"ids":["` + all[0].ID.String() + `"]}`
		if code, text, _ := console(t, "POST", at+"/river/api/jobs/cancel", consoleToken, body); code != http.StatusOK {
			t.Fatalf("cancelling a job: %d, %s", code, text)
		}
		if all := consoleJobs(t, at, "available"); len(all) != 0 {
			t.Errorf("the job is still there: %+v", all)
		}
		work, stop := context.WithTimeout(t.Context(), 25*time.Second)
		defer stop()
		if err := q.Work(work, jobs.WorkOptions{Slots: 1, Drain: true}); err != nil {
			t.Fatal(err)
		}
		if p, err := q.Show(t.Context(), id); err != nil || p.State != jobs.Done {
			t.Errorf("the print is %+v, %v", p, err)
		}
		if all := consoleJobs(t, at, "completed"); len(all) != 8 {
			t.Errorf("%d jobs completed, not the plan, six tiles and the assembly", len(all))
		}
		if code, text, _ := console(t, "GET", at+"/", consoleToken, ""); code != http.StatusOK || !strings.Contains(text, "Console reef") {
			t.Errorf("the board itself: %d", code)
		}
	})
}

// consolePage looks at the page and its script, as a stranger and with the token.
func consolePage(t *testing.T, at string) {
	t.Helper()
	for _, path := range []string{"/river", "/river/", "/river/jobs", "/river/api/jobs?state=available", "/river/api/queues", "/river/favicon.ico"} {
		if code, _, _ := console(t, "GET", at+path, "", ""); code != http.StatusUnauthorized {
			t.Errorf("a stranger gets %d for %s", code, path)
		}
	}
	code, page, h := console(t, "GET", at+"/river/", consoleToken, "")
	if code != http.StatusOK || !strings.Contains(page, `"/river/api"`) || !strings.Contains(page, `src="/river/assets/`) {
		t.Errorf("%d, %v:\n%s", code, h, page)
	}
	_, rest, _ := strings.Cut(page, `src="`)
	script, _, _ := strings.Cut(rest, `"`)
	if code, _, h := console(t, "GET", at+script, consoleToken, ""); code != http.StatusOK || !strings.Contains(h.Get("Content-Type"), "javascript") {
		t.Errorf("its script %s: %d, %s", script, code, h.Get("Content-Type"))
	}
}

// consoleJob is a job as River's page lists it.
type consoleJob struct {
	ID          json.Number
	Kind, State string
}

// consoleJobs lists the jobs of a state.
func consoleJobs(t *testing.T, at, state string) []consoleJob {
	t.Helper()
	var list struct{ Data []consoleJob }
	code, body, _ := console(t, "GET", at+"/river/api/jobs?state="+state, consoleToken, "")
	if err := json.Unmarshal([]byte(body), &list); code != http.StatusOK || err != nil {
		t.Fatalf("%d, %v: %s", code, err, body)
	}
	for _, j := range list.Data {
		if j.State != state {
			t.Errorf("asked for %s: %+v", state, j)
		}
	}
	return list.Data
}

// addConsole queues a print of six tiles.
func addConsole(t *testing.T, q *jobs.Queue) int64 {
	t.Helper()
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","title":"Console reef","set":{"kind":"mandelbrot"},
		"view":{"centre":{"re":"-0.6","im":"0"},"height":"2.6"},"iteration":{"limit":300},
		"sampling":{"least":1,"most":2},"sheet":{"width":"48px","height":"32px"}}`))
	if err != nil {
		t.Fatal(err)
	}
	id, err := q.Add(t.Context(), f, jobs.AddOptions{Out: filepath.Join(t.TempDir(), "a.png"), Tile: 16})
	if err != nil {
		t.Fatal(err)
	}
	return id
}

// serveConsole runs a board with River's page to the end of the test.
func serveConsole(t *testing.T, q *jobs.Queue) (at string) {
	t.Helper()
	ctx, stop := context.WithCancel(context.Background())
	c, err := q.Console(board.RiverPrefix, nil)
	if err != nil {
		t.Fatal(err)
	}
	if err := c.Start(ctx); err != nil {
		t.Fatal(err)
	}
	s, err := board.Listen(ctx, q, board.Options{Listen: "127.0.0.1:0", Token: consoleToken, River: c})
	if err != nil {
		t.Fatal(err)
	}
	ended := make(chan error, 1)
	go func() { ended <- s.Serve(ctx) }()
	t.Cleanup(func() {
		stop()
		if err := <-ended; err != nil {
			t.Error(err)
		}
	})
	return strings.TrimSuffix(s.Address(), "/")
}

// console asks with a token, or without one, and sends JSON.
func console(t *testing.T, method, url, token, send string) (code int, body string, h http.Header) {
	t.Helper()
	r, err := http.NewRequest(method, url, strings.NewReader(send))
	if err != nil {
		t.Fatal(err)
	}
	if token != "" {
		r.Header.Set("Authorization", "Bearer "+token)
	}
	r.Header.Set("Content-Type", "application/json")
	a, err := http.DefaultClient.Do(r)
	if err != nil {
		t.Fatal(err)
	}
	defer a.Body.Close()
	b, err := io.ReadAll(a.Body)
	if err != nil {
		t.Fatal(err)
	}
	return a.StatusCode, string(b), a.Header
}
