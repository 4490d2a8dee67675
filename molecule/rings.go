package molecule

import (
	"cmp"
	"slices"
)

// Rings returns a smallest set of smallest rings (a minimum cycle basis): the atom indices of each ring in ring order from
// its lowest atom, small rings first. The slices belong to the molecule. Source: Vismara, Electron. J. Combin. 4, R9 (1997).
func (m *Molecule) Rings() [][]int { return m.rings() }

// ringBonds tells which bonds lie in a ring, by depth-first search for bridges (Tarjan, Inf. Process. Lett. 2, 160 (1974)).
func ringBonds(adjacency [][]Neighbor, bonds int) []bool {
	inRing := make([]bool, bonds)
	depth := make([]int, len(adjacency)) // discovery number, 0 = unseen
	low := make([]int, len(adjacency))
	type frame struct{ atom, bond, next int }
	clock := 0
	for root := range adjacency {
		if depth[root] != 0 {
			continue
		}
		clock++
		depth[root], low[root] = clock, clock
		stack := []frame{{root, -1, 0}}
		for len(stack) > 0 {
			top := &stack[len(stack)-1]
			if top.next < len(adjacency[top.atom]) {
				n := adjacency[top.atom][top.next]
				top.next++
				switch {
				case n.Bond == top.bond:
				case depth[n.Atom] == 0:
					clock++
					depth[n.Atom], low[n.Atom] = clock, clock
					stack = append(stack, frame{n.Atom, n.Bond, 0})
				default:
					inRing[n.Bond] = true
					low[top.atom] = min(low[top.atom], depth[n.Atom])
				}
				continue
			}
			done := *top
			stack = stack[:len(stack)-1]
			if len(stack) > 0 {
				parent := stack[len(stack)-1].atom
				low[parent] = min(low[parent], low[done.atom])
				if low[done.atom] <= depth[parent] {
					inRing[done.bond] = true
				}
			}
		}
	}
	return inRing
}

// smallestRings returns a minimum cycle basis of a graph.
func smallestRings(adjacency [][]Neighbor, bonds int) [][]int {
	inRing := ringBonds(adjacency, bonds)
	cyclic := make([][]Neighbor, len(adjacency))
	for i, around := range adjacency {
		for _, n := range around {
			if inRing[n.Bond] {
				cyclic[i] = append(cyclic[i], n)
			}
		}
	}
	basis := newCycleBasis(cyclic, bonds)
	if basis.missing == 0 {
		return nil
	}
	// Most bases consist of small rings, so the search widens only as far as it must.
	for shorter, limit := 0, 8; basis.missing > 0; shorter, limit = limit, 4*limit {
		candidates := cycleCandidates(cyclic, shorter, limit)
		slices.SortFunc(candidates, func(a, b []int) int {
			return cmp.Or(cmp.Compare(len(a), len(b)), slices.Compare(a, b))
		})
		for _, c := range candidates {
			basis.add(c)
		}
	}
	return basis.rings
}

// cycleCandidates returns one ring for each of Vismara's families with more than shorter and at most limit atoms; they
// contain a minimum cycle basis.
func cycleCandidates(adjacency [][]Neighbor, shorter, limit int) [][]int {
	n := len(adjacency)
	distance, restricted, parent := make([]int, n), make([]int, n), make([]int, n)
	onPath := make([]int, n) // root·2 + side of the path it was last marked for
	for i := range distance {
		distance[i], restricted[i] = -1, -1
	}
	var found [][]int
	marker := 0
	disjoint := func(root, a, b int) bool {
		marker++
		for ; a != root; a = parent[a] {
			onPath[a] = marker
		}
		for ; b != root; b = parent[b] {
			if onPath[b] == marker {
				return false
			}
		}
		return true
	}
	ring := func(root, a, b, apex int) []int {
		var left []int
		for ; a != root; a = parent[a] {
			left = append(left, a)
		}
		left = append(left, root)
		slices.Reverse(left)
		if apex >= 0 {
			left = append(left, apex)
		}
		for ; b != root; b = parent[b] {
			left = append(left, b)
		}
		return turned(left)
	}
	var all, below []int
	for root := range adjacency {
		if len(adjacency[root]) == 0 {
			continue
		}
		all = breadthFirst(adjacency, root, limit/2, distance, nil, n, all[:0])
		below = breadthFirst(adjacency, root, limit/2, restricted, parent, root, below[:0])
		for _, y := range below {
			if y == root || restricted[y] != distance[y] {
				continue
			}
			var before []int
			for _, z := range adjacency[y] {
				if z.Atom != root && (z.Atom > root || restricted[z.Atom] < 0 || restricted[z.Atom] != distance[z.Atom]) {
					continue
				}
				size := 2*distance[y] + 1
				switch {
				case distance[z.Atom]+1 == distance[y]:
					before = append(before, z.Atom)
				case distance[z.Atom] == distance[y] && z.Atom < y && size > shorter && size <= limit && disjoint(root, y, z.Atom):
					found = append(found, ring(root, y, z.Atom, -1))
				}
			}
			if size := 2 * distance[y]; size <= shorter || size > limit {
				continue
			}
			for i, p := range before {
				for _, q := range before[:i] {
					if p != root && q != root && disjoint(root, p, q) {
						found = append(found, ring(root, p, q, y))
					}
				}
			}
		}
		for _, i := range all {
			distance[i] = -1
		}
		for _, i := range below {
			restricted[i] = -1
		}
	}
	return found
}

// breadthFirst fills distances from root up to a depth over atoms below a bound (the root itself excepted), and the
// parents if parent is not nil. It appends the atoms reached to reached.
func breadthFirst(adjacency [][]Neighbor, root, depth int, distance, parent []int, bound int, reached []int) []int {
	distance[root] = 0
	reached = append(reached, root)
	for head := 0; head < len(reached); head++ {
		i := reached[head]
		if distance[i] == depth {
			continue
		}
		for _, n := range adjacency[i] {
			if n.Atom < bound && distance[n.Atom] < 0 {
				distance[n.Atom] = distance[i] + 1
				if parent != nil {
					parent[n.Atom] = i
				}
				reached = append(reached, n.Atom)
			}
		}
	}
	return reached
}

// turned rotates and reflects a ring so that it begins at its lowest atom and goes on to the lower of its two neighbours.
func turned(ring []int) []int {
	low := slices.Index(ring, slices.Min(ring))
	out := append(slices.Clone(ring[low:]), ring[:low]...)
	if out[1] > out[len(out)-1] {
		slices.Reverse(out[1:])
	}
	return out
}
