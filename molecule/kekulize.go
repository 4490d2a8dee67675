package molecule

import "slices"

// kekulize decides which order-0 bonds of a draft are double. sums holds the bond orders of each atom with every order-0
// bond counted as single. It returns the chosen orders of all bonds.
//
// An aromatic atom needs a double bond exactly if its valence has one place left; these atoms must be matched perfectly
// (Edmonds' blossom algorithm, Can. J. Math. 17, 449 (1965)). Of the many perfect matchings one is preferred that has its
// double bonds in six-membered rings, then in other small aromatic rings: the drawing a chemist would make.
func (d *Draft) kekulize(sums []int) ([]int, error) {
	orders := make([]int, len(d.Bonds))
	adjacency := make([][]Neighbor, len(d.Atoms))
	aromatic := make([]bool, len(d.Atoms))
	any := false
	for i, b := range d.Bonds {
		orders[i] = b.Order
		adjacency[b.A] = append(adjacency[b.A], Neighbor{b.B, i})
		adjacency[b.B] = append(adjacency[b.B], Neighbor{b.A, i})
		if b.Order == 0 {
			orders[i], any = 1, true
			aromatic[b.A], aromatic[b.B] = true, true
		}
	}
	for i, a := range d.Atoms {
		if a.Aromatic {
			aromatic[i], any = true, true
		}
	}
	if !any {
		return orders, nil
	}
	needs := make([]bool, len(d.Atoms))
	for i, a := range d.Atoms {
		needs[i] = aromatic[i] && needsDoubleBond(a, sums[i])
	}
	tier := d.doubleBondTiers(adjacency, aromatic)
	match := newMatching(len(d.Atoms))
	var allowed [][]int
	for level := 0; level <= lastTier; level++ {
		allowed = make([][]int, len(d.Atoms))
		for i, b := range d.Bonds {
			if b.Order == 0 && tier[i] <= level && needs[b.A] && needs[b.B] {
				allowed[b.A] = append(allowed[b.A], b.B)
				allowed[b.B] = append(allowed[b.B], b.A)
			}
		}
		match.extend(allowed)
	}
	if fault := d.kekuleFault(needs, match, allowed); fault != nil {
		return nil, fault
	}
	for i, b := range d.Bonds {
		if b.Order == 0 && match.mate[b.A] == b.B {
			orders[i] = 2
		}
	}
	return orders, nil
}

// kekuleFault names an atom for each one that is left without a partner: a heteroatom if one could be in its place, since
// that is where a hydrogen or charge is most often forgotten, else the first that could.
func (d *Draft) kekuleFault(needs []bool, match *matching, allowed [][]int) error {
	fault := &KekuleError{}
	for i, needed := range needs {
		if !needed || match.mate[i] >= 0 {
			continue
		}
		named := -1
		for _, atom := range match.exposable(i, allowed) {
			if named < 0 || d.Atoms[named].Element == 6 && d.Atoms[atom].Element != 6 {
				named = atom
			}
		}
		if slices.Contains(fault.Atoms, named) {
			named = i
		}
		fault.Atoms = append(fault.Atoms, named)
		fault.Elements = append(fault.Elements, d.Atoms[named].Element)
		fault.Places = append(fault.Places, d.Atoms[named].Place)
	}
	if len(fault.Atoms) == 0 {
		return nil
	}
	return fault
}

// needsDoubleBond tells whether an aromatic atom has one place left for a double bond in its ring.
func needsDoubleBond(a DraftAtom, sum int) bool {
	if a.Hydrogens > 0 {
		sum += a.Hydrogens
	}
	sum += a.Radical
	for _, v := range valences(a.Element, a.Charge) {
		if v >= sum {
			return v > sum && (v-sum == 1 || a.Element.group() <= 5)
		}
	}
	return false
}

const lastTier = 2

// doubleBondTiers ranks the places for double bonds: 0 in six-membered rings of aromatic atoms, 1 in five- and
// seven-membered ones, 2 in other rings, 3 outside rings, where an aromatic bond is read as single (OpenSMILES 3.5:
// the bond of biphenyl).
func (d *Draft) doubleBondTiers(adjacency [][]Neighbor, aromatic []bool) []int {
	tiers := make([]int, len(d.Bonds))
	inRing := ringBonds(adjacency, len(d.Bonds))
	for i := range tiers {
		tiers[i] = lastTier
		if !inRing[i] {
			tiers[i] = lastTier + 1
		}
	}
	within := make([][]Neighbor, len(adjacency))
	for i, around := range adjacency {
		for _, n := range around {
			if aromatic[i] && aromatic[n.Atom] && inRing[n.Bond] {
				within[i] = append(within[i], n)
			}
		}
	}
	for _, ring := range smallestRings(within, len(d.Bonds)) {
		level := lastTier
		switch len(ring) {
		case 6:
			level = 0
		case 5, 7:
			level = 1
		}
		for k, atom := range ring {
			next := ring[(k+1)%len(ring)]
			at := slices.IndexFunc(adjacency[atom], func(n Neighbor) bool { return n.Atom == next })
			bond := adjacency[atom][at].Bond
			tiers[bond] = min(tiers[bond], level)
		}
	}
	return tiers
}
