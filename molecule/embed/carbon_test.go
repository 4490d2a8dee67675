package embed

import (
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
)

// hydrocarbon builds a molecule from its carbon skeleton: bonds as pairs of atoms (from 0), doubles as indices of bonds.
// Hydrogens fill the valences.
func hydrocarbon(t testing.TB, bonds [][2]int, doubles ...int) *molecule.Molecule {
	t.Helper()
	n := 0
	var list []molecule.Bond
	for _, b := range bonds {
		n = max(n, b[0]+1, b[1]+1)
		list = append(list, molecule.Bond{A: b[0], B: b[1], Order: 1})
	}
	for _, d := range doubles {
		list[d].Order = 2
	}
	free := make([]int, max(n, 1))
	for i := range free {
		free[i] = 4
	}
	for _, b := range list {
		free[b.A] -= b.Order
		free[b.B] -= b.Order
	}
	atoms := make([]molecule.Atom, len(free))
	for i := range atoms {
		atoms[i].Element = carbon
	}
	for i, f := range free {
		for range f {
			list = append(list, molecule.Bond{A: i, B: len(atoms), Order: 1})
			atoms = append(atoms, molecule.Atom{Element: hydrogen})
		}
	}
	m, err := molecule.New("", atoms, list, nil, nil)
	require.NoError(t, err)
	return m
}

// ringBonds returns the bonds of a ring of n atoms, the first of which has the given index.
func ringBonds(first, n int) [][2]int {
	var bonds [][2]int
	for i := range n {
		bonds = append(bonds, [2]int{first + i, first + (i+1)%n})
	}
	return bonds
}

// covalent is a Field for hydrocarbons, good enough to test the machinery without a force field.
type covalent struct{}

func (covalent) ReferenceBond(i, j int) float64     { return 1.4 }
func (covalent) ReferenceAngle(i, j, k int) float64 { return 109.5 * degree }
