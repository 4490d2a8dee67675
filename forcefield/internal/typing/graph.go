package typing

import (
	"fmt"
	"strings"

	"tarn/molecule"
)

// graph is the molecule with bond orders and charges that normalisation may change.
type graph struct {
	molecule *molecule.Molecule
	element  []molecule.Element
	charge   []int
	order    []int // of each bond
}

func newGraph(m *molecule.Molecule) *graph {
	g := &graph{
		molecule: m, element: make([]molecule.Element, len(m.Atoms)),
		charge: make([]int, len(m.Atoms)), order: make([]int, len(m.Bonds)),
	}
	for i, a := range m.Atoms {
		g.element[i], g.charge[i] = a.Element, a.Charge
	}
	for i, b := range m.Bonds {
		g.order[i] = b.Order
	}
	return g
}

func (g *graph) atoms() int                          { return len(g.element) }
func (g *graph) neighbors(i int) []molecule.Neighbor { return g.molecule.Neighbors(i) }
func (g *graph) degree(i int) int                    { return len(g.neighbors(i)) }

// valence returns the sum of the bond orders.
func (g *graph) valence(i int) int {
	v := 0
	for _, n := range g.neighbors(i) {
		v += g.order[n.Bond]
	}
	return v
}

// count returns the number of neighbours of an element.
func (g *graph) count(i int, e molecule.Element) int {
	c := 0
	for _, n := range g.neighbors(i) {
		if g.element[n.Atom] == e {
			c++
		}
	}
	return c
}

// terminals returns the number of neighbours of an element that have no other neighbour.
func (g *graph) terminals(i int, e molecule.Element) int {
	c := 0
	for _, n := range g.neighbors(i) {
		if g.element[n.Atom] == e && g.degree(n.Atom) == 1 {
			c++
		}
	}
	return c
}

// bonded returns the first neighbour of an element that is reached over a bond of the given order, or -1.
func (g *graph) bonded(i, order int, e molecule.Element) int {
	for _, n := range g.neighbors(i) {
		if g.order[n.Bond] == order && g.element[n.Atom] == e {
			return n.Atom
		}
	}
	return -1
}

// has says whether i has a bond of the given order to the element.
func (g *graph) has(i, order int, e molecule.Element) bool { return g.bonded(i, order, e) >= 0 }

// inThreeRing says whether two neighbours of i are bonded.
func (g *graph) inThreeRing(i int) bool {
	for _, n := range g.neighbors(i) {
		for _, o := range g.neighbors(i) {
			if n.Atom != o.Atom && g.molecule.BondBetween(n.Atom, o.Atom) >= 0 {
				return true
			}
		}
	}
	return false
}

// inFourRing says whether two neighbours of i have another common neighbour; a bond across the ring does not matter.
func (g *graph) inFourRing(i int) bool {
	for _, n := range g.neighbors(i) {
		for _, across := range g.neighbors(n.Atom) {
			if across.Atom == i {
				continue
			}
			for _, o := range g.neighbors(i) {
				if o.Atom != n.Atom && g.molecule.BondBetween(o.Atom, across.Atom) >= 0 {
					return true
				}
			}
		}
	}
	return false
}

// checkElements refuses what no atom type covers, whatever its neighbours.
func (g *graph) checkElements() error {
	for i, a := range g.molecule.Atoms {
		known := ions[ion{a.Element, a.Charge}] != "" && g.degree(i) == 0
		switch {
		case a.Radical != 0:
			return &Error{i, fmt.Sprintf("MMFF94 does not cover radicals (unpaired electrons: %d)", a.Radical)}
		case known || formsBonds(a.Element) && g.degree(i) > 0:
		case formsBonds(a.Element):
			return &Error{i, fmt.Sprintf("MMFF94 has no type for a lone atom %s with charge %+d", a.Element, a.Charge)}
		case len(ionCharges(a.Element)) > 0:
			return &Error{i, fmt.Sprintf("MMFF94 covers %s only as an ion without bonds, charge %s", a.Element,
				strings.Join(ionCharges(a.Element), " or "))}
		default:
			return &Error{i, fmt.Sprintf("MMFF94 does not cover the element %s", a.Element)}
		}
	}
	return nil
}

// formsBonds says whether an element has types for bonded atoms.
func formsBonds(e molecule.Element) bool {
	switch e {
	case 1, 6, 7, 8, 9, 14, 15, 16, 17, 35, 53:
		return true
	}
	return false
}

// checkValences compares the bond orders and the charge of each atom, after normalisation, with the valences that the
// atom types presuppose.
func (g *graph) checkValences() error {
	for i, e := range g.element {
		if g.degree(i) == 0 {
			continue
		}
		if v := g.valence(i); !g.valenceKnown(i, e, v, g.charge[i]) {
			return &Error{i, fmt.Sprintf("MMFF94 has no type for %s with %d bonds, valence %d and charge %+d",
				e, g.degree(i), v, g.charge[i])}
		}
	}
	return nil
}

func (g *graph) valenceKnown(i int, e molecule.Element, valence, charge int) bool {
	bonds := g.degree(i)
	switch e {
	case 6:
		return charge == 0 && valence == 4 || charge == -1 && valence == 3 && bonds == 1
	case 7:
		return valence-charge == 3
	case 8:
		return valence-charge == 2
	case 14:
		return charge == 0 && valence == 4 && bonds == 4
	case 15:
		return charge >= 0 && (bonds == 4 && valence+charge == 5 || bonds < 4 && valence == 3 && charge == 0)
	case 16:
		return bonds == 4 && valence+charge == 6 || bonds == 3 && (valence+charge == 4 || valence+charge == 6) ||
			bonds == 2 && charge == 0 && (valence == 2 || valence == 4) || bonds == 1 && valence-charge == 2
	case 17:
		return valence == 1 && charge == 0 || bonds == 4 && valence+charge == 7
	}
	return valence == 1 && charge == 0
}
