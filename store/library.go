package store

import (
	"encoding/binary"
	"encoding/json"
	"errors"
	"fmt"

	bolt "go.etcd.io/bbolt"

	"tarn/dedupe"
	"tarn/search"
)

// Entry is a minimum of the library, with what each search contributed to it. Hits of the minimum is the sum over the searches.
type Entry struct {
	search.Minimum
	HitsByJob map[string]int `json:"hits_by_job"`
}

// Library is all minima ever found for a molecule in one force field, open for adding to. It holds the index of known minima in memory
// and must be used by one goroutine at a time, with one open Library for a molecule and field. After an error of Record it must be
// opened again.
type Library struct {
	store  *Store
	bucket []byte
	index  *dedupe.Index
	order  []int // atom of the search that stands at each place of the library; nil: the same order
}

// ErrSettled says that a job has ended, so that nothing more can be recorded for it.
var ErrSettled = errors.New("the job has ended")

// OpenLibrary reads the known minima of a molecule into an index. symmetry is that of the molecule in the order of the library; order
// names the atom of the search that stands at each place of it, nil if they are the same.
func (s *Store) OpenLibrary(key, field string, symmetry *dedupe.Symmetry, order []int) (*Library, error) {
	l := &Library{store: s, bucket: libraryName(key, field), index: dedupe.NewIndex(symmetry, dedupe.Tolerance{}), order: order}
	err := s.eachEntry(l.bucket, func(n uint64, e Entry) error {
		if id := l.index.Add(e.X, e.Energy); id != int(n) {
			return fmt.Errorf("library %s: entry %d is missing", l.bucket, id)
		}
		return nil
	})
	if err != nil {
		return nil, err
	}
	return l, nil
}

// Record writes a checkpoint of a job and merges its minima into the library, all in one transaction. A minimum that another search has
// found before keeps its place and gains the hits. Recording the same checkpoint again changes nothing.
func (l *Library) Record(jobID string, c search.Checkpoint) error {
	return l.store.db.Update(func(tx *bolt.Tx) error {
		var job Job
		if err := get(tx.Bucket(jobsBucket), []byte(jobID), &job); err != nil {
			return fmt.Errorf("job %s: %w", jobID, err)
		}
		if job.State.Settled() {
			return ErrSettled
		}
		if err := putCheckpoint(tx, jobID, c); err != nil {
			return err
		}
		links, err := tx.Bucket(checkpointsBucket).Bucket([]byte(jobID)).CreateBucketIfNotExists(linksBucket)
		if err != nil {
			return err
		}
		entries, err := tx.Bucket(librariesBucket).CreateBucketIfNotExists(l.bucket)
		if err != nil {
			return err
		}
		for i, m := range c.Minima {
			if err := l.merge(entries, links, jobID, uint64(i), m); err != nil {
				return fmt.Errorf("library %s, minimum %d of job %s: %w", l.bucket, i+1, jobID, err)
			}
		}
		return nil
	})
}

func (l *Library) merge(entries, links *bolt.Bucket, jobID string, i uint64, m search.Minimum) error {
	m.X = l.reordered(m.X)
	var e Entry
	place := links.Get(number(i))
	if place == nil {
		id, known := l.index.Find(m.X, m.Energy)
		if !known {
			id = l.index.Add(m.X, m.Energy)
			m.Hits, m.Draws = 0, 0 // they are counted by job below
			e = Entry{Minimum: m, HitsByJob: map[string]int{}}
			if err := put(entries, number(uint64(id)), e); err != nil {
				return err
			}
		}
		place = number(uint64(id))
		if err := links.Put(number(i), place); err != nil {
			return err
		}
	}
	if err := get(entries, place, &e); err != nil {
		return err
	}
	described := e.Degeneracy == 0 && m.Degeneracy > 0
	if e.HitsByJob[jobID] == m.Hits && !described {
		return nil
	}
	if described {
		hits := e.Hits
		e.Minimum = m
		e.Hits, e.Draws = hits, 0
	}
	e.Hits += m.Hits - e.HitsByJob[jobID]
	e.HitsByJob[jobID] = m.Hits
	return put(entries, place, e)
}

func (l *Library) reordered(x []float64) []float64 {
	if l.order == nil {
		return x
	}
	y := make([]float64, 0, len(x))
	for _, i := range l.order {
		y = append(y, x[3*i:3*i+3]...)
	}
	return y
}

// Entries returns the library of a molecule in a field, in the order of discovery; empty if nothing has been found yet.
func (s *Store) Entries(key, field string) (all []Entry, err error) {
	err = s.eachEntry(libraryName(key, field), func(_ uint64, e Entry) error {
		all = append(all, e)
		return nil
	})
	return all, err
}

// Fields returns the force fields in which a molecule has a library.
func (s *Store) Fields(key string) (fields []string, err error) {
	prefix := key + "/"
	err = s.db.View(func(tx *bolt.Tx) error {
		return tx.Bucket(librariesBucket).ForEachBucket(func(k []byte) error {
			if name := string(k); len(name) > len(prefix) && name[:len(prefix)] == prefix {
				fields = append(fields, name[len(prefix):])
			}
			return nil
		})
	})
	return fields, err
}

func (s *Store) eachEntry(bucket []byte, visit func(uint64, Entry) error) error {
	return s.db.View(func(tx *bolt.Tx) error {
		b := tx.Bucket(librariesBucket).Bucket(bucket)
		if b == nil {
			return nil
		}
		return b.ForEach(func(k, v []byte) error {
			var e Entry
			if err := json.Unmarshal(v, &e); err != nil {
				return fmt.Errorf("library %s, entry %d: %w", bucket, binary.BigEndian.Uint64(k), err)
			}
			return visit(binary.BigEndian.Uint64(k), e)
		})
	})
}

func libraryName(key, field string) []byte { return []byte(key + "/" + field) }
