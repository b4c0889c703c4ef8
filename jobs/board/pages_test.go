package board

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"image"
	"image/png"
	"net/http"
	"slices"
	"strings"
	"testing"
	"time"

	"leadline/jobs"
)

// TestHome shows everything of a print that is under way.
func TestHome(t *testing.T) {
	t.Parallel()
	failed := rendering(8, "")
	failed.State, failed.Reason, failed.Hint, failed.Out = jobs.Failed, "the disk is full", "make room", "/prints/wreck.png"
	idle := rendering(9, "Idle")
	idle.Progress.Workers = 0
	f := &fake{prints: []jobs.Print{rendering(7, "Reef"), failed, idle}, tiles: 4, hands: []jobs.Worker{
		{Name: "tower/12", Slots: 2, Running: 1, Rate: 2_500_000, Tiles: 12, Holding: []string{"tile 5 of print 7"}, Seen: time.Now()}}}
	s := serve(t, f, Options{})
	s.page("/", "Reef", "rendering", "40.0 %", "4 of 10 tiles", "1.5 Mpx/s", "5 min left, between 4.0 and 6.2 min",
		"wreck.png", "failed", "the disk is full", "make room",
		"No worker of release 0.1.0 with numerics 1 is there.",
		"tower/12", "1 of 2 slots busy", "2.5 Mpx/s", "12 tiles in the last minute", "tile 5 of print 7",
		"2 prints under way · 1 over · 1 worker · 2.5 Mpx/s", `aria-valuenow="40"`, `<noscript><meta http-equiv="refresh"`,
		"<title>40.0 % Reef – leadline board</title>")
	if a := s.page("/"); strings.Contains(a.body, "/river/") {
		t.Error("names River's page where there is none")
	}
	empty := serve(t, &fake{}, Options{River: http.NotFoundHandler()})
	empty.page("/", "The queue is empty.", "leadline queue add", "Nobody works", "leadline work", `href="/river/"`)
}

// TestPrintPage has every fact that the command's show has.
func TestPrintPage(t *testing.T) {
	t.Parallel()
	p := rendering(7, "Reef")
	p.State, p.Done, p.Attempts, p.Rescued, p.Scale, p.Numerics = jobs.Done, 10, 1234, 3, 8, 5
	p.Added, p.Ended = time.Date(2031, 2, 3, 4, 5, 6, 0, time.UTC), time.Date(2031, 2, 4, 4, 5, 6, 0, time.UTC)
	p.File, p.Sidecar, p.SHA256, p.Bytes = "/prints/a.png", "/prints/a.sidecar.json", strings.Repeat("ab", 32), 123_456_789
	s := serve(t, &fake{prints: []jobs.Print{p}, tiles: 10}, Options{})
	s.page("/prints/7", "Reef", "done", "/prints/a.png", "1,000 × 100 px at 1/8", "2 (1 is first", "10 of 10 tiles",
		"1,234 begun, 3 taken over", "0.1.0, numerics 5", when(p.Added), when(p.Ended), "a.sidecar.json", p.SHA256, "123 MB")
}

// hostile are titles that would run or break out as HTML, attributes, scripts,
// styles or addresses (common practice: OWASP, Cross Site Scripting Prevention
// Cheat Sheet).
var hostile = []string{"<script>alert(1)</script>", `"onload=alert(1) x="`, `'><img src=x onerror=alert(1)>`, "</title><script>alert(1)</script>",
	"javascript:alert(1)", "{{.ID}}", "&lt;b&gt;", "</svg><svg onload=alert(1)>"}

// TestHostileTitle puts each title through every page.
func TestHostileTitle(t *testing.T) {
	t.Parallel()
	for i, title := range hostile {
		p := rendering(7, title)
		p.State, p.Reason, p.Hint, p.Out, p.File = jobs.Failed, title, title, "/x/"+title, title
		f := &fake{prints: []jobs.Print{p, rendering(8, title)}, tiles: 1, hands: []jobs.Worker{{Name: title, Holding: []string{title}, Release: title}}}
		s := serve(t, f, Options{})
		for _, path := range []string{"/", "/prints/7", "/prints/7/remove"} {
			a := s.page(path)
			for _, bad := range []string{"<script>alert", "<img src=x", "<svg onload", `"onload`, `"/x/"`, "<b>"} {
				if strings.Contains(a.body, bad) {
					t.Errorf("title %d breaks out of %s as %s", i, path, bad)
				}
			}
			if !strings.Contains(a.body, "&") && !strings.Contains(a.body, "alert(1)") && !strings.Contains(a.body, "{{") {
				t.Errorf("title %d is not shown on %s", i, path)
			}
		}
		var v sight
		if a := s.page("/prints.json"); json.Unmarshal([]byte(a.body), &v) != nil || v.Prints[0].Title != title || a.Header.Get("Content-Type") != "application/json" {
			t.Errorf("title %d: JSON %s", i, a.body)
		}
	}
}

