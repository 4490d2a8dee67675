package forcefield

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"tarn/molecule"
)

// Options choose between the published variants of MMFF94. The zero value is MMFF94 in vacuum.
type Options struct {
	// Static chooses MMFF94s, in which delocalised nitrogen is closer to planar (J. Comput. Chem. 20, 720 (1999)).
	Static bool `json:"static"`
	// Dielectric is the dielectric constant D of the electrostatic term; 0 stands for 1.
	Dielectric float64 `json:"dielectric"`
	// DistanceDependent makes the dielectric grow with distance: q·q/D(R+δ)² instead of q·q/D(R+δ).
	DistanceDependent bool `json:"distance_dependent"`
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

// Sum returns the total energy.
func (t Terms) Sum() float64 {
	return t.Bond + t.Angle + t.StretchBend + t.OutOfPlane + t.Torsion + t.VdW + t.Electrostatic
}

// Empirical is a parameter that no published table lists and that an empirical rule supplied; it deserves less trust.
type Empirical struct {
	Term  string `json:"term"`  // "bond", "charge", "angle" or "torsion"
	Atoms []int  `json:"atoms"` // atom numbers, counted from 1
	Types []int  `json:"types"` // their atom types
	Value string `json:"value"` // the constants with their units
}

// MMFF94 is the force field of one molecule, prepared for evaluation. It never changes and may be used by any number of
// goroutines.
type MMFF94 struct {
	options        Options
	atoms          int
	types          []int
	charges        []float64
	empirical      []Empirical
	angleReference map[[3]int]float64

	bonds        []bond
	angles       []angle
	linearAngles []linearAngle
	outOfPlanes  []outOfPlane
	torsions     []torsion
	nonbonded    nonbonded
}

// NewMMFF94 assigns types, charges and parameters. It returns an *[UnsupportedError] that names the atom if the molecule
// has an environment that MMFF94 does not cover, and another error if an option makes no sense. All pairs of atoms
// interact; there is no cut-off.
func NewMMFF94(m *molecule.Molecule, o Options) (*MMFF94, error) {
	if len(m.Atoms) == 0 {
		return nil, errors.New("the molecule has no atoms")
	}
	if !(o.Dielectric >= 0) || math.IsInf(o.Dielectric, 1) {
		return nil, fmt.Errorf("dielectric constant %g: it must be positive", o.Dielectric)
	}
	if o.Dielectric == 0 {
		o.Dielectric = 1
	}
	return assemble(m, o)
}

// Options returns the options in use, with the dielectric constant filled in.
func (f *MMFF94) Options() Options { return f.options }

// Atoms returns the number of atoms.
func (f *MMFF94) Atoms() int { return f.atoms }

// Energy returns the energy in kcal/mol. x holds 3N coordinates in Å, atom-major; grad, if not nil, holds 3N elements and
// receives dE/dx in kcal/mol/Å. Coincident atoms have a finite energy; NaN in x gives NaN.
func (f *MMFF94) Energy(x, grad []float64) float64 {
	if grad == nil {
		return f.Terms(x).Sum()
	}
	clear(grad)
	bend, stretchBend := angleEnergy(f.angles, x, grad)
	return bondEnergy(f.bonds, x, grad) + bend + stretchBend + linearAngleEnergy(f.linearAngles, x, grad) +
		outOfPlaneEnergy(f.outOfPlanes, x, grad) + torsionEnergy(f.torsions, x, grad) + f.nonbonded.energyGradient(x, grad)
}

// Terms returns the parts of the energy.
func (f *MMFF94) Terms(x []float64) Terms {
	t := Terms{
		Bond:       bondEnergy(f.bonds, x, nil),
		OutOfPlane: outOfPlaneEnergy(f.outOfPlanes, x, nil),
		Torsion:    torsionEnergy(f.torsions, x, nil),
	}
	t.Angle, t.StretchBend = angleEnergy(f.angles, x, nil)
	t.Angle += linearAngleEnergy(f.linearAngles, x, nil)
	t.VdW, t.Electrostatic = f.nonbonded.energy(x)
	return t
}

// Hessian writes the exact second derivatives in kcal/mol/Å² to h, 3N×3N, row-major.
func (f *MMFF94) Hessian(x, h []float64) {
	clear(h)
	bondHessian(f.bonds, x, h)
	angleHessian(f.angles, x, h)
	linearAngleHessian(f.linearAngles, x, h)
	outOfPlaneHessian(f.outOfPlanes, x, h)
	torsionHessian(f.torsions, x, h)
	f.nonbonded.hessian(x, h)
}

// AtomTypes returns the numeric type of each atom.
func (f *MMFF94) AtomTypes() []int { return slices.Clone(f.types) }

// PartialCharges returns the charge of each atom in elementary charges.
func (f *MMFF94) PartialCharges() []float64 { return slices.Clone(f.charges) }

// Empirical lists the parameters that came from empirical rules.
func (f *MMFF94) Empirical() []Empirical { return slices.Clone(f.empirical) }

// ReferenceBond returns the reference length in Å of the bond i–j, or 0 if there is no such bond.
func (f *MMFF94) ReferenceBond(i, j int) float64 {
	for n := range f.bonds {
		b := &f.bonds[n]
		if b.i == offset(i) && b.j == offset(j) || b.i == offset(j) && b.j == offset(i) {
			return b.length
		}
	}
	return 0
}

// ReferenceAngle returns the reference angle in radians of the bonded atoms i–j–k, π at a linear centre, or 0 if there
// is no such angle.
func (f *MMFF94) ReferenceAngle(i, j, k int) float64 {
	return f.angleReference[[3]int{min(i, k), j, max(i, k)}]
}
