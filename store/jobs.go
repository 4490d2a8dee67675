package store

import (
	"cmp"
	"encoding/json"
	"fmt"
	"slices"
	"time"

	bolt "go.etcd.io/bbolt"

	"tarn/molecule/notation"
	"tarn/search"
)

// State of a job.
type State string

const (
	Queued    State = "queued"
	Running   State = "running"
	Paused    State = "paused"
	Done      State = "done"
	Failed    State = "failed"
	Cancelled State = "cancelled"
)

// Settled reports whether a job in this state will never run again.
func (s State) Settled() bool { return s == Done || s == Failed || s == Cancelled }

// Job is one search that somebody asked for. ID is given by [Store.Submit]; later jobs have later identifiers.
type Job struct {
	ID       string          `json:"id"`
	State    State           `json:"state"`
	Input    notation.Input  `json:"input"` // as it was submitted
	Molecule Molecule        `json:"molecule"`
	Field    string          `json:"field"`
	Settings search.Settings `json:"settings"`
	Priority int             `json:"priority"`        // higher runs first
	Notes    []string        `json:"notes,omitempty"` // what the user should know of the input

	Submitted time.Time `json:"submitted"`
	Started   time.Time `json:"started,omitzero"`
	Finished  time.Time `json:"finished,omitzero"`

	Progress   search.Progress   `json:"progress"`
	StopReason search.StopReason `json:"stop_reason,omitempty"`
	Counted    search.Counted    `json:"counted"`
	Error      string            `json:"error,omitempty"`
}

// Submit puts a job into the queue, with the identifier that it returns. When it returns, the job is on disk.
func (s *Store) Submit(job Job) (Job, error) {
	err := s.db.Update(func(tx *bolt.Tx) error {
		jobs := tx.Bucket(jobsBucket)
		sequence, err := jobs.NextSequence()
		if err != nil {
			return err
		}
		job.ID = fmt.Sprintf("%08d", sequence)
		job.State = Queued
		job.Molecule.Reference = job.Input
		if err := keepMolecule(tx, job.Molecule); err != nil {
			return err
		}
		job.Molecule.Reference = notation.Input{}
		return put(jobs, []byte(job.ID), job)
	})
	return job, err
}

// JobsOf returns the jobs of a molecule in a field, the oldest first.
func (s *Store) JobsOf(key, field string) (jobs []Job, err error) {
	err = s.eachJob(func(job Job) {
		if job.Molecule.Key == key && job.Field == field {
			jobs = append(jobs, job)
		}
	})
	return jobs, err
}

// Job returns a job, or [ErrNotFound].
func (s *Store) Job(id string) (job Job, err error) {
	err = s.db.View(func(tx *bolt.Tx) error { return get(tx.Bucket(jobsBucket), []byte(id), &job) })
	return job, err
}

// UpdateJob changes a job in one transaction. If change returns an error nothing is written.
func (s *Store) UpdateJob(id string, change func(*Job) error) (job Job, err error) {
	err = s.db.Update(func(tx *bolt.Tx) error {
		jobs := tx.Bucket(jobsBucket)
		if err := get(jobs, []byte(id), &job); err != nil {
			return err
		}
		if err := change(&job); err != nil {
			return err
		}
		if job.State.Settled() {
			if err := dropCheckpoint(tx, id); err != nil {
				return err
			}
		}
		return put(jobs, []byte(id), job)
	})
	return job, err
}

// Jobs returns up to limit jobs, the newest first, beginning after the job with the identifier before ("" for the newest).
func (s *Store) Jobs(before string, limit int) (jobs []Job, err error) {
	err = s.db.View(func(tx *bolt.Tx) error {
		c := tx.Bucket(jobsBucket).Cursor()
		k, v := c.Last()
		if before != "" {
			if k, _ = c.Seek([]byte(before)); k == nil {
				k, v = c.Last()
			} else {
				k, v = c.Prev()
			}
		}
		for ; k != nil && len(jobs) < limit; k, v = c.Prev() {
			var job Job
			if err := json.Unmarshal(v, &job); err != nil {
				return fmt.Errorf("job %s: %w", k, err)
			}
			jobs = append(jobs, job)
		}
		return nil
	})
	return jobs, err
}

// Waiting returns the queued jobs in the order in which they should run: by priority, then by age.
func (s *Store) Waiting() (jobs []Job, err error) {
	err = s.eachJob(func(job Job) {
		if job.State == Queued {
			jobs = append(jobs, job)
		}
	})
	slices.SortStableFunc(jobs, func(a, b Job) int { return cmp.Compare(b.Priority, a.Priority) })
	return jobs, err
}

// Recover puts the jobs that were running when the last process ended back into the queue and returns how many there were.
func (s *Store) Recover() (recovered int, err error) {
	var interrupted []string
	err = s.eachJob(func(job Job) {
		if job.State == Running {
			interrupted = append(interrupted, job.ID)
		}
	})
	if err != nil {
		return 0, err
	}
	for _, id := range interrupted {
		if _, err := s.UpdateJob(id, func(j *Job) error { j.State = Queued; return nil }); err != nil {
			return recovered, err
		}
		recovered++
	}
	return recovered, nil
}

// eachJob visits the jobs from the oldest to the newest.
func (s *Store) eachJob(visit func(Job)) error {
	return s.db.View(func(tx *bolt.Tx) error {
		return tx.Bucket(jobsBucket).ForEach(func(k, v []byte) error {
			var job Job
			if err := json.Unmarshal(v, &job); err != nil {
				return fmt.Errorf("job %s: %w", k, err)
			}
			visit(job)
			return nil
		})
	})
}

// CountJobs returns the number of jobs in each state.
func (s *Store) CountJobs() (map[State]int, error) {
	counts := map[State]int{}
	return counts, s.eachJob(func(job Job) { counts[job.State]++ })
}
