package molecule

import "slices"

// Labels are the stereodescriptors of Cahn, Ingold and Prelog, parallel to the centres and double bonds of Stereo: R or S,
// r or s (pseudoasymmetric), M or P for allenes, Z or E; "" where the configuration is unspecified or no rule decides.
type Labels struct {
	Centers     []string
	DoubleBonds []string
}

// Labels names the configurations by the sequence rules 1 to 5 of the IUPAC recommendations of 2013 (P-91 to P-93). They
// are names only and never decide whether two molecules are the same. Rule 4b is applied in a simplified form (see
// compareLike) and rule 6 not at all; for the largest cages no label is given.
func (m *Molecule) Labels() Labels {
	drawn := m.standard()
	stereo := drawn.Stereo()
	labels := Labels{make([]string, len(stereo.Centers)), make([]string, len(stereo.DoubleBonds))}
	for i, c := range stereo.Centers {
		if !c.Specified {
			continue
		}
		if ends, allene := drawn.alleneEnds(c.Atom); allene {
			labels.Centers[i] = drawn.alleneLabel(c.Center, ends)
			continue
		}
		d := newDigraph(drawn, c.Atom)
		if label := d.centerLabel(0, c.Center); label != 0 {
			labels.Centers[i] = string(label)
		}
	}
	for i, b := range stereo.DoubleBonds {
		if !b.Specified {
			continue
		}
		higherA, okA := drawn.higherAtEnd(b.A, b.RefA)
		higherB, okB := drawn.higherAtEnd(b.B, b.RefB)
		if okA && okB {
			labels.DoubleBonds[i] = string(doubleBondLabel(b.Cis, higherA, higherB))
		}
	}
	return labels
}

// centerLabel returns R, S, r or s for the centre at a node, or 0.
func (d *digraph) centerLabel(node int, c Center) byte {
	var arms [4]int // node, or LonePair
	for k, n := range c.Neighbors {
		arms[k] = LonePair
		if n != LonePair {
			if arms[k] = d.toward(node, n); arms[k] < 0 {
				return 0
			}
		}
	}
	order, decided := d.order(arms, node, ruleMass)
	pseudo := false
	if !decided {
		d.assignAuxiliary()
		if order, decided = d.order(arms, node, rulePseudo); !decided {
			pseudo = true
			order, decided = d.order(arms, node, ruleChiral)
		}
	}
	if !decided || d.overgrown {
		return 0
	}
	// Seen from the lowest, the others descend counter-clockwise in R.
	odd, _ := permutationOdd(c.Neighbors, [4]int{
		c.Neighbors[order[3]], c.Neighbors[order[0]], c.Neighbors[order[1]], c.Neighbors[order[2]],
	})
	label := byte('S')
	if c.Clockwise == odd {
		label = 'R'
	}
	if pseudo {
		label += 'a' - 'A'
	}
	return label
}

// order returns the places of four arms from the highest to the lowest, and whether the rules up to last decide it.
func (d *digraph) order(arms [4]int, node, last int) (places [4]int, decided bool) {
	rank := func(x, y int) int {
		switch {
		case arms[x] == LonePair:
			return 1
		case arms[y] == LonePair:
			return -1
		}
		return -d.compare(arms[x], arms[y], node, last)
	}
	places = [4]int{0, 1, 2, 3}
	slices.SortStableFunc(places[:], rank)
	for k := range 3 {
		if rank(places[k], places[k+1]) == 0 {
			return places, false
		}
	}
	return places, true
}

// assignAuxiliary gives every centre and double bond inside the digraph its descriptor within the digraph, the outermost
// first (P-92.1.4.2, P-93.5).
func (d *digraph) assignAuxiliary() {
	if d.auxiliary {
		return
	}
	d.auxiliary = true
	for node := 0; node < len(d.nodes) && !d.overgrown; node++ {
		d.expand(node)
	}
	for node := len(d.nodes) - 1; node > 0 && !d.overgrown; node-- { // children have higher numbers than their parents
		n := &d.nodes[node]
		if n.duplicate {
			continue
		}
		if c, ok := d.centers[n.atom]; ok {
			label := d.centerLabel(node, c)
			d.nodes[node].center = label
			d.forget()
		}
		for _, b := range d.stereo.DoubleBonds {
			if b.Specified && (n.atom == b.A || n.atom == b.B) {
				if label := d.bondLabel(node, b.DoubleBond); label != 0 {
					d.nodes[node].bond = label
					d.forget()
				}
			}
		}
	}
}

// forget drops the orders that depend on auxiliary descriptors.
func (d *digraph) forget() {
	for key := range d.sorted {
		if key.rule > ruleMass {
			delete(d.sorted, key)
		}
	}
}

// bondLabel returns Z or E for a double bond whose nearer end is at a node, or 0.
func (d *digraph) bondLabel(node int, b DoubleBond) byte {
	nearRef, farRef, far := b.RefA, b.RefB, b.B
	if d.nodes[node].atom == b.B {
		nearRef, farRef, far = b.RefB, b.RefA, b.A
	}
	farNode := d.toward(node, far)
	if farNode < 0 || d.nodes[farNode].duplicate || d.nodes[farNode].parent != node {
		return 0
	}
	higherNear, okNear := d.higherPlace(node, farNode, nearRef)
	higherFar, okFar := d.higherPlace(farNode, node, farRef)
	if !okNear || !okFar {
		return 0
	}
	return doubleBondLabel(b.Cis, higherNear, higherFar)
}

// higherPlace tells whether the neighbour ref of a node outranks the other one that is not on the axis.
func (d *digraph) higherPlace(node, axis, ref int) (higher, ok bool) {
	refNode, otherNode := -1, -1
	for _, n := range d.onward(node, axis) {
		switch {
		case d.nodes[n].atom == d.nodes[axis].atom: // duplicate of the double bond
		case d.nodes[n].atom == ref:
			refNode = n
		default:
			otherNode = n
		}
	}
	if refNode < 0 {
		return false, false
	}
	if otherNode < 0 {
		return true, true // the other place is a lone pair
	}
	c := d.compare(refNode, otherNode, node, ruleMass)
	if c == 0 {
		d.assignAuxiliary()
		c = d.compare(refNode, otherNode, node, ruleChiral)
	}
	return c > 0, c != 0 && !d.overgrown
}

func doubleBondLabel(cis, higherA, higherB bool) byte {
	if cis == (higherA == higherB) {
		return 'Z'
	}
	return 'E'
}

// higherAtEnd tells whether ref outranks the other substituent at the end of a double bond or cumulene.
func (m *Molecule) higherAtEnd(end, ref int) (higher, ok bool) {
	d := newDigraph(m, end)
	for _, n := range m.neighbors[end] {
		if m.Bonds[n.Bond].Order == 2 {
			return d.higherPlace(0, d.toward(0, n.Atom), ref)
		}
	}
	return false, false
}

// alleneLabel returns M or P: the substituents of one end before those of the other, by rank at each end (P-93.5.3.1).
func (m *Molecule) alleneLabel(c Center, ends [2]int) string {
	if !m.attached(ends[0], c.Neighbors[0]) {
		ends[0], ends[1] = ends[1], ends[0]
	}
	higherA, okA := m.higherAtEnd(ends[0], c.Neighbors[0])
	higherB, okB := m.higherAtEnd(ends[1], c.Neighbors[2])
	if !okA || !okB {
		return ""
	}
	// With both first neighbours the higher ones, (a, b, c, d) seen from a is as (d, a, b, c) reversed.
	if c.Clockwise == (higherA == higherB) {
		return "M"
	}
	return "P"
}
