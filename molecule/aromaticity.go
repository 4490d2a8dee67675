package molecule

import "slices"

// Aromaticity tells which atoms and which bonds are aromatic in the sense of OpenSMILES 3.5: rings of atoms with a p
// orbital each whose π electrons count 4n+2. An atom with a double bond in the ring system gives one electron; O, S, Se,
// N with three neighbours and carbanions give two; a carbon with a double bond to an exocyclic O, N or S, boron and
// carbocations give none. Tested are the chordless rings of up to eight atoms, the smallest rings beyond, and what is left
// at the rim when up to three of them are fused (azulene). The slices belong to the molecule. The force field has its
// own, different, notion of aromatic rings.
func (m *Molecule) Aromaticity() (atoms, bonds []bool) {
	a := m.aromaticity()
	return a.atoms, a.bonds
}

type aromaticity struct {
	atoms, bonds []bool
}

const (
	noOrbital  = -1 // π electrons of an atom that cannot be aromatic
	ringDouble = -2 // one electron, if the double bond turns out to lie in a ring of candidates
)

// maxFused bounds the rings whose common rim is tested; maxFusedRings the rings of a system for which rims are tested.
const (
	maxFused      = 3
	maxFusedRings = 64
)

func (m *Molecule) findAromaticity() aromaticity {
	if standard := m.standard(); standard != m {
		return standard.aromaticity()
	}
	result := aromaticity{make([]bool, len(m.Atoms)), make([]bool, len(m.Bonds))}
	within, electrons := m.orbitalGraph()
	if within == nil {
		return result
	}
	mark := func(ring []int) bool {
		count := 0
		for _, atom := range ring {
			count += electrons[atom]
		}
		if count%4 != 2 {
			return false
		}
		for k, atom := range ring {
			result.atoms[atom] = true
			result.bonds[m.BondBetween(atom, ring[(k+1)%len(ring)])] = true
		}
		return true
	}
	rings := chordlessRings(within, 8)
	for _, ring := range smallestRings(within, len(m.Bonds)) {
		if len(ring) > 8 {
			rings = append(rings, ring)
		}
	}
	var failed [][]int
	for _, ring := range rings {
		if !mark(ring) {
			failed = append(failed, ring)
		}
	}
	if len(failed) > 0 && len(rings) <= maxFusedRings {
		for _, rim := range fusedRims(rings) {
			mark(rim)
		}
	}
	return result
}

// orbitalGraph returns the ring bonds between atoms that can be aromatic, and the π electrons each atom gives; nil if
// there is no ring of such atoms.
func (m *Molecule) orbitalGraph() (within [][]Neighbor, electrons []int) {
	inRing := ringBonds(m.neighbors, len(m.Bonds))
	electrons = make([]int, len(m.Atoms))
	for i := range m.Atoms {
		electrons[i] = m.orbital(i, inRing)
	}
	for {
		within = make([][]Neighbor, len(m.Atoms))
		found := false
		for i, around := range m.neighbors {
			for _, n := range around {
				if inRing[n.Bond] && electrons[i] != noOrbital && electrons[n.Atom] != noOrbital {
					within[i] = append(within[i], n)
					found = true
				}
			}
		}
		if !found {
			return nil, nil
		}
		// A bond that is no ring bond among the candidates is exocyclic after all.
		inRing = ringBonds(within, len(m.Bonds))
		changed := false
		for i, e := range electrons {
			if e == ringDouble {
				if updated := m.orbital(i, inRing); updated != e {
					electrons[i], changed = updated, true
				}
			}
		}
		if !changed {
			break
		}
	}
	for i, around := range within {
		within[i] = slices.DeleteFunc(around, func(n Neighbor) bool { return !inRing[n.Bond] })
		if electrons[i] == ringDouble {
			electrons[i] = 1
		}
	}
	return within, electrons
}

