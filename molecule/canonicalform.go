package molecule

import (
	"cmp"
	"slices"
)

// Canonical returns the molecule in its standard drawing with the atoms in canonical order: one form for all numberings,
// Kekulé structures and drawing variants. Descriptors that make no difference are left out, as are atom classes. Source of
// the resonance rules: standardDrawing, chargePools; charges within one aromatic system (imidazolium) are placed on the
// first atoms that can bear them.
func (m *Molecule) Canonical() *Molecule {
	standard := m.standard()
	ranks := m.CanonicalRanks()
	atoms := make([]Atom, len(standard.Atoms))
	for i, a := range standard.Atoms {
		a.Class, a.Radical = 0, 0
		atoms[ranks[i]] = a
	}
	aromatic := standard.aromaticity().bonds
	bonds := make([]DraftBond, len(standard.Bonds))
	for i, b := range standard.Bonds {
		a, c := ranks[b.A], ranks[b.B]
		bonds[i] = DraftBond{min(a, c), max(a, c), b.Order}
	}
	for _, pool := range standard.chargePools() {
		standard.settlePool(pool, ranks, atoms, bonds)
	}
	kekule := slices.Clone(bonds)
	for i := range bonds {
		if aromatic[i] {
			bonds[i].Order = 0
		}
	}
	for _, list := range [2][]DraftBond{bonds, kekule} {
		slices.SortFunc(list, func(a, b DraftBond) int { return cmp.Or(cmp.Compare(a.A, b.A), cmp.Compare(a.B, b.B)) })
	}
	draft := Draft{Name: m.Name, Bonds: bonds}
	for _, a := range atoms {
		draft.Atoms = append(draft.Atoms, DraftAtom{Atom: a})
	}
	for _, c := range m.stereo().identity {
		if c.center != nil {
			draft.Centers = append(draft.Centers, c.asCenter().renumbered(ranks))
		} else {
			draft.DoubleBonds = append(draft.DoubleBonds, c.asDoubleBond().renumbered(ranks))
		}
	}
	slices.SortFunc(draft.Centers, func(a, b Center) int { return cmp.Compare(a.Atom, b.Atom) })
	slices.SortFunc(draft.DoubleBonds, func(a, b DoubleBond) int { return cmp.Or(cmp.Compare(a.A, b.A), cmp.Compare(a.B, b.B)) })
	if built := standard.settleAromaticCharges(&draft, ranks); built != nil {
		return built
	}
	// Valences that only New accepts: keep the bonds as they are drawn.
	plain := make([]Bond, len(kekule))
	for i, b := range kekule {
		plain[i] = Bond(b)
	}
	built, _ := New(m.Name, atoms, plain, draft.Centers, draft.DoubleBonds)
	return built
}

func (c Center) renumbered(ranks []int) Center {
	c.Atom = ranks[c.Atom]
	for k, n := range c.Neighbors {
		if n >= 0 {
			c.Neighbors[k] = ranks[n]
		}
	}
	return c
}

func (b DoubleBond) renumbered(ranks []int) DoubleBond {
	for _, i := range [...]*int{&b.A, &b.B, &b.RefA, &b.RefB} {
		if *i >= 0 {
			*i = ranks[*i]
		}
	}
	if b.A > b.B {
		b.A, b.B, b.RefA, b.RefB = b.B, b.A, b.RefB, b.RefA
	}
	return b
}

// settlePool gives the double bonds of a pool to its first atoms in canonical order. atoms are in canonical order, bonds in
// that of the molecule.
func (m *Molecule) settlePool(pool chargePool, ranks []int, atoms []Atom, bonds []DraftBond) {
	ends := slices.Clone(pool.ends)
	slices.SortFunc(ends, func(a, b Neighbor) int { return cmp.Compare(ranks[a.Atom], ranks[b.Atom]) })
	double := 0
	for _, n := range ends {
		if m.Bonds[n.Bond].Order == 2 {
			double++
		}
	}
	for k, n := range ends {
		bonds[n.Bond].Order, atoms[ranks[n.Atom]].Charge = 1, -1
		if k < double {
			bonds[n.Bond].Order, atoms[ranks[n.Atom]].Charge = 2, 0
		}
	}
}

// maxPlacements bounds the ways to place the charges of an aromatic system that are tried.
const maxPlacements = 256

// settleAromaticCharges moves the charges of each aromatic system to the first atoms in canonical order that can bear them
// with the same aromatic bonds, and builds the draft. It returns nil if the draft has no valid valences.
func (m *Molecule) settleAromaticCharges(draft *Draft, ranks []int) *Molecule {
	built, err := draft.Build()
	if err != nil {
		return nil
	}
	_, wanted := built.Aromaticity()
	for _, system := range m.aromaticSystems() {
		type site struct {
			element   Element
			neighbors int
		}
		charges := map[site]int{}
		places := map[site][]int{}
		count := 0
		for _, i := range system {
			a := m.Atoms[i]
			key := site{a.Element, len(m.neighbors[i])}
			places[key] = append(places[key], ranks[i])
			if a.Charge != 0 {
				charges[key] = a.Charge
				count++
			}
		}
		if count != 1 { // several charges keep their places
			continue
		}
		for key, charge := range charges {
			slices.Sort(places[key])
			for _, place := range places[key][:min(len(places[key]), maxPlacements)] {
				trial := *draft
				trial.Atoms = slices.Clone(draft.Atoms)
				for _, other := range places[key] {
					trial.Atoms[other].Charge = 0
				}
				trial.Atoms[place].Charge = charge
				moved, err := trial.Build()
				if err != nil {
					continue
				}
				if _, now := moved.Aromaticity(); slices.Equal(now, wanted) {
					*draft, built = trial, moved
					break
				}
			}
		}
	}
	return built
}
