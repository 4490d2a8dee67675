package molecule

import (
	"fmt"
	"slices"
)

// resolveStereo puts the real hydrogens, or lone pairs, where descriptors name ImplicitHydrogen, and checks that each
// descriptor fits its atom. hydrogenOf names the one hydrogen appended to an atom, noHydrogen or severalHydrogens.
func (d *Draft) resolveStereo(m *Molecule, hydrogenOf []int) error {
	fault := func(atom int, format string, arguments ...any) error {
		if atom < 0 || atom >= len(d.Atoms) {
			return &BuildError{Atom: -1, Reason: fmt.Sprintf("a stereodescriptor names atom %d, which is not there", atom+1)}
		}
		return &BuildError{Atom: atom, Place: d.Atoms[atom].Place, Reason: fmt.Sprintf(format, arguments...)}
	}
	resolve := func(neighbor *int, parent int) error {
		if *neighbor != ImplicitHydrogen {
			return nil
		}
		switch hydrogen := hydrogenOf[parent]; hydrogen {
		case noHydrogen:
			*neighbor = LonePair
		case severalHydrogens:
			return fault(parent, "it is marked as a stereocentre but carries several hydrogens")
		default:
			*neighbor = hydrogen
		}
		return nil
	}
	centered := make(map[int]bool, len(m.Centers))
	for i := range m.Centers {
		c := &m.Centers[i]
		if c.Atom < 0 || c.Atom >= len(d.Atoms) || centered[c.Atom] {
			return fault(c.Atom, "it is marked as a stereocentre twice")
		}
		centered[c.Atom] = true
		bearers := [4]int{c.Atom, c.Atom, c.Atom, c.Atom}
		ends, allene := m.alleneEnds(c.Atom)
		if allene {
			if m.attached(ends[1], c.Neighbors[0]) || m.attached(ends[1], c.Neighbors[1]) {
				ends[0], ends[1] = ends[1], ends[0]
			}
			bearers = [4]int{ends[0], ends[0], ends[1], ends[1]}
		}
		for k := range c.Neighbors {
			if err := resolve(&c.Neighbors[k], bearers[k]); err != nil {
				return err
			}
		}
		if !m.centerFits(*c, bearers, allene) {
			return fault(c.Atom, "it is marked as a stereocentre but does not have four different neighbours")
		}
	}
	for i := range m.DoubleBonds {
		b := &m.DoubleBonds[i]
		if b.A < 0 || b.A >= len(d.Atoms) {
			return fault(b.A, "")
		}
		if b.B < 0 || b.B >= len(d.Atoms) {
			return fault(b.B, "")
		}
		if err := resolve(&b.RefA, b.A); err != nil {
			return err
		}
		if err := resolve(&b.RefB, b.B); err != nil {
			return err
		}
		nextA, nextB, ok := m.doubleBondAxis(b.A, b.B)
		if !ok || b.RefA == nextA || b.RefB == nextB || !m.attached(b.A, b.RefA) || !m.attached(b.B, b.RefB) {
			return fault(b.A, "the cis or trans mark does not belong to a double bond with substituents at both ends")
		}
		if size := m.transInSmallRing(*b); size > 0 {
			return fault(b.A, "a trans double bond does not fit in a ring of %d atoms", size)
		}
	}
	return nil
}

// transInSmallRing returns the size of a ring of fewer than eight atoms in which a double bond is marked trans, or 0.
func (m *Molecule) transInSmallRing(b DoubleBond) int {
	for _, ring := range m.Rings() {
		at := slices.Index(ring, b.A)
		if at < 0 || len(ring) >= minStereoRing {
			continue
		}
		n := len(ring)
		before, after := ring[(at+n-1)%n], ring[(at+1)%n]
		beyond := ring[(at+2)%n]
		if before == b.B {
			before, after, beyond = after, before, ring[(at+n-2)%n]
		}
		if after == b.B && b.Cis == ((b.RefA == before) != (b.RefB == beyond)) {
			return n
		}
	}
	return 0
}

const (
	noHydrogen       = -1
	severalHydrogens = -2
)

func (m *Molecule) attached(i, j int) bool {
	return j >= 0 && j < len(m.Atoms) && m.BondBetween(i, j) >= 0
}

// centerFits checks that the four neighbours of a centre are different and bonded to their bearers.
func (m *Molecule) centerFits(c Center, bearers [4]int, allene bool) bool {
	lonePairs := 0
	for k, n := range c.Neighbors {
		for _, other := range c.Neighbors[:k] {
			if other == n {
				return false
			}
		}
		if n == LonePair {
			lonePairs++
		} else if !m.attached(bearers[k], n) {
			return false
		}
	}
	if allene {
		return lonePairs == 0
	}
	return len(m.neighbors[c.Atom])+lonePairs == 4
}

// cumulated tells whether an atom is an inner carbon of a cumulene: two neighbours, two double bonds.
func (m *Molecule) cumulated(atom int) bool {
	around := m.neighbors[atom]
	return m.Atoms[atom].Element == 6 && len(around) == 2 &&
		m.Bonds[around[0].Bond].Order == 2 && m.Bonds[around[1].Bond].Order == 2
}

// cumuleneEnd follows cumulated double bonds from atom to next and on; it returns the last atom, the one before it and
// the number of double bonds passed. A ring of nothing but cumulated carbons ends where it began.
func (m *Molecule) cumuleneEnd(atom, next int) (end, before, length int) {
	start := atom
	for length = 1; m.cumulated(next) && next != start; length++ {
		onward := m.neighbors[next][0].Atom
		if onward == atom {
			onward = m.neighbors[next][1].Atom
		}
		atom, next = next, onward
	}
	return next, atom, length
}

// alleneEnds returns the end atoms of the allene (or longer cumulene with an even number of double bonds) whose middle
// carbon is given.
func (m *Molecule) alleneEnds(middle int) (ends [2]int, ok bool) {
	if !m.cumulated(middle) {
		return ends, false
	}
	around := m.neighbors[middle]
	a, _, lengthA := m.cumuleneEnd(middle, around[0].Atom)
	b, _, lengthB := m.cumuleneEnd(middle, around[1].Atom)
	return [2]int{a, b}, lengthA == lengthB && a != b && a != middle
}

// doubleBondAxis tells whether a and b are the ends of a double bond or of a cumulene with an odd number of double bonds,
// and returns the atoms next to them on it.
func (m *Molecule) doubleBondAxis(a, b int) (nextA, nextB int, ok bool) {
	for _, n := range m.neighbors[a] {
		if m.Bonds[n.Bond].Order != 2 {
			continue
		}
		if end, before, length := m.cumuleneEnd(a, n.Atom); end == b && length%2 == 1 {
			return n.Atom, before, true
		}
	}
	return 0, 0, false
}
