package moves

import (
	"slices"

	"tarn/molecule"
)

// Set is what can move in a molecule.
type Set struct {
	Torsions   []Torsion
	Tops       []Torsion // rotations of three like atoms on one atom, which rarely do anything new
	Cranks     []Crank
	Inversions []Inversion
	// RingFreedom is the number of independent ring torsions, roughly: the flexible ring atoms less three a ring.
	RingFreedom int
}

// Rigid tells whether nothing but tops can move.
func (s *Set) Rigid() bool { return len(s.Torsions)+len(s.Cranks)+len(s.Inversions) == 0 }

// Freedom is the number of degrees of freedom that lead from minimum to minimum, roughly.
func (s *Set) Freedom() int { return len(s.Torsions) + s.RingFreedom + len(s.Inversions) }

// Analyze reads the moves off the graph. Torsions are the single bonds outside rings, amides and conjugated bonds included, without those
// whose rotation does nothing new (methyl and other tops of three like atoms, ends of linear groups). Cranks are all pairs of atoms of a ring
// system that, taken out, leave a segment on its own, unless that would twist a double bond or fold a flat ring.
func Analyze(m *molecule.Molecule) *Set {
	s := &Set{}
	ring := ringBonds(m)
	linearDone := make(map[int]bool)
	for i, b := range m.Bonds {
		if b.Order != 1 || ring[i] || linearDone[i] {
			continue
		}
		switch t, kind := torsionOf(m, b, linearDone); kind {
		case rotatable:
			s.Torsions = append(s.Torsions, t)
		case spinning:
			s.Tops = append(s.Tops, t)
		}
	}
	s.Cranks, s.RingFreedom = cranks(m, ring)
	for i := range m.Atoms {
		if v, ok := inversionOf(m, i, ring); ok {
			s.Inversions = append(s.Inversions, v)
		}
	}
	return s
}

func ringBonds(m *molecule.Molecule) []bool {
	in := make([]bool, len(m.Bonds))
	for _, r := range m.Rings() {
		for k, a := range r {
			if b := m.BondBetween(a, r[(k+1)%len(r)]); b >= 0 {
				in[b] = true
			}
		}
	}
	return in
}

// torsionOf follows linear groups at both ends, so that the axis is one however many atoms lie on it; the single bonds of such an axis
// are marked done.
func torsionOf(m *molecule.Molecule, b molecule.Bond, done map[int]bool) (Torsion, bondKind) {
	a, bb := b.A, b.B
	beforeA, endA := throughLinear(m, b.B, a, done)
	beforeB, endB := throughLinear(m, b.A, bb, done)
	kind := min(endKind(m, endA, beforeA), endKind(m, endB, beforeB))
	if kind == fixed {
		return Torsion{}, fixed
	}
	sideA, sideB := side(m, a, bb), side(m, bb, a)
	t := Torsion{A: a, B: bb, Atoms: sideB, Ends: [2]int{other(m, endA, beforeA), other(m, endB, beforeB)}}
	if len(sideA) < len(sideB) {
		t.Atoms = sideA
	}
	t.Stiff = partlyDouble(m, a, bb) || partlyDouble(m, bb, a)
	t.Atoms = slices.DeleteFunc(t.Atoms, func(i int) bool { return i == a || i == bb })
	return t, kind
}

// throughLinear walks from atom away from previous as long as atoms are linear (two neighbours, a triple bond or two double bonds).
func throughLinear(m *molecule.Molecule, previous, atom int, done map[int]bool) (before, end int) {
	for linear(m, atom) {
		for _, n := range m.Neighbors(atom) {
			if n.Atom != previous {
				done[n.Bond] = true
				previous, atom = atom, n.Atom
				break
			}
		}
	}
	return previous, atom
}

func linear(m *molecule.Molecule, atom int) bool {
	around := m.Neighbors(atom)
	return len(around) == 2 && m.Bonds[around[0].Bond].Order+m.Bonds[around[1].Bond].Order == 4
}

// bondKind says what a rotation does.
type bondKind int

