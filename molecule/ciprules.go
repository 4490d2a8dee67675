package molecule

import (
	"cmp"
	"slices"
)

// The sequence rules of P-92.1.3, in the order of their application.
const (
	ruleNumber     = iota // 1a: higher atomic number
	ruleDuplicate         // 1b: duplicate of an atom nearer to the root
	ruleMass              // 2: higher atomic mass
	ruleDoubleBond        // 3: Z before E
	ruleKind              // 4a: chiral before pseudoasymmetric before neither
	ruleLike              // 4b: like before unlike pairs of descriptors
	rulePseudo            // 4c: r before s
	ruleChiral            // 5: R before S
)

// key returns what a rule compares of one node; the higher key ranks higher.
func (d *digraph) key(node, rule int) float64 {
	n := &d.nodes[node]
	switch rule {
	case ruleNumber:
		return n.number
	case ruleDuplicate:
		if n.duplicate {
			return -float64(n.origin)
		}
	case ruleMass:
		return d.m.Atoms[n.atom].Mass()
	case ruleDoubleBond:
		switch n.bond {
		case 'Z':
			return 2
		case 'E':
			return 1
		}
	case ruleKind:
		switch n.center {
		case 'R', 'S':
			return 2
		case 'r', 's':
			return 1
		}
	case rulePseudo:
		if n.center == 'r' {
			return 1
		}
	case ruleChiral:
		if n.center == 'R' {
			return 1
		}
	}
	return 0
}

// compare ranks two branches by the rules up to last, each rule to the end of the digraph before the next.
func (d *digraph) compare(a, b, from, last int) int {
	for rule := 0; rule <= last; rule++ {
		var c int
		if rule == ruleLike {
			c = d.compareLike(a, b, from)
		} else {
			c = d.compareBySpheres(a, b, from, rule)
		}
		if c != 0 || d.overgrown {
			return c
		}
	}
	return 0
}

type arc struct{ node, from int }

// compareBySpheres compares two branches sphere by sphere, in each sphere the sets of the higher-ranked nodes first.
func (d *digraph) compareBySpheres(a, b, from, rule int) int {
	if c := cmp.Compare(d.key(a, rule), d.key(b, rule)); c != 0 {
		return c
	}
	left, right := []arc{{a, from}}, []arc{{b, from}}
	for len(left) > 0 && len(right) > 0 && !d.overgrown {
		var nextLeft, nextRight []arc
		for i := range min(len(left), len(right)) {
			setLeft, setRight := d.ranked(left[i], rule), d.ranked(right[i], rule)
			for k := range max(len(setLeft), len(setRight)) {
				keyLeft, keyRight := 0.0, 0.0 // phantom atoms
				if k < len(setLeft) {
					keyLeft = d.key(setLeft[k], rule)
					nextLeft = append(nextLeft, arc{setLeft[k], left[i].node})
				}
				if k < len(setRight) {
					keyRight = d.key(setRight[k], rule)
					nextRight = append(nextRight, arc{setRight[k], right[i].node})
				}
				if c := cmp.Compare(keyLeft, keyRight); c != 0 {
					return c
				}
			}
		}
		left, right = nextLeft, nextRight
	}
	return cmp.Compare(len(left), len(right))
}

// ranked returns the nodes onward of an arc, highest first by the rules up to rule.
func (d *digraph) ranked(at arc, rule int) []int {
	key := sortKey{at.node, at.from, rule}
	if known, ok := d.sorted[key]; ok {
		return known
	}
	set := d.onward(at.node, at.from)
	slices.SortStableFunc(set, func(x, y int) int { return -d.compare(x, y, at.node, rule) })
	d.sorted[key] = set
	return set
}

// compareLike applies rule 4b: in each branch the descriptors are paired with that of the highest-ranked chiral node; the
// branch with the first like pair against an unlike one ranks higher. Where the highest-ranked nodes differ among
// themselves, the better of the two references counts.
func (d *digraph) compareLike(a, b, from int) int {
	return slices.Compare(d.likeness(a, from), d.likeness(b, from))
}

func (d *digraph) likeness(branch, from int) []int {
	var chiral []byte
	first := -1 // number of nodes in the sphere of the reference
	for sphere := []arc{{branch, from}}; len(sphere) > 0 && !d.overgrown; {
		var next []arc
		for _, at := range sphere {
			if c := d.nodes[at.node].center; c == 'R' || c == 'S' {
				chiral = append(chiral, c)
			}
			for _, n := range d.ranked(at, ruleKind) {
				next = append(next, arc{n, at.node})
			}
		}
		if first < 0 && len(chiral) > 0 {
			first = len(chiral)
		}
		sphere = next
	}
	if len(chiral) == 0 {
		return nil
	}
	var best []int
	for _, reference := range chiral[:first] {
		pairs := make([]int, len(chiral))
		for i, c := range chiral {
			if c == reference {
				pairs[i] = 1
			}
		}
		if best == nil || slices.Compare(pairs, best) > 0 {
			best = pairs
		}
	}
	return best
}
