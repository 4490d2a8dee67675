package jobs_test

import (
	"context"
	"io"
	"log/slog"
	"testing"
	"time"

	"github.com/stretchr/testify/require"
	"go.uber.org/goleak"

	"tarn/molecule/notation"
	"tarn/search"
	"tarn/server/jobs"
	"tarn/store"
)

func TestMain(m *testing.M) { goleak.VerifyTestMain(m) }

// bench is a store with a runner, started and stopped as a test likes.
type bench struct {
	t      *testing.T
	store  *store.Store
	runner *jobs.Runner
	stop   func()
}

func newBench(t *testing.T) *bench {
	t.Helper()
	s, err := store.Open(t.TempDir())
	require.NoError(t, err)
	b := &bench{t: t, store: s, stop: func() {}}
	t.Cleanup(func() {
		b.stop()
		require.NoError(t, s.Close())
	})
	b.fresh()
	return b
}

// fresh takes a new runner on the same store, as a new process would.
func (b *bench) fresh() {
	b.runner = jobs.New(b.store, 2, slog.New(slog.NewTextHandler(io.Discard, nil)))
}

func (b *bench) start() {
	ctx, cancel := context.WithCancel(context.Background())
	ended := make(chan error, 1)
	go func() { ended <- b.runner.Run(ctx) }()
	b.stop = func() {
		cancel()
		require.NoError(b.t, <-ended)
		b.stop = func() {}
	}
}

func (b *bench) submit(in notation.Input, s search.Settings, priority int) store.Job {
	b.t.Helper()
	job, err := jobs.NewJob(b.t.Context(), in, "", s, priority)
	require.NoError(b.t, err)
	job, err = b.runner.Submit(job)
	require.NoError(b.t, err)
	return job
}

// follow calls see with every change until it returns true.
func (b *bench) follow(l *jobs.Listener, see func(store.Job) bool) {
	b.t.Helper()
	patience := time.After(2 * time.Minute) // only so that a broken test ends
	for {
		select {
		case <-l.Ready():
			for _, job := range l.Take() {
				if see(job) {
					return
				}
			}
		case <-patience:
			require.FailNow(b.t, "what the test waits for does not come")
		}
	}
}

func (b *bench) until(id string, state store.State) store.Job {
	b.t.Helper()
	l := b.runner.Listen()
	defer l.Close()
	job, err := b.runner.Job(id)
	require.NoError(b.t, err)
	if job.State != state {
		b.follow(l, func(j store.Job) bool { job = j; return j.ID == id && j.State == state })
	}
	return job
}

var (
	butane   = notation.Input{SMILES: "CCCC", Name: "butane"}
	nonane   = notation.Input{SMILES: "CCCCCCCCC"} // more minima than a test waits for
	cluster5 = notation.Input{LJ: 5}
)

func TestJobsRunByPriorityThenByAge(t *testing.T) {
	b := newBench(t)
	var names []string
	for _, c := range []struct {
		name     string
		priority int
	}{{"c", 0}, {"d", 0}, {"a", 5}, {"e", -5}, {"b", 5}} {
		in := cluster5
		in.Name = c.name
		b.submit(in, search.Settings{MaxQuenches: 1}, c.priority)
	}
	l := b.runner.Listen()
	defer l.Close()
	b.start()
	b.follow(l, func(j store.Job) bool {
		if j.State == store.Done {
			names = append(names, j.Molecule.Name)
		}
		return len(names) == 5
	})
	require.Equal(t, []string{"a", "b", "c", "d", "e"}, names)
}

func TestFinishedJobTellsHowItEnded(t *testing.T) {
	b := newBench(t)
	job := b.submit(butane, search.Settings{Seed: 3}, 0)
	require.Equal(t, store.Queued, job.State)
	b.start()
	done := b.until(job.ID, store.Done)
	require.Equal(t, search.StopCoverage, done.StopReason)
	require.Equal(t, 2, done.Progress.Minima)
	require.Positive(t, done.Progress.Quenches)
	require.Equal(t, 1.0, done.Progress.Fraction)
	require.GreaterOrEqual(t, done.Progress.Coverage.Estimate, 0.99)
	require.False(t, done.Started.Before(done.Submitted) || done.Finished.Before(done.Started))
	entries, err := b.store.Entries(done.Molecule.Key, "mmff94")
	require.NoError(t, err)
	require.Len(t, entries, 2)
	for _, e := range entries {
		require.Positive(t, e.Degeneracy)
		require.Positive(t, e.Hits)
	}
	_, err = b.store.Checkpoint(job.ID)
	require.ErrorIs(t, err, store.ErrNotFound, "an ended job needs no checkpoint")
}

