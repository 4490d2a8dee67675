package molecule

import "slices"

// candidate is an atom or double bond whose surroundings allow two configurations, before it is known whether these differ.
// Exactly one of center and doubleBond is set; its neighbours are in the order of element.neighbors.
type candidate struct {
	center     *Center
	doubleBond *DoubleBond
	element    stereoElement
	distinct   bool // the neighbours to be told apart are constitutionally different
	unit       int  // candidates of one unit, a cage, have one configuration in common
	removed    bool
}

func (c *candidate) asCenter() Center {
	center := *c.center
	center.Clockwise = c.element.value == clockwise
	return center
}

func (c *candidate) asDoubleBond() DoubleBond {
	bond := *c.doubleBond
	bond.Cis = c.element.value == clockwise
	return bond
}

// stereoCandidates lists all atoms, allenes and double bonds whose surroundings allow two configurations.
func (m *Molecule) stereoCandidates() []candidate {
	s := m.skeleton()
	smallest := m.smallestRingOfBonds()
	locked := m.lockedNitrogens()
	classes := m.SymmetryClasses()
	var found []candidate
	add := func(c candidate, at [2]int, axial bool, around [4]int) {
		c.element = stereoElement{at: [2]int{s.vertex[at[0]], s.vertex[at[1]]}, axial: axial}
		c.distinct = true
		for k, n := range around {
			switch {
			case n == LonePair:
				c.element.neighbors[k] = emptyPlace
			case s.vertex[n] < 0:
				c.element.neighbors[k] = foldedHydrogen
			default:
				c.element.neighbors[k] = s.vertex[n]
			}
			for j, other := range around[:k] {
				if (!axial || j/2 == k/2) && n >= 0 && other >= 0 && classes[n] == classes[other] {
					c.distinct = false
				}
			}
		}
		c.unit = len(found)
		found = append(found, c)
	}
	for i := range m.Atoms {
		if around, ok := m.tetrahedral(i, locked[i]); ok && s.tellsApart(around[:]) && !m.protonExchanged(i) {
			add(candidate{center: &Center{Atom: i, Neighbors: around}}, [2]int{i, i}, false, around)
			continue
		}
		ends, ok := m.alleneEnds(i)
		if !ok || smallest[m.neighbors[i][0].Bond] < minStereoRing {
			continue
		}
		if a, b, ok := m.axisSubstituents(ends[0], ends[1], i); ok && s.tellsApart(a[:]) && s.tellsApart(b[:]) {
			around := [4]int{a[0], a[1], b[0], b[1]}
			add(candidate{center: &Center{Atom: i, Neighbors: around}}, ends, true, around)
		}
	}
	aromatic := m.aromaticity().bonds
	for i, bond := range m.Bonds {
		if bond.Order != 2 || aromatic[i] || smallest[i] < minStereoRing {
			continue
		}
		for _, a := range [2]int{bond.A, bond.B} {
			b, before, length := m.cumuleneEnd(a, bond.Other(a))
			if m.cumulated(a) || length%2 == 0 || a > b {
				continue
			}
			refsA, okA := m.endSubstituents(a, bond.Other(a))
			refsB, okB := m.endSubstituents(b, before)
			if okA && okB && s.tellsApart(refsA[:]) && s.tellsApart(refsB[:]) {
				around := [4]int{refsA[0], refsA[1], refsB[0], refsB[1]}
				add(candidate{doubleBond: &DoubleBond{A: a, B: b, RefA: around[0], RefB: around[2]}}, [2]int{a, b}, true, around)
			}
		}
	}
	return found
}

// minStereoRing is the size of the smallest ring in which a trans double bond or an allene lasts at room temperature
// (trans-cyclooctene; common practice, also the limit of the IUPAC recommendations of 2013, P-31.1.4.3.4).
const minStereoRing = 8

// smallestRingOfBonds returns for each bond the size of the smallest ring through it, or a large number.
func (m *Molecule) smallestRingOfBonds() []int {
	smallest := make([]int, len(m.Bonds))
	for i := range smallest {
		smallest[i] = len(m.Atoms) + minStereoRing
	}
	for _, ring := range m.Rings() {
		for k, atom := range ring {
			bond := m.BondBetween(atom, ring[(k+1)%len(ring)])
			smallest[bond] = min(smallest[bond], len(ring))
		}
	}
	return smallest
}

