package smiles

import (
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/molecule"
)

// renumbered returns the same molecule with its atoms and bonds in another order, each descriptor written from another
// neighbour.
func renumbered(t *testing.T, m *molecule.Molecule, rng *rand.Rand) *molecule.Molecule {
	t.Helper()
	place := rng.Perm(len(m.Atoms))
	at := func(i int) int {
		if i < 0 {
			return i
		}
		return place[i]
	}
	atoms := make([]molecule.Atom, len(m.Atoms))
	for i, a := range m.Atoms {
		atoms[place[i]] = a
	}
	bonds := make([]molecule.Bond, len(m.Bonds))
	for i, k := range rng.Perm(len(m.Bonds)) {
		b := m.Bonds[i]
		bonds[k] = molecule.Bond{A: at(b.A), B: at(b.B), Order: b.Order}
		if rng.IntN(2) == 0 {
			bonds[k].A, bonds[k].B = bonds[k].B, bonds[k].A
		}
	}
	var centers []molecule.Center
	for _, c := range m.Centers {
		n := c.Neighbors
		switch rng.IntN(3) {
		case 0: // an even permutation that keeps the pairs of an allene
			n = [4]int{n[2], n[3], n[0], n[1]}
		case 1:
			n = [4]int{n[1], n[0], n[2], n[3]}
			c.Clockwise = !c.Clockwise
		}
		for k := range n {
			n[k] = at(n[k])
		}
		centers = append(centers, molecule.Center{Atom: at(c.Atom), Neighbors: n, Clockwise: c.Clockwise})
	}
	rng.Shuffle(len(centers), func(i, j int) { centers[i], centers[j] = centers[j], centers[i] })
	var doubleBonds []molecule.DoubleBond
	for _, b := range m.DoubleBonds {
		b = molecule.DoubleBond{A: at(b.A), B: at(b.B), RefA: at(b.RefA), RefB: at(b.RefB), Cis: b.Cis}
		if rng.IntN(2) == 0 {
			b.A, b.B, b.RefA, b.RefB = b.B, b.A, b.RefB, b.RefA
		}
		doubleBonds = append(doubleBonds, b)
	}
	out, err := molecule.New(m.Name, atoms, bonds, centers, doubleBonds)
	require.NoError(t, err)
	return out
}

func parse(t *testing.T, s string) *molecule.Molecule {
	t.Helper()
	m, err := Parse(s)
	require.NoError(t, err, s)
	return m
}

// checkInvariance renumbers a molecule and reads back what is written, and wants one canonical SMILES from all.
func checkInvariance(t *testing.T, s string, times int, rng *rand.Rand) {
	t.Helper()
	m := parse(t, s)
	want := Canonical(m)
	require.Equal(t, want, Canonical(parse(t, want)), "canonical SMILES of %s read back", s)
	require.Equal(t, want, Canonical(parse(t, Write(m))), "%s written as %s and read back", s, Write(m))
	for range times {
		other := renumbered(t, m, rng)
		require.Equal(t, want, Canonical(other), "renumbered %s", s)
		require.Equal(t, want, Canonical(parse(t, Write(other))), "renumbered %s, written as %s", s, Write(other))
		require.True(t, m.Same(other))
	}
}