// TestRealTitle takes a hostile title the whole way through a real queue.
func TestRealTitle(t *testing.T) {
	t.Parallel()
	q, id := desk(t, `<script>alert(1)</script> "onload=`)
	s := serve(t, q, Options{})
	for _, path := range []string{"/", fmt.Sprintf("/prints/%d", id), fmt.Sprintf("/prints/%d/cancel", id)} {
		a := s.page(path, "&lt;script&gt;alert(1)&lt;/script&gt; &#34;onload=")
		if strings.Contains(a.body, "<script>alert") || strings.Contains(a.body, `"onload`) || strings.Contains(a.body, "<b>") {
			t.Errorf("%s:\n%s", path, a.body)
		}
	}
}

// TestJSON gives the queue's own forms.
func TestJSON(t *testing.T) {
	t.Parallel()
	f := &fake{prints: []jobs.Print{rendering(7, "Reef")}, hands: []jobs.Worker{{Name: "tower", Holding: []string{"tile 5"}}}}
	s := serve(t, f, Options{})
	var all sight
	if err := json.Unmarshal([]byte(s.page("/prints.json").body), &all); err != nil || len(all.Prints) != 1 || len(all.Workers) != 1 ||
		all.Prints[0].Title != "Reef" || all.Prints[0].Left != 300 || all.Workers[0].Holding[0] != "tile 5" {
		t.Errorf("%+v, %v", all, err)
	}
	var p jobs.Print
	if err := json.Unmarshal([]byte(s.page("/prints/7.json").body), &p); err != nil || p.ID != 7 || p.Rate != 1_500_000 {
		t.Errorf("%+v, %v", p, err)
	}
	if a := s.in("GET", "/prints/8.json"); a.StatusCode != http.StatusNotFound || !strings.Contains(a.body, `{"error":"the queue holds no print 8","hint":`) {
		t.Errorf("%s: %s", a.Status, a.body)
	}
	if a := serve(t, &fake{}, Options{}).page("/prints.json"); strings.TrimSpace(a.body) != `{"prints":[],"workers":[]}` {
		t.Errorf("an empty queue: %s", a.body)
	}
}

// opaque counts the opaque pixels of a PNG.
func opaque(t *testing.T, body string) (n int, size image.Point) {
	t.Helper()
	img, err := png.Decode(bytes.NewReader([]byte(body)))
	if err != nil {
		t.Fatal(err)
	}
	b := img.Bounds()
	for y := b.Min.Y; y < b.Max.Y; y++ {
		for x := b.Min.X; x < b.Max.X; x++ {
			if _, _, _, a := img.At(x, y).RGBA(); a == 0xffff {
				n++
			}
		}
	}
	return n, b.Size()
}

// TestThumbnail grows, and is sent and made only when it has: conditional
// requests by RFC 9110, 13.1.2.
func TestThumbnail(t *testing.T) {
	t.Parallel()
	f := secrets()
	s := serve(t, f, Options{})
	const path = "/prints/7/thumbnail.png"
	first := s.page(path)
	if n, _ := opaque(t, first.body); n != 400 || first.Header.Get("Content-Type") != "image/png" {
		t.Errorf("%d opaque pixels of %s", n, first.Header.Get("Content-Type"))
	}
	etag := first.Header.Get("ETag")
	same := s.in("GET", path, "If-None-Match", etag)
	if same.StatusCode != http.StatusNotModified || same.body != "" || same.Header.Get("ETag") != etag {
		t.Errorf("unchanged: %s, %q", same.Status, same.Header.Get("ETag"))
	}
	if f.set(func() { f.tiles = 9 }); f.drawn != 1 {
		t.Errorf("made %d times", f.drawn)
	}
	later := s.in("GET", path, "If-None-Match", etag)
	if n, _ := opaque(t, later.body); later.StatusCode != http.StatusOK || n != 900 || later.Header.Get("ETag") == etag {
		t.Errorf("grown: %s, %d opaque pixels, %s", later.Status, n, later.Header.Get("ETag"))
	}
	if a := s.in("GET", "/prints/8/thumbnail.png"); a.StatusCode != http.StatusNotFound {
		t.Errorf("of no print: %s", a.Status)
	}
	s.page("/", `src="/prints/7/thumbnail.png?mark=mark&#43;%229%22&#43;%26&#43;more"`)
}