// tetrahedral returns the neighbours of an atom that can be a stable tetrahedral centre, the lone pair last.
func (m *Molecule) tetrahedral(i int, locked bool) (around [4]int, ok bool) {
	a := m.Atoms[i]
	neighbors := m.neighbors[i]
	if len(neighbors) < 3 || len(neighbors) > 4 || m.aromaticity().atoms[i] {
		return around, false
	}
	sum, hydrogens := 0, 0
	around[3] = LonePair
	for k, n := range neighbors {
		sum += m.Bonds[n.Bond].Order
		around[k] = n.Atom
		if m.Atoms[n.Atom].Element == 1 {
			hydrogens++
		}
	}
	free := a.Element.group() - a.Charge - sum // electrons not in bonds
	if len(neighbors) == 4 && free != 0 || len(neighbors) == 3 && free != 2 {
		return around, false
	}
	switch a.Element {
	case 5, 6, 14, 32, 50:
		return around, len(neighbors) == 4
	case 7:
		return around, locked || len(neighbors) == 4 && hydrogens == 0
	case 15, 33, 16, 34, 52:
		return around, true
	}
	return around, false
}

// protonExchanged tells whether an atom is an oxo acid centre with two terminal atoms of one chalcogen, which differ at
// most by a mobile proton. Common practice: such centres are not configurationally stable.
func (m *Molecule) protonExchanged(i int) bool {
	switch m.Atoms[i].Element {
	case 15, 16, 33, 34:
	default:
		return false
	}
	terminal := map[Atom]int{}
	for _, n := range m.neighbors[i] {
		a := m.Atoms[n.Atom]
		if !isChalcogen(a.Element) {
			continue
		}
		heavy := 0
		for _, next := range m.neighbors[n.Atom] {
			if m.Atoms[next.Atom].Element != 1 {
				heavy++
			}
		}
		if heavy == 1 {
			terminal[Atom{Element: a.Element, Isotope: a.Isotope}]++
		}
	}
	for _, count := range terminal {
		if count > 1 {
			return true
		}
	}
	return false
}

// axisSubstituents returns the substituents at both ends of an allene.
func (m *Molecule) axisSubstituents(endA, endB, middle int) (a, b [2]int, ok bool) {
	var befores []int
	for _, n := range m.neighbors[middle] {
		end, before, _ := m.cumuleneEnd(middle, n.Atom)
		if end == endB {
			befores = append(befores, before)
		} else {
			befores = append([]int{before}, befores...)
		}
	}
	a, okA := m.endSubstituents(endA, befores[0])
	b, okB := m.endSubstituents(endB, befores[1])
	return a, b, okA && okB && a[1] != LonePair && b[1] != LonePair
}

// endSubstituents returns the two places at the end of a double bond whose next atom on the axis is given; the lone pair
// of an imine nitrogen is the second.
func (m *Molecule) endSubstituents(end, next int) (places [2]int, ok bool) {
	a := m.Atoms[end]
	around := m.neighbors[end]
	switch {
	case a.Element == 6 && len(around) == 3 && a.Charge == 0:
	case a.Element == 7 && len(around) == 3 && a.Charge == 1:
	case a.Element == 7 && len(around) == 2 && a.Charge == 0:
	default:
		return places, false
	}
	places[1] = LonePair
	k := 0
	for _, n := range around {
		if n.Atom == next {
			continue
		}
		if m.Bonds[n.Bond].Order != 1 {
			return places, false
		}
		places[k] = n.Atom
		k++
	}
	return places, true
}

// tellsApart rejects neighbours that can never differ: two ordinary hydrogens, or two like atoms without further neighbours.
func (s *skeleton) tellsApart(around []int) bool {
	type likeness struct{ color, kind uint64 }
	seen := map[likeness]bool{}
	for _, n := range around {
		if n == LonePair {
			continue
		}
		var key likeness
		if v := s.vertex[n]; v >= 0 {
			if len(s.edges[v]) != 1 {
				continue
			}
			key = likeness{s.colors[v], s.edges[v][0].kind}
		}
		if seen[key] {
			return false
		}
		seen[key] = true
	}
	return true
}

// lockedNitrogens tells which three-coordinate nitrogens keep their configuration: those in three-membered rings and at the
// bridgeheads of small bicycles (common practice, no source).
func (m *Molecule) lockedNitrogens() []bool {
	locked := make([]bool, len(m.Atoms))
	for _, ring := range m.Rings() {
		for _, i := range ring {
			locked[i] = locked[i] || len(ring) == 3 && m.Atoms[i].Element == 7
		}
	}
	for _, cage := range m.cages() {
		if cage.bridged {
			for _, i := range cage.heads {
				locked[i] = locked[i] || m.Atoms[i].Element == 7
			}
		}
	}
	return locked
}

// permutationOdd tells whether b is an odd permutation of a; ok is false if they are not permutations of each other.
func permutationOdd(a, b [4]int) (odd, ok bool) {
	var place [4]int
	for i, n := range b {
		place[i] = slices.Index(a[:], n)
		if place[i] < 0 || slices.Contains(place[:i], place[i]) {
			return false, false
		}
		for _, before := range place[:i] {
			odd = odd != (before > place[i])
		}
	}
	return odd, true
}
