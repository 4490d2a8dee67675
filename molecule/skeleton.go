package molecule

import "slices"

// skeleton is the molecule as identity sees it: the standard drawing without its ordinary hydrogens, aromatic bonds all
// alike, charges of aromatic systems and of resonating terminal oxygens and sulfurs (carboxylate, nitro, phosphate) spread
// evenly. What is symmetric up to resonance is symmetric here.
type skeleton struct {
	standard  *Molecule
	atoms     []int // vertex → atom
	vertex    []int // atom → vertex, -1 for a folded hydrogen
	parent    []int // folded hydrogen → atom that it is on, else -1
	hydrogens []int // vertex → number of folded hydrogens
	colors    []uint64
	edges     [][]colorEdge
	part      []int   // vertex → connected part
	parts     [][]int // vertices of each part, ascending
	local     []int   // vertex → place in its part
}

// Kinds of edges beyond the bond orders 1 to 4.
const (
	aromaticEdge = 5
	pooledEdge   = 6
)

func (m *Molecule) findSkeleton() *skeleton {
	s := &skeleton{
		standard: m.standard(),
		vertex:   make([]int, len(m.Atoms)), parent: make([]int, len(m.Atoms)),
	}
	for i := range m.Atoms {
		s.parent[i] = m.foldedOn(i)
		s.vertex[i] = -1
		if s.parent[i] < 0 {
			s.vertex[i] = len(s.atoms)
			s.atoms = append(s.atoms, i)
		}
	}
	s.hydrogens = make([]int, len(s.atoms))
	for _, parent := range s.parent {
		if parent >= 0 {
			s.hydrogens[s.vertex[parent]]++
		}
	}
	s.paint()
	s.findParts()
	return s
}

// foldedOn returns the heavy atom that an ordinary terminal hydrogen is bonded to, or -1 for every other atom.
func (m *Molecule) foldedOn(i int) int {
	a := m.Atoms[i]
	if a.Element != 1 || a.Isotope != 0 || a.Charge != 0 || len(m.neighbors[i]) != 1 {
		return -1
	}
	n := m.neighbors[i][0]
	if m.Atoms[n.Atom].Element == 1 || m.Bonds[n.Bond].Order != 1 {
		return -1
	}
	return n.Atom
}

// OrdinaryHydrogen tells whether an atom is a hydrogen that notations may leave out: of natural isotopes, uncharged, on one
// other atom that is no hydrogen.
func (m *Molecule) OrdinaryHydrogen(i int) bool { return m.foldedOn(i) >= 0 }

// paint sets the colours and edges.
func (s *skeleton) paint() {
	m := s.standard
	aromatic := m.aromaticity()
	pools := m.chargePools()
	charge := make([]int, len(m.Atoms))
	for i, a := range m.Atoms {
		charge[i] = a.Charge
	}
	shared := make([]int, len(m.Atoms)) // charge spread over an atom's pool or aromatic system, offset by a constant
	for _, pool := range pools {
		for _, n := range pool.ends {
			shared[pool.center] += m.Atoms[n.Atom].Charge
			charge[n.Atom] = 0
		}
	}
	for _, system := range m.aromaticSystems() {
		total := 0
		for _, atom := range system {
			total += m.Atoms[atom].Charge
			charge[atom] = 0
		}
		for _, atom := range system {
			shared[atom] += 1000 * total
		}
	}
	pooled := make([]bool, len(m.Bonds))
	for _, pool := range pools {
		for _, n := range pool.ends {
			pooled[n.Bond] = true
		}
	}
	s.colors = make([]uint64, len(s.atoms))
	s.edges = make([][]colorEdge, len(s.atoms))
	for v, i := range s.atoms {
		a := m.Atoms[i]
		heavy := min(15, len(m.neighbors[i])-s.hydrogens[v])
		// Element and degree first, so that canonical SMILES begin at the end of a carbon chain where they can.
		s.colors[v] = uint64(a.Element)<<50 | uint64(heavy)<<46 | uint64(a.Isotope)<<36 | uint64(charge[i]+128)<<28 |
			uint64(s.hydrogens[v])<<20 | uint64(shared[i]+1<<19)
		for _, n := range m.neighbors[i] {
			to := s.vertex[n.Atom]
			if to < 0 {
				continue
			}
			kind := uint64(m.Bonds[n.Bond].Order)
			switch {
			case aromatic.bonds[n.Bond]:
				kind = aromaticEdge
			case pooled[n.Bond]:
				kind = pooledEdge
			}
			s.edges[v] = append(s.edges[v], colorEdge{to, kind})
		}
	}
}

// chargePool is an atom with terminal O, S, Se or Te neighbours of which some are double-bonded and some negative: their
// places are exchanged by resonance.
type chargePool struct {
	center int
	ends   []Neighbor
}

