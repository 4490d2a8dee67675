package xyz

import "tarn/molecule"

// markOutward finds the bonds that leave rings which could be aromatic: five or six members, none with four neighbours.
func (s *structure) markOutward() error {
	atoms := make([]molecule.Atom, len(s.elements))
	bonds := make([]molecule.Bond, len(s.bonds))
	for i, e := range s.elements {
		atoms[i].Element = e
	}
	for i, b := range s.bonds {
		bonds[i] = molecule.Bond{A: b.a, B: b.b, Order: 1}
	}
	m, err := molecule.New("", atoms, bonds, nil, nil)
	if err != nil {
		return err
	}
	inside := make([]bool, len(s.bonds))
	member := make([]bool, len(s.elements))
	for _, ring := range m.Rings() {
		if len(ring) > 6 {
			break
		}
		if len(ring) < 5 || !s.mayBeAromatic(ring) {
			continue
		}
		for k, atom := range ring {
			member[atom] = true
			inside[m.BondBetween(atom, ring[(k+1)%len(ring)])] = true
		}
	}
	s.outward = make([]bool, len(s.bonds))
	for i, b := range s.bonds {
		s.outward[i] = !inside[i] && (member[b.a] || member[b.b])
	}
	return nil
}

func (s *structure) mayBeAromatic(ring []int) bool {
	for _, atom := range ring {
		if len(s.around[atom]) > 3 {
			return false
		}
	}
	return true
}