// orbital returns the number of π electrons that an atom brings into a ring, noOrbital or ringDouble.
func (m *Molecule) orbital(i int, inRing []bool) int {
	a := m.Atoms[i]
	switch a.Element {
	case 5, 6, 7, 8, 15, 16, 33, 34, 52:
	default:
		return noOrbital
	}
	around := m.neighbors[i]
	if len(around) > 3 {
		return noOrbital
	}
	endo, exo, exoPolar, ringDegree := 0, 0, 0, 0
	for _, n := range around {
		if inRing[n.Bond] {
			ringDegree++
		}
		switch order := m.Bonds[n.Bond].Order; {
		case order > 2:
			return noOrbital
		case order == 2 && inRing[n.Bond]:
			endo++
		case order == 2:
			exo++
			switch m.Atoms[n.Atom].Element {
			case 7, 8, 16, 34:
				exoPolar++
			}
		}
	}
	if ringDegree < 2 || endo+exo > 1 || a.Radical > 0 && endo == 0 {
		return noOrbital
	}
	switch {
	case endo == 1:
		return ringDouble
	case exo == 1 && (exoPolar == 0 || a.Element != 6):
		return noOrbital
	case exo == 1:
		return 0
	}
	switch a.Element {
	case 5:
		if a.Charge == 0 && len(around) == 3 {
			return 0
		}
	case 6:
		if a.Charge == 1 && len(around) == 3 {
			return 0
		}
		if a.Charge == -1 && len(around) == 3 {
			return 2
		}
	case 7, 15, 33:
		if a.Charge == 0 && len(around) == 3 || a.Charge == -1 && len(around) == 2 {
			return 2
		}
	default:
		if a.Charge == 0 && len(around) == 2 {
			return 2
		}
	}
	return noOrbital
}

// chordlessRings returns every ring of up to limit atoms in which only successive atoms are bonded.
func chordlessRings(adjacency [][]Neighbor, limit int) [][]int {
	var rings [][]int
	onPath := make([]bool, len(adjacency))
	bonded := func(i, j int) bool {
		return slices.ContainsFunc(adjacency[i], func(n Neighbor) bool { return n.Atom == j })
	}
	var path []int
	var grow func()
	grow = func() {
		last := path[len(path)-1]
		for _, n := range adjacency[last] {
			next := n.Atom
			if next <= path[0] || onPath[next] {
				continue
			}
			if len(path) > 1 && slices.ContainsFunc(path[1:len(path)-1], func(atom int) bool { return bonded(next, atom) }) {
				continue
			}
			if len(path) > 1 && bonded(next, path[0]) {
				if path[1] < next {
					rings = append(rings, append(slices.Clone(path), next))
				}
				continue
			}
			if len(path) < limit-1 {
				onPath[next] = true
				path = append(path, next)
				grow()
				path = path[:len(path)-1]
				onPath[next] = false
			}
		}
	}
	for i := range adjacency {
		path = append(path[:0], i)
		grow()
	}
	return rings
}

// fusedRims returns the rims of all groups of two to maxFused rings that are fused along single bonds into one another: the
// bonds that belong to one ring only, where they form one ring.
func fusedRims(rings [][]int) [][]int {
	bondsOf := make([]map[[2]int]bool, len(rings))
	for i, ring := range rings {
		bondsOf[i] = map[[2]int]bool{}
		for k, a := range ring {
			b := ring[(k+1)%len(ring)]
			bondsOf[i][[2]int{min(a, b), max(a, b)}] = true
		}
	}
	fused := func(i, j int) bool {
		for b := range bondsOf[i] {
			if bondsOf[j][b] {
				return true
			}
		}
		return false
	}
	var rims [][]int
	groups := map[[maxFused]int]bool{}
	var extend func(group []int)
	extend = func(group []int) {
		if len(group) > 1 {
			if rim := rimOf(bondsOf, group); rim != nil {
				rims = append(rims, rim)
			}
		}
		if len(group) == maxFused {
			return
		}
		for j := range rings {
			if slices.Contains(group, j) || !slices.ContainsFunc(group, func(i int) bool { return fused(i, j) }) {
				continue
			}
			larger := append(slices.Clone(group), j)
			slices.Sort(larger)
			var name [maxFused]int
			for k, member := range larger {
				name[k] = member + 1
			}
			if !groups[name] {
				groups[name] = true
				extend(larger)
			}
		}
	}
	for i := range rings {
		extend([]int{i})
	}
	return rims
}

// rimOf returns the atoms around a group of rings in order, or nil if their sum is not a single ring.
func rimOf(bondsOf []map[[2]int]bool, group []int) []int {
	next := map[int][]int{}
	count := map[[2]int]int{}
	for _, i := range group {
		for b := range bondsOf[i] {
			count[b]++
		}
	}
	size, start := 0, -1
	for b, times := range count {
		if times%2 == 1 {
			next[b[0]] = append(next[b[0]], b[1])
			next[b[1]] = append(next[b[1]], b[0])
			size++
			if start < 0 || b[0] < start {
				start = b[0]
			}
		}
	}
	for _, around := range next {
		if len(around) != 2 {
			return nil
		}
	}
	if size == 0 {
		return nil
	}
	rim := []int{start}
	for before, at := -1, start; ; {
		onward := next[at][0]
		if onward == before {
			onward = next[at][1]
		}
		if onward == start {
			break
		}
		before, at = at, onward
		rim = append(rim, at)
		if len(rim) > size {
			return nil
		}
	}
	if len(rim) != size {
		return nil
	}
	return rim
}
