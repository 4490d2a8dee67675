package web

import (
	"embed"
	"io/fs"
	"net/http"
	"path"
	"strings"
)

//go:embed all:dist
var dist embed.FS

// policy lets the page load nothing but its own files and talk to nobody but its own server. The page needs no more: its viewer is
// bundled, styles are set through the style sheet or the DOM, images are at most snapshots of the viewer.
const policy = "default-src 'none'; script-src 'self'; style-src 'self'; connect-src 'self'; img-src 'self' data:; " +
	"base-uri 'none'; form-action 'self'; frame-ancestors 'none'"

const notBuilt = "The page has not been built: stop the server and start it with `make run`. The API under /api/v1 works without it.\n"

// Handler serves the page that is built into the program.
func Handler() http.Handler {
	pages, err := fs.Sub(dist, "dist")
	if err != nil {
		panic(err) // dist is embedded above
	}
	return handler(pages)
}

// handler serves a built page. Files in assets carry a hash of their content in their names and never change; the browser asks for
// all others every time.
func handler(pages fs.FS) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		header := w.Header()
		header.Set("Content-Security-Policy", policy)
		header.Set("X-Content-Type-Options", "nosniff")
		header.Set("Referrer-Policy", "no-referrer")
		header.Set("Cache-Control", "no-cache")
		if r.Method != http.MethodGet && r.Method != http.MethodHead {
			header.Set("Allow", "GET, HEAD")
			http.Error(w, "the page is only read", http.StatusMethodNotAllowed)
			return
		}
		name := strings.TrimPrefix(path.Clean(r.URL.Path), "/")
		if name == "" {
			name = "index.html"
		}
		info, err := fs.Stat(pages, name)
		switch {
		case err != nil && name == "index.html":
			http.Error(w, notBuilt, http.StatusServiceUnavailable)
			return
		case err != nil || info.IsDir() || strings.HasPrefix(path.Base(name), "."):
			http.Error(w, "there is no such page; the page of the searches is /", http.StatusNotFound)
			return
		}
		if strings.HasPrefix(name, "assets/") {
			header.Set("Cache-Control", "public, max-age=31536000, immutable")
		}
		http.ServeFileFS(w, r, pages, name)
	})
}
