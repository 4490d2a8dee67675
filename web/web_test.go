package web

import (
	"net/http"
	"net/http/httptest"
	"testing"
	"testing/fstest"

	"github.com/stretchr/testify/require"
)

func TestPageIsServedWithPolicyAndCaching(t *testing.T) {
	built := fstest.MapFS{
		".gitkeep":             {},
		"index.html":           {Data: []byte("<!doctype html><title>Tarn</title>")},
		"favicon.svg":          {Data: []byte("<svg/>")},
		"assets/index-1a2b.js": {Data: []byte("export {}")},
		"assets/index-1a.css":  {Data: []byte("body{}")},
	}
	const immutable = "public, max-age=31536000, immutable"
	for _, c := range []struct {
		name, method, path string
		pages              fstest.MapFS
		status             int
		mediaType, caching string
		body               string
	}{
		{"page", "GET", "/", built, 200, "text/html; charset=utf-8", "no-cache", "<title>Tarn"},
		{"script", "GET", "/assets/index-1a2b.js", built, 200, "text/javascript; charset=utf-8", immutable, "export"},
		{"style", "GET", "/assets/index-1a.css", built, 200, "text/css; charset=utf-8", immutable, "body"},
		{"icon", "GET", "/favicon.svg", built, 200, "image/svg+xml", "no-cache", "<svg"},
		{"head", "HEAD", "/", built, 200, "text/html; charset=utf-8", "no-cache", ""},
		{"unknown", "GET", "/nothing", built, 404, "text/plain; charset=utf-8", "", "no such page"},
		{"missing asset", "GET", "/assets/old.js", built, 404, "text/plain; charset=utf-8", "", "no such page"},
		{"no listing", "GET", "/assets/", built, 404, "text/plain; charset=utf-8", "", "no such page"},
		{"hidden file", "GET", "/.gitkeep", built, 404, "text/plain; charset=utf-8", "", "no such page"},
		{"outside", "GET", "/../../web.go", built, 404, "text/plain; charset=utf-8", "", "no such page"},
		{"posting", "POST", "/", built, 405, "text/plain; charset=utf-8", "", "only read"},
		{"not built", "GET", "/", fstest.MapFS{".gitkeep": {}}, 503, "text/plain; charset=utf-8", "", "make run"},
	} {
		t.Run(c.name, func(t *testing.T) {
			answer := httptest.NewRecorder()
			request := httptest.NewRequest(c.method, "/", http.NoBody)
			request.URL.Path = c.path
			handler(c.pages).ServeHTTP(answer, request)
			require.Equal(t, c.status, answer.Code)
			require.Equal(t, c.mediaType, answer.Header().Get("Content-Type"))
			if c.status == http.StatusOK {
				require.Equal(t, c.caching, answer.Header().Get("Cache-Control"))
			} else {
				require.NotContains(t, answer.Header().Get("Cache-Control"), "immutable", "an error must not be kept")
			}
			require.Contains(t, answer.Body.String(), c.body)
			require.Equal(t, policy, answer.Header().Get("Content-Security-Policy"))
			require.Equal(t, "nosniff", answer.Header().Get("X-Content-Type-Options"))
		})
	}
}

func TestEmbeddedFolderIsThere(t *testing.T) {
	answer := httptest.NewRecorder()
	Handler().ServeHTTP(answer, httptest.NewRequest("GET", "/", http.NoBody))
	require.Contains(t, []int{http.StatusOK, http.StatusServiceUnavailable}, answer.Code, "built or not, there is an answer")
	require.NotEmpty(t, answer.Body.String())
}
