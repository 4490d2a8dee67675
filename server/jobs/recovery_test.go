package jobs_test

import (
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule/notation"
	"tarn/search"
	"tarn/store"
)

var pentane = notation.Input{SMILES: "CCCCC"}

// outcome is what a search leaves behind, apart from the time that it took.
func (b *bench) outcome(id string) (store.Job, []store.Entry) {
	b.t.Helper()
	job, err := b.store.Job(id)
	require.NoError(b.t, err)
	job.Submitted, job.Started, job.Finished = job.Submitted.UTC(), job.Submitted, job.Submitted
	job.Counted.ElapsedSeconds, job.Progress.SecondsLeft = 0, 0
	job.Progress.TemperatureK, job.Progress.EnergyKcal = 0, 0 // of the walk that reported last
	entries, err := b.store.Entries(job.Molecule.Key, job.Field)
	require.NoError(b.t, err)
	return job, entries
}

func TestSearchEndsTheSameHoweverOftenItWasInterrupted(t *testing.T) {
	settings := search.Settings{Seed: 11}
	calm := newBench(t)
	job := calm.submit(pentane, settings, 0)
	calm.start()
	calm.until(job.ID, store.Done)
	want, wantEntries := calm.outcome(job.ID)
	require.Len(t, wantEntries, 4, "pentane has four minima")
	require.Greater(t, want.Progress.Round, 2, "there must be rounds to interrupt")

	b := newBench(t)
	again := b.submit(pentane, settings, 0)
	require.Equal(t, job.ID, again.ID)
	stops := 0
	for round := 0; ; round++ {
		b.fresh()
		l := b.runner.Listen()
		b.start()
		ended := false
		b.follow(l, func(j store.Job) bool {
			ended = j.State == store.Done
			return ended || j.State == store.Running && j.Progress.Round > round
		})
		l.Close()
		if ended {
			break
		}
		b.stop()
		left, err := b.store.Job(job.ID)
		require.NoError(t, err)
		if left.State == store.Done { // just before it was stopped
			break
		}
		require.Equal(t, store.Queued, left.State, "a stopped server leaves its job in the queue")
		stops++
	}
	require.Positive(t, stops)
	got, gotEntries := b.outcome(job.ID)
	got.Submitted, got.Started, got.Finished = want.Submitted, want.Started, want.Finished
	require.Equal(t, want, got)
	require.Equal(t, wantEntries, gotEntries)
}

func TestJobThatWasRunningWhenTheProcessDiedGoesOn(t *testing.T) {
	b := newBench(t)
	job := b.submit(butane, search.Settings{}, 0)
	_, err := b.store.UpdateJob(job.ID, func(j *store.Job) error { j.State = store.Running; return nil }) // as kill -9 leaves it
	require.NoError(t, err)
	b.start()
	b.until(job.ID, store.Done)
}
