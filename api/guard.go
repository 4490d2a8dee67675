package api

import (
	"net/http"
	"runtime/debug"
	"time"

	"github.com/go-chi/chi/v5/middleware"
)

// guard tells browsers to take answers for nothing but what they are called, and to load nothing because of them. The page sets a
// policy of its own.
func guard(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		w.Header().Set("X-Content-Type-Options", "nosniff")
		w.Header().Set("Content-Security-Policy", "default-src 'none'; frame-ancestors 'none'")
		next.ServeHTTP(w, r)
	})
}

// refuseOtherSites refuses requests that a page of another site makes a browser send, except for reading, which browsers keep from it
// by themselves.
func refuseOtherSites(next http.Handler) http.Handler {
	protection := http.NewCrossOriginProtection()
	protection.SetDenyHandler(http.HandlerFunc(func(w http.ResponseWriter, _ *http.Request) {
		newProblem(http.StatusForbidden, "a page of another site sent this request; only this server's own page may").write(w)
	}))
	return protection.Handler(next)
}

// recoverPanics keeps the server up when a handler has a bug; the client gets a problem document and the log the stack.
func (s *server) recoverPanics(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		defer func() {
			reason := recover()
			switch reason {
			case nil:
			case http.ErrAbortHandler:
				panic(reason)
			default:
				s.Log.Error("a handler panicked", "reason", reason, "path", r.URL.Path, "stack", string(debug.Stack()))
				newProblem(http.StatusInternalServerError, "something went wrong inside the server; its log says more").write(w)
			}
		}()
		next.ServeHTTP(w, r)
	})
}

func (s *server) logRequests(next http.Handler) http.Handler {
	return http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		began := time.Now()
		wrapped := middleware.NewWrapResponseWriter(w, r.ProtoMajor)
		next.ServeHTTP(wrapped, r)
		s.Log.Debug("request", "method", r.Method, "path", r.URL.Path, "status", wrapped.Status(), "seconds", time.Since(began).Seconds(),
			"request", middleware.GetReqID(r.Context()))
	})
}