// TestThumbCache holds no more than it may.
func TestThumbCache(t *testing.T) {
	t.Parallel()
	f := &fake{}
	for i := range int64(3 * mostThumbs) {
		f.prints = append(f.prints, rendering(i+1, ""))
	}
	c := newThumbs(f)
	for i := range f.prints {
		if _, err := c.get(t.Context(), f.prints[i].ID, "x"); err != nil {
			t.Fatal(err)
		}
		if _, err := c.get(t.Context(), 1, "mark \"0\" & more"); err != nil { // asked for again and again
			t.Fatal(err)
		}
	}
	if len(c.kept) != mostThumbs || c.kept[1] == nil || c.kept[int64(len(f.prints))] == nil || f.drawn != len(f.prints) {
		t.Errorf("%d kept, %d made", len(c.kept), f.drawn)
	}
}

// TestActions offers what a print's state allows, and asks before the grave.
func TestActions(t *testing.T) {
	t.Parallel()
	for state, want := range map[string][]string{"rendering": {"pause", "cancel"}, "queued": {"pause", "cancel"}, "paused": {"resume", "cancel"},
		"done": {"remove"}, "failed": {"again", "remove"}, "cancelled": {"again", "remove"}} {
		p := rendering(7, "Reef")
		if p.State = jobs.State(state); state == "paused" {
			p.State, p.Paused = jobs.Rendering, true
		}
		f := &fake{prints: []jobs.Print{p}}
		s := serve(t, f, Options{})
		a := s.page("/prints/7", state)
		for _, name := range []string{"pause", "resume", "cancel", "again", "remove"} {
			form := strings.Contains(a.body, `<form method="post" action="/prints/7/`+name+`">`)
			link := strings.Contains(a.body, `href="/prints/7/`+name+`"`)
			if (form || link) != slices.Contains(want, name) || link != (slices.Contains(want, name) && (name == "cancel" || name == "remove")) {
				t.Errorf("%s: %s as form %v, as question %v", state, name, form, link)
			}
		}
	}
	f := &fake{prints: []jobs.Print{rendering(7, "Reef")}}
	s := serve(t, f, Options{})
	s.page("/prints/7/cancel", `<form method="post" action="/prints/7/cancel">`, "Finished tiles are kept", `href="/prints/7"`)
	s.page("/prints/7/remove", `<form method="post" action="/prints/7/remove">`)
	if did := f.deeds(); len(did) > 0 {
		t.Errorf("a question does %v", did)
	}
	for name, to := range map[string]string{"pause": "/prints/7", "resume": "/prints/7", "cancel": "/prints/7", "again": "/prints/7", "remove": "/"} {
		a := s.in("POST", "/prints/7/"+name)
		if did := f.deeds(); a.StatusCode != http.StatusSeeOther || a.Header.Get("Location") != to || len(did) != 1 || did[0] != name+" 7" {
			t.Errorf("%s: %s to %s, did %v", name, a.Status, a.Header.Get("Location"), did)
		}
	}
	for _, path := range []string{"/prints/7/burn", "/prints/x/pause", "/prints/-1/pause", "/prints/0/pause", "/prints/99999999999999999999/pause"} {
		if a := s.in("POST", path); a.StatusCode != http.StatusNotFound || len(f.deeds()) > 0 {
			t.Errorf("%s: %s", path, a.Status)
		}
	}
}

// post asks for a change of a print, which must answer with a code.
func (s *served) post(path string, code int) answer {
	s.t.Helper()
	a := s.in("POST", path)
	if a.StatusCode != code {
		s.t.Fatalf("%s: %s\n%s", path, a.Status, a.body)
	}
	return a
}

// only is the one print of the board's JSON; an empty one where there is none.
func (s *served) only() (p jobs.Print) {
	s.t.Helper()
	var v sight
	if err := json.Unmarshal([]byte(s.page("/prints.json").body), &v); err != nil {
		s.t.Fatal(err)
	}
	if len(v.Prints) > 0 {
		p = v.Prints[0]
	}
	return p
}

