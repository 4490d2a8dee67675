package browsertest

import (
	"context"
	"io"
	"log/slog"
	"net/http"
	"net/http/httptest"
	"net/url"
	"os"
	"os/exec"
	"strings"
	"sync"
	"testing"
	"time"

	"github.com/chromedp/cdproto/network"
	"github.com/chromedp/chromedp"
	"github.com/prometheus/client_golang/prometheus"
	"github.com/stretchr/testify/require"

	"tarn/api"
	"tarn/server/jobs"
	"tarn/store"
	"tarn/web"
)

const patience = 60 * time.Second // for a whole test, on a loaded machine

// session is a tab on the page of a server of its own.
type session struct {
	t      *testing.T
	ctx    context.Context
	server *httptest.Server

	mu       sync.Mutex
	messages []string // console errors and requests to other hosts
}

// open starts a server and shows its page. The test fails at its end if the page has logged an error or asked another host.
func open(t *testing.T, width, height int64) *session {
	t.Helper()
	s := &session{t: t, server: startServer(t)}
	limited, cancel := context.WithTimeout(startBrowser(t), patience)
	t.Cleanup(cancel)
	ctx, _ := chromedp.NewContext(limited)
	s.ctx = ctx
	t.Cleanup(func() {
		_ = chromedp.Cancel(ctx)
		s.mu.Lock()
		defer s.mu.Unlock()
		require.Empty(t, s.messages)
	})
	s.watch()
	s.do(chromedp.EmulateViewport(width, height), chromedp.Navigate(s.server.URL), chromedp.WaitVisible(chromedp.CSS("form")))
	return s
}

// watch collects what a well-behaved page never does.
func (s *session) watch() {
	note := func(text string) {
		s.mu.Lock()
		defer s.mu.Unlock()
		s.messages = append(s.messages, text)
	}
	console := chromedp.Console(s.ctx)
	requests := chromedp.Events(s.ctx, network.RequestWillBeSent)
	go func() {
		for m, err := range console {
			if err != nil {
				return
			}
			expected := strings.Contains(m.Text, "GPU stall") || strings.Contains(m.Text, "422") // the browser logs refused requests
			switch {
			case expected:
			case m.Type == "error", m.Type == "warning", m.Type == chromedp.ConsoleException:
				note(m.Text)
			}
		}
	}()
	go func() {
		for e, err := range requests {
			if err != nil {
				return
			}
			if u, err := url.Parse(e.Request.URL); err == nil && strings.HasPrefix(u.Scheme, "http") && "http://"+u.Host != s.server.URL {
				note("request to " + e.Request.URL)
			}
		}
	}()
}

func (s *session) do(actions ...chromedp.Action[chromedp.Void]) {
	s.t.Helper()
	require.NoError(s.t, chromedp.Do(s.ctx, actions...))
}

// wait waits until a JavaScript expression is true.
func (s *session) wait(expression string) {
	s.t.Helper()
	_, err := chromedp.Run(s.ctx, chromedp.Poll[bool](expression, chromedp.WithPollingTimeout(patience)))
	require.NoError(s.t, err, expression)
}

// read evaluates a JavaScript expression.
func read[T any](s *session, expression string) T {
	s.t.Helper()
	v, err := chromedp.Run(s.ctx, chromedp.Evaluate[T](expression))
	require.NoError(s.t, err, expression)
	return v
}

// typeSMILES enters a SMILES and leaves the field, so that the page checks it.
func (s *session) typeSMILES(text string) {
	s.t.Helper()
	field := chromedp.CSS("form textarea")
	s.do(chromedp.SendKeys(field, text), chromedp.Blur(field))
}

func (s *session) submit() {
	s.t.Helper()
	s.wait(`!document.querySelector('form button.primary').disabled`)
	s.do(chromedp.Click(chromedp.CSS("form button.primary")))
}

// browser is started by the first test and shared by all; each test has a tab of its own.
var browser struct {
	once sync.Once
	ctx  context.Context
	stop func()
	err  error
}

func TestMain(m *testing.M) {
	status := m.Run()
	if browser.stop != nil {
		browser.stop()
	}
	os.Exit(status)
}

func startBrowser(t *testing.T) context.Context {
	t.Helper()
	path := findBrowser(t)
	browser.once.Do(func() {
		options := append([]chromedp.ExecAllocatorOption{}, chromedp.DefaultExecAllocatorOptions[:]...)
		options = append(options, chromedp.ExecPath(path), chromedp.NoSandbox, chromedp.DisableGPU,
			chromedp.Flag("enable-unsafe-swiftshader", true), chromedp.Flag("disable-quic", true))
		allocator, stopAllocator := chromedp.NewExecAllocator(context.Background(), options...)
		ctx, _ := chromedp.NewContext(allocator)
		browser.ctx = ctx
		browser.stop = func() {
			_ = chromedp.Cancel(ctx)
			stopAllocator()
		}
		browser.err = chromedp.Do(ctx) // starts it
	})
	require.NoError(t, browser.err)
	return browser.ctx
}

func startServer(t *testing.T) *httptest.Server {
	t.Helper()
	requirePage(t)
	st, err := store.Open(t.TempDir())
	require.NoError(t, err)
	log := slog.New(slog.NewTextHandler(io.Discard, nil))
	runner := jobs.New(st, 0, log)
	ctx, stop := context.WithCancel(context.Background())
	done := make(chan error, 1)
	go func() { done <- runner.Run(ctx) }()
	server := httptest.NewServer(api.New(api.Options{
		Queue: runner, Library: st, Page: web.Handler(), Metrics: prometheus.NewRegistry(), Log: log, Version: "test",
	}))
	t.Cleanup(func() {
		stop()
		server.CloseClientConnections()
		server.Close()
		require.NoError(t, <-done)
		require.NoError(t, st.Close())
	})
	return server
}

// missing fails where the browser tests are required and skips them elsewhere.
func missing(t *testing.T, what string) {
	t.Helper()
	if os.Getenv("TARN_BROWSER_TESTS") == "require" {
		t.Fatal(what)
	}
	t.Skip(what)
}

func findBrowser(t *testing.T) string {
	t.Helper()
	for _, name := range []string{"chromium", "chromium-browser", "google-chrome", "chromium-headless-shell"} {
		if path, err := exec.LookPath(name); err == nil {
			return path
		}
	}
	missing(t, "the page tests need Chromium: install it (Debian: apt-get install chromium)")
	return ""
}

func requirePage(t *testing.T) {
	t.Helper()
	recorder := httptest.NewRecorder()
	web.Handler().ServeHTTP(recorder, httptest.NewRequest(http.MethodGet, "/", nil))
	if recorder.Code != http.StatusOK {
		missing(t, "the page tests need the built page: run make page")
	}
}
