package forcefield

import (
	"errors"
	"math"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"tarn/molecule"
)

// TestArbitraryGraphs draws bonds between atoms at random. Whatever comes, the answer is a force field with a finite energy
// or an error that names an atom.
func TestArbitraryGraphs(t *testing.T) {
	elements := []molecule.Element{1, 1, 6, 6, 6, 7, 7, 8, 8, 9, 14, 15, 16, 16, 17, 35, 53, 5, 11, 30}
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 9).Draw(t, "atoms")
		atoms := make([]molecule.Atom, n)
		valence := make([]int, n)
		var bonds []molecule.Bond
		for i := range atoms {
			atoms[i].Element = rapid.SampledFrom(elements).Draw(t, "element")
			atoms[i].Charge = rapid.SampledFrom([]int{0, 0, 0, 0, 0, 1, -1, 2}).Draw(t, "charge")
			for j := range i {
				if order := rapid.SampledFrom([]int{0, 0, 1, 1, 2, 3}).Draw(t, "order"); order > 0 {
					bonds = append(bonds, molecule.Bond{A: j, B: i, Order: order})
					valence[i], valence[j] = valence[i]+order, valence[j]+order
				}
			}
		}
		if rapid.Bool().Draw(t, "saturate") {
			for i := range n {
				usual := map[molecule.Element]int{6: 4, 7: 3, 8: 2, 14: 4, 15: 3, 16: 2}[atoms[i].Element]
				for range usual - valence[i] {
					bonds = append(bonds, molecule.Bond{A: i, B: len(atoms), Order: 1})
					atoms = append(atoms, molecule.Atom{Element: 1})
				}
			}
		}
		m, err := molecule.New("", atoms, bonds, nil, nil)
		require.NoError(t, err)
		f, err := NewMMFF94(m, Options{})
		if err != nil {
			var refused *UnsupportedError
			require.True(t, errors.As(err, &refused), err)
			require.Less(t, refused.Atom, len(atoms))
			return
		}
		require.NotContains(t, f.AtomTypes(), 0)
		require.False(t, math.IsNaN(f.Energy(lattice(len(atoms)), nil)))
	})
}
