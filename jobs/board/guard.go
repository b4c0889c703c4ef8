package board

import (
	"net"
	"net/http"
	"net/netip"
	"net/url"
	"strings"
)

const (
	tokenField  = "token"   // in the address and in the form
	assetPrefix = "/board/" // style, script and icon: open to all who reach the board
	enterPath   = "/enter"  // takes the form's token
	ownPolicy   = "default-src 'none'; img-src 'self'; style-src 'self'; script-src 'self'; connect-src 'self'; form-action 'self'; base-uri 'none'; frame-ancestors 'none'"
	realm       = `Bearer realm="leadline board"`
	wrongToken  = realm + `, error="invalid_token"` // RFC 6750, 3.1
	mostForm    = 4 << 10                           // bytes of a form
)

// guard stands before every page: who does not know the token sees one page
// that says so, and a page of another site can do nothing here.
type guard struct {
	pass   *pass
	local  bool // listens on loopback
	secure bool // TLS
	port   string
	cross  http.CrossOriginProtection
}

// around puts the guard before h.
func (g *guard) around(h http.Handler) http.Handler {
	g.cross.SetDenyHandler(http.HandlerFunc(func(w http.ResponseWriter, _ *http.Request) {
		refuse(w, http.StatusForbidden, "Not from here", "Another site asked for this change.", "Make it on the board itself.")
	}))
	guarded := g.cross.Handler(http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) { g.serve(w, r, h) }))
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		harden(w.Header())
		if g.local && !localHost(r.Host) {
			refuse(w, http.StatusMisdirectedRequest, "Not this address",
				"The board answers to localhost and to loopback addresses alone.", "Open the address that leadline board printed.")
			return
		}
		r.Body = http.MaxBytesReader(w, r.Body, 1<<20)
		guarded.ServeHTTP(w, r)
	})
}

// harden sets what every answer carries.
func harden(h http.Header) {
	h.Set("Content-Security-Policy", ownPolicy)
	h.Set("X-Content-Type-Options", "nosniff")
	h.Set("X-Frame-Options", "DENY") // frame-ancestors, for browsers before it
	h.Set("Referrer-Policy", "same-origin")
	h.Set("Cross-Origin-Opener-Policy", "same-origin")
	h.Set("Cross-Origin-Resource-Policy", "same-origin")
	h.Set("Cache-Control", "no-store")
}

// localHost says whether a Host header names this machine by loopback. A site
// whose name was pointed here (DNS rebinding) sends its own name. The port is
// free: tunnels change it.
func localHost(host string) bool {
	name, _, err := net.SplitHostPort(host)
	if err != nil {
		name = strings.Trim(host, "[]") // without a port
	}
	if strings.EqualFold(name, "localhost") {
		return true
	}
	ip, err := netip.ParseAddr(name)
	return err == nil && ip.Unmap().IsLoopback()
}

// serve lets requests with the token or the cookie through to h.
func (g *guard) serve(w http.ResponseWriter, r *http.Request, h http.Handler) {
	look := r.Method == http.MethodGet || r.Method == http.MethodHead
	given := r.URL.Query()
	bearer, hasBearer := bearerToken(r)
	switch {
	case strings.HasPrefix(r.URL.Path, assetPrefix) && look:
		h.ServeHTTP(w, r)
	case r.URL.Path == enterPath && r.Method == http.MethodPost:
		g.enter(w, r)
	case hasBearer && g.pass.opens(bearer):
		h.ServeHTTP(w, r)
	case hasBearer:
		shut(w, wrongToken)
	case look && given.Has(tokenField):
		if !g.pass.opens(given.Get(tokenField)) {
			shut(w, wrongToken)
			return
		}
		given.Del(tokenField)
		g.admit(w, r, r.URL.Path, given)
	case g.known(r):
		h.ServeHTTP(w, r)
	default:
		shut(w, realm)
	}
}

// bearerToken reads RFC 6750's header; the scheme's case is free (RFC 9110, 11.1).
func bearerToken(r *http.Request) (string, bool) {
	scheme, token, ok := strings.Cut(r.Header.Get("Authorization"), " ")
	if !ok || !strings.EqualFold(scheme, "Bearer") {
		return "", false
	}
	return strings.TrimSpace(token), true
}

// cookieName tells boards on one host apart, which cookies do not do by
// themselves (RFC 6265, 8.5).
func (g *guard) cookieName() string {
	if g.secure {
		return "__Host-leadline-" + g.port
	}
	return "leadline-" + g.port
}

func (g *guard) known(r *http.Request) bool {
	for _, c := range r.CookiesNamed(g.cookieName()) {
		if g.pass.admits(c.Value) {
			return true
		}
	}
	return false
}

// enter takes the token from the form of the refusal.
func (g *guard) enter(w http.ResponseWriter, r *http.Request) {
	r.Body = http.MaxBytesReader(w, r.Body, mostForm)
	if !g.pass.opens(strings.TrimSpace(r.PostFormValue(tokenField))) {
		shut(w, wrongToken)
		return
	}
	g.admit(w, r, "/", nil)
}

// admit gives the cookie for a token and leads on to a path of this board,
// away from an address that holds the token.
func (g *guard) admit(w http.ResponseWriter, r *http.Request, path string, query url.Values) {
	http.SetCookie(w, &http.Cookie{Name: g.cookieName(), Value: g.pass.value, Path: "/",
		HttpOnly: true, Secure: g.secure, SameSite: http.SameSiteStrictMode})
	to := url.URL{Path: "/" + strings.TrimLeft(path, `/\`), RawQuery: query.Encode()} // //host would lead elsewhere
	if r.Header.Get("Sec-Fetch-Site") == "cross-site" {
		// A link on another site: browsers keep a strict cookie back along a
		// chain of redirects that began there, but not from a page of ours.
		show(w, http.StatusOK, "onward", to.String())
		return
	}
	w.Header().Set("Location", to.String())
	w.WriteHeader(http.StatusSeeOther)
}

// shut is the one page that strangers see, whatever they asked for.
func shut(w http.ResponseWriter, challenge string) {
	w.Header().Set("WWW-Authenticate", challenge)
	show(w, http.StatusUnauthorized, "door", nil)
}

// refuse is a page that says why not, and what to do.
func refuse(w http.ResponseWriter, code int, title, what, cure string) {
	show(w, code, "trouble", trouble{title, what, cure})
}

// trouble is the content of refuse's page.
type trouble struct{ Title, What, Cure string }
