package molecule

import "fmt"

// Atom is one nucleus of a molecule.
type Atom struct {
	Element Element
	Isotope int // mass number; 0 stands for the natural mixture
	Charge  int // formal charge, elementary charges
	Radical int // number of unpaired electrons
	Class   int // atom class of the notation; carries no chemistry
}

// Bond joins atoms A and B. The orders of all bonds together are one Kekulé structure.
type Bond struct {
	A, B  int
	Order int // 1 to 4
}

// Other returns the atom at the other end of the bond.
func (b Bond) Other(atom int) int {
	if b.A == atom {
		return b.B
	}
	return b.A
}

// LonePair stands for a lone pair where a stereocentre has three neighbours.
const LonePair = -1

// Center is a tetrahedral stereocentre or, with the middle carbon as Atom and the four end substituents as Neighbors, an
// allene. Seen from Neighbors[0] the others run clockwise or counter-clockwise, as in OpenSMILES (@@ and @).
type Center struct {
	Atom      int
	Neighbors [4]int // atom indices; one of them may be LonePair
	Clockwise bool
}

// DoubleBond is a stereogenic double bond (or the ends of an odd cumulene) between A and B. Cis says that the reference
// neighbours RefA (on A) and RefB (on B) lie on the same side.
type DoubleBond struct {
	A, B       int
	RefA, RefB int
	Cis        bool
}

// Neighbor is an atom reached over a bond; both are indices.
type Neighbor struct {
	Atom, Bond int
}

// Molecule is atoms, bonds, formal charges and stereodescriptors; it has no coordinates. It must not be changed once it
// has been made by [New] or [Draft.Build]; it may then be read by any number of goroutines.
type Molecule struct {
	Name        string
	Atoms       []Atom
	Bonds       []Bond
	Centers     []Center     // the specified stereocentres
	DoubleBonds []DoubleBond // the specified double-bond geometries

	neighbors [][]Neighbor
	perception
}

// New makes a molecule from complete parts: all hydrogens present, all bond orders set. It returns an error if an index
// is out of range, an atom is bonded to itself, or two bonds join the same atoms. It does not judge valences: that is done
// by [Draft.Build], through which all notations go.
func New(name string, atoms []Atom, bonds []Bond, centers []Center, doubleBonds []DoubleBond) (*Molecule, error) {
	m := &Molecule{
		Name: name, Atoms: atoms, Bonds: bonds, Centers: centers, DoubleBonds: doubleBonds,
		neighbors: make([][]Neighbor, len(atoms)),
	}
	seen := make(map[[2]int]bool, len(bonds))
	for i, b := range bonds {
		if b.A < 0 || b.A >= len(atoms) || b.B < 0 || b.B >= len(atoms) {
			return nil, fmt.Errorf("bond %d joins atoms %d and %d, but there are %d atoms", i+1, b.A+1, b.B+1, len(atoms))
		}
		if b.A == b.B {
			return nil, fmt.Errorf("bond %d joins atom %d to itself", i+1, b.A+1)
		}
		pair := [2]int{min(b.A, b.B), max(b.A, b.B)}
		if seen[pair] {
			return nil, fmt.Errorf("atoms %d and %d are joined by two bonds", pair[0]+1, pair[1]+1)
		}
		seen[pair] = true
		m.neighbors[b.A] = append(m.neighbors[b.A], Neighbor{b.B, i})
		m.neighbors[b.B] = append(m.neighbors[b.B], Neighbor{b.A, i})
	}
	m.perception = perceptionOf(m)
	return m, nil
}

// Neighbors returns the atoms bonded to an atom, in the order of the bonds. The slice belongs to the molecule.
func (m *Molecule) Neighbors(atom int) []Neighbor { return m.neighbors[atom] }

// BondBetween returns the index of the bond that joins i and j, or -1.
func (m *Molecule) BondBetween(i, j int) int {
	for _, n := range m.neighbors[i] {
		if n.Atom == j {
			return n.Bond
		}
	}
	return -1
}

// Charge returns the sum of the formal charges.
func (m *Molecule) Charge() int {
	total := 0
	for _, a := range m.Atoms {
		total += a.Charge
	}
	return total
}

// Fragments returns the atoms of each connected part, each list ascending, ordered by their first atom.
func (m *Molecule) Fragments() [][]int {
	part := make([]int, len(m.Atoms))
	var fragments [][]int
	for start := range m.Atoms {
		if part[start] != 0 {
			continue
		}
		fragments = append(fragments, nil)
		label := len(fragments)
		part[start] = label
		for stack := []int{start}; len(stack) > 0; {
			i := stack[len(stack)-1]
			stack = stack[:len(stack)-1]
			for _, n := range m.neighbors[i] {
				if part[n.Atom] == 0 {
					part[n.Atom] = label
					stack = append(stack, n.Atom)
				}
			}
		}
	}
	for i, p := range part {
		fragments[p-1] = append(fragments[p-1], i)
	}
	return fragments
}
