package jobs

import (
	"context"
	"fmt"
	"slices"
	"strings"

	"tarn/forcefield"
	"tarn/molecule"
	"tarn/molecule/notation"
	"tarn/molecule/smiles"
	"tarn/search"
	"tarn/store"
)

// NewJob turns a request into a job, refusing whatever cannot be searched: input that cannot be read, chemistry that the force field does
// not cover, open stereochemistry, settings out of range. Nothing is stored. Errors are those of notation, search and forcefield.
func NewJob(ctx context.Context, in notation.Input, field string, s search.Settings, priority int) (store.Job, error) {
	if err := s.Validate(); err != nil {
		return store.Job{}, err
	}
	p, reading, err := problemOf(ctx, in, field, s.Seed)
	if err != nil {
		return store.Job{}, err
	}
	return store.Job{
		Input: in, Molecule: Identity(reading.Name, p), Notes: Notes(reading, p), Field: p.FieldName,
		Settings: s.WithDefaults(p.Cluster()), Priority: priority,
	}, nil
}

// Notes says in sentences what the user should know of an input before the search begins: where it was read in one of several ways, and
// where the force field had to guess parameters.
func Notes(r *notation.Reading, p *search.Problem) []string {
	notes := slices.Clone(r.Notes)
	f, ok := p.Field.(*forcefield.MMFF94)
	if !ok {
		return notes
	}
	if guessed := f.Empirical(); len(guessed) > 0 {
		first := guessed[0]
		notes = append(notes, fmt.Sprintf("%d parameter(s) of the force field come from empirical rules and deserve less trust, the first one for the %s of atoms %s",
			len(guessed), first.Term, strings.Trim(strings.ReplaceAll(fmt.Sprint(first.Atoms), " ", "-"), "[]")))
	}
	return notes
}

// Identity returns what a molecule or cluster is known by.
func Identity(name string, p *search.Problem) store.Molecule {
	if p.Cluster() {
		key := fmt.Sprintf("lj-%d", p.Atoms())
		return store.Molecule{Name: name, Formula: fmt.Sprintf("LJ%d", p.Atoms()), Key: key}
	}
	return store.Molecule{
		Name: name, SMILES: smiles.Canonical(p.Molecule), Formula: p.Molecule.Formula(), Key: smiles.Key(p.Molecule),
	}
}

// problemOf prepares an input for a search in a field and returns what was read; nothing but the name for a cluster.
func problemOf(ctx context.Context, in notation.Input, field string, seed uint64) (*search.Problem, *notation.Reading, error) {
	if in.LJ > 0 {
		if in.SMILES+in.Molfile+in.XYZ != "" {
			return nil, nil, &notation.InputError{Part: "molecule", Err: notation.ErrChoice}
		}
		if field != "" && field != "lj" {
			return nil, nil, &search.SettingError{Name: "field", Reason: "a Lennard-Jones cluster takes the field lj"}
		}
		p, err := search.NewClusterProblem(in.LJ)
		return p, &notation.Reading{Name: in.Name}, err
	}
	reading, err := in.Read()
	if err != nil {
		return nil, nil, err
	}
	p, err := search.NewMoleculeProblem(ctx, reading.Molecule, field, reading.Geometry, seed)
	return p, reading, err
}

// Reference returns the molecule of a library with its atoms in the order of the library; nil for a cluster.
func Reference(m store.Molecule) (*molecule.Molecule, error) {
	if m.Reference.LJ > 0 {
		return nil, nil
	}
	reading, err := m.Reference.Read()
	if err != nil {
		return nil, fmt.Errorf("molecule %s: %w", m.Key, err)
	}
	return search.Settle(reading.Molecule, reading.Geometry)
}

// reorder returns, for each atom of a, the atom of b that it is the same as. Both must be the same molecule.
func reorder(a, b *molecule.Molecule) ([]int, error) {
	ranked := make([]int, len(b.Atoms))
	for i, r := range b.CanonicalRanks() {
		ranked[r] = i
	}
	order := make([]int, len(a.Atoms))
	for i, r := range a.CanonicalRanks() {
		if len(ranked) != len(order) || a.Atoms[i].Element != b.Atoms[ranked[r]].Element {
			return nil, fmt.Errorf("%s and %s are not the same molecule", smiles.Canonical(a), smiles.Canonical(b))
		}
		order[i] = ranked[r]
	}
	return order, nil
}
