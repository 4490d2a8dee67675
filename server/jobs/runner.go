package jobs

import (
	"context"
	"errors"
	"fmt"
	"log/slog"
	"sync"
	"time"

	"tarn/store"
)

// Runner runs queued jobs until its context ends. Its methods may be called by any number of goroutines.
type Runner struct {
	store   *store.Store
	workers int // walks at a time; 0 stands for one a processor
	log     *slog.Logger
	events  events
	wake    chan struct{}

	mu      sync.Mutex
	current string // identifier of the running job, or ""
	stop    context.CancelCauseFunc
	live    store.Job // the running job with its latest progress, which is on disk only after every round
}

// New returns a runner; it does nothing before Run.
func New(s *store.Store, workers int, log *slog.Logger) *Runner {
	return &Runner{store: s, workers: workers, log: log, wake: make(chan struct{}, 1)}
}

// StateError says that a job cannot do what was asked because of the state it is in.
type StateError struct {
	ID     string
	State  store.State
	Action string
}

func (e *StateError) Error() string {
	return fmt.Sprintf("job %s is %s and cannot be %s", e.ID, e.State, e.Action)
}

// Reasons for which a running job is stopped.
var (
	errPaused    = errors.New("paused")
	errCancelled = errors.New("cancelled")
)

// Run recovers the jobs that an earlier process left behind and then runs the queue. It returns nil when ctx ends; the job that was
// running then is back in the queue and goes on from its checkpoint the next time.
func (r *Runner) Run(ctx context.Context) error {
	recovered, err := r.store.Recover()
	if err != nil {
		return fmt.Errorf("recovering interrupted jobs: %w", err)
	}
	if recovered > 0 {
		r.log.Info("interrupted jobs go on", "jobs", recovered)
	}
	for ctx.Err() == nil {
		waiting, err := r.store.Waiting()
		if err != nil {
			return fmt.Errorf("reading the queue: %w", err)
		}
		if len(waiting) == 0 {
			select {
			case <-ctx.Done():
			case <-r.wake:
			}
			continue
		}
		if err := r.runJob(ctx, waiting[0].ID); err != nil {
			return err
		}
	}
	return nil
}

// Submit puts a job into the queue. When it returns, the job is on disk.
func (r *Runner) Submit(job store.Job) (store.Job, error) {
	job.Submitted = time.Now().UTC()
	job, err := r.store.Submit(job)
	if err != nil {
		return job, fmt.Errorf("keeping the job: %w", err)
	}
	r.events.publish(job)
	r.nudge()
	return job, nil
}

// Job returns a job with its latest progress, or [store.ErrNotFound].
func (r *Runner) Job(id string) (store.Job, error) {
	r.mu.Lock()
	defer r.mu.Unlock()
	if id == r.current && id != "" {
		return r.live, nil
	}
	return r.store.Job(id)
}

// Jobs is [store.Store.Jobs] with the latest progress of the running job.
func (r *Runner) Jobs(before string, limit int) ([]store.Job, error) {
	jobs, err := r.store.Jobs(before, limit)
	return r.brought(jobs), err
}

// JobsOf is [store.Store.JobsOf] with the latest progress of the running job.
func (r *Runner) JobsOf(key, field string) ([]store.Job, error) {
	jobs, err := r.store.JobsOf(key, field)
	return r.brought(jobs), err
}

// brought puts the running job, brought up to date, in its place.
func (r *Runner) brought(jobs []store.Job) []store.Job {
	r.mu.Lock()
	defer r.mu.Unlock()
	for i := range jobs {
		if jobs[i].ID == r.current {
			jobs[i] = r.live
		}
	}
	return jobs
}

// Pause stops a job until it is resumed. A running one ends its round in flight unfinished and goes on from the checkpoint before it.
func (r *Runner) Pause(id string) (store.Job, error) { return r.interrupt(id, errPaused) }

// Cancel ends a job for good. The minima found so far stay in the library.
func (r *Runner) Cancel(id string) (store.Job, error) { return r.interrupt(id, errCancelled) }

// Resume puts a paused job back into the queue.
func (r *Runner) Resume(id string) (store.Job, error) {
	r.mu.Lock()
	defer r.mu.Unlock()
	job, err := r.store.UpdateJob(id, func(j *store.Job) error {
		if j.State != store.Paused {
			return &StateError{id, j.State, "resumed"}
		}
		j.State = store.Queued
		return nil
	})
	if err != nil {
		return job, err
	}
	if id == r.current { // its last sitting is still ending
		r.live = job
	}
	r.events.publish(job)
	r.nudge()
	return job, nil
}

// interrupt moves a job to the state that belongs to the cause, stopping it if it runs. The state is on disk when it returns.
func (r *Runner) interrupt(id string, cause error) (store.Job, error) {
	r.mu.Lock()
	defer r.mu.Unlock()
	job, err := r.store.UpdateJob(id, func(j *store.Job) error {
		if j.State.Settled() || j.State == store.Paused && errors.Is(cause, errPaused) {
			return &StateError{id, j.State, cause.Error()}
		}
		if id == r.current {
			j.Progress = r.live.Progress
		}
		j.State = store.Paused
		if errors.Is(cause, errCancelled) {
			j.State, j.Finished = store.Cancelled, time.Now().UTC()
		}
		return nil
	})
	if err != nil {
		return job, err
	}
	if id == r.current {
		r.live = job
		r.stop(cause)
	}
	r.events.publish(job)
	return job, nil
}

// Listen returns a listener to all jobs; it must be closed.
func (r *Runner) Listen() *Listener { return r.events.listen() }

func (r *Runner) nudge() {
	select {
	case r.wake <- struct{}{}:
	default:
	}
}
