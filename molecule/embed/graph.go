package embed

import "tarn/molecule"

// smallRing is the size up to which a ring restricts the angles and torsions along it.
const smallRing = 11

// graph is what the bounds need to know of a molecule's graph.
type graph struct {
	*molecule.Molecule
	rings        [][]int
	aromaticAtom []bool
	aromaticBond []bool
	hops         [][]uint8 // bonds on the shortest path, capped at far
	linear       []bool    // two neighbours at 180°
	planar       []bool    // three neighbours in one plane with the atom
	bondRing     []int     // size of the smallest ring through a bond; 0 if none up to smallRing
}

const far = 5

func newGraph(m *molecule.Molecule) *graph {
	g := &graph{Molecule: m, rings: m.Rings()}
	g.aromaticAtom, g.aromaticBond = m.Aromaticity()
	n := len(m.Atoms)
	g.hops = make([][]uint8, n)
	g.linear, g.planar = make([]bool, n), make([]bool, n)
	for i := range n {
		g.hops[i] = g.hopsFrom(i)
	}
	g.bondRing = make([]int, len(m.Bonds))
	for b, bond := range m.Bonds {
		g.bondRing[b] = g.ringThrough(bond.A, bond.B)
	}
	for i := range n {
		g.linear[i] = g.isLinear(i)
	}
	for i := range n {
		g.planar[i] = g.isPlanar(i)
	}
	return g
}

// hopsFrom returns the number of bonds between an atom and every other, capped at far.
func (g *graph) hopsFrom(start int) []uint8 {
	hops := make([]uint8, len(g.Atoms))
	for i := range hops {
		hops[i] = far
	}
	hops[start] = 0
	front := []int{start}
	for d := uint8(1); d < far; d++ {
		var next []int
		for _, i := range front {
			for _, n := range g.Neighbors(i) {
				if hops[n.Atom] == far {
					hops[n.Atom] = d
					next = append(next, n.Atom)
				}
			}
		}
		front = next
	}
	return hops
}

// ringThrough returns the size of the smallest ring that runs through a chain of bonded atoms, or 0 if none up to
// smallRing does.
func (g *graph) ringThrough(chain ...int) int {
	first, last := chain[0], chain[len(chain)-1]
	seen := make(map[int]bool, 32)
	for _, i := range chain[:len(chain)-1] {
		seen[i] = true
	}
	front := []int{first}
	for size := len(chain); size <= smallRing; size++ {
		var next []int
		for _, i := range front {
			for _, n := range g.Neighbors(i) {
				if n.Atom == last && (len(chain) > 2 || i != first) {
					return size
				}
				if !seen[n.Atom] && n.Atom != last {
					seen[n.Atom] = true
					next = append(next, n.Atom)
				}
			}
		}
		front = next
	}
	return 0
}

func (g *graph) isLinear(i int) bool {
	neighbors := g.Neighbors(i)
	if len(neighbors) != 2 {
		return false
	}
	a, b := g.Bonds[neighbors[0].Bond].Order, g.Bonds[neighbors[1].Bond].Order
	return a >= 3 || b >= 3 || (a == 2 && b == 2 && (g.Atoms[i].Element == carbon || g.Atoms[i].Element == nitrogen))
}

func (g *graph) isPlanar(i int) bool {
	neighbors := g.Neighbors(i)
	if len(neighbors) != 3 {
		return false
	}
	orders, ringBonds := 0, 0
	for _, n := range neighbors {
		orders += g.Bonds[n.Bond].Order
		if g.bondRing[n.Bond] > 0 {
			ringBonds++
		}
	}
	switch g.Atoms[i].Element {
	case boron:
		return true
	case carbon:
		return orders == 4 || g.Atoms[i].Charge > 0
	case nitrogen:
		return orders == 4 || (g.Atoms[i].Charge == 0 && (g.aromaticAtom[i] || ringBonds < 3 && g.besideCarbonyl(i)))
	case sulfur:
		return orders == 6
	}
	return false
}

// besideCarbonyl says whether an atom is bonded to a carbon that has a double bond to O, S or N: the nitrogen of amides,
// ureas, amidines and the oxygen of esters.
func (g *graph) besideCarbonyl(i int) bool {
	for _, n := range g.Neighbors(i) {
		if g.isCarbonyl(n.Atom, i) {
			return true
		}
	}
	return false
}

// isCarbonyl says whether c is a carbon with a double bond to O, S or N at another atom than except.
func (g *graph) isCarbonyl(c, except int) bool {
	if g.Atoms[c].Element != carbon || len(g.Neighbors(c)) != 3 {
		return false
	}
	for _, n := range g.Neighbors(c) {
		e := g.Atoms[n.Atom].Element
		if n.Atom != except && g.Bonds[n.Bond].Order == 2 && (e == oxygen || e == sulfur || e == nitrogen) {
			return true
		}
	}
	return false
}

// flatEnd says whether the atom can be the end of a double bond that keeps its substituents in one plane.
func (g *graph) flatEnd(i int) bool {
	if g.linear[i] {
		return false
	}
	switch n := len(g.Neighbors(i)); g.Atoms[i].Element {
	case boron, carbon, nitrogen, oxygen:
		return n <= 3
	default:
		return n <= 2
	}
}

// others returns the neighbours of an atom without one of them.
func (g *graph) others(atom, except int) []int {
	var list []int
	for _, n := range g.Neighbors(atom) {
		if n.Atom != except {
			list = append(list, n.Atom)
		}
	}
	return list
}

const (
	hydrogen molecule.Element = 1
	boron    molecule.Element = 5
	carbon   molecule.Element = 6
	nitrogen molecule.Element = 7
	oxygen   molecule.Element = 8
	fluorine molecule.Element = 9
	sulfur   molecule.Element = 16
	chlorine molecule.Element = 17
	bromine  molecule.Element = 35
	iodine   molecule.Element = 53
)
