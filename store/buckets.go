package store

import (
	"encoding/binary"
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"time"

	bolt "go.etcd.io/bbolt"
	bolterrors "go.etcd.io/bbolt/errors"
)

// schemaVersion is written into every new file; a file of another version is refused.
const schemaVersion = 1

var (
	metaBucket        = []byte("meta")        // schema → version
	moleculesBucket   = []byte("molecules")   // key → Molecule
	jobsBucket        = []byte("jobs")        // id → Job
	librariesBucket   = []byte("libraries")   // key/field → bucket: number → Entry
	checkpointsBucket = []byte("checkpoints") // job id → bucket: head, minima/number, links/number

	schemaKey = []byte("schema")
)

var (
	// ErrNotFound says that there is no record of that name.
	ErrNotFound = errors.New("not found")
	// ErrLocked says that another process has the file open.
	ErrLocked = errors.New("the data folder is in use by another tarn process; stop it or choose another folder with --data")
)

const lockTimeout = 2 * time.Second

// Store is an open store. It may be used by any number of goroutines.
type Store struct {
	db *bolt.DB
}

// Open opens the store in a folder, which is made if it is not there. It returns [ErrLocked] if another process has it open, and an
// error if the file was written by a version that this one does not understand.
func Open(folder string) (*Store, error) {
	if err := os.MkdirAll(folder, 0o750); err != nil {
		return nil, fmt.Errorf("making the data folder: %w", err)
	}
	path := filepath.Join(folder, "tarn.db")
	db, err := bolt.Open(path, 0o640, &bolt.Options{Timeout: lockTimeout})
	if errors.Is(err, bolterrors.ErrTimeout) {
		return nil, ErrLocked
	}
	if err != nil {
		return nil, fmt.Errorf("opening %s: %w", path, err)
	}
	if err := db.Update(prepare); err != nil {
		return nil, errors.Join(fmt.Errorf("opening %s: %w", path, err), db.Close())
	}
	return &Store{db: db}, nil
}

// Close waits for running transactions and closes the file.
func (s *Store) Close() error { return s.db.Close() }

func prepare(tx *bolt.Tx) error {
	for _, name := range [][]byte{metaBucket, moleculesBucket, jobsBucket, librariesBucket, checkpointsBucket} {
		if _, err := tx.CreateBucketIfNotExists(name); err != nil {
			return err
		}
	}
	meta := tx.Bucket(metaBucket)
	found := meta.Get(schemaKey)
	if found == nil {
		return meta.Put(schemaKey, number(schemaVersion))
	}
	if v := binary.BigEndian.Uint64(found); v != schemaVersion {
		return fmt.Errorf("the file has schema %d, this program reads schema %d; use the version of tarn that wrote it", v, schemaVersion)
	}
	return nil
}

// number is a key that sorts by value.
func number(n uint64) []byte { return binary.BigEndian.AppendUint64(nil, n) }

func put(b *bolt.Bucket, key []byte, value any) error {
	data, err := json.Marshal(value)
	if err != nil {
		return err
	}
	return b.Put(key, data)
}

// get reads a record into value; [ErrNotFound] if there is none.
func get(b *bolt.Bucket, key []byte, value any) error {
	data := b.Get(key)
	if data == nil {
		return ErrNotFound
	}
	return json.Unmarshal(data, value)
}
