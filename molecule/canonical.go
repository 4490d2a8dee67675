package molecule

import (
	"cmp"
	"slices"
)

// canonicalOrder is the canonical order of a molecule.
type canonicalOrder struct {
	ranks       []int    // atom → place
	certificate []uint64 // equal exactly for the same stereoisomer
}

func (m *Molecule) findCanonicalOrder() *canonicalOrder {
	if standard := m.standard(); standard != m {
		return standard.canonical()
	}
	s := m.skeleton()
	var identity []stereoElement
	for _, c := range m.stereo().identity {
		identity = append(identity, c.element)
	}
	type labelled struct {
		part int
		*labelling
	}
	parts := make([]labelled, len(s.parts))
	for k := range s.parts {
		parts[k] = labelled{k, s.graph(k, identity, nil).label()}
	}
	slices.SortStableFunc(parts, func(a, b labelled) int {
		return cmp.Or(cmp.Compare(len(b.certificate), len(a.certificate)), slices.Compare(a.certificate, b.certificate))
	})
	out := &canonicalOrder{ranks: make([]int, len(m.Atoms))}
	next := 0
	for _, l := range parts {
		for _, place := range l.order {
			out.ranks[s.atoms[s.parts[l.part][place]]] = next
			next++
		}
		out.certificate = append(append(out.certificate, uint64(len(l.certificate))), l.certificate...)
	}
	var hydrogens []int
	for i, parent := range s.parent {
		if parent >= 0 {
			hydrogens = append(hydrogens, i)
		}
	}
	slices.SortStableFunc(hydrogens, func(a, b int) int { return cmp.Compare(out.ranks[s.parent[a]], out.ranks[s.parent[b]]) })
	for _, i := range hydrogens {
		out.ranks[i] = next
		next++
	}
	return out
}

// CanonicalRanks returns the place of every atom in the canonical order, 0 first: other atoms before the ordinary
// hydrogens, these in the order of the atoms that carry them. The order does not depend on the numbering or the drawing of
// the molecule, except that equivalent atoms may be exchanged. The slice belongs to the molecule.
func (m *Molecule) CanonicalRanks() []int { return m.canonical().ranks }

// Same tells whether two molecules are the same stereoisomer of the same compound, however they are numbered and drawn.
func (m *Molecule) Same(other *Molecule) bool {
	return slices.Equal(m.canonical().certificate, other.canonical().certificate)
}
