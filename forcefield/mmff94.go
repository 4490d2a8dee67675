package forcefield

import (
	"errors"

	"tarn/molecule"
)

// Options choose between the published variants of MMFF94. The zero value is MMFF94 in vacuum.
type Options struct {
	Static            bool    // MMFF94s: planar delocalised nitrogen (J. Comput. Chem. 20, 720 (1999))
	Dielectric        float64 // dielectric constant of the electrostatic term; 0 stands for 1
	DistanceDependent bool    // dielectric grows with distance: q·q/(R+δ)² instead of q·q/(R+δ)
}

// Terms are the parts of the energy in kcal/mol.
type Terms struct {
	Bond          float64 `json:"bond"`
	Angle         float64 `json:"angle"`
	StretchBend   float64 `json:"stretch_bend"`
	OutOfPlane    float64 `json:"out_of_plane"`
	Torsion       float64 `json:"torsion"`
	VdW           float64 `json:"vdw"`
	Electrostatic float64 `json:"electrostatic"`
}

// Empirical is a parameter that no published table lists and that an empirical rule supplied; it deserves less trust.
type Empirical struct {
	Term  string `json:"term"`  // "bond", "charge", "angle" or "torsion"
	Atoms []int  `json:"atoms"` // atom numbers, counted from 1
	Types []int  `json:"types"` // their atom types
	Value string `json:"value"` // the constants with their units
}

// MMFF94 is the force field of one molecule.
type MMFF94 struct {
	atoms int
}

// NewMMFF94 assigns types, charges and parameters. It returns an *[UnsupportedError] that names the atom if the molecule
// has an environment that MMFF94 does not cover.
func NewMMFF94(m *molecule.Molecule, o Options) (*MMFF94, error) {
	return nil, errors.New("mmff94: not assembled")
}

// Atoms returns the number of atoms.
func (f *MMFF94) Atoms() int { return f.atoms }

// Energy returns the energy in kcal/mol. x holds 3N coordinates in Å, atom-major; grad, if not nil, receives dE/dx in
// kcal/mol/Å.
func (f *MMFF94) Energy(x, grad []float64) float64 { return 0 }

// Hessian writes the second derivatives in kcal/mol/Å² to h, 3N×3N, row-major.
func (f *MMFF94) Hessian(x, h []float64) {}

// Terms returns the parts of the energy.
func (f *MMFF94) Terms(x []float64) Terms { return Terms{} }

// AtomTypes returns the numeric type of each atom.
func (f *MMFF94) AtomTypes() []int { return nil }

// PartialCharges returns the charge of each atom in elementary charges.
func (f *MMFF94) PartialCharges() []float64 { return nil }

// Empirical lists the parameters that came from empirical rules.
func (f *MMFF94) Empirical() []Empirical { return nil }

// ReferenceBond returns the reference length in Å of the bond i–j.
func (f *MMFF94) ReferenceBond(i, j int) float64 { return 0 }

// ReferenceAngle returns the reference angle in radians of i–j–k, which must be bonded i–j and j–k; π at a linear centre.
func (f *MMFF94) ReferenceAngle(i, j, k int) float64 { return 0 }
