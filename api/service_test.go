package api_test

import (
	"bufio"
	"context"
	"encoding/json"
	"io"
	"log/slog"
	"net/http"
	"net/http/httptest"
	"strings"
	"testing"
	"time"

	"github.com/prometheus/client_golang/prometheus"
	"github.com/stretchr/testify/require"
	"go.uber.org/goleak"

	"tarn/api"
	"tarn/server/jobs"
	"tarn/store"
)

func TestMain(m *testing.M) { goleak.VerifyTestMain(m) }

// service is a whole server without its program: store, runner and handler.
type service struct {
	*httptest.Server
	t      *testing.T
	runner *jobs.Runner
	begin  func() // lets the queue run
}

func newService(t *testing.T) *service {
	t.Helper()
	quiet := slog.New(slog.NewTextHandler(io.Discard, nil))
	st, err := store.Open(t.TempDir())
	require.NoError(t, err)
	runner := jobs.New(st, 2, quiet)
	metrics := prometheus.NewRegistry()
	metrics.MustRegister(jobs.NewCollector(st))
	page := http.HandlerFunc(func(w http.ResponseWriter, _ *http.Request) { _, _ = io.WriteString(w, "the page") })
	s := &service{t: t, runner: runner}
	s.Server = httptest.NewServer(api.New(api.Options{
		Queue: runner, Library: st, Page: page, Metrics: metrics, Log: quiet, Version: "test",
	}))
	ctx, cancel := context.WithCancel(context.Background())
	ended := make(chan error, 1)
	ended <- nil
	s.begin = func() {
		<-ended
		go func() { ended <- runner.Run(ctx) }()
	}
	t.Cleanup(func() {
		cancel()
		require.NoError(t, <-ended)
		s.CloseClientConnections()
		s.Close()
		s.Client().CloseIdleConnections()
		require.NoError(t, st.Close())
	})
	return s
}

// answer of a request, its body read.
type answer struct {
	*http.Response
	text string
}

func (s *service) send(method, path, body string, header ...string) answer {
	s.t.Helper()
	ctx, cancel := context.WithTimeout(s.t.Context(), time.Minute) // only so that a broken test ends
	defer cancel()
	request, err := http.NewRequestWithContext(ctx, method, s.URL+path, strings.NewReader(body))
	require.NoError(s.t, err)
	if body != "" {
		request.Header.Set("Content-Type", "application/json")
	}
	for i := 0; i < len(header); i += 2 {
		request.Header.Set(header[i], header[i+1])
	}
	response, err := s.Client().Do(request)
	require.NoError(s.t, err)
	defer response.Body.Close()
	text, err := io.ReadAll(response.Body)
	require.NoError(s.t, err)
	return answer{response, string(text)}
}

func (s *service) get(path string, header ...string) answer {
	return s.send("GET", path, "", header...)
}

func into[T any](t *testing.T, a answer) (v T) {
	t.Helper()
	require.NoError(t, json.Unmarshal([]byte(a.text), &v), a.text)
	return v
}

func (s *service) submit(body string) api.Job {
	s.t.Helper()
	a := s.send("POST", "/api/v1/jobs", body)
	require.Equal(s.t, http.StatusAccepted, a.StatusCode, a.text)
	return into[api.Job](s.t, a)
}

// done follows a job to its end and returns all its events.
func (s *service) done(id string) []api.Job {
	s.t.Helper()
	ctx, cancel := context.WithTimeout(s.t.Context(), 2*time.Minute)
	defer cancel()
	request, err := http.NewRequestWithContext(ctx, "GET", s.URL+"/api/v1/jobs/"+id+"/events", http.NoBody)
	require.NoError(s.t, err)
	response, err := s.Client().Do(request)
	require.NoError(s.t, err)
	defer response.Body.Close()
	require.Equal(s.t, "text/event-stream", response.Header.Get("Content-Type"))
	events := readEvents(s.t, response.Body)
	require.NotEmpty(s.t, events)
	require.True(s.t, events[len(events)-1].State.Settled(), "the stream ends with the job, not before")
	return events
}

// readEvents reads a stream to its end.
func readEvents(t *testing.T, r io.Reader) (events []api.Job) {
	lines := bufio.NewScanner(r)
	lines.Buffer(nil, 1<<20)
	name := ""
	for lines.Scan() {
		switch field, value, _ := strings.Cut(lines.Text(), ": "); field {
		case "event":
			name = value
		case "data":
			require.Equal(t, "job", name)
			var job api.Job
			require.NoError(t, json.Unmarshal([]byte(value), &job))
			events = append(events, job)
		}
	}
	require.NoError(t, lines.Err())
	return events
}
