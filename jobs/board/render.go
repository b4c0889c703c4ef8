package board

import (
	"bytes"
	"crypto/sha256"
	"embed"
	"fmt"
	"html/template"
	"net/http"
	"path"
	"time"
)

//go:embed assets
var assets embed.FS

// templates escape by where a value stands: nothing of a frame can become
// anything but text.
var templates = template.Must(template.ParseFS(assets, "assets/*.html"))

// show writes a page.
func show(w http.ResponseWriter, code int, name string, data any) {
	var b bytes.Buffer
	if err := templates.ExecuteTemplate(&b, name, data); err != nil {
		// A slip in a template; the tests show every page.
		http.Error(w, "the page could not be made", http.StatusInternalServerError)
		return
	}
	w.Header().Set("Content-Type", "text/html; charset=utf-8")
	w.WriteHeader(code)
	_, _ = w.Write(b.Bytes()) // a reader that has left misses nothing
}

// kinds are the files that pages name, and no others.
var kinds = map[string]string{
	"board.css": "text/css; charset=utf-8",
	"board.js":  "text/javascript; charset=utf-8",
	"icon.svg":  "image/svg+xml",
}

// asset is GET /board/{name}.
func asset(w http.ResponseWriter, r *http.Request) {
	name := r.PathValue("name")
	kind, ok := kinds[name]
	b, err := assets.ReadFile(path.Join("assets", name))
	if !ok || err != nil {
		http.NotFound(w, r)
		return
	}
	w.Header().Set("Content-Type", kind)
	w.Header().Set("Cache-Control", "no-cache")
	w.Header().Set("ETag", fmt.Sprintf(`"%x"`, sha256.Sum256(b)))
	http.ServeContent(w, r, "", time.Time{}, bytes.NewReader(b))
}
