package board

import (
	"net/http"
	"net/url"
	"strings"
	"testing"

	"leadline/jobs"
)

// secrets is a queue whose content no stranger may see.
func secrets() *fake { return &fake{prints: []jobs.Print{rendering(7, "Secret reef")}, tiles: 4} }

// everywhere are paths of every kind.
var everywhere = []string{"/", "/prints.json", "/prints/7", "/prints/7.json", "/prints/7/thumbnail.png", "/prints/7/cancel",
	"/prints/8", "/nowhere", "/river/", "/river/api/jobs", "/river", "/enter", "/?token=", "/?token=" + testToken + "x"}

// TestStrangers sees one page and the same one everywhere, with the challenge
// of RFC 6750, 3.
func TestStrangers(t *testing.T) {
	t.Parallel()
	s := serve(t, secrets(), Options{River: http.NotFoundHandler()})
	first := s.ask("GET", "/")
	if !strings.Contains(first.body, "leadline board") || !strings.Contains(first.body, "asks for its token") {
		t.Fatalf("the refusal does not say what to do:\n%s", first.body)
	}
	for _, path := range everywhere {
		for _, method := range []string{"GET", "POST", "DELETE", "OPTIONS"} {
			a := s.ask(method, path)
			if a.StatusCode != http.StatusUnauthorized || a.body != first.body {
				t.Errorf("%s %s: %s, another page: %v", method, path, a.Status, a.body != first.body)
			}
			if c := a.Header.Get("WWW-Authenticate"); !strings.HasPrefix(c, `Bearer realm="`) {
				t.Errorf("%s %s: challenge %q", method, path, c)
			}
			if len(a.Cookies()) > 0 {
				t.Errorf("%s %s sets a cookie", method, path)
			}
		}
	}
	for _, name := range []string{"board.css", "board.js", "icon.svg"} {
		if a := s.ask("GET", assetPrefix+name); a.StatusCode != http.StatusOK || a.body == "" {
			t.Errorf("%s: %s", name, a.Status)
		}
	}
	if a := s.ask("GET", assetPrefix+"home.html"); a.StatusCode != http.StatusNotFound {
		t.Errorf("a template is given out: %s", a.Status)
	}
}

// TestBearer tries RFC 6750's header: 2.1, and the errors of 3.1. The scheme's
// case is free (RFC 9110, 11.1).
func TestBearer(t *testing.T) {
	t.Parallel()
	s := serve(t, secrets(), Options{})
	for header, want := range map[string]int{
		"Bearer " + testToken:                     200,
		"bearer " + testToken:                     200,
		"Bearer " + testToken + "x":               401,
		"Bearer " + testToken[:len(testToken)-1]:  401,
		"Bearer " + strings.ToUpper(testToken):    401,
		"Bearer":                                  401,
		"Bearer ":                                 401,
		testToken:                                 401,
		"Basic " + testToken:                      401,
		"Bearer " + newPass(testToken).value:      401, // the cookie is no token
		"Bearer " + strings.Repeat("x", 10<<10):   401,
		"Bearer " + testToken + ", Bearer " + "x": 401,
	} {
		a := s.ask("GET", "/", "Authorization", header)
		if a.StatusCode != want {
			t.Errorf("%.60q: %s, not %d", header, a.Status, want)
		}
		wrong := want == 401 && strings.HasPrefix(header, "Bearer ") && len(header) > 8
		if got := strings.Contains(a.Header.Get("WWW-Authenticate"), `error="invalid_token"`); wrong != got {
			t.Errorf("%.60q: challenge %q", header, a.Header.Get("WWW-Authenticate"))
		}
	}
}

