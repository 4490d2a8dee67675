package store_test

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"github.com/stretchr/testify/require"
	bolt "go.etcd.io/bbolt"

	"tarn/dedupe"
	"tarn/molecule/notation"
	"tarn/molecule/smiles"
	"tarn/search"
	"tarn/store"
)

func open(t *testing.T, folder string) *store.Store {
	t.Helper()
	s, err := store.Open(folder)
	require.NoError(t, err)
	t.Cleanup(func() { _ = s.Close() })
	return s
}

func submit(t *testing.T, s *store.Store, job store.Job) store.Job {
	t.Helper()
	job, err := s.Submit(job)
	require.NoError(t, err)
	return job
}

var pairJob = store.Job{Input: notation.Input{LJ: 2}, Molecule: store.Molecule{Key: "lj-2", Formula: "LJ2"}, Field: "lj"}

func TestSecondProcessIsToldThatTheFolderIsInUse(t *testing.T) {
	folder := t.TempDir()
	open(t, folder)
	_, err := store.Open(folder) // locks are per open file: the same process stands for another one
	require.ErrorIs(t, err, store.ErrLocked)
	require.ErrorContains(t, err, "--data", "the remedy is named")
}

func TestFileOfAnotherSchemaIsRefused(t *testing.T) {
	folder := t.TempDir()
	require.NoError(t, open(t, folder).Close())
	db, err := bolt.Open(filepath.Join(folder, "tarn.db"), 0o600, nil)
	require.NoError(t, err)
	require.NoError(t, db.Update(func(tx *bolt.Tx) error {
		return tx.Bucket([]byte("meta")).Put([]byte("schema"), []byte{0, 0, 0, 0, 0, 0, 0, 99})
	}))
	require.NoError(t, db.Close())
	_, err = store.Open(folder)
	require.ErrorContains(t, err, "schema 99")
}

func TestForeignFileIsRefusedAndLeftAlone(t *testing.T) {
	folder := t.TempDir()
	path := filepath.Join(folder, "tarn.db")
	require.NoError(t, os.WriteFile(path, []byte("these are the minutes of a meeting, and no store\n"), 0o600))
	_, err := store.Open(folder)
	require.ErrorContains(t, err, "tarn.db")
	left, err := os.ReadFile(path)
	require.NoError(t, err)
	require.Contains(t, string(left), "minutes of a meeting")
}

func TestTwoMinimaOfASearchWithinTheToleranceOfOneEntryKeepAllHits(t *testing.T) {
	s := open(t, t.TempDir())
	record := func(c search.Checkpoint) string {
		job := submit(t, s, pairJob)
		l, err := s.OpenLibrary("lj-2", "lj", pair, nil)
		require.NoError(t, err)
		require.NoError(t, l.Record(job.ID, c))
		require.NoError(t, l.Record(job.ID, c), "again")
		return job.ID
	}
	first := record(search.Checkpoint{Round: 1, Minima: []search.Minimum{{Energy: -1, X: turned(0, 0), Hits: 3}}})
	// The energies of these two are further apart than the tolerance of 0.001, but each is within it of the known one.
	second := record(search.Checkpoint{Round: 1, Minima: []search.Minimum{
		{Energy: -1.0008, X: turned(0, 1), Hits: 5}, {Energy: -0.9992, X: turned(0, 2), Hits: 7},
	}})
	entries, err := s.Entries("lj-2", "lj")
	require.NoError(t, err)
	require.Len(t, entries, 1)
	require.Equal(t, 15, entries[0].Hits)
	require.Equal(t, map[string]int{first: 3, second: 12}, entries[0].HitsByJob)
}

func TestLibraryKeepsItsOrderOfAtoms(t *testing.T) {
	m, err := smiles.Parse("O")
	require.NoError(t, err)
	symmetry, err := dedupe.NewSymmetry(m)
	require.NoError(t, err)
	s := open(t, t.TempDir())
	water := store.Job{Input: notation.Input{SMILES: "O"}, Molecule: store.Molecule{Key: "water"}, Field: "mmff94"}
	record := func(x []float64, order []int) {
		job := submit(t, s, water)
		l, err := s.OpenLibrary("water", "mmff94", symmetry, order)
		require.NoError(t, err)
		require.NoError(t, l.Record(job.ID, search.Checkpoint{Round: 1, Minima: []search.Minimum{{X: x, Hits: 1}}}))
	}
	record([]float64{0, 0, 0, 0.97, 0, 0, -0.24, 0.94, 0}, nil)              // O H H
	record([]float64{0.97, 0, 0, 0, 0, 0, -0.24, 0.94, 0}, []int{1, 0, 2})   // H O H
	record([]float64{-0.24, 0.94, 0, 0.97, 0, 0, 0, 0, 0.0}, []int{2, 0, 1}) // H H O
	record([]float64{5, 5, 5, 5.97, 5, 5, 4.76, 5.94, 5}, []int{0, 1, 2})    // elsewhere in space
	record([]float64{0, 0, 0, 1.5, 0, 0, -0.24, 0.94, 0}, nil)               // stretched: another one
	entries, err := s.Entries("water", "mmff94")
	require.NoError(t, err)
	require.Len(t, entries, 2)
	require.Equal(t, 4, entries[0].Hits)
	require.Equal(t, []float64{0, 0, 0, 0.97, 0, 0, -0.24, 0.94, 0}, entries[0].X)
}

