package dedupe

import (
	"math"
	"slices"

	"tarn/molecule"
)

// labelled returns the conditions under which a permutation of the atoms preserves the stereochemistry that a geometry shows when
// every heavy atom carries a label: tetrahedral centres keep their handedness, double bonds keep which substituents are on the
// same side, allenes keep their twist. An atom that bears two like hydrogens puts no condition, and neither does an amine
// nitrogen that can invert.
func (s *Symmetry) labelled(x []float64) (constraints []constraint) {
	m := s.molecule
	for atom := range m.Atoms {
		if around, ok := s.handedNeighbors(atom); ok {
			tuple := append([]int{atom}, around[:3]...)
			if math.Abs(volume(x, tuple)) < flatVolume {
				continue
			}
			constraints = append(constraints, sameSign(tuple, func(t []int) float64 { return volume(x, t) }))
		}
	}
	for bond, b := range m.Bonds {
		if tuple, ok := s.sidedNeighbors(bond, b); ok {
			constraints = append(constraints, sameSign(tuple, func(t []int) float64 { return side(x, t) }))
		}
	}
	for atom := range m.Atoms {
		if tuple, ok := s.alleneEnds(atom); ok {
			constraints = append(constraints, sameSign(tuple, func(t []int) float64 { return twist(x, t) }))
		}
	}
	return constraints
}

const flatVolume = 0.1 // Å³; three bonds that span less lie in a plane and have no handedness

// sameSign asks that a signed quantity has the same sign on the images of the atoms as on the atoms.
func sameSign(tuple []int, quantity func([]int) float64) constraint {
	sign := math.Signbit(quantity(tuple))
	return constraint{tuple, func(image []int) bool {
		moved := make([]int, len(tuple))
		for k, i := range tuple {
			moved[k] = image[i]
		}
		return math.Signbit(quantity(moved)) == sign
	}}
}

// handedNeighbors returns the neighbours that make an atom a labelled centre, those in the skeleton first.
func (s *Symmetry) handedNeighbors(atom int) ([]int, bool) {
	m := s.molecule
	neighbors := m.Neighbors(atom)
	var around []int
	for _, n := range neighbors {
		if s.skeleton[n.Atom] {
			around = append(around, n.Atom)
		}
		if m.Bonds[n.Bond].Order > 1 && (m.Atoms[atom].Element == 6 || m.Atoms[atom].Element == 7) {
			return nil, false
		}
	}
	switch {
	case len(around) < 3 || len(neighbors) > 4:
		return nil, false
	case len(neighbors) == 4:
		return around, true
	}
	// Three neighbours: pyramids that do not invert.
	switch m.Atoms[atom].Element {
	case 15, 16, 33, 34:
		return around, true
	case 7:
		return around, s.bridgehead(atom) || slices.ContainsFunc(m.Centers, func(c molecule.Center) bool { return c.Atom == atom })
	}
	return nil, false
}

// bridgehead reports whether every two neighbours of a nitrogen are joined by a ring of at most eight atoms through it, so
// that it cannot turn inside out.
func (s *Symmetry) bridgehead(atom int) bool {
	n := s.molecule.Neighbors(atom)
	for i := range n {
		for j := range i {
			if !s.shortDetour(n[i].Atom, n[j].Atom, atom, 8-2) {
				return false
			}
		}
	}
	return true
}

// shortDetour reports whether a path of at most most bonds leads from one atom to another without passing through avoid.
func (s *Symmetry) shortDetour(from, to, avoid, most int) bool {
	seen := map[int]bool{from: true, avoid: true}
	front := []int{from}
	for range most {
		var next []int
		for _, i := range front {
			for _, n := range s.molecule.Neighbors(i) {
				if n.Atom == to {
					return true
				}
				if !seen[n.Atom] {
					seen[n.Atom] = true
					next = append(next, n.Atom)
				}
			}
		}
		front = next
	}
	return false
}

// sidedNeighbors returns reference atom, both ends and the other reference atom of a localised double bond.
func (s *Symmetry) sidedNeighbors(bond int, b molecule.Bond) ([]int, bool) {
	if b.Order != 2 || s.kinds[bond] != 2 {
		return nil, false
	}
	ra, ok := s.reference(b.A, b.B)
	if !ok {
		return nil, false
	}
	rb, ok := s.reference(b.B, b.A)
	return []int{ra, b.A, b.B, rb}, ok
}

// reference returns a substituent of an end of a double bond that tells one side from the other.
func (s *Symmetry) reference(end, other int) (int, bool) {
	neighbors := s.molecule.Neighbors(end)
	if len(neighbors) > 3 {
		return 0, false
	}
	for _, n := range neighbors {
		if n.Atom != other && s.skeleton[n.Atom] {
			return n.Atom, s.molecule.Bonds[n.Bond].Order == 1
		}
	}
	return 0, false
}

// alleneEnds returns a substituent of each end of the allene around a middle atom, with the ends between them.
func (s *Symmetry) alleneEnds(middle int) ([]int, bool) {
	m := s.molecule
	n := m.Neighbors(middle)
	if len(n) != 2 || m.Bonds[n[0].Bond].Order != 2 || m.Bonds[n[1].Bond].Order != 2 {
		return nil, false
	}
	ra, okA := s.reference(n[0].Atom, middle)
	rb, okB := s.reference(n[1].Atom, middle)
	if !okA || !okB || len(m.Neighbors(n[0].Atom)) < 3 || len(m.Neighbors(n[1].Atom)) < 3 {
		return nil, false
	}
	return []int{ra, n[0].Atom, n[1].Atom, rb}, true
}

// volume is the signed volume spanned by three neighbours seen from their centre t[0].
func volume(x []float64, t []int) float64 {
	u, v, w := minus(x, t[1], t[0]), minus(x, t[2], t[0]), minus(x, t[3], t[0])
	return dot(cross(u, v), w)
}

// side is positive where t[0] and t[3] lie on the same side of the axis t[1]–t[2].
func side(x []float64, t []int) float64 {
	axis := minus(x, t[2], t[1])
	return dot(cross(minus(x, t[0], t[1]), axis), cross(minus(x, t[3], t[2]), axis))
}

// twist is the handedness of the screw t[0]–t[1]…t[2]–t[3].
func twist(x []float64, t []int) float64 {
	axis := minus(x, t[2], t[1])
	return dot(cross(minus(x, t[0], t[1]), axis), minus(x, t[3], t[2]))
}

func minus(x []float64, i, j int) [3]float64 {
	return [3]float64{x[3*i] - x[3*j], x[3*i+1] - x[3*j+1], x[3*i+2] - x[3*j+2]}
}

func dot(a, b [3]float64) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }

func cross(a, b [3]float64) [3]float64 {
	return [3]float64{a[1]*b[2] - a[2]*b[1], a[2]*b[0] - a[0]*b[2], a[0]*b[1] - a[1]*b[0]}
}