// TestCookie exchanges the address' token: attributes by RFC 6265, 4.1.2, and
// SameSite of its revision; the token is in no address afterwards.
func TestCookie(t *testing.T) {
	t.Parallel()
	s := serve(t, secrets(), Options{})
	for path, want := range map[string]string{
		"/?token=" + testToken:                 "/",
		"/?token=" + testToken + "&over=all":   "/?over=all",
		"/prints/7?token=" + testToken:         "/prints/7",
		"//evil.example/x?token=" + testToken:  "/evil.example/x",
		`/\evil.example?token=` + testToken:    "/evil.example",
		"/%2F/evil.example?token=" + testToken: "/evil.example",
	} {
		a := s.ask("GET", path)
		if a.StatusCode != http.StatusSeeOther || a.Header.Get("Location") != want {
			t.Errorf("%s: %s to %q, not %q", path, a.Status, a.Header.Get("Location"), want)
		}
		if len(a.Cookies()) != 1 {
			t.Fatalf("%s: cookies %v", path, a.Cookies())
		}
		c := a.Cookies()[0]
		if !c.HttpOnly || c.SameSite != http.SameSiteStrictMode || c.Path != "/" || c.Domain != "" || c.Secure {
			t.Errorf("the cookie is %s", c)
		}
		if strings.Contains(c.Raw, testToken) {
			t.Error("the cookie tells the token")
		}
	}
	a := s.ask("GET", "/?token="+testToken, "Sec-Fetch-Site", "cross-site")
	if a.StatusCode != http.StatusOK || !strings.Contains(a.body, `content="0; url=/"`) || len(a.Cookies()) != 1 {
		t.Errorf("from another site: %s\n%s", a.Status, a.body)
	}
	if a := s.ask("POST", "/prints/7/pause?token="+testToken); a.StatusCode != http.StatusUnauthorized {
		t.Errorf("a token in the address changes something: %s", a.Status)
	}
	s.browser()
	a = s.ask("GET", "/?token="+testToken)
	if a.StatusCode != http.StatusOK || a.Request.URL.String() != s.at+"/" || !strings.Contains(a.body, "Secret reef") {
		t.Errorf("a browser ends at %s: %s", a.Request.URL, a.Status)
	}
	if a := s.ask("GET", "/prints/7"); a.StatusCode != http.StatusOK {
		t.Errorf("the cookie does not last: %s", a.Status)
	}
	if a := s.ask("GET", "/", "Authorization", "Bearer wrong"); a.StatusCode != http.StatusUnauthorized {
		t.Errorf("a wrong token beside a good cookie: %s", a.Status)
	}
}

// TestCookieOfOthers tries cookies that no token gave.
func TestCookieOfOthers(t *testing.T) {
	t.Parallel()
	s := serve(t, secrets(), Options{})
	u, err := url.Parse(s.at)
	if err != nil {
		t.Fatal(err)
	}
	name, good := "leadline-"+u.Port()+"=", newPass(testToken).value
	for cookie, want := range map[string]int{
		name + good:                         200,
		name + "x; " + name + good:          200, // another path's or an older one beside it
		name + good + "x":                   401,
		name + testToken:                    401,
		name:                                401,
		"leadline-1=" + good:                401,
		name + newPass("another one").value: 401,
	} {
		if a := s.ask("GET", "/", "Cookie", cookie); a.StatusCode != want {
			t.Errorf("%s: %s, not %d", cookie, a.Status, want)
		}
	}
}

// TestForm gives the token by the refusal's form.
func TestForm(t *testing.T) {
	t.Parallel()
	s := serve(t, secrets(), Options{})
	for token, want := range map[string]int{testToken: 303, " " + testToken + "\n": 303, "": 401, "wrong": 401, strings.Repeat("x", 1<<16): 401} {
		r, err := http.NewRequest("POST", s.at+enterPath, strings.NewReader(url.Values{"token": {token}}.Encode()))
		if err != nil {
			t.Fatal(err)
		}
		r.Header.Set("Content-Type", "application/x-www-form-urlencoded")
		a := s.do(r)
		if a.StatusCode != want || (want == 303) != (len(a.Cookies()) == 1) {
			t.Errorf("%.40q: %s, cookies %v", token, a.Status, a.Cookies())
		}
	}
}

// TestHost refuses names that are not this machine's: DNS rebinding makes a
// browser send the other site's. Misdirected Request: RFC 9110, 15.5.20.
func TestHost(t *testing.T) {
	t.Parallel()
	s := serve(t, secrets(), Options{})
	for host, want := range map[string]int{
		"localhost": 200, "LOCALHOST:5323": 200, "127.0.0.1": 200, "127.0.0.1:9": 200, "127.8.8.8:80": 200, "[::1]:5323": 200, "[::1]": 200,
		"evil.example": 421, "localhost.evil.example": 421, "127.0.0.1.evil.example:80": 421, "192.0.2.1": 421, "0.0.0.0": 421,
		"[::]:80": 421, "evil.example:127.0.0.1": 421,
	} {
		a := s.in("GET", "/", "Host", host)
		if a.StatusCode != want {
			t.Errorf("%s: %s, not %d", host, a.Status, want)
		}
		if want == 421 && strings.Contains(a.body, "Secret") {
			t.Errorf("%s sees the prints", host)
		}
	}
}

