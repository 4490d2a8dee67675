package api

import (
	"log/slog"
	"net/http"
	"strings"
	"time"

	"github.com/danielgtaylor/huma/v2"
	"github.com/danielgtaylor/huma/v2/adapters/humachi"
	"github.com/go-chi/chi/v5"
	"github.com/go-chi/chi/v5/middleware"
	"github.com/prometheus/client_golang/prometheus"
	"github.com/prometheus/client_golang/prometheus/promhttp"

	"tarn/server/jobs"
	"tarn/store"
)

// Queue is what the API needs of the runner of jobs.
type Queue interface {
	Submit(store.Job) (store.Job, error)
	Job(id string) (store.Job, error)
	Jobs(before string, limit int) ([]store.Job, error)
	Pause(id string) (store.Job, error)
	Resume(id string) (store.Job, error)
	Cancel(id string) (store.Job, error)
	JobsOf(key, field string) ([]store.Job, error)
	Listen() *jobs.Listener
}

// Library is what the API needs of the store.
type Library interface {
	Molecule(key string) (store.Molecule, error)
	Molecules() ([]store.Molecule, error)
	Fields(key string) ([]string, error)
	Entries(key, field string) ([]store.Entry, error)
}

// Options of the handler.
type Options struct {
	Queue   Queue
	Library Library
	Page    http.Handler // serves everything that is no route of the API
	Metrics *prometheus.Registry
	Log     *slog.Logger
	Version string
}

const (
	maxBody        = 16 << 20 // bytes of a request
	requestTimeout = 60 * time.Second
)

type server struct {
	Options
}

// New returns the handler of all routes.
func New(o Options) http.Handler {
	s := &server{o}
	router := chi.NewRouter()
	router.Use(middleware.RequestID, s.logRequests, s.recoverPanics, guard, refuseOtherSites, middleware.Compress(5))
	router.NotFound(s.notFound)
	router.MethodNotAllowed(func(w http.ResponseWriter, r *http.Request) {
		newProblem(http.StatusMethodNotAllowed, r.Method+" is not possible on "+r.URL.Path+"; see /openapi.json").write(w)
	})
	router.Get("/healthz", ok)
	router.Get("/readyz", s.ready)
	router.Handle("/metrics", promhttp.HandlerFor(o.Metrics, promhttp.HandlerOpts{}))

	config := huma.DefaultConfig("Tarn", o.Version)
	config.Info.Description = "Finds the low-energy conformers of flexible molecules, each one once, with Boltzmann populations. " +
		"Results are force-field models of isolated molecules and no basis for clinical, safety or regulatory decisions."
	config.DocsPath, config.SchemasPath, config.CreateHooks = "", "", nil
	config.RejectUnknownQueryParameters = true
	s.register(humachi.New(router, config))
	return router
}

func (s *server) register(a huma.API) {
	register := func(method, path, id, summary string) huma.Operation {
		return huma.Operation{
			OperationID: id, Method: method, Path: "/api/v1" + path, Summary: summary,
			MaxBodyBytes: maxBody, BodyReadTimeout: requestTimeout,
		}
	}
	submit := register(http.MethodPost, "/jobs", "submit-job", "Queue a search; it is on disk before the answer")
	submit.DefaultStatus = http.StatusAccepted
	huma.Register(a, submit, s.submitJob)
	huma.Register(a, register(http.MethodGet, "/jobs", "list-jobs", "Jobs, the newest first"), s.listJobs)
	huma.Register(a, register(http.MethodGet, "/jobs/{id}", "get-job", "One job"), s.getJob)
	huma.Register(a, register(http.MethodPost, "/jobs/{id}/pause", "pause-job", "Stop a job until it is resumed"), s.act(s.Queue.Pause))
	huma.Register(a, register(http.MethodPost, "/jobs/{id}/resume", "resume-job", "Put a paused job back into the queue"), s.act(s.Queue.Resume))
	huma.Register(a, register(http.MethodPost, "/jobs/{id}/cancel", "cancel-job", "End a job for good; what it found is kept"), s.act(s.Queue.Cancel))
	huma.Register(a, eventStream(register(http.MethodGet, "/jobs/{id}/events", "follow-job", "Server-sent events of one job, until it ends")), s.followJob)
	huma.Register(a, eventStream(register(http.MethodGet, "/events", "follow-jobs", "Server-sent events of all jobs")), s.followJobs)
	huma.Register(a, register(http.MethodPost, "/molecules", "check-molecule", "Say what Tarn understands of a molecule; nothing is queued"), s.checkMolecule)
	huma.Register(a, register(http.MethodGet, "/molecules", "list-molecules", "Molecules that have been searched"), s.listMolecules)
	huma.Register(a, register(http.MethodGet, "/molecules/{key}", "get-molecule", "One molecule"), s.getMolecule)
	huma.Register(a, minimaOperation(register(http.MethodGet, "/molecules/{key}/minima", "list-minima", "Ranked minima with populations, as JSON, SDF, XYZ or CSV")), s.listMinima)
}

func ok(w http.ResponseWriter, _ *http.Request) {
	w.Header().Set("Content-Type", "text/plain; charset=utf-8")
	_, _ = w.Write([]byte("ok\n"))
}

// ready says whether the store answers.
func (s *server) ready(w http.ResponseWriter, r *http.Request) {
	if _, err := s.Queue.Jobs("", 1); err != nil {
		s.Log.Error("the store does not answer", "error", err)
		newProblem(http.StatusServiceUnavailable, "the store does not answer; see the server's log").write(w)
		return
	}
	ok(w, r)
}

// notFound leaves everything outside the API to the page.
func (s *server) notFound(w http.ResponseWriter, r *http.Request) {
	if strings.HasPrefix(r.URL.Path, "/api/") || s.Page == nil {
		newProblem(http.StatusNotFound, "there is nothing at "+r.URL.Path+"; the routes are listed in /openapi.json").write(w)
		return
	}
	s.Page.ServeHTTP(w, r)
}
