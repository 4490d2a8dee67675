package dedupe

import (
	"fmt"
	"math/big"
	"slices"

	"tarn/molecule"
)

// Symmetry knows which atoms of a molecule, or of a cluster of equal atoms, may stand for each other. It is immutable and may
// be used by any number of goroutines.
type Symmetry struct {
	atoms    int
	cluster  bool
	molecule *molecule.Molecule
	graph    *graph
	kinds    []int  // of the bonds, independent of the Lewis structure
	skeleton []bool // the atoms that carry labels when versions are counted: all but interchangeable hydrogens
	order    []int  // all atoms, neighbours after each other
	parent   []int
	mirror   bool
}

// NewSymmetry reads the symmetry off a molecule. It returns [ErrTooSymmetric] if that takes too many steps.
func NewSymmetry(m *molecule.Molecule) (*Symmetry, error) {
	s := &Symmetry{atoms: len(m.Atoms), molecule: m, graph: newGraph(m), parent: make([]int, len(m.Atoms))}
	s.kinds, _ = bondKinds(m)
	s.skeleton = skeleton(m)
	s.order = searchOrder(s.graph, slices.Repeat([]bool{true}, s.atoms), s.parent)
	var err error
	if s.mirror, err = s.mirrorIsSame(); err != nil {
		return nil, fmt.Errorf("comparing the molecule with its mirror image: %w", err)
	}
	return s, nil
}

// NewClusterSymmetry is the symmetry of n equal atoms: all permutations and the mirror image.
func NewClusterSymmetry(n int) *Symmetry { return &Symmetry{atoms: n, cluster: true, mirror: true} }

// Atoms returns the number of atoms.
func (s *Symmetry) Atoms() int { return s.atoms }

// MirrorIsSame reports whether the mirror image of the molecule is the same stereoisomer, so that a geometry and its mirror
// image are versions of one minimum.
func (s *Symmetry) MirrorIsSame() bool { return s.mirror }

// Order returns the number of automorphisms of the molecular graph without regard to stereochemistry, like hydrogens on one
// atom counted as interchangeable.
func (s *Symmetry) Order() (*big.Int, error) {
	if s.cluster {
		return new(big.Int).MulRange(1, int64(s.atoms)), nil
	}
	return newMapper(s.graph, s.skeleton, nil).groupOrder()
}

// skeleton marks the atoms that carry labels: every heavy atom, and a hydrogen only where it is the one of its isotope beside
// other hydrogens on the same atom or has no heavy neighbour.
func skeleton(m *molecule.Molecule) []bool {
	kept := make([]bool, len(m.Atoms))
	for i, a := range m.Atoms {
		neighbors := m.Neighbors(i)
		if a.Element != 1 || len(neighbors) != 1 || m.Atoms[neighbors[0].Atom].Element == 1 {
			kept[i] = true
			continue
		}
		like, hydrogens := 0, 0
		for _, n := range m.Neighbors(neighbors[0].Atom) {
			if h := m.Atoms[n.Atom]; h.Element == 1 {
				hydrogens++
				if h.Isotope == a.Isotope {
					like++
				}
			}
		}
		kept[i] = like == 1 && hydrogens > 1
	}
	return kept
}

// mirrorIsSame looks for an automorphism that inverts every specified centre and keeps every specified double bond.
func (s *Symmetry) mirrorIsSame() (bool, error) {
	m := s.molecule
	if len(m.Centers) == 0 {
		return true, nil
	}
	var constraints []constraint
	centers := map[int]molecule.Center{}
	for _, c := range m.Centers {
		centers[c.Atom] = c
	}
	for _, c := range m.Centers {
		atoms := []int{c.Atom}
		for _, n := range c.Neighbors {
			if n >= 0 && s.skeleton[n] {
				atoms = append(atoms, n)
			}
		}
		constraints = append(constraints, constraint{atoms, func(image []int) bool {
			other, ok := centers[image[c.Atom]]
			if !ok {
				return false
			}
			odd, ok := oddPermutation(c, other, image)
			return ok && (c.Clockwise != other.Clockwise) != odd
		}})
	}
	for _, d := range m.DoubleBonds {
		constraints = append(constraints, constraint{[]int{d.A, d.B, d.RefA, d.RefB}, func(image []int) bool {
			return slices.ContainsFunc(m.DoubleBonds, func(o molecule.DoubleBond) bool { return sameSides(d, o, image) })
		}})
	}
	kept := slices.Clone(s.skeleton)
	for _, d := range m.DoubleBonds { // a reference may be a hydrogen
		kept[d.RefA], kept[d.RefB] = true, true
	}
	image, err := newMapper(s.graph, kept, constraints).exists()
	return image != nil, err
}

// oddPermutation reports whether the images of a centre's neighbours are an odd permutation of the neighbours of the centre it goes
// to. The one neighbour that is not mapped, a hydrogen or a lone pair, goes to the one that is left.
func oddPermutation(from, to molecule.Center, image []int) (odd, ok bool) {
	var places [4]int
	left := 6 // 0+1+2+3
	open := -1
	for k, n := range from.Neighbors {
		at := -1
		if n >= 0 && image[n] >= 0 {
			at = slices.Index(to.Neighbors[:], image[n])
			if at < 0 {
				return false, false
			}
			left -= at
		} else if open >= 0 {
			return false, false
		} else {
			open = k
		}
		places[k] = at
	}
	if open >= 0 {
		places[open] = left
	}
	for i := range places {
		for j := range i {
			if places[j] > places[i] {
				odd = !odd
			}
		}
	}
	return odd, true
}

// sameSides reports whether the image of d is the double bond o with the same geometry.
func sameSides(d, o molecule.DoubleBond, image []int) bool {
	a, b, ra, rb := image[d.A], image[d.B], image[d.RefA], image[d.RefB]
	if a == o.B && b == o.A {
		a, b, ra, rb = b, a, rb, ra
	}
	if a != o.A || b != o.B {
		return false
	}
	return (d.Cis == o.Cis) == ((ra == o.RefA) == (rb == o.RefB))
}