const (
	fixed     bondKind = iota // nothing: there is no atom off the axis
	spinning                  // it permutes three like atoms
	rotatable                 // something new
)

func endKind(m *molecule.Molecule, end, before int) bondKind {
	count, alike, element := 0, true, molecule.Element(0)
	for _, n := range m.Neighbors(end) {
		if n.Atom == before {
			continue
		}
		count++
		e := m.Atoms[n.Atom].Element
		if len(m.Neighbors(n.Atom)) > 1 || element != 0 && e != element {
			alike = false
		}
		element = e
	}
	switch {
	case count == 0:
		return fixed
	case count == 3 && alike:
		return spinning
	}
	return rotatable
}

func other(m *molecule.Molecule, end, before int) int {
	best := -1
	for _, n := range m.Neighbors(end) {
		if n.Atom != before && (best < 0 || m.Atoms[n.Atom].Element > m.Atoms[best].Element) {
			best = n.Atom
		}
	}
	return best
}

// side returns the atoms on the side of a after the bond between a and b is cut.
func side(m *molecule.Molecule, a, b int) []int {
	return component(m, a, func(i int) bool { return i == b })
}

// component returns the atoms reached from start without entering a wall, ascending.
func component(m *molecule.Molecule, start int, wall func(int) bool) []int {
	seen := map[int]bool{start: true}
	reached := []int{start}
	for head := 0; head < len(reached); head++ {
		for _, n := range m.Neighbors(reached[head]) {
			if !seen[n.Atom] && !wall(n.Atom) {
				seen[n.Atom] = true
				reached = append(reached, n.Atom)
			}
		}
	}
	slices.Sort(reached)
	return reached
}

// partlyDouble tells whether a carbon that is doubly bonded to oxygen, nitrogen or sulfur is bonded to an atom that shares a lone pair with it.
func partlyDouble(m *molecule.Molecule, carbon, donor int) bool {
	e := m.Atoms[donor].Element
	if m.Atoms[carbon].Element != 6 || e != 7 && e != 8 && e != 16 {
		return false
	}
	for _, n := range m.Neighbors(carbon) {
		e := m.Atoms[n.Atom].Element
		if n.Atom != donor && m.Bonds[n.Bond].Order == 2 && (e == 7 || e == 8 || e == 16) {
			return true
		}
	}
	return false
}

// amideLike tells whether a nitrogen shares its lone pair with a carbon that is doubly bonded to oxygen, nitrogen or sulfur, which makes it
// planar or nearly so.
func amideLike(m *molecule.Molecule, nitrogen int) bool {
	if m.Atoms[nitrogen].Element != 7 {
		return false
	}
	for _, n := range m.Neighbors(nitrogen) {
		if partlyDouble(m, n.Atom, nitrogen) {
			return true
		}
	}
	return false
}

// inversionOf accepts neutral nitrogen with three single bonds that is no amide, no stereocentre and no bridgehead.
func inversionOf(m *molecule.Molecule, atom int, ring []bool) (Inversion, bool) {
	around := m.Neighbors(atom)
	if m.Atoms[atom].Element != 7 || len(around) != 3 || m.Atoms[atom].Charge != 0 || amideLike(m, atom) {
		return Inversion{}, false
	}
	for _, c := range m.Centers {
		if c.Atom == atom {
			return Inversion{}, false
		}
	}
	best := -1
	var atoms []int
	for k, n := range around {
		if m.Bonds[n.Bond].Order != 1 {
			return Inversion{}, false
		}
		if ring[n.Bond] {
			continue
		}
		if s := side(m, n.Atom, atom); best < 0 || len(s) < len(atoms) {
			best, atoms = k, s
		}
	}
	if best < 0 {
		return Inversion{}, false
	}
	swinging := around[best].Atom
	v := Inversion{Center: atom, Atoms: append([]int{swinging}, slices.DeleteFunc(atoms, func(i int) bool { return i == swinging })...)}
	k := 0
	for i, n := range around {
		if i != best {
			v.Others[k] = n.Atom
			k++
		}
	}
	return v, true
}
