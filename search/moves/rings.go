package moves

import "tarn/molecule"

// cranks lists the segments of all ring systems that can turn, and the number of independent ring torsions.
func cranks(m *molecule.Molecule, ring []bool) (list []Crank, freedom int) {
	system := ringSystems(m, ring)
	seen := make(map[[2]int]bool)
	flexible := make(map[int]bool)
	for i, label := range system {
		if label < 0 {
			continue
		}
		for j := i + 1; j < len(system); j++ {
			if system[j] != label || m.BondBetween(i, j) >= 0 || seen[[2]int{i, j}] {
				continue
			}
			seen[[2]int{i, j}] = true
			for _, c := range cranksBetween(m, i, j, ring) {
				list = append(list, c)
				flexible[c.A], flexible[c.B] = true, true
			}
		}
	}
	for _, r := range m.Rings() {
		count := 0
		for _, a := range r {
			if flexible[a] {
				count++
			}
		}
		freedom += max(0, min(count, len(r)-3))
	}
	return list, freedom
}

// flat tells whether the bonds of an atom lie in one plane.
func flat(m *molecule.Molecule, atom int) bool {
	if amideLike(m, atom) {
		return true
	}
	for _, n := range m.Neighbors(atom) {
		if m.Bonds[n.Bond].Order != 1 {
			return true
		}
	}
	return false
}

// ringSystems labels the atoms of each system of rings that share bonds; -1 outside rings.
func ringSystems(m *molecule.Molecule, ring []bool) []int {
	label := make([]int, len(m.Atoms))
	for i := range label {
		label[i] = -1
	}
	next := 0
	for start := range m.Atoms {
		if label[start] >= 0 {
			continue
		}
		stack := []int{start}
		for len(stack) > 0 {
			i := stack[len(stack)-1]
			stack = stack[:len(stack)-1]
			for _, n := range m.Neighbors(i) {
				if ring[n.Bond] && label[n.Atom] < 0 {
					label[n.Atom] = next
					stack = append(stack, n.Atom)
				}
			}
		}
		if label[start] >= 0 {
			next++
		}
	}
	return label
}

// cranksBetween returns the segments that hang on a and b alone, all but the largest, unless turning them would twist a double bond or
// fold a flat ring.
func cranksBetween(m *molecule.Molecule, a, b int, ring []bool) []Crank {
	part := make(map[int]int)
	var parts [][]int
	wall := func(i int) bool { return i == a || i == b }
	for _, end := range []int{a, b} {
		for _, n := range m.Neighbors(end) {
			if _, done := part[n.Atom]; done || wall(n.Atom) {
				continue
			}
			atoms := component(m, n.Atom, wall)
			for _, i := range atoms {
				part[i] = len(parts)
			}
			parts = append(parts, atoms)
		}
	}
	attached := make([][2][]int, len(parts)) // neighbours of a and of b in each part
	for k, end := range []int{a, b} {
		for _, n := range m.Neighbors(end) {
			if p, ok := part[n.Atom]; ok {
				attached[p][k] = append(attached[p][k], n.Atom)
			}
		}
	}
	largest, bridges := -1, 0
	for p, atoms := range parts {
		if len(attached[p][0]) == 0 || len(attached[p][1]) == 0 {
			continue
		}
		bridges++
		if largest < 0 || len(atoms) > len(parts[largest]) {
			largest = p
		}
	}
	if bridges < 2 {
		return nil
	}
	var list []Crank
	for p, atoms := range parts {
		if p == largest || len(attached[p][0]) != 1 || len(attached[p][1]) != 1 {
			continue
		}
		c := Crank{
			A: a, B: b, Atoms: atoms,
			inner: [2]int{attached[p][0][0], attached[p][1][0]},
			outer: [2]int{attached[largest][0][0], attached[largest][1][0]},
		}
		twists := flat(m, a) && flat(m, b) && flat(m, c.inner[0]) && flat(m, c.inner[1]) && flat(m, c.outer[0]) && flat(m, c.outer[1])
		for k, end := range []int{a, b} {
			for _, n := range m.Neighbors(end) {
				q, ok := part[n.Atom]
				if !ok {
					continue
				}
				bridge := len(attached[q][0]) > 0 && len(attached[q][1]) > 0
				if bridge && m.Bonds[n.Bond].Order != 1 {
					twists = true
				}
				if !bridge {
					c.pendant[k] = append(c.pendant[k], parts[q]...)
				}
			}
		}
		if twists {
			continue
		}
		for _, i := range atoms {
			for _, n := range m.Neighbors(i) {
				if ring[n.Bond] {
					c.Size++
					break
				}
			}
		}
		list = append(list, c)
	}
	return list
}
