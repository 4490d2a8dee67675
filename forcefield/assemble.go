package forcefield

import (
	"errors"
	"fmt"
	"math"

	"tarn/forcefield/internal/parameters"
	"tarn/forcefield/internal/typing"
	"tarn/molecule"
)

// assembly gathers what the terms of one molecule are made from.
type assembly struct {
	*MMFF94
	molecule *molecule.Molecule
	tables   *parameters.Tables
	typed    *typing.Assignment
	classes  []int     // of the bonds
	lengths  []float64 // reference lengths of the bonds, Å
}

func assemble(m *molecule.Molecule, o Options) (*MMFF94, error) {
	tables, err := parameters.Load(o.Static)
	if err != nil {
		return nil, err
	}
	typed, err := typing.Assign(m, tables)
	var untyped *typing.Error
	if errors.As(err, &untyped) {
		return nil, unsupported(m, untyped.Atom, untyped.Reason)
	}
	a := &assembly{
		MMFF94:   &MMFF94{options: o, atoms: len(m.Atoms), types: typed.Types, empirical: []Empirical{}, angleReference: map[[3]int]float64{}},
		molecule: m, tables: tables, typed: typed,
	}
	for _, add := range []func() error{a.addBonds, a.addAngles, a.addTorsions} {
		if err := add(); err != nil {
			return nil, err
		}
	}
	a.addOutOfPlanes()
	a.addCharges()
	a.addPairs()
	return a.MMFF94, nil
}

// bondClass returns 1 for a formally single bond between atoms that also take part in multiple bonds, else 0.
func (a *assembly) bondClass(bond int) int {
	b := a.molecule.Bonds[bond]
	p, q := a.tables.Atom(a.types[b.A]), a.tables.Atom(a.types[b.B])
	if a.typed.Orders[bond] == 1 && !a.typed.AromaticBonds[bond] &&
		(p.Conjugates && q.Conjugates || p.Aromatic && q.Aromatic) {
		return 1
	}
	return 0
}

func (a *assembly) addBonds() error {
	for n, b := range a.molecule.Bonds {
		a.classes = append(a.classes, a.bondClass(n))
		p, ok := a.tables.Bond(a.classes[n], a.types[b.A], a.types[b.B])
		if !ok {
			var err error
			if p, err = a.tables.RuleBond(a.types[b.A], a.types[b.B], a.typed.Orders[n], a.typed.AromaticBonds[n]); err != nil {
				return a.missing("bond", err, b.A, b.B)
			}
			a.report("bond", fmt.Sprintf("length %.4f Å, stiffness %.3f md/Å", p.Length, p.Stiffness), b.A, b.B)
		}
		a.lengths = append(a.lengths, p.Length)
		a.bonds = append(a.bonds, bond{offset(b.A), offset(b.B), p.Length, millidyne * p.Stiffness})
	}
	return nil
}

// addCharges spreads formal charges and bond charge increments. Source: J. Comput. Chem. 17, 616 (1996), eq. 15, with the
// factor of the giving atom in both sums (the printed equation misplaces it).
func (a *assembly) addCharges() {
	formal := a.typed.FormalCharges
	a.charges = make([]float64, a.atoms)
	for i, q := range formal {
		given := a.tables.Atom(a.types[i]).Shared * q
		a.charges[i] += q
		for _, n := range a.molecule.Neighbors(i) {
			a.charges[i] -= given
			a.charges[n.Atom] += given
		}
	}
	for n, b := range a.molecule.Bonds {
		gain, listed := a.tables.ChargeIncrement(a.classes[n], a.types[b.A], a.types[b.B])
		if !listed {
			a.report("charge", fmt.Sprintf("%+.4f e on the second atom", gain), b.A, b.B)
		}
		a.charges[b.A] -= gain
		a.charges[b.B] += gain
	}
}

func (a *assembly) addOutOfPlanes() {
	for j := range a.molecule.Atoms {
		around := a.molecule.Neighbors(j)
		if len(around) != 3 {
			continue
		}
		var outer [3]int32
		var types [3]int
		for n, o := range around {
			outer[n], types[n] = offset(o.Atom), a.types[o.Atom]
		}
		if stiffness := a.tables.OutOfPlane(a.types[j], types); stiffness != 0 {
			a.outOfPlanes = append(a.outOfPlanes, outOfPlane{offset(j), outer, millidyne * stiffness})
		}
	}
}

func (a *assembly) addPairs() {
	a.nonbonded.distanceDependent = a.options.DistanceDependent
	a.nonbonded.pairs = make([]pair, 0, a.atoms*(a.atoms-1)/2)
	separation := make([]int, a.atoms) // of each atom from the current one; 0 beyond three bonds
	for i := range a.atoms {
		near := a.nearby(i, separation)
		for j := i + 1; j < a.atoms; j++ {
			if separation[j] == 1 || separation[j] == 2 {
				continue
			}
			distance, depth := a.tables.VanDerWaals(a.types[i], a.types[j])
			charge := coulomb / a.options.Dielectric * a.charges[i] * a.charges[j]
			if separation[j] == 3 {
				charge *= oneFour
			}
			a.nonbonded.pairs = append(a.nonbonded.pairs, pair{1 / distance, depth, charge, offset(j)})
		}
		a.nonbonded.end = append(a.nonbonded.end, int32(len(a.nonbonded.pairs)))
		for _, j := range near {
			separation[j] = 0
		}
	}
}

// nearby returns the atoms within three bonds of i and writes their separation.
func (a *assembly) nearby(i int, separation []int) []int {
	near := []int{i}
	separation[i] = 3 // closed for the search; the pair of an atom with itself is never asked for
	shell := near
	for bonds := 1; bonds <= 3; bonds++ {
		var next []int
		for _, j := range shell {
			for _, n := range a.molecule.Neighbors(j) {
				if separation[n.Atom] == 0 {
					separation[n.Atom] = bonds
					next = append(next, n.Atom)
				}
			}
		}
		near = append(near, next...)
		shell = next
	}
	return near
}

// report notes that an empirical rule supplied a parameter.
func (a *assembly) report(term, value string, atoms ...int) {
	e := Empirical{Term: term, Value: value}
	for _, i := range atoms {
		e.Atoms = append(e.Atoms, i+1)
		e.Types = append(e.Types, a.types[i])
	}
	a.empirical = append(a.empirical, e)
}

// missing makes the error for an interaction without parameters.
func (a *assembly) missing(term string, cause error, atoms ...int) error {
	numbers, types := "", ""
	for n, i := range atoms {
		if n > 0 {
			numbers, types = numbers+"-", types+"-"
		}
		numbers += fmt.Sprint(i + 1)
		types += fmt.Sprint(a.types[i])
	}
	middle := atoms[(len(atoms)-1)/2]
	return unsupported(a.molecule, middle, fmt.Sprintf("MMFF94 has no %s parameter for atoms %s of types %s: %v", term, numbers, types, cause))
}

func offset(atom int) int32 { return int32(3 * atom) }

func radians(degrees float64) float64 { return degrees * math.Pi / 180 }
