package search

import (
	"context"
	"errors"

	"tarn/minimize"
	"tarn/molecule"
)

// Problem is what is searched: a molecule in a force field, or a Lennard-Jones cluster. It may be used by several searches at a time.
type Problem struct {
	Molecule  *molecule.Molecule // nil for a cluster
	FieldName string             // mmff94, mmff94s or lj
	Field     minimize.Field
	Start     []molecule.Geometry // quenched geometries that the first round starts from
}

// NewMoleculeProblem prepares a molecule: force field, symmetry and a first geometry. geometry nil stands for one made by distance
// geometry; a given one is quenched. The stereochemistry asked for is that of the first geometry, or there is an error: a
// *UnspecifiedError if the molecule leaves open which stereoisomer it is and geometry is nil. fieldName is mmff94 (also for "") or mmff94s.
func NewMoleculeProblem(ctx context.Context, m *molecule.Molecule, fieldName string, geometry molecule.Geometry, seed uint64) (*Problem, error) {
	return nil, errors.New("not yet")
}

// NewClusterProblem prepares a cluster of n Lennard-Jones atoms in reduced units.
func NewClusterProblem(n int) (*Problem, error) {
	return nil, errors.New("not yet")
}

// UnspecifiedError says that a molecule leaves stereocentres open, and lists the stereoisomers it may be. Each of them can be searched.
type UnspecifiedError struct {
	Isomers []*molecule.Molecule
}

func (e *UnspecifiedError) Error() string { return "stereochemistry is not specified" }