func (m *Molecule) chargePools() []chargePool {
	var pools []chargePool
	for i := range m.Atoms {
		var ends []Neighbor
		double, negative := false, false
		for _, n := range m.neighbors[i] {
			a := m.Atoms[n.Atom]
			if !isChalcogen(a.Element) || len(m.neighbors[n.Atom]) != 1 {
				continue
			}
			switch order := m.Bonds[n.Bond].Order; {
			case order == 2 && a.Charge == 0:
				double = true
			case order == 1 && a.Charge == -1:
				negative = true
			default:
				continue
			}
			ends = append(ends, n)
		}
		if double && negative {
			pools = append(pools, chargePool{i, ends})
		}
	}
	return pools
}

func isChalcogen(e Element) bool { return e == 8 || e == 16 || e == 34 || e == 52 }

// aromaticSystems returns the sets of atoms joined by aromatic bonds, each ascending.
func (m *Molecule) aromaticSystems() [][]int {
	aromatic := m.aromaticity()
	sets := newUnionFind(len(m.Atoms))
	for i, b := range m.Bonds {
		if aromatic.bonds[i] {
			sets.union(b.A, b.B)
		}
	}
	return sets.groups(func(i int) bool { return aromatic.atoms[i] })
}

func (s *skeleton) findParts() {
	sets := newUnionFind(len(s.atoms))
	for v, around := range s.edges {
		for _, e := range around {
			sets.union(v, e.to)
		}
	}
	s.parts = sets.groups(func(int) bool { return true })
	s.part, s.local = make([]int, len(s.atoms)), make([]int, len(s.atoms))
	for k, part := range s.parts {
		for place, v := range part {
			s.part[v], s.local[v] = k, place
		}
	}
}

// graph returns one connected part with stereo elements, whose vertices are those of the skeleton. Colours are changed by
// marks, vertex → any number but 0.
func (s *skeleton) graph(part int, elements []stereoElement, marks map[int]uint64) *colorGraph {
	vertices := s.parts[part]
	g := &colorGraph{colors: make([]uint64, len(vertices)), edges: make([][]colorEdge, len(vertices))}
	for place, v := range vertices {
		g.colors[place] = s.colors[v]
		if mark := marks[v]; mark != 0 {
			g.colors[place] = mix(s.colors[v], mark)
		}
		g.edges[place] = make([]colorEdge, len(s.edges[v]))
		for k, e := range s.edges[v] {
			g.edges[place][k] = colorEdge{s.local[e.to], e.kind}
		}
	}
	for _, e := range elements {
		if s.part[e.at[0]] != part {
			continue
		}
		e.at = [2]int{s.local[e.at[0]], s.local[e.at[1]]}
		for k, n := range e.neighbors {
			if n >= 0 {
				e.neighbors[k] = s.local[n]
			}
		}
		g.elements = append(g.elements, e)
	}
	return g
}

// groups returns the sets among the members chosen, each ascending, ordered by first member.
func (u *unionFind) groups(chosen func(int) bool) [][]int {
	number := map[int]int{}
	var out [][]int
	for i := range u.parent {
		if !chosen(i) {
			continue
		}
		root := u.find(i)
		k, known := number[root]
		if !known {
			k = len(out)
			number[root] = k
			out = append(out, nil)
		}
		out[k] = append(out[k], i)
	}
	return out
}

// findSymmetryClasses numbers the orbits of the automorphism group of the skeleton without its descriptors.
func (m *Molecule) findSymmetryClasses() []int {
	s := m.skeleton()
	sets := newUnionFind(len(s.atoms))
	var kinds []*labelling
	var examples []int
	for k, part := range s.parts {
		l := s.graph(k, nil, nil).label()
		for place, v := range part {
			sets.union(v, part[l.orbits.find(place)])
		}
		same := slices.IndexFunc(kinds, func(other *labelling) bool { return slices.Equal(other.certificate, l.certificate) })
		if same < 0 {
			kinds, examples = append(kinds, l), append(examples, k)
			continue
		}
		for i, place := range l.order {
			sets.union(part[place], s.parts[examples[same]][kinds[same].order[i]])
		}
	}
	classes := make([]int, len(m.Atoms))
	number := map[[2]int]int{}
	for i := range m.Atoms {
		key := [2]int{0, 0}
		if s.parent[i] >= 0 {
			key = [2]int{1, sets.find(s.vertex[s.parent[i]])}
		} else {
			key[1] = sets.find(s.vertex[i])
		}
		class, known := number[key]
		if !known {
			class = len(number)
			number[key] = class
		}
		classes[i] = class
	}
	return classes
}

// SymmetryClasses numbers the atoms so that two have the same number exactly if an automorphism of the constitution carries
// one onto the other, up to resonance (both oxygens of a carboxylate are equivalent) and regardless of configuration.
// Numbers rise with the first atom of a class. The slice belongs to the molecule.
func (m *Molecule) SymmetryClasses() []int { return m.classes() }
