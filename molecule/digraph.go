package molecule

// digraph is the hierarchical digraph of Cahn, Ingold and Prelog around one atom: a tree of all paths from it, ended by
// duplicate atoms where a path would close a ring, with further duplicates for multiple bonds. Source: IUPAC, Nomenclature
// of Organic Chemistry, Recommendations 2013, P-92.1.4.
type digraph struct {
	m          *Molecule
	stereo     Stereo
	centers    map[int]Center
	nodes      []digraphNode
	sorted     map[sortKey][]int // neighbours of a node away from another, highest first
	overgrown  bool              // more than maxDigraph nodes: no label is given
	auxiliary  bool              // the descriptors within the digraph have been assigned
	mesomerism []bool            // atoms with a double bond of an aromatic ring
}

type digraphNode struct {
	atom      int
	parent    int
	children  []int
	expanded  bool
	duplicate bool
	depth     int
	origin    int     // duplicates: depth of the atom that they repeat
	number    float64 // atomic number; the mean of the possible partners for duplicates in aromatic rings
	center    byte    // auxiliary descriptor R, S, r, s or 0
	bond      byte    // auxiliary descriptor Z or E of a double bond to a child, or 0
}

type sortKey struct{ node, from, rule int }

// maxDigraph bounds the size of a digraph; only large cages, whose paths multiply, exceed it.
const maxDigraph = 20_000

func newDigraph(m *Molecule, root int) *digraph {
	d := &digraph{m: m, stereo: m.Stereo(), centers: map[int]Center{}, sorted: map[sortKey][]int{}}
	for _, c := range d.stereo.Centers {
		if c.Specified {
			d.centers[c.Atom] = c.Center
		}
	}
	d.mesomerism = make([]bool, len(m.Atoms))
	aromatic := m.aromaticity().bonds
	for i, b := range m.Bonds {
		if aromatic[i] && b.Order == 2 {
			d.mesomerism[b.A], d.mesomerism[b.B] = true, true
		}
	}
	d.add(root, -1, false, 0)
	return d
}

func (d *digraph) add(atom, parent int, duplicate bool, origin int) int {
	n := digraphNode{
		atom: atom, parent: parent, duplicate: duplicate, origin: origin, expanded: duplicate,
		number: float64(d.m.Atoms[atom].Element),
	}
	if parent >= 0 {
		n.depth = d.nodes[parent].depth + 1
	}
	d.nodes = append(d.nodes, n)
	if len(d.nodes) > maxDigraph {
		d.overgrown = true
	}
	return len(d.nodes) - 1
}

// onPath returns the depth at which an atom stands between a node and the root, or -1.
func (d *digraph) onPath(node, atom int) int {
	for ; node >= 0; node = d.nodes[node].parent {
		if d.nodes[node].atom == atom {
			return d.nodes[node].depth
		}
	}
	return -1
}

// expand makes the children of a node.
func (d *digraph) expand(node int) {
	if d.nodes[node].expanded || d.overgrown {
		return
	}
	d.nodes[node].expanded = true
	atom := d.nodes[node].atom
	before := -1
	if parent := d.nodes[node].parent; parent >= 0 {
		before = d.nodes[parent].atom
	}
	aromatic := d.m.aromaticity().bonds
	var children []int
	for _, n := range d.m.neighbors[atom] {
		depth := d.onPath(node, n.Atom)
		if n.Atom != before {
			children = append(children, d.add(n.Atom, node, depth >= 0, depth))
		}
		copies := d.m.Bonds[n.Bond].Order - 1
		if aromatic[n.Bond] {
			copies = 0
		}
		for range copies {
			children = append(children, d.add(n.Atom, node, true, d.duplicateDepth(node, depth)))
		}
	}
	if d.mesomerism[atom] {
		children = append(children, d.aromaticDuplicate(node))
	}
	d.nodes[node].children = children
}

// duplicateDepth returns the depth of the atom that a duplicate for a multiple bond repeats: that on the path, or the child.
func (d *digraph) duplicateDepth(node, onPath int) int {
	if onPath >= 0 {
		return onPath
	}
	return d.nodes[node].depth + 1
}

// aromaticDuplicate adds the duplicate for the double bond of an aromatic atom. In the Kekulé structures it goes to each
// of the neighbours that have one too, so it takes the mean of their atomic numbers (P-92.1.4.4).
func (d *digraph) aromaticDuplicate(node int) int {
	atom := d.nodes[node].atom
	aromatic := d.m.aromaticity().bonds
	total, count, partner := 0.0, 0.0, -1
	for _, n := range d.m.neighbors[atom] {
		if aromatic[n.Bond] && d.mesomerism[n.Atom] {
			total += float64(d.m.Atoms[n.Atom].Element)
			count++
			partner = n.Atom
		}
	}
	duplicate := d.add(partner, node, true, d.nodes[node].depth+1)
	d.nodes[duplicate].number = total / count
	return duplicate
}

// onward returns the neighbours of a node in the tree other than the one it is reached from.
func (d *digraph) onward(node, from int) []int {
	d.expand(node)
	n := d.nodes[node]
	out := make([]int, 0, len(n.children)+1)
	if n.parent >= 0 && n.parent != from {
		out = append(out, n.parent)
	}
	for _, child := range n.children {
		if child != from {
			out = append(out, child)
		}
	}
	return out
}

// toward returns the neighbour of a node that stands for an atom, the real one before a duplicate; -1 if there is none.
func (d *digraph) toward(node, atom int) int {
	found := -1
	for _, n := range d.onward(node, -1) {
		if d.nodes[n].atom == atom && (found < 0 || !d.nodes[n].duplicate) {
			found = n
		}
	}
	return found
}