// TestCrossOrigin refuses changes that another site's page asks for, by Fetch
// Metadata and by Origin (common practice: OWASP, Cross-Site Request Forgery
// Prevention Cheat Sheet).
func TestCrossOrigin(t *testing.T) {
	t.Parallel()
	f := secrets()
	s := serve(t, f, Options{River: http.HandlerFunc(func(http.ResponseWriter, *http.Request) { f.note("river", 0) })})
	for _, c := range []struct {
		header, value string
		want          int
	}{
		{"Sec-Fetch-Site", "cross-site", 403}, {"Sec-Fetch-Site", "same-site", 403},
		{"Origin", "https://evil.example", 403}, {"Origin", "null", 403}, {"Origin", "http://localhost:1", 403},
		{"Sec-Fetch-Site", "same-origin", 303}, {"Sec-Fetch-Site", "none", 303}, {"Origin", s.at, 303},
	} {
		a := s.in("POST", "/prints/7/pause", c.header, c.value)
		if did := f.deeds(); a.StatusCode != c.want || (len(did) == 1) != (c.want == 303) {
			t.Errorf("%s %s: %s, did %v", c.header, c.value, a.Status, did)
		}
		if c.want == 403 {
			s.in("PUT", "/river/api/queues/x/pause", c.header, c.value)
			s.ask("POST", enterPath, c.header, c.value)
			if did := f.deeds(); len(did) > 0 {
				t.Errorf("%s %s reaches River's page", c.header, c.value)
			}
		}
	}
	a := s.in("GET", "/prints/7/pause")
	if did := f.deeds(); a.StatusCode != http.StatusNotFound || len(did) > 0 {
		t.Errorf("reading changes something: %s, %v", a.Status, did)
	}
	s.in("PUT", "/river/api/queues/x/pause", "Sec-Fetch-Site", "same-origin")
	if did := f.deeds(); len(did) != 1 {
		t.Errorf("River's own page changes nothing: %v", did)
	}
}

// TestHeaders looks for the headers of common practice (OWASP, HTTP Security
// Response Headers Cheat Sheet) on every kind of answer.
func TestHeaders(t *testing.T) {
	t.Parallel()
	s := serve(t, secrets(), Options{River: http.NotFoundHandler()})
	check := func(what string, a answer) {
		t.Helper()
		for name, want := range map[string]string{"X-Content-Type-Options": "nosniff", "Referrer-Policy": "same-origin",
			"X-Frame-Options": "DENY", "Cross-Origin-Opener-Policy": "same-origin", "Cross-Origin-Resource-Policy": "same-origin"} {
			if got := a.Header.Get(name); got != want {
				t.Errorf("%s: %s is %q", what, name, got)
			}
		}
		csp := a.Header.Get("Content-Security-Policy")
		for _, want := range []string{"default-src 'none'", "script-src 'self';", "frame-ancestors 'none'", "base-uri 'none'"} {
			if !strings.Contains(csp, want) {
				t.Errorf("%s: policy %q lacks %q", what, csp, want)
			}
		}
		river := strings.HasPrefix(a.Request.URL.Path, "/river") && a.StatusCode != 401
		if strings.Contains(csp, "unsafe-eval") || strings.Contains(csp, "http") || strings.Contains(csp, "unsafe-inline") != river {
			t.Errorf("%s: policy %q", what, csp)
		}
		if c := a.Header.Get("Cache-Control"); c == "" || strings.Contains(c, "public") {
			t.Errorf("%s: Cache-Control %q", what, c)
		}
	}
	for _, path := range everywhere {
		check(path, s.ask("GET", path))
		check(path, s.in("GET", path))
	}
	check("style", s.ask("GET", "/board/board.css"))
	check("host", s.ask("GET", "/", "Host", "evil.example"))
	check("cross", s.in("POST", "/prints/7/pause", "Sec-Fetch-Site", "cross-site"))
	check("onward", s.ask("GET", "/?token="+testToken))
}
