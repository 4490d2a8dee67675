package smiles

// markDoubleBonds chooses the directions of the single bonds next to specified double bonds. The marks of conjugated double
// bonds share bonds; where these cannot all be right at once, or would seem to specify a double bond that is not, the
// marks go to other substituents, if need be hydrogens written as atoms.
func (w *writer) markDoubleBonds() {
	for _, shared := range [2]bool{true, false} {
		w.directions = nil
		d := directionSystem{w: w, side: map[int]int{}, flip: map[int]bool{}}
		if d.fill(shared) {
			w.directions = d.solution()
			if !shared || !w.overspecified() {
				return
			}
		}
	}
}

// directionSystem is a set of bonds whose directions are tied to each other: side points to another bond of the set, flip
// says that the direction differs from that bond's. Directions are those of the second atom seen from the first.
type directionSystem struct {
	w    *writer
	side map[int]int
	flip map[int]bool
}

// fill enters the constraint of every double bond; it returns false if they contradict each other.
func (d *directionSystem) fill(shared bool) bool {
	for _, b := range d.w.m.DoubleBonds {
		bondA, flipA := d.reference(b.A, b.B, b.RefA, shared)
		bondB, flipB := d.reference(b.B, b.A, b.RefB, shared)
		if bondA < 0 || bondB < 0 {
			continue
		}
		if !d.tie(bondA, bondB, flipA != flipB != !b.Cis) {
			return false
		}
	}
	for _, b := range d.w.m.DoubleBonds { // the other substituent, if marked, lies on the other side
		for _, end := range [2]int{b.A, b.B} {
			first := -1
			for _, n := range d.w.m.Neighbors(end) {
				if _, marked := d.side[n.Bond]; !marked {
					continue
				}
				if first < 0 {
					first = n.Bond
				} else if !d.tie(first, n.Bond, d.from(first, end) == d.from(n.Bond, end)) {
					return false
				}
			}
		}
	}
	return true
}

// from tells whether a bond is seen from its second atom at an end.
func (d *directionSystem) from(bond, end int) bool { return d.w.m.Bonds[bond].B == end }

// reference returns the bond at an end that carries the mark, and whether its direction is opposite to the side of ref.
func (d *directionSystem) reference(end, other, ref int, shared bool) (bond int, flip bool) {
	m := d.w.m
	best, bestScore := -1, -1
	for _, n := range m.Neighbors(end) {
		if m.Bonds[n.Bond].Order != 1 {
			continue
		}
		score := 0
		switch {
		case d.w.folded[n.Atom] && m.OrdinaryHydrogen(n.Atom):
			score = 1
		case shared:
			score = 3
		case !d.nextToDoubleBond(n.Atom):
			score = 2
		}
		if _, marked := d.side[n.Bond]; marked && score > 0 {
			score++
		}
		if score > bestScore {
			best, bestScore = n.Bond, score
		}
	}
	if best < 0 {
		return -1, false
	}
	neighbor := m.Bonds[best].Other(end)
	d.w.unfold(neighbor)
	return best, (neighbor != ref) != d.from(best, end)
}

func (d *directionSystem) nextToDoubleBond(atom int) bool {
	for _, n := range d.w.m.Neighbors(atom) {
		if d.w.m.Bonds[n.Bond].Order == 2 && !d.w.aromaticBonds[n.Bond] {
			return true
		}
	}
	return false
}

func (d *directionSystem) root(bond int) (root int, flip bool) {
	if _, known := d.side[bond]; !known {
		d.side[bond] = bond
	}
	for d.side[bond] != bond {
		flip = flip != d.flip[bond]
		bond = d.side[bond]
	}
	return bond, flip
}

// tie states that two directions differ or are equal; it returns false if that contradicts what is known.
func (d *directionSystem) tie(a, b int, differ bool) bool {
	rootA, flipA := d.root(a)
	rootB, flipB := d.root(b)
	if rootA == rootB {
		return (flipA != flipB) == differ
	}
	d.side[rootB] = rootA
	d.flip[rootB] = (flipA != flipB) != differ
	return true
}

// solution gives every set the direction that makes its lowest bond, in the order of the molecule, an upward one.
func (d *directionSystem) solution() map[int]bool {
	lowest := map[int]int{}
	for bond := range d.side {
		root, _ := d.root(bond)
		if known, ok := lowest[root]; !ok || bond < known {
			lowest[root] = bond
		}
	}
	up := map[int]bool{}
	for bond := range d.side {
		root, flip := d.root(bond)
		_, reference := d.root(lowest[root])
		up[bond] = flip == reference
	}
	return up
}

// overspecified tells whether marks stand at both ends of a double bond, or cumulene, that is not specified.
func (w *writer) overspecified() bool {
	specified := map[[2]int]bool{}
	for _, b := range w.m.DoubleBonds {
		specified[[2]int{b.A, b.B}] = true
		specified[[2]int{b.B, b.A}] = true
	}
	for i, bond := range w.m.Bonds {
		if bond.Order != 2 || w.aromaticBonds[i] {
			continue
		}
		a, b := w.axisEnd(bond.B, bond.A), w.axisEnd(bond.A, bond.B)
		if !specified[[2]int{a, b}] && w.marked(a) && w.marked(b) {
			return true
		}
	}
	return false
}

func (w *writer) axisEnd(before, end int) int {
	for steps := 0; w.cumulated(end) && steps < len(w.m.Atoms); steps++ {
		onward := w.m.Neighbors(end)[0].Atom
		if onward == before {
			onward = w.m.Neighbors(end)[1].Atom
		}
		before, end = end, onward
	}
	return end
}

func (w *writer) marked(atom int) bool {
	for _, n := range w.m.Neighbors(atom) {
		if _, ok := w.directions[n.Bond]; ok {
			return true
		}
	}
	return false
}
