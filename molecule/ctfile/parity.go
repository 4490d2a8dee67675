package ctfile

import (
	"slices"

	"tarn/molecule"
)

// stereoFromParity takes the configuration of a record without coordinates from the parity of its atoms.
func (t *table) stereoFromParity(m *molecule.Molecule) (*molecule.Molecule, error) {
	var centers []molecule.Center
	for _, c := range m.Stereo().Centers {
		if c.Atom >= len(t.atoms) || m.BondBetween(c.Atom, max(c.Neighbors[0], c.Neighbors[1])) < 0 {
			continue
		}
		switch t.atoms[c.Atom].parity {
		case 1:
			centers = append(centers, molecule.Center{Atom: c.Atom, Neighbors: parityOrder(m, c.Neighbors)})
		case 2:
			centers = append(centers, molecule.Center{Atom: c.Atom, Neighbors: parityOrder(m, c.Neighbors), Clockwise: true})
		}
	}
	return molecule.New(m.Name, m.Atoms, m.Bonds, centers, slices.Clone(m.DoubleBonds))
}

// parityOrder sorts neighbours as the published description asks: by atom number, but a hydrogen (or lone pair) last; that
// one is returned first. The parity is odd (1) if the others turn clockwise with it pointing away from the viewer: seen
// from it, they turn counter-clockwise.
func parityOrder(m *molecule.Molecule, neighbors [4]int) [4]int {
	last := func(n int) bool { return n < 0 || m.Atoms[n].Element == 1 }
	sorted := neighbors[:]
	slices.SortFunc(sorted, func(a, b int) int {
		switch {
		case last(a) != last(b) && last(a):
			return 1
		case last(a) != last(b):
			return -1
		}
		return a - b
	})
	return [4]int{sorted[3], sorted[0], sorted[1], sorted[2]}
}

// parityOf returns the parity of a centre: 1 odd, 2 even.
func parityOf(m *molecule.Molecule, c molecule.Center) int {
	order := parityOrder(m, c.Neighbors)
	even := true
	from := c.Neighbors
	for k := range order {
		if from[k] != order[k] {
			other := slices.Index(from[:], order[k])
			from[k], from[other] = from[other], from[k]
			even = !even
		}
	}
	if c.Clockwise == even {
		return 2
	}
	return 1
}
