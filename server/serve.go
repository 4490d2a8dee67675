package server

import (
	"context"
	"errors"
	"fmt"
	"io"
	"log/slog"
	"net"
	"net/http"
	"time"

	"github.com/prometheus/client_golang/prometheus"
	"github.com/prometheus/client_golang/prometheus/collectors"
	"github.com/spf13/cobra"
	"golang.org/x/sync/errgroup"

	"tarn/api"
	"tarn/molecule/notation"
	"tarn/search"
	"tarn/server/jobs"
	"tarn/store"
	"tarn/web"
)

type serveOptions struct {
	listen  string
	data    string
	demo    bool
	workers int
	verbose bool
}

func serveCommand() *cobra.Command {
	var o serveOptions
	cmd := &cobra.Command{
		Use:   "serve",
		Short: "Run the server with its page",
		Args:  cobra.NoArgs,
		RunE:  func(cmd *cobra.Command, _ []string) error { return serve(cmd.Context(), o, cmd.ErrOrStderr()) },
	}
	f := cmd.Flags()
	f.StringVar(&o.listen, "listen", "127.0.0.1:8418", "address to listen on")
	f.StringVar(&o.data, "data", "./data", "folder of the store")
	f.BoolVar(&o.demo, "demo", false, "queue a demonstration search if the store is empty")
	f.IntVar(&o.workers, "workers", 0, "walks at a time (default one for each processor)")
	f.BoolVar(&o.verbose, "verbose", false, "log every request")
	return cmd
}

const (
	headerTimeout   = 10 * time.Second
	writeTimeout    = 2 * time.Minute
	idleTimeout     = 2 * time.Minute
	shutdownTimeout = 10 * time.Second
)

// serve runs until its context ends; a running search then goes back into the queue with its checkpoint.
func serve(ctx context.Context, o serveOptions, errOut io.Writer) (err error) {
	if o.workers < 0 {
		return fmt.Errorf("--workers must not be negative")
	}
	level := slog.LevelInfo
	if o.verbose {
		level = slog.LevelDebug
	}
	log := slog.New(slog.NewTextHandler(errOut, &slog.HandlerOptions{Level: level}))
	st, err := store.Open(o.data)
	if err != nil {
		return err
	}
	defer func() { err = errors.Join(err, st.Close()) }()
	listener, err := net.Listen("tcp", o.listen)
	if err != nil {
		return fmt.Errorf("listening on %s: %w; choose another address with --listen", o.listen, err)
	}
	runner := jobs.New(st, o.workers, log)
	if o.demo {
		if err := queueDemo(ctx, st, runner); err != nil {
			return errors.Join(fmt.Errorf("queueing the demonstration: %w", err), listener.Close())
		}
	}
	group, ctx := errgroup.WithContext(ctx)
	group.Go(func() error { return runner.Run(ctx) })
	group.Go(func() error { return serveHTTP(ctx, listener, handler(st, runner, log), log) })
	return group.Wait()
}

func handler(st *store.Store, runner *jobs.Runner, log *slog.Logger) http.Handler {
	metrics := prometheus.NewRegistry()
	metrics.MustRegister(collectors.NewGoCollector(), collectors.NewProcessCollector(collectors.ProcessCollectorOpts{}), jobs.NewCollector(st))
	return api.New(api.Options{Queue: runner, Library: st, Page: web.Handler(), Metrics: metrics, Log: log, Version: Version})
}

// serveHTTP answers requests until ctx ends, then lets those in flight finish and closes event streams.
func serveHTTP(ctx context.Context, listener net.Listener, h http.Handler, log *slog.Logger) error {
	streams, endStreams := context.WithCancel(context.Background())
	defer endStreams()
	server := &http.Server{
		Handler: h, ReadHeaderTimeout: headerTimeout, WriteTimeout: writeTimeout, IdleTimeout: idleTimeout,
		BaseContext: func(net.Listener) context.Context { return streams },
		ErrorLog:    slog.NewLogLogger(log.Handler(), slog.LevelWarn),
	}
	server.RegisterOnShutdown(endStreams)
	stopped := make(chan error, 1)
	go func() {
		<-ctx.Done()
		deadline, cancel := context.WithTimeout(context.Background(), shutdownTimeout)
		defer cancel()
		stopped <- server.Shutdown(deadline)
	}()
	log.Info("listening", "address", "http://"+listener.Addr().String())
	if err := server.Serve(listener); !errors.Is(err, http.ErrServerClosed) {
		return err
	}
	return <-stopped
}

// demonstration is the search of an invented fragrance laboratory on a real molecule: the musk odorant (R)-muscone.
var demonstration = notation.Input{Name: "(R)-muscone, Tarnvik fragrance laboratory", SMILES: "C[C@@H]1CCCCCCCCCCCCC(=O)C1"}

func queueDemo(ctx context.Context, st *store.Store, runner *jobs.Runner) error {
	existing, err := st.Jobs("", 1)
	if err != nil || len(existing) > 0 {
		return err
	}
	job, err := jobs.NewJob(ctx, demonstration, "mmff94", search.Settings{Seed: 1, WindowKcal: 2, Coverage: 0.95}, 0)
	if err != nil {
		return err
	}
	_, err = runner.Submit(job)
	return err
}
