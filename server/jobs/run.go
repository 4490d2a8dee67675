package jobs

import (
	"context"
	"errors"
	"fmt"
	"time"

	"tarn/dedupe"
	"tarn/search"
	"tarn/store"
)

// runJob runs one job to its end or until it is stopped. An error means that the store cannot be used any more; a job that fails is
// marked so and is no error.
func (r *Runner) runJob(parent context.Context, id string) error {
	ctx, stop := context.WithCancelCause(parent)
	defer stop(nil)
	if began, err := r.begin(id, stop); err != nil || !began {
		return err
	}
	result, err := r.searchJob(ctx, id)
	return r.finish(ctx, id, result, err)
}

// begin marks a job as running. It reports false if the job has left the queue in the meantime.
func (r *Runner) begin(id string, stop context.CancelCauseFunc) (bool, error) {
	r.mu.Lock()
	defer r.mu.Unlock()
	left := false
	job, err := r.store.UpdateJob(id, func(j *store.Job) error {
		if left = j.State != store.Queued; left {
			return nil
		}
		j.State = store.Running
		if j.Started.IsZero() {
			j.Started = time.Now().UTC()
		}
		return nil
	})
	if err != nil || left {
		return false, err
	}
	r.current, r.stop, r.live = id, stop, job
	r.events.publish(job)
	r.log.Info("search begins", "job", id, "molecule", job.Molecule.Key)
	return true, nil
}

func (r *Runner) searchJob(ctx context.Context, id string) (*search.Result, error) {
	job, err := r.store.Job(id)
	if err != nil {
		return nil, err
	}
	problem, _, err := problemOf(ctx, job.Input, job.Field, job.Settings.Seed)
	if err != nil {
		return nil, err
	}
	library, err := r.openLibrary(job, problem)
	if err != nil {
		return nil, err
	}
	from, err := r.store.Checkpoint(id)
	if errors.Is(err, store.ErrNotFound) {
		from = nil
	} else if err != nil {
		return nil, err
	}
	settings := job.Settings
	settings.Workers = r.workers
	result, err := search.Run(ctx, problem, settings, from, search.Hooks{
		Progress:   r.progress,
		Checkpoint: func(c search.Checkpoint) error { return library.Record(id, c) },
	})
	if err != nil {
		return nil, err
	}
	return result, library.Record(id, result.Checkpoint)
}

// openLibrary opens the library of a job's molecule, whose atoms stand in the order of the input that came first.
func (r *Runner) openLibrary(job store.Job, p *search.Problem) (*store.Library, error) {
	m, err := r.store.Molecule(job.Molecule.Key)
	if err != nil {
		return nil, fmt.Errorf("molecule %s: %w", job.Molecule.Key, err)
	}
	if p.Cluster() || m.Reference == job.Input {
		return r.store.OpenLibrary(job.Molecule.Key, job.Field, p.Symmetry, nil)
	}
	reference, err := Reference(m)
	if err != nil {
		return nil, err
	}
	order, err := reorder(reference, p.Molecule)
	if err != nil {
		return nil, err
	}
	symmetry, err := dedupe.NewSymmetry(reference)
	if err != nil {
		return nil, err
	}
	return r.store.OpenLibrary(job.Molecule.Key, job.Field, symmetry, order)
}

// progress publishes what the running search tells.
func (r *Runner) progress(p search.Progress) {
	r.mu.Lock()
	defer r.mu.Unlock()
	if r.live.State == store.Running {
		r.live.Progress = p
		r.events.publish(r.live)
	}
}

// finish writes how a job ended.
func (r *Runner) finish(ctx context.Context, id string, result *search.Result, failure error) error {
	r.mu.Lock()
	defer r.mu.Unlock()
	progress := r.live.Progress
	r.current, r.stop, r.live = "", nil, store.Job{}
	job, err := r.store.UpdateJob(id, func(j *store.Job) error {
		if j.State != store.Running { // paused or cancelled: written by interrupt
			return nil
		}
		j.Progress = progress
		switch {
		case failure == nil:
			j.State, j.Finished = store.Done, time.Now().UTC()
			j.StopReason, j.Counted = result.StopReason, result.Counted
			j.Progress.Minima, j.Progress.Coverage = len(result.Minima), result.Coverage
			j.Progress.Quenches, j.Progress.Evaluations = result.Quenches, result.Evaluations
			j.Progress.Fraction, j.Progress.SecondsLeft = 1, 0
		case ctx.Err() != nil: // the server stops
			j.State = store.Queued
		default:
			j.State, j.Finished, j.Error = store.Failed, time.Now().UTC(), failure.Error()
		}
		return nil
	})
	if err != nil {
		return fmt.Errorf("keeping the end of job %s: %w", id, err)
	}
	r.events.publish(job)
	r.log.Info("search ends", "job", id, "state", job.State, "minima", job.Progress.Minima, "error", job.Error)
	return nil
}
