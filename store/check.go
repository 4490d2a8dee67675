package store

import (
	"encoding/binary"
	"encoding/json"
	"fmt"
	"math"

	bolt "go.etcd.io/bbolt"
)

// Check reads the whole store and returns a sentence for everything that contradicts itself; none if the store is sound. It works on one
// snapshot, beside running searches.
func (s *Store) Check() (faults []string, err error) {
	err = s.db.View(func(tx *bolt.Tx) error {
		for fault := range tx.Check() {
			faults = append(faults, "pages of the file: "+fault.Error())
		}
		c := checker{tx: tx, jobs: map[string]Job{}}
		c.checkJobs()
		c.checkLibraries()
		c.checkCheckpoints()
		faults = append(faults, c.faults...)
		return nil
	})
	return faults, err
}

type checker struct {
	tx     *bolt.Tx
	jobs   map[string]Job
	faults []string
}

func (c *checker) fault(format string, arguments ...any) {
	c.faults = append(c.faults, fmt.Sprintf(format, arguments...))
}

func (c *checker) checkJobs() {
	_ = c.tx.Bucket(jobsBucket).ForEach(func(k, v []byte) error {
		var job Job
		if err := json.Unmarshal(v, &job); err != nil {
			c.fault("job %s cannot be read: %v", k, err)
			return nil
		}
		c.jobs[string(k)] = job
		switch job.State {
		case Queued, Running, Paused, Done, Failed, Cancelled:
		default:
			c.fault("job %s has the unknown state %q", k, job.State)
		}
		if job.ID != string(k) {
			c.fault("job %s calls itself %s", k, job.ID)
		}
		if c.tx.Bucket(moleculesBucket).Get([]byte(job.Molecule.Key)) == nil {
			c.fault("job %s: its molecule %s is missing", k, job.Molecule.Key)
		}
		return nil
	})
}

func (c *checker) checkLibraries() {
	libraries := c.tx.Bucket(librariesBucket)
	_ = libraries.ForEachBucket(func(name []byte) error {
		next, coordinates := uint64(0), -1
		return libraries.Bucket(name).ForEach(func(k, v []byte) error {
			n := binary.BigEndian.Uint64(k)
			if n != next {
				c.fault("library %s: entry %d follows entry %d", name, n, int64(next)-1)
			}
			next = n + 1
			var e Entry
			if err := json.Unmarshal(v, &e); err != nil {
				c.fault("library %s: entry %d cannot be read: %v", name, n, err)
				return nil
			}
			if coordinates < 0 {
				coordinates = len(e.X)
			}
			if len(e.X) != coordinates || len(e.X)%3 != 0 || math.IsNaN(e.Energy) {
				c.fault("library %s: entry %d is no geometry of this molecule", name, n)
			}
			c.checkHits(name, n, e)
			return nil
		})
	})
}

// checkHits compares the hits of an entry with what each search contributed.
func (c *checker) checkHits(library []byte, n uint64, e Entry) {
	sum := 0
	for id, hits := range e.HitsByJob {
		sum += hits
		if job, known := c.jobs[id]; !known {
			c.fault("library %s: entry %d has hits of job %s, which is missing", library, n, id)
		} else if string(libraryName(job.Molecule.Key, job.Field)) != string(library) {
			c.fault("library %s: entry %d has hits of job %s, which searched another molecule", library, n, id)
		}
	}
	if sum != e.Hits {
		c.fault("library %s: entry %d has %d hits, its searches %d", library, n, e.Hits, sum)
	}
}

func (c *checker) checkCheckpoints() {
	checkpoints := c.tx.Bucket(checkpointsBucket)
	_ = checkpoints.ForEachBucket(func(id []byte) error {
		job, known := c.jobs[string(id)]
		if !known {
			c.fault("checkpoint of job %s, which is missing", id)
			return nil
		}
		if job.State.Settled() {
			c.fault("job %s has ended but kept its checkpoint", id)
		}
		b := checkpoints.Bucket(id)
		minima, links := b.Bucket(minimaBucket), b.Bucket(linksBucket)
		library := c.tx.Bucket(librariesBucket).Bucket(libraryName(job.Molecule.Key, job.Field))
		if b.Get(headKey) == nil || minima == nil || links == nil || library == nil {
			c.fault("checkpoint of job %s is not whole", id)
			return nil
		}
		return minima.ForEach(func(k, _ []byte) error {
			if place := links.Get(k); place == nil || library.Get(place) == nil {
				c.fault("checkpoint of job %s: minimum %d has no place in the library", id, binary.BigEndian.Uint64(k))
			}
			return nil
		})
	})
}
