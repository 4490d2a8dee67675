package dedupe

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"tarn/molecule"
)

// graph is the molecular graph as far as symmetry is concerned: coloured atoms and bonds of a kind. Colours are stable under
// refinement, so atoms of different colour are never equivalent.
type graph struct {
	color []int
	edges [][]edge
}

type edge struct {
	to   int
	kind int
}

// Kinds of bonds beyond the formal orders 1 to 4.
const (
	aromaticBond    = 5
	delocalisedBond = 6
)

func newGraph(m *molecule.Molecule) *graph {
	kinds, free := bondKinds(m)
	g := &graph{color: make([]int, len(m.Atoms)), edges: make([][]edge, len(m.Atoms))}
	labels := make([]string, len(m.Atoms))
	for i, a := range m.Atoms {
		charge := a.Charge
		if free[i] {
			charge = 0
		}
		labels[i] = fmt.Sprint(a.Element, " ", a.Isotope, " ", charge, " ", a.Radical)
		for _, n := range m.Neighbors(i) {
			g.edges[i] = append(g.edges[i], edge{n.Atom, kinds[n.Bond]})
		}
	}
	g.refine(labels)
	return g
}

// refine numbers the labels and splits the classes by their neighbours until nothing changes.
func (g *graph) refine(labels []string) {
	for classes := 0; ; {
		sorted := slices.Clone(labels)
		slices.Sort(sorted)
		sorted = slices.Compact(sorted)
		for i, l := range labels {
			g.color[i], _ = slices.BinarySearch(sorted, l)
		}
		if len(sorted) == classes {
			return
		}
		classes = len(sorted)
		for i := range labels {
			around := make([][2]int, 0, len(g.edges[i]))
			for _, e := range g.edges[i] {
				around = append(around, [2]int{e.kind, g.color[e.to]})
			}
			slices.SortFunc(around, func(a, b [2]int) int { return cmp.Or(cmp.Compare(a[0], b[0]), cmp.Compare(a[1], b[1])) })
			var b strings.Builder
			fmt.Fprintf(&b, "%06d", g.color[i])
			for _, p := range around {
				fmt.Fprintf(&b, " %d:%d", p[0], p[1])
			}
			labels[i] = b.String()
		}
	}
}

// kind returns the kind of the bond between two atoms, 0 for none.
func (g *graph) kind(i, j int) int {
	for _, e := range g.edges[i] {
		if e.to == j {
			return e.kind
		}
	}
	return 0
}

// bondKinds returns a kind for each bond that does not depend on the choice of the Lewis structure, and the atoms whose formal
// charge is spread over a delocalised group. Bonds on an alternating path from a doubly bonded atom to an atom of the same
// element that is singly bonded and carries one charge less (carboxylate, nitro, amidinium, phosphate, cyanines, …) are
// delocalised; so are aromatic bonds.
func bondKinds(m *molecule.Molecule) (kinds []int, free []bool) {
	kinds = make([]int, len(m.Bonds))
	free = make([]bool, len(m.Atoms))
	_, aromatic := m.Aromaticity()
	for i, b := range m.Bonds {
		kinds[i] = b.Order
		if aromatic[i] {
			kinds[i] = aromaticBond
		}
	}
	if !slices.ContainsFunc(m.Atoms, func(a molecule.Atom) bool { return a.Charge != 0 }) {
		return kinds, free // nothing to shift
	}
	for start := range m.Atoms {
		for _, path := range alternatingPaths(m, start) {
			for _, b := range path.bonds {
				if kinds[b] != aromaticBond {
					kinds[b] = delocalisedBond
				}
			}
			free[start], free[path.end] = true, true
		}
	}
	return kinds, free
}

type alternatingPath struct {
	bonds []int
	end   int
}

const longestPath = 12 // bonds; longer delocalised chains are taken as drawn

// alternatingPaths returns the paths double, single, double, …, single from start to an atom onto which the multiple bonds can
// be shifted: same element, one charge less.
func alternatingPaths(m *molecule.Molecule, start int) (paths []alternatingPath) {
	visited := map[int]bool{start: true}
	var bonds []int
	var walk func(at int)
	walk = func(at int) {
		order := 2 - len(bonds)%2
		if len(bonds) == longestPath {
			return
		}
		for _, n := range m.Neighbors(at) {
			if m.Bonds[n.Bond].Order != order || visited[n.Atom] {
				continue
			}
			visited[n.Atom] = true
			bonds = append(bonds, n.Bond)
			a, s := m.Atoms[n.Atom], m.Atoms[start]
			if order == 1 && a.Element == s.Element && a.Charge == s.Charge-1 {
				paths = append(paths, alternatingPath{slices.Clone(bonds), n.Atom})
			}
			walk(n.Atom)
			bonds = bonds[:len(bonds)-1]
			delete(visited, n.Atom)
		}
	}
	walk(start)
	return paths
}
