package store

import (
	"encoding/binary"
	"encoding/json"
	"errors"
	"fmt"

	bolt "go.etcd.io/bbolt"
	bolterrors "go.etcd.io/bbolt/errors"

	"tarn/search"
)

var (
	headKey      = []byte("head")   // the checkpoint without its minima
	minimaBucket = []byte("minima") // index → Minimum
	linksBucket  = []byte("links")  // index → number in the library
)

// Checkpoint returns the last checkpoint of a job, or [ErrNotFound].
func (s *Store) Checkpoint(jobID string) (c *search.Checkpoint, err error) {
	err = s.db.View(func(tx *bolt.Tx) error {
		b := tx.Bucket(checkpointsBucket).Bucket([]byte(jobID))
		if b == nil {
			return ErrNotFound
		}
		c = &search.Checkpoint{}
		if err := get(b, headKey, c); err != nil {
			return err
		}
		return b.Bucket(minimaBucket).ForEach(func(k, v []byte) error {
			var m search.Minimum
			if err := json.Unmarshal(v, &m); err != nil {
				return fmt.Errorf("checkpoint of job %s, minimum %d: %w", jobID, binary.BigEndian.Uint64(k), err)
			}
			c.Minima = append(c.Minima, m)
			return nil
		})
	})
	return c, err
}

// putCheckpoint writes a checkpoint; of the minima only those that the last round touched.
func putCheckpoint(tx *bolt.Tx, jobID string, c search.Checkpoint) error {
	b, err := tx.Bucket(checkpointsBucket).CreateBucketIfNotExists([]byte(jobID))
	if err != nil {
		return err
	}
	minima, err := b.CreateBucketIfNotExists(minimaBucket)
	if err != nil {
		return err
	}
	for i, m := range c.Minima {
		if key := number(uint64(i)); m.LastHitInRound >= c.Round-1 || minima.Get(key) == nil {
			if err := put(minima, key, m); err != nil {
				return err
			}
		}
	}
	head := c
	head.Minima = nil
	return put(b, headKey, head)
}

func dropCheckpoint(tx *bolt.Tx, jobID string) error {
	err := tx.Bucket(checkpointsBucket).DeleteBucket([]byte(jobID))
	if errors.Is(err, bolterrors.ErrBucketNotFound) {
		return nil
	}
	return err
}
