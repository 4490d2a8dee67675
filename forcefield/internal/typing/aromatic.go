package typing

// aromaticRing is a cycle of five or six atoms with six π electrons.
type aromaticRing struct {
	atoms []int
	donor int // the atom that gives two electrons; -1 in six-rings
}

func (r *aromaticRing) contains(atom int) bool {
	for _, a := range r.atoms {
		if a == atom {
			return true
		}
	}
	return false
}

// aromaticity lists the aromatic rings.
type aromaticity struct {
	rings  []aromaticRing
	bonds  []bool  // ring bonds of aromatic rings
	ofAtom [][]int // indices into rings, by atom
}

// inSixRing says whether an atom lies in an aromatic ring of six.
func (a *aromaticity) inSixRing(atom int) bool {
	for _, r := range a.ofAtom[atom] {
		if len(a.rings[r].atoms) == 6 {
			return true
		}
	}
	return false
}

// findAromaticity tests every cycle of five and six atoms until a pass finds no further aromatic one, since fused rings
// depend on each other.
func (g *graph) findAromaticity() *aromaticity {
	found := &aromaticity{bonds: make([]bool, len(g.order)), ofAtom: make([][]int, g.atoms())}
	candidates := g.cycles()
	for again := true; again; {
		again = false
		open := candidates[:0]
		for _, ring := range candidates {
			donor, ok := g.aromaticElectrons(ring, found.bonds)
			if !ok {
				open = append(open, ring)
				continue
			}
			again = true
			for i, atom := range ring {
				found.bonds[g.molecule.BondBetween(atom, ring[(i+1)%len(ring)])] = true
				found.ofAtom[atom] = append(found.ofAtom[atom], len(found.rings))
			}
			found.rings = append(found.rings, aromaticRing{ring, donor})
		}
		candidates = open
	}
	return found
}

// mayBeAromatic says whether an atom can be part of an aromatic ring.
func (g *graph) mayBeAromatic(i int) bool {
	switch g.element[i] {
	case 6, 7, 8, 16:
		return g.degree(i) == 2 || g.degree(i) == 3
	}
	return false
}

// cycles returns all simple cycles of five and six atoms that may be aromatic, each once, in ring order.
func (g *graph) cycles() [][]int {
	var all [][]int
	path := make([]int, 0, 6)
	onPath := make([]bool, g.atoms())
	var extend func()
	extend = func() {
		first, last := path[0], path[len(path)-1]
		for _, n := range g.neighbors(last) {
			if n.Atom == first && len(path) >= 5 && path[1] < last {
				all = append(all, append([]int(nil), path...))
			}
			if n.Atom <= first || len(path) == 6 || onPath[n.Atom] || !g.mayBeAromatic(n.Atom) {
				continue
			}
			path, onPath[n.Atom] = append(path, n.Atom), true
			extend()
			path, onPath[n.Atom] = path[:len(path)-1], false
		}
	}
	for i := range g.atoms() {
		if g.mayBeAromatic(i) {
			path = append(path[:0], i)
			extend()
		}
	}
	return all
}

// aromaticElectrons says whether a cycle has six π electrons, and which atom gives two of them (-1 if none does).
// aromatic holds the bonds of rings that are known to be aromatic.
func (g *graph) aromaticElectrons(ring []int, aromatic []bool) (donor int, ok bool) {
	donor = -1
	for place, atom := range ring {
		before, after := ring[(place+len(ring)-1)%len(ring)], ring[(place+1)%len(ring)]
		multiple := 0
		for _, n := range g.neighbors(atom) {
			if g.order[n.Bond] < 2 {
				continue
			}
			inside := n.Atom == before || n.Atom == after
			if multiple++; multiple > 1 || g.order[n.Bond] > 2 || !inside && !aromatic[n.Bond] {
				return 0, false
			}
		}
		e := g.element[atom]
		switch {
		case multiple == 1 && (e == 6 || e == 7):
		case multiple == 1 || len(ring) == 6 || donor >= 0:
			return 0, false
		case e == 7 && (g.degree(atom) == 3 || g.charge[atom] == -1), (e == 8 || e == 16) && g.degree(atom) == 2:
			donor = atom
		default:
			return 0, false
		}
	}
	return donor, len(ring) == 6 || donor >= 0
}
