package api

import (
	"context"
	"encoding/json"
	"fmt"
	"io"
	"net/http"
	"time"

	"github.com/danielgtaylor/huma/v2"
	"github.com/danielgtaylor/huma/v2/adapters/humachi"

	"tarn/store"
)

const (
	keepAlive = 20 * time.Second // how often an idle stream sends a comment, so that proxies leave it open
	patience  = 30 * time.Second // how long a client may leave a message unread
)

func eventStream(op huma.Operation) huma.Operation {
	op.Responses = map[string]*huma.Response{"200": {
		Description: "Events named job, each with a job resource as data",
		Content:     map[string]*huma.MediaType{"text/event-stream": {Schema: &huma.Schema{Type: "string"}}},
	}}
	return op
}

type jobFollower struct {
	ID   string `path:"id" maxLength:"20"`
	Seen string `header:"Last-Event-ID" doc:"Set by browsers that connect again"`
}

// followJob streams one job, beginning with its present state, and ends after its final one. A browser that then connects again is told
// that there is nothing more to come (204), or it would go on trying for ever.
func (s *server) followJob(ctx context.Context, in *jobFollower) (*huma.StreamResponse, error) {
	job, err := s.Queue.Job(in.ID)
	if err != nil {
		return nil, s.problem(ctx, err)
	}
	if job.State.Settled() && in.Seen == eventID(job) {
		return &huma.StreamResponse{Body: func(hc huma.Context) { hc.SetStatus(http.StatusNoContent) }}, nil
	}
	return s.stream(func(send func(store.Job) error) (bool, error) {
		job, err := s.Queue.Job(in.ID)
		if err == nil {
			err = send(job)
		}
		return job.State.Settled(), err
	}, func(job store.Job) (wanted, last bool) { return job.ID == in.ID, job.State.Settled() }), nil
}

func eventID(job store.Job) string { return job.ID + "-" + string(job.State) }

// followJobs streams all jobs from now on, beginning with those that have not ended.
func (s *server) followJobs(context.Context, *struct{}) (*huma.StreamResponse, error) {
	return s.stream(func(send func(store.Job) error) (bool, error) {
		recent, err := s.Queue.Jobs("", 100)
		for i := len(recent) - 1; i >= 0 && err == nil; i-- {
			if !recent[i].State.Settled() {
				err = send(recent[i])
			}
		}
		return false, err
	}, func(store.Job) (wanted, last bool) { return true, false }), nil
}

// stream sends what begin sends, then the changes that are wanted, until the last one or until the client has gone.
func (s *server) stream(begin func(send func(store.Job) error) (done bool, err error), choose func(store.Job) (wanted, last bool)) *huma.StreamResponse {
	return &huma.StreamResponse{Body: func(hc huma.Context) {
		r, w := humachi.Unwrap(hc)
		w.Header().Set("Content-Type", "text/event-stream")
		w.Header().Set("Cache-Control", "no-store")
		control := http.NewResponseController(w)
		listener := s.Queue.Listen()
		defer listener.Close()
		write := func(text string) error {
			// A stream outlives the deadline of ordinary answers, but not a client that has stopped reading.
			if err := control.SetWriteDeadline(time.Now().Add(patience)); err != nil {
				return err
			}
			if _, err := io.WriteString(w, text); err != nil {
				return err
			}
			return control.Flush()
		}
		send := func(job store.Job) error {
			data, err := json.Marshal(resource(job))
			if err != nil {
				return err
			}
			return write(fmt.Sprintf("event: job\nid: %s\ndata: %s\n\n", eventID(job), data))
		}
		if err := write("retry: 2000\n\n"); err != nil {
			return
		}
		if done, err := begin(send); done || err != nil {
			return
		}
		idle := time.NewTicker(keepAlive)
		defer idle.Stop()
		for {
			select {
			case <-r.Context().Done():
				return
			case <-idle.C:
				if err := write(": alive\n\n"); err != nil {
					return
				}
			case <-listener.Ready():
				for _, job := range listener.Take() {
					wanted, last := choose(job)
					if !wanted {
						continue
					}
					if err := send(job); err != nil || last {
						return
					}
				}
			}
		}
	}}
}
