package store_test

import (
	"cmp"
	"errors"
	"math"
	"os"
	"slices"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"tarn/dedupe"
	"tarn/molecule/notation"
	"tarn/search"
	"tarn/store"
)

// The minima of the tests are pairs of atoms: number n has the distance 1 + n/2, in any orientation.
var pair = dedupe.NewClusterSymmetry(2)

func distanceOf(n int) float64 { return 1 + float64(n)/2 }

func turned(n int, angle float64) []float64 {
	d := distanceOf(n)
	return []float64{0, 0, 0, d * math.Cos(angle), d * math.Sin(angle), 0}
}

func numberOf(x []float64) int {
	return int(math.Round(2 * (math.Hypot(math.Hypot(x[3]-x[0], x[4]-x[1]), x[5]-x[2]) - 1)))
}

// model is what a store should hold.
type model struct {
	t         *rapid.T
	folder    string
	store     *store.Store
	libraries map[string]*store.Library // open ones
	jobs      []store.Job               // by identifier
	last      map[string]search.Checkpoint
	found     map[string][]int                  // library → numbers of the minima in the order of discovery
	hits      map[string]map[int]map[string]int // library → number → job → hits
	described map[string]map[int]bool           // library → number
}

func TestStoreAgreesWithModel(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		folder, err := os.MkdirTemp("", "store")
		require.NoError(t, err)
		defer os.RemoveAll(folder)
		m := &model{
			t: t, folder: folder, last: map[string]search.Checkpoint{},
			found: map[string][]int{}, hits: map[string]map[int]map[string]int{}, described: map[string]map[int]bool{},
		}
		m.open()
		defer func() { require.NoError(t, m.store.Close()) }()
		t.Repeat(map[string]func(*rapid.T){
			"submit":        func(t *rapid.T) { m.with(t).submit() },
			"record":        func(t *rapid.T) { m.with(t).record() },
			"record again":  func(t *rapid.T) { m.with(t).replay() },
			"change state":  func(t *rapid.T) { m.with(t).changeState() },
			"refuse change": func(t *rapid.T) { m.with(t).refuseChange() },
			"reopen":        func(t *rapid.T) { m.with(t).reopen() },
			"recover":       func(t *rapid.T) { m.with(t).recover() },
			"":              func(t *rapid.T) { m.with(t).compare() },
		})
	})
}

func (m *model) with(t *rapid.T) *model { m.t = t; return m }

func (m *model) open() {
	var err error
	m.store, err = store.Open(m.folder)
	require.NoError(m.t, err)
	m.store.SkipSync()
	m.libraries = map[string]*store.Library{}
}

func (m *model) reopen() {
	require.NoError(m.t, m.store.Close())
	m.open()
}

func (m *model) submit() {
	key := rapid.SampledFrom([]string{"lj-2", "other"}).Draw(m.t, "key")
	job, err := m.store.Submit(store.Job{
		Input: notation.Input{LJ: 2}, Molecule: store.Molecule{Key: key, Formula: "LJ2"},
		Field: rapid.SampledFrom([]string{"lj", "mmff94"}).Draw(m.t, "field"), Priority: rapid.IntRange(-1, 1).Draw(m.t, "priority"),
	})
	require.NoError(m.t, err)
	if len(m.jobs) > 0 {
		require.Greater(m.t, job.ID, m.jobs[len(m.jobs)-1].ID, "identifiers grow")
	}
	m.jobs = append(m.jobs, job)
}

// pick draws a job that can be in one of the states; nil if there is none.
func (m *model) pick(usable func(store.State) bool) *store.Job {
	var places []int
	for i := range m.jobs {
		if usable(m.jobs[i].State) {
			places = append(places, i)
		}
	}
	if len(places) == 0 {
		return nil
	}
	return &m.jobs[rapid.SampledFrom(places).Draw(m.t, "job")]
}

func libraryOf(job *store.Job) string { return job.Molecule.Key + "/" + job.Field }

func (m *model) library(job *store.Job) *store.Library {
	name := libraryOf(job)
	if m.libraries[name] == nil {
		l, err := m.store.OpenLibrary(job.Molecule.Key, job.Field, pair, nil)
		require.NoError(m.t, err)
		m.libraries[name] = l
	}
	return m.libraries[name]
}

// record does a round of a search: hits for minima that it knows or finds.
func (m *model) record() {
	job := m.pick(func(store.State) bool { return true })
	if job == nil {
		return
	}
	c := m.last[job.ID]
	c.Minima = slices.Clone(c.Minima)
	drawn := rapid.SliceOfN(rapid.IntRange(0, 7), 0, 5).Draw(m.t, "minima hit")
	for _, n := range drawn {
		at := slices.IndexFunc(c.Minima, func(known search.Minimum) bool { return numberOf(known.X) == n })
		if at < 0 {
			at = len(c.Minima)
			angle := rapid.Float64Range(0, 6).Draw(m.t, "angle")
			c.Minima = append(c.Minima, search.Minimum{Energy: -1 / distanceOf(n), X: turned(n, angle), FoundInRound: c.Round})
		}
		c.Minima[at].Hits++
		c.Minima[at].LastHitInRound = c.Round
	}
	for i := range c.Minima {
		if c.Minima[i].FoundInRound == c.Round && rapid.Bool().Draw(m.t, "described") {
			c.Minima[i].Degeneracy = 1 + numberOf(c.Minima[i].X)
		}
	}
	c.Round++
	c.Quenches += len(drawn)
	err := m.library(job).Record(job.ID, c)
	if job.State.Settled() {
		require.ErrorIs(m.t, err, store.ErrSettled)
		return
	}
	require.NoError(m.t, err)
	m.last[job.ID] = c
	name := libraryOf(job)
	if m.hits[name] == nil {
		m.hits[name], m.described[name] = map[int]map[string]int{}, map[int]bool{}
	}
	for _, known := range c.Minima {
		n := numberOf(known.X)
		if m.hits[name][n] == nil {
			m.hits[name][n] = map[string]int{}
			m.found[name] = append(m.found[name], n)
		}
		m.hits[name][n][job.ID] = known.Hits
		m.described[name][n] = m.described[name][n] || known.Degeneracy > 0
	}
}