func TestMoleculeKeepsItsFirstNameAndReference(t *testing.T) {
	s := open(t, t.TempDir())
	with := func(name, smiles string) store.Job {
		return store.Job{Input: notation.Input{SMILES: smiles}, Molecule: store.Molecule{Key: "k", Name: name}, Field: "mmff94"}
	}
	submit(t, s, with("", "CCO"))
	submit(t, s, with("ethanol", "OCC"))
	submit(t, s, with("spirit", "C(C)O"))
	m, err := s.Molecule("k")
	require.NoError(t, err)
	require.Equal(t, "ethanol", m.Name)
	require.Equal(t, "CCO", m.Reference.SMILES, "the order of atoms is that of the first input")
	all, err := s.Molecules()
	require.NoError(t, err)
	require.Equal(t, []store.Molecule{m}, all)
	_, err = s.Molecule("unknown")
	require.ErrorIs(t, err, store.ErrNotFound)
}

func TestCheckFindsWhatDoesNotFit(t *testing.T) {
	for _, c := range []struct {
		name, fault string
		harm        func(tx *bolt.Tx) error
	}{
		{"job without molecule", "its molecule lj-2 is missing", func(tx *bolt.Tx) error {
			return tx.Bucket([]byte("molecules")).Delete([]byte("lj-2"))
		}},
		{"unreadable job", "cannot be read", func(tx *bolt.Tx) error {
			return tx.Bucket([]byte("jobs")).Put([]byte("00000001"), []byte("{"))
		}},
		{"hits from nowhere", "has 9 hits, its searches 3", func(tx *bolt.Tx) error {
			return tx.Bucket([]byte("libraries")).Bucket([]byte("lj-2/lj")).
				Put([]byte{0, 0, 0, 0, 0, 0, 0, 0}, []byte(`{"x":[0,0,0,1,0,0],"hits":9,"hits_by_job":{"00000001":3}}`))
		}},
		{"a gap in the library", "follows entry", func(tx *bolt.Tx) error {
			return tx.Bucket([]byte("libraries")).Bucket([]byte("lj-2/lj")).
				Put([]byte{0, 0, 0, 0, 0, 0, 0, 7}, []byte(`{"x":[0,0,0,1,0,0],"hits_by_job":{}}`))
		}},
		{"minimum without place", "has no place in the library", func(tx *bolt.Tx) error {
			return tx.Bucket([]byte("libraries")).Bucket([]byte("lj-2/lj")).Delete([]byte{0, 0, 0, 0, 0, 0, 0, 0})
		}},
		{"checkpoint of an ended job", "kept its checkpoint", func(tx *bolt.Tx) error {
			return tx.Bucket([]byte("jobs")).Put([]byte("00000001"), []byte(`{"id":"00000001","state":"done","molecule":{"key":"lj-2"},"field":"lj"}`))
		}},
	} {
		t.Run(c.name, func(t *testing.T) {
			folder := t.TempDir()
			s := open(t, folder)
			job := submit(t, s, pairJob)
			l, err := s.OpenLibrary("lj-2", "lj", pair, nil)
			require.NoError(t, err)
			require.NoError(t, l.Record(job.ID, search.Checkpoint{Round: 1, Minima: []search.Minimum{{Energy: -1, X: turned(0, 0), Hits: 3}}}))
			faults, err := s.Check()
			require.NoError(t, err)
			require.Empty(t, faults)
			require.NoError(t, s.Close())

			db, err := bolt.Open(filepath.Join(folder, "tarn.db"), 0o600, nil)
			require.NoError(t, err)
			require.NoError(t, db.Update(c.harm))
			require.NoError(t, db.Close())
			faults, err = open(t, folder).Check()
			require.NoError(t, err)
			require.Contains(t, strings.Join(faults, "\n"), c.fault)
		})
	}
}
