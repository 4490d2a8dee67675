package api

import (
	"context"
	"slices"
	"time"

	"tarn/ensemble/report"
	"tarn/molecule/notation"
	"tarn/search"
	"tarn/server/jobs"
	"tarn/store"
)

// JobRequest asks for a search. Everything but the molecule has a default.
type JobRequest struct {
	Molecule     notation.Input `json:"molecule"`
	Field        string         `json:"field,omitempty" enum:"mmff94,mmff94s,lj" doc:"Force field; default mmff94, for clusters lj"`
	Method       search.Method  `json:"method,omitempty" enum:"anneal,dynamics,mixed" doc:"How walks move; the default is the one that docs/search.md found best"`
	Seed         uint64         `json:"seed,omitempty" doc:"Of all random streams: the same seed gives the same library"`
	WindowKcal   *float64       `json:"window_kcal_mol,omitempty" exclusiveMinimum:"0" maximum:"1000" doc:"Energy range above the lowest minimum that matters; default 6"`
	Coverage     *float64       `json:"coverage,omitempty" exclusiveMinimum:"0" maximum:"1" doc:"Estimated coverage at which the search stops; default 0.99"`
	MaxQuenches  *int           `json:"max_quenches,omitempty" minimum:"1" doc:"Budget of quenches"`
	MaxSeconds   *float64       `json:"max_seconds,omitempty" exclusiveMinimum:"0" doc:"Budget of wall time"`
	TemperatureK *float64       `json:"temperature_k,omitempty" exclusiveMinimum:"0" maximum:"10000" doc:"Of the populations; default 298.15"`
	Priority     int            `json:"priority,omitempty" minimum:"-100" maximum:"100" doc:"Higher runs first"`
}

func (r *JobRequest) settings() search.Settings {
	return search.Settings{
		Method: r.Method, Seed: r.Seed, WindowKcal: value(r.WindowKcal), Coverage: value(r.Coverage),
		MaxQuenches: value(r.MaxQuenches), MaxSeconds: value(r.MaxSeconds), TemperatureK: value(r.TemperatureK),
	}
}

func value[T any](p *T) (v T) {
	if p != nil {
		v = *p
	}
	return v
}

// Job is the resource of a job.
type Job struct {
	ID       string          `json:"id"`
	State    store.State     `json:"state" enum:"queued,running,paused,done,failed,cancelled"`
	Molecule report.Molecule `json:"molecule"`
	Field    string          `json:"field"`
	Method   search.Method   `json:"method"`
	Seed     uint64          `json:"seed"`
	Settings search.Settings `json:"settings"`
	Priority int             `json:"priority"`

	Submitted time.Time `json:"submitted"`
	Started   time.Time `json:"started,omitzero"`
	Finished  time.Time `json:"finished,omitzero"`

	Progress   search.Progress   `json:"progress"`
	StopReason search.StopReason `json:"stop_reason,omitempty"`
	Stopped    string            `json:"stopped,omitempty" doc:"The stop reason in words"`
	Warnings   []string          `json:"warnings,omitempty"`
	Error      string            `json:"error,omitempty"`
}

func resource(j store.Job) Job {
	out := Job{
		ID: j.ID, State: j.State, Molecule: identity(j.Molecule), Field: j.Field, Method: j.Settings.Method, Seed: j.Settings.Seed,
		Settings: j.Settings, Priority: j.Priority, Submitted: j.Submitted, Started: j.Started, Finished: j.Finished,
		Progress: j.Progress, StopReason: j.StopReason, Warnings: append(slices.Clone(j.Notes), report.Warnings(j.Counted)...), Error: j.Error,
	}
	if j.StopReason != "" {
		out.Stopped = report.StopSentence(j.StopReason)
	}
	return out
}

func identity(m store.Molecule) report.Molecule {
	return report.Molecule{Name: m.Name, SMILES: m.SMILES, Formula: m.Formula, Key: m.Key}
}

type jobID struct {
	ID string `path:"id" maxLength:"20"`
}

type jobAnswer struct {
	Location string `header:"Location"`
	Body     Job
}

func answer(j store.Job) *jobAnswer { return &jobAnswer{"/api/v1/jobs/" + j.ID, resource(j)} }

func (s *server) submitJob(ctx context.Context, in *struct{ Body JobRequest }) (*jobAnswer, error) {
	ctx, cancel := context.WithTimeout(ctx, requestTimeout)
	defer cancel()
	job, err := jobs.NewJob(ctx, in.Body.Molecule, in.Body.Field, in.Body.settings(), in.Body.Priority)
	if err != nil {
		return nil, s.refusal(ctx, err)
	}
	if job, err = s.Queue.Submit(job); err != nil {
		return nil, s.problem(ctx, err)
	}
	return answer(job), nil
}

func (s *server) getJob(ctx context.Context, in *jobID) (*jobAnswer, error) {
	job, err := s.Queue.Job(in.ID)
	if err != nil {
		return nil, s.problem(ctx, err)
	}
	return answer(job), nil
}

func (s *server) act(action func(id string) (store.Job, error)) func(context.Context, *jobID) (*jobAnswer, error) {
	return func(ctx context.Context, in *jobID) (*jobAnswer, error) {
		job, err := action(in.ID)
		if err != nil {
			return nil, s.problem(ctx, err)
		}
		return answer(job), nil
	}
}

type jobList struct {
	Body struct {
		Jobs       []Job  `json:"jobs"`
		NextCursor string `json:"next_cursor,omitempty" doc:"Give it as cursor for the jobs before these"`
	}
}

func (s *server) listJobs(ctx context.Context, in *struct {
	Limit  int    `query:"limit" default:"50" minimum:"1" maximum:"500"`
	Cursor string `query:"cursor" pattern:"^[0-9]{1,18}$" patternDescription:"the next_cursor of another answer"`
},
) (*jobList, error) {
	found, err := s.Queue.Jobs(in.Cursor, in.Limit)
	if err != nil {
		return nil, s.problem(ctx, err)
	}
	list := &jobList{}
	list.Body.Jobs = make([]Job, 0, len(found))
	for _, j := range found {
		list.Body.Jobs = append(list.Body.Jobs, resource(j))
	}
	if len(found) == in.Limit {
		list.Body.NextCursor = found[len(found)-1].ID
	}
	return list, nil
}