// replay records a checkpoint again, as it was or with everything described, as a search does at its end.
func (m *model) replay() {
	job := m.pick(func(s store.State) bool { return !s.Settled() })
	if job == nil {
		return
	}
	c, recorded := m.last[job.ID]
	if !recorded {
		return
	}
	require.NoError(m.t, m.library(job).Record(job.ID, c))
	if rapid.Bool().Draw(m.t, "at the end") {
		c.Minima = slices.Clone(c.Minima)
		for i := range c.Minima {
			n := numberOf(c.Minima[i].X)
			c.Minima[i].Degeneracy = 1 + n
			m.described[libraryOf(job)][n] = true
		}
		require.NoError(m.t, m.library(job).Record(job.ID, c))
		changed, err := m.store.UpdateJob(job.ID, func(j *store.Job) error { j.State = store.Done; return nil })
		require.NoError(m.t, err)
		job.State = changed.State
		delete(m.last, job.ID)
	}
}

func (m *model) changeState() {
	job := m.pick(func(s store.State) bool { return !s.Settled() })
	if job == nil {
		return
	}
	state := rapid.SampledFrom([]store.State{store.Queued, store.Running, store.Paused, store.Done, store.Failed, store.Cancelled}).Draw(m.t, "state")
	changed, err := m.store.UpdateJob(job.ID, func(j *store.Job) error { j.State = state; return nil })
	require.NoError(m.t, err)
	require.Equal(m.t, state, changed.State)
	job.State = state
	if state.Settled() {
		delete(m.last, job.ID)
	}
}

func (m *model) refuseChange() {
	if job := m.pick(func(store.State) bool { return true }); job != nil {
		reason := errors.New("not now")
		_, err := m.store.UpdateJob(job.ID, func(j *store.Job) error { j.State, j.Error = store.Failed, "half done"; return reason })
		require.ErrorIs(m.t, err, reason)
	}
	_, err := m.store.UpdateJob("99999999", func(*store.Job) error { return nil })
	require.ErrorIs(m.t, err, store.ErrNotFound)
}

func (m *model) recover() {
	running := 0
	for i := range m.jobs {
		if m.jobs[i].State == store.Running {
			m.jobs[i].State = store.Queued
			running++
		}
	}
	recovered, err := m.store.Recover()
	require.NoError(m.t, err)
	require.Equal(m.t, running, recovered)
}

func (m *model) compare() {
	m.compareJobs()
	for i := range m.jobs {
		got, err := m.store.Checkpoint(m.jobs[i].ID)
		if want, recorded := m.last[m.jobs[i].ID]; recorded {
			require.NoError(m.t, err)
			require.Equal(m.t, want, *got)
		} else {
			require.ErrorIs(m.t, err, store.ErrNotFound)
		}
	}
	for _, key := range []string{"lj-2", "other", "unknown"} {
		for _, field := range []string{"lj", "mmff94"} {
			m.compareLibrary(key, field)
		}
	}
	faults, err := m.store.Check()
	require.NoError(m.t, err)
	require.Empty(m.t, faults)
}

func (m *model) compareJobs() {
	newest := slices.Clone(m.jobs)
	slices.Reverse(newest)
	var got []store.Job
	for cursor := ""; ; {
		page, err := m.store.Jobs(cursor, 3)
		require.NoError(m.t, err)
		got = append(got, page...)
		if len(page) < 3 {
			break
		}
		cursor = page[2].ID
	}
	require.Equal(m.t, newest, got)
	waiting := slices.DeleteFunc(slices.Clone(m.jobs), func(j store.Job) bool { return j.State != store.Queued })
	slices.SortStableFunc(waiting, func(a, b store.Job) int { return cmp.Compare(b.Priority, a.Priority) })
	gotWaiting, err := m.store.Waiting()
	require.NoError(m.t, err)
	require.Equal(m.t, len(waiting), len(gotWaiting))
	for i := range waiting {
		require.Equal(m.t, waiting[i].ID, gotWaiting[i].ID)
	}
}

func (m *model) compareLibrary(key, field string) {
	name := key + "/" + field
	entries, err := m.store.Entries(key, field)
	require.NoError(m.t, err)
	require.Len(m.t, entries, len(m.found[name]))
	for place, n := range m.found[name] {
		e := entries[place]
		require.Equal(m.t, n, numberOf(e.X), "place %d of %s", place, name)
		total := 0
		for _, hits := range m.hits[name][n] {
			total += hits
		}
		require.Equal(m.t, total, e.Hits)
		require.Equal(m.t, m.hits[name][n], e.HitsByJob)
		if m.described[name][n] {
			require.Equal(m.t, 1+n, e.Degeneracy)
		} else {
			require.Zero(m.t, e.Degeneracy)
		}
	}
	fields, err := m.store.Fields(key)
	require.NoError(m.t, err)
	var want []string
	for library := range m.hits {
		if f, ok := strings.CutPrefix(library, key+"/"); ok {
			want = append(want, f)
		}
	}
	slices.Sort(want)
	require.Equal(m.t, want, fields)
}
