package search

import (
	"context"
	"errors"
	"fmt"
	"strings"

	"tarn/dedupe"
	"tarn/forcefield"
	"tarn/minimize"
	"tarn/molecule"
	"tarn/molecule/embed"
	"tarn/molecule/smiles"
	"tarn/search/moves"
)

// MaxAtoms is the largest molecule or cluster that is searched. Every quench ends with a Hessian, whose cost grows with the cube.
const MaxAtoms = 500

// Problem is what is searched: a molecule in a force field, or a Lennard-Jones cluster. It is made by [NewMoleculeProblem] or
// [NewClusterProblem], never changes, and may be used by several searches at a time.
type Problem struct {
	Molecule  *molecule.Molecule // nil for a cluster
	FieldName string             // mmff94, mmff94s or lj
	Field     minimize.Field
	Symmetry  *dedupe.Symmetry
	Start     []molecule.Geometry // quenched geometries that the first round starts from; none for a cluster

	moves    *moves.Set
	embedder *embed.Embedder
	masses   []float64
	charges  []float64
	lengths  []float64 // reference lengths of the bonds, Å
	watched  [][4]int  // torsions whose decorrelation sets the stride of snapshots
}

// Atoms returns the number of atoms.
func (p *Problem) Atoms() int { return p.Field.Atoms() }

// Cluster tells whether it is a Lennard-Jones cluster, in reduced units.
func (p *Problem) Cluster() bool { return p.Molecule == nil }

// tolerance says how far two quenches of one minimum may differ. Clusters have minima whose energies agree to 1e-4, and are so stiff that
// quenches agree far better.
func (p *Problem) tolerance() dedupe.Tolerance {
	if p.Cluster() {
		return dedupe.Tolerance{Energy: 1e-6, Distance: 0.02}
	}
	return dedupe.Tolerance{}
}

// roughTolerance says how close to a known minimum a geometry at the end of the crude stage must be to be on its way there.
func (p *Problem) roughTolerance() dedupe.Tolerance {
	if p.Cluster() {
		return dedupe.Tolerance{Energy: 2e-5, Distance: 0.02}
	}
	return dedupe.Tolerance{Energy: 0.02, Distance: 0.1}
}

// ErrFragments says that an input holds more than one molecule.
var ErrFragments = errors.New("the input has several unconnected parts")

// NewMoleculeProblem prepares a molecule: force field, symmetry and a first geometry. geometry nil stands for one made by distance
// geometry from the seed; a given one is quenched and decides the stereochemistry that the molecule leaves open. The geometry shows the
// stereochemistry asked for, or there is an error: an *[UnspecifiedError] if the molecule leaves open which stereoisomer it is and
// geometry is nil. fieldName is mmff94 (also for "") or mmff94s.
func NewMoleculeProblem(ctx context.Context, m *molecule.Molecule, fieldName string, geometry molecule.Geometry, seed uint64) (*Problem, error) {
	if err := checkSize(m); err != nil {
		return nil, err
	}
	p := &Problem{FieldName: fieldName}
	switch fieldName {
	case "":
		p.FieldName = "mmff94"
	case "mmff94", "mmff94s":
	case "lj":
		return nil, &SettingError{"field", "lj is for clusters of Lennard-Jones atoms; a molecule takes mmff94 or mmff94s"}
	default:
		return nil, &SettingError{"field", fmt.Sprintf("there is no force field %q; use mmff94 or mmff94s", fieldName)}
	}
	var err error
	if p.Molecule, err = Settle(m, geometry); err != nil {
		return nil, err
	}
	f, err := forcefield.NewMMFF94(p.Molecule, forcefield.Options{Static: p.FieldName == "mmff94s"})
	if err != nil {
		return nil, err
	}
	p.Field, p.charges = f, f.PartialCharges()
	if p.Symmetry, err = dedupe.NewSymmetry(p.Molecule); err != nil {
		return nil, err
	}
	if p.embedder, err = embed.New(p.Molecule, f); err != nil {
		return nil, err
	}
	p.moves = moves.Analyze(p.Molecule)
	p.masses = p.Molecule.Masses()
	for _, b := range p.Molecule.Bonds {
		p.lengths = append(p.lengths, f.ReferenceBond(b.A, b.B))
	}
	p.watched = watchedTorsions(p.Molecule, p.moves)
	start, err := p.firstGeometry(ctx, geometry, seed)
	if err != nil {
		return nil, err
	}
	p.Start = []molecule.Geometry{start}
	return p, nil
}

func checkSize(m *molecule.Molecule) error {
	if n := len(m.Atoms); n > MaxAtoms {
		return fmt.Errorf("the molecule has %d atoms with its hydrogens; at most %d can be searched", n, MaxAtoms)
	}
	parts := m.Fragments()
	if len(parts) > 1 {
		return fmt.Errorf("%w: %d of them (atoms 1 and %d are not connected); split the salt or mixture and submit one part at a time",
			ErrFragments, len(parts), parts[1][0]+1)
	}
	return nil
}

// NewClusterProblem prepares a cluster of n Lennard-Jones atoms in reduced units.
func NewClusterProblem(n int) (*Problem, error) {
	if n < 2 || n > MaxAtoms {
		return nil, fmt.Errorf("a cluster of %d atoms cannot be searched; give 2 to %d", n, MaxAtoms)
	}
	f, err := forcefield.NewLennardJones(n)
	if err != nil {
		return nil, err
	}
	p := &Problem{FieldName: "lj", Field: f, Symmetry: dedupe.NewClusterSymmetry(n), moves: &moves.Set{}, masses: make([]float64, n)}
	for i := range p.masses {
		p.masses[i] = 1
	}
	return p, nil
}

// UnspecifiedError says that a molecule leaves its stereochemistry open, and lists the stereoisomers that it may be. Each of them can be
// searched.
type UnspecifiedError struct {
	Open    int // centres and double bonds without a descriptor
	Isomers []*molecule.Molecule
}

func (e *UnspecifiedError) Error() string {
	const shown = 8
	var names []string
	for i, m := range e.Isomers {
		if i == shown {
			names = append(names, fmt.Sprintf("and %d more", len(e.Isomers)-shown))
			break
		}
		names = append(names, smiles.Canonical(m))
	}
	return fmt.Sprintf("the stereochemistry is open at %d place(s); choose one of the stereoisomers: %s", e.Open, strings.Join(names, ", "))
}