func TestRunningJobIsPausedResumedAndCancelled(t *testing.T) {
	b := newBench(t)
	long := b.submit(nonane, search.Settings{}, 0)
	next := b.submit(cluster5, search.Settings{MaxQuenches: 1}, 0)
	b.start()
	l := b.runner.Listen()
	defer l.Close()
	b.follow(l, func(j store.Job) bool { return j.ID == long.ID && j.Progress.Minima > 0 })

	paused, err := b.runner.Pause(long.ID)
	require.NoError(t, err)
	require.Equal(t, store.Paused, paused.State)
	require.Positive(t, paused.Progress.Quenches)
	b.until(next.ID, store.Done) // the queue goes on without it
	still, err := b.runner.Job(long.ID)
	require.NoError(t, err)
	require.Equal(t, store.Paused, still.State)

	resumed, err := b.runner.Resume(long.ID)
	require.NoError(t, err)
	require.Equal(t, store.Queued, resumed.State)
	b.follow(l, func(j store.Job) bool {
		return j.ID == long.ID && j.State == store.Running && j.Progress.Round > paused.Progress.Round
	})
	cancelled, err := b.runner.Cancel(long.ID)
	require.NoError(t, err)
	require.Equal(t, store.Cancelled, cancelled.State)
	entries, err := b.store.Entries(long.Molecule.Key, "mmff94")
	require.NoError(t, err)
	require.NotEmpty(t, entries, "what was found is kept")
	b.stop()
	last, err := b.store.Job(long.ID)
	require.NoError(t, err)
	require.Equal(t, store.Cancelled, last.State)
}

func TestQueuedJobIsPausedAndCancelledWithoutRunning(t *testing.T) {
	b := newBench(t)
	first, second := b.submit(butane, search.Settings{}, 0), b.submit(butane, search.Settings{}, 0)
	_, err := b.runner.Pause(first.ID)
	require.NoError(t, err)
	_, err = b.runner.Cancel(second.ID)
	require.NoError(t, err)
	third := b.submit(cluster5, search.Settings{MaxQuenches: 1}, -1)
	b.start()
	b.until(third.ID, store.Done)
	for id, state := range map[string]store.State{first.ID: store.Paused, second.ID: store.Cancelled} {
		job, err := b.runner.Job(id)
		require.NoError(t, err)
		require.Equal(t, state, job.State)
		require.Zero(t, job.Started)
	}
}

func TestImpossibleActionsAreRefusedWithTheState(t *testing.T) {
	b := newBench(t)
	job := b.submit(butane, search.Settings{}, 0)
	var refused *jobs.StateError
	_, err := b.runner.Resume(job.ID)
	require.ErrorAs(t, err, &refused)
	require.Equal(t, store.Queued, refused.State)
	_, err = b.runner.Pause(job.ID)
	require.NoError(t, err)
	_, err = b.runner.Pause(job.ID)
	require.ErrorAs(t, err, &refused)
	_, err = b.runner.Cancel(job.ID)
	require.NoError(t, err)
	for _, action := range []func(string) (store.Job, error){b.runner.Pause, b.runner.Resume, b.runner.Cancel} {
		_, err = b.runner.Job("")
		require.ErrorIs(t, err, store.ErrNotFound)
		_, err = action(job.ID)
		require.ErrorAs(t, err, &refused)
		require.Equal(t, store.Cancelled, refused.State)
		_, err = action("00000099")
		require.ErrorIs(t, err, store.ErrNotFound)
		_, err = action("")
		require.ErrorIs(t, err, store.ErrNotFound)
	}
}

func TestFailedJobSaysWhyAndLetsTheNextRun(t *testing.T) {
	b := newBench(t)
	broken, err := b.runner.Submit(store.Job{
		Input: notation.Input{SMILES: "CC("}, Molecule: store.Molecule{Key: "broken"}, Field: "mmff94",
	})
	require.NoError(t, err)
	next := b.submit(cluster5, search.Settings{MaxQuenches: 1}, 0)
	b.start()
	b.until(next.ID, store.Done)
	failed, err := b.runner.Job(broken.ID)
	require.NoError(t, err)
	require.Equal(t, store.Failed, failed.State)
	require.Contains(t, failed.Error, "column 3")
}

func TestOneMoleculeInSeveralNotationsHasOneLibrary(t *testing.T) {
	b := newBench(t)
	b.start()
	var key string
	total := 0
	for i, text := range []string{"CCCC", "C(C)CC", "[H]C([H])([H])CCC"} {
		job := b.submit(notation.Input{SMILES: text}, search.Settings{Seed: uint64(i)}, 0)
		done := b.until(job.ID, store.Done)
		if key == "" {
			key = done.Molecule.Key
		}
		require.Equal(t, key, done.Molecule.Key)
		entries, err := b.store.Entries(key, "mmff94")
		require.NoError(t, err)
		require.Len(t, entries, 2, "butane has two minima, whoever searched")
		hits := 0
		for _, e := range entries {
			require.Positive(t, e.HitsByJob[job.ID])
			hits += e.Hits
		}
		require.Greater(t, hits, total)
		total = hits
	}
	faults, err := b.store.Check()
	require.NoError(t, err)
	require.Empty(t, faults)
}
