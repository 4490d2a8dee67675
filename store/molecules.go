package store

import (
	"encoding/json"

	bolt "go.etcd.io/bbolt"

	"tarn/molecule/notation"
)

// Molecule identifies what was searched. Key is derived from the canonical SMILES; a cluster of n Lennard-Jones atoms has the key
// lj-n and no SMILES.
type Molecule struct {
	Name    string `json:"name"`
	SMILES  string `json:"smiles"`
	Formula string `json:"formula"`
	Key     string `json:"key"`
	// Reference is the input that the molecule was first submitted with. Its order of atoms is that of the library.
	Reference notation.Input `json:"reference,omitzero"`
}

// Molecule returns the molecule of a key, or [ErrNotFound].
func (s *Store) Molecule(key string) (m Molecule, err error) {
	err = s.db.View(func(tx *bolt.Tx) error { return get(tx.Bucket(moleculesBucket), []byte(key), &m) })
	return m, err
}

// Molecules returns all molecules that have been submitted, by key.
func (s *Store) Molecules() (all []Molecule, err error) {
	err = s.db.View(func(tx *bolt.Tx) error {
		return tx.Bucket(moleculesBucket).ForEach(func(_, v []byte) error {
			var m Molecule
			if err := json.Unmarshal(v, &m); err != nil {
				return err
			}
			all = append(all, m)
			return nil
		})
	})
	return all, err
}

// keepMolecule writes a molecule the first time it comes, and its name when it gets one later.
func keepMolecule(tx *bolt.Tx, m Molecule) error {
	molecules := tx.Bucket(moleculesBucket)
	var old Molecule
	if get(molecules, []byte(m.Key), &old) == nil {
		if old.Name != "" || m.Name == "" {
			return nil
		}
		m.Reference = old.Reference
	}
	return put(molecules, []byte(m.Key), m)
}
