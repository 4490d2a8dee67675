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
	store     *Store
	bucket    []byte
	index     *dedupe.Index // an identifier is a place in the library
	described []bool        // by place: the properties of the minimum are there
	order     []int         // atom of the search that stands at each place of the geometry; nil: the same order
}

// ErrSettled says that a job has ended, so that nothing more can be recorded for it.
var ErrSettled = errors.New("the job has ended")

// OpenLibrary reads the known minima of a molecule into an index. symmetry is that of the molecule in the order of the library; order
// names the atom of the search that stands at each place of it, nil if they are the same.
func (s *Store) OpenLibrary(key, field string, symmetry *dedupe.Symmetry, order []int) (*Library, error) {
	l := &Library{store: s, bucket: libraryName(key, field), index: dedupe.NewIndex(symmetry, dedupe.Tolerance{}), order: order}
	err := s.eachEntry(l.bucket, func(n uint64, e Entry) error {
		if place := l.learn(e.Minimum); place != int(n) {
			return fmt.Errorf("library %s: entry %d is missing", l.bucket, place)
		}
		return nil
	})
	if err != nil {
		return nil, err
	}
	return l, nil
}

func (l *Library) learn(m search.Minimum) (place int) {
	l.described = append(l.described, m.Degeneracy > 0)
	return l.index.Add(m.X, m.Energy)
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
		if err := l.merge(entries, links, jobID, c); err != nil {
			return fmt.Errorf("library %s, job %s: %w", l.bucket, jobID, err)
		}
		return nil
	})
}

// merge brings the minima of a job to their places. Only those that the last round touched or that have been described since are looked
// at; the others were merged with an earlier checkpoint.
func (l *Library) merge(entries, links *bolt.Bucket, jobID string, c search.Checkpoint) error {
	places := make([]int, len(c.Minima))
	hits := map[int]int{} // two minima of a search may lie within the tolerance of one entry
	for i := range c.Minima {
		place, err := l.placeOf(entries, links, uint64(i), &c.Minima[i])
		if err != nil {
			return err
		}
		places[i] = place
		hits[place] += c.Minima[i].Hits
	}
	for i, place := range places {
		m := &c.Minima[i]
		describes := m.Degeneracy > 0 && !l.described[place]
		if m.LastHitInRound < c.Round-1 && !describes {
			continue
		}
		var e Entry
		if err := get(entries, number(uint64(place)), &e); err != nil {
			return err
		}
		if describes {
			total := e.Hits
			e.Minimum = *m
			e.X, e.Hits, e.Draws = l.reordered(m.X), total, 0
			l.described[place] = true
		}
		e.Hits += hits[place] - e.HitsByJob[jobID]
		e.HitsByJob[jobID] = hits[place]
		if err := put(entries, number(uint64(place)), e); err != nil {
			return err
		}
	}
	return nil
}

// placeOf returns the place of a job's minimum in the library; an unknown one gets the next place, without hits.
func (l *Library) placeOf(entries, links *bolt.Bucket, i uint64, m *search.Minimum) (int, error) {
	if link := links.Get(number(i)); link != nil {
		return int(binary.BigEndian.Uint64(link)), nil
	}
	fresh := *m
	fresh.X, fresh.Hits, fresh.Draws = l.reordered(m.X), 0, 0
	place, known := l.index.Find(fresh.X, fresh.Energy)
	if !known {
		place = l.learn(fresh)
		if err := put(entries, number(uint64(place)), Entry{Minimum: fresh, HitsByJob: map[string]int{}}); err != nil {
			return 0, err
		}
	}
	return place, links.Put(number(i), number(uint64(place)))
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