// TestRealActions changes a real print and sees each change at once.
func TestRealActions(t *testing.T) {
	t.Parallel()
	q, id := desk(t, "Reef")
	s := serve(t, q, Options{})
	page := fmt.Sprintf("/prints/%d", id)
	if p := s.only(); p.State != jobs.Queued || p.Paused {
		t.Fatalf("begins as %+v", p)
	}
	for _, c := range []struct {
		name   string
		code   int
		state  jobs.State
		paused bool
	}{
		{"pause", 303, jobs.Queued, true}, {"resume", 303, jobs.Queued, false},
		{"again", http.StatusConflict, jobs.Queued, false}, {"remove", http.StatusConflict, jobs.Queued, false},
		{"cancel", 303, jobs.Cancelled, false}, {"again", 303, jobs.Queued, false}, {"cancel", 303, jobs.Cancelled, false},
	} {
		s.post(page+"/"+c.name, c.code)
		if p := s.only(); p.State != c.state || p.Paused != c.paused {
			t.Errorf("after %s: %+v", c.name, p)
		}
	}
	a := s.post(page+"/pause", http.StatusConflict)
	if !strings.Contains(a.body, "cannot be paused") || !strings.Contains(a.body, "only a print that is still") {
		t.Errorf("no reason or no cure:\n%s", a.body)
	}
	s.post(page+"/remove", 303)
	if p := s.only(); p.ID != 0 {
		t.Errorf("removed: %+v", p)
	}
	if a := s.in("GET", page); a.StatusCode != http.StatusNotFound {
		t.Errorf("a removed print: %s", a.Status)
	}
}

// TestRealPicture follows a real print from the empty sheet to the whole.
func TestRealPicture(t *testing.T) {
	t.Parallel()
	q, id := desk(t, "Reef")
	s := serve(t, q, Options{})
	page := fmt.Sprintf("/prints/%d", id)
	blank := s.page(page + "/thumbnail.png")
	if n, size := opaque(t, blank.body); n != 0 || size != image.Pt(48, 32) {
		t.Errorf("before the work %d pixels of %v are opaque", n, size)
	}
	if err := q.Work(t.Context(), jobs.WorkOptions{Slots: 1, Drain: true}); err != nil {
		t.Fatal(err)
	}
	s.page(page, "done", "6 of 6 tiles", ".sidecar.json")
	whole := s.in("GET", page+"/thumbnail.png", "If-None-Match", blank.Header.Get("ETag"))
	if n, _ := opaque(t, whole.body); whole.StatusCode != http.StatusOK || n != 48*32 {
		t.Errorf("afterwards %s, %d pixels are opaque", whole.Status, n)
	}
	if a := s.in("GET", page+"/thumbnail.png", "If-None-Match", whole.Header.Get("ETag")); a.StatusCode != http.StatusNotModified {
		t.Errorf("the same again: %s", a.Status)
	}
}

// TestOver lists the latest finished prints, and all when asked.
func TestOver(t *testing.T) {
	t.Parallel()
	f := &fake{}
	for i := range int64(30) {
		p := rendering(i+1, fmt.Sprintf("Title%02d", i+1))
		p.State, p.Ended = jobs.Done, time.Unix(1e9+i, 0)
		f.prints = append(f.prints, p)
	}
	s := serve(t, f, Options{})
	a := s.page("/", "Title30", "Title19", "18 earlier", "30 over")
	if strings.Contains(a.body, "Title18") || strings.Index(a.body, "Title30") > strings.Index(a.body, "Title29") {
		t.Error("not the latest, or not in order")
	}
	if a := s.page("/?over=all", "Title01", "Title30"); strings.Contains(a.body, "earlier") {
		t.Error("not all")
	}
}

// TestTrouble says what is wrong with the queue, on the page and in JSON.
func TestTrouble(t *testing.T) {
	t.Parallel()
	s := serve(t, &fake{err: fmt.Errorf("looking: %w", &jobs.StateError{What: "the tide is out", Cure: "wait"})}, Options{})
	for _, path := range []string{"/", "/prints.json"} {
		if a := s.in("GET", path); a.StatusCode != http.StatusConflict || !strings.Contains(a.body, "the tide is out") || !strings.Contains(a.body, "wait") {
			t.Errorf("%s: %s\n%s", path, a.Status, a.body)
		}
	}
	s = serve(t, &fake{err: errors.New("the disk fell off")}, Options{})
	if a := s.in("GET", "/"); a.StatusCode != http.StatusInternalServerError || !strings.Contains(a.body, "the disk fell off") {
		t.Errorf("%s\n%s", a.Status, a.body)
	}
}
