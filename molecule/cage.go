package molecule

// cageBond says that two bridgeheads of a small bicycle determine each other's configuration: in,out isomers, and trans
// fusion of the smallest rings, do not exist.
type cageBond struct {
	heads  [2]int
	bridge [2][3]int // first atom of each bridge, seen from either head
	// bridged tells that all three bridges have atoms, so that the heads cannot invert without breaking a bond.
	bridged bool
}

// Limits of what counts as a small bicycle, in atoms of the three bridges together. The smallest in,out bicycles that have
// been isolated have nine ([4.4.1], [5.3.1]); the smallest trans-fused saturated ones six ([3.3.0], [4.2.0], [5.1.0]).
// From memory, common knowledge of the stereochemistry of bicycles.
const (
	maxBridgedCage = 8
	maxFusedCage   = 5
)

// findCageBonds finds the pairs of bridgeheads that are joined by three separate bridges of few atoms.
func (m *Molecule) findCageBonds() []cageBond {
	inRing := ringBonds(m.neighbors, len(m.Bonds))
	ring := make([][]int, len(m.Atoms))
	for i, around := range m.neighbors {
		for _, n := range around {
			if inRing[n.Bond] {
				ring[i] = append(ring[i], n.Atom)
			}
		}
	}
	var found []cageBond
	for head := range ring {
		if len(ring[head]) < 3 || len(m.neighbors[head]) > 4 {
			continue
		}
		for _, other := range within(ring, head, 3) { // of three bridges with eight atoms in all one has at most two
			if other < head || len(ring[other]) < 3 || len(m.neighbors[other]) > 4 {
				continue
			}
			s := bridgeSearch{ring: ring, head: head, other: other, best: maxBridgedCage + 1, used: map[int]bool{}}
			s.distance = distancesTo(ring, other, maxBridgedCage)
			s.start(0, 0, 0)
			if s.best <= maxBridgedCage && (!s.fused || s.best <= maxFusedCage) {
				found = append(found, cageBond{[2]int{head, other}, s.bridge, !s.fused})
			}
		}
	}
	return found
}

// within returns the atoms at most depth bonds away.
func within(adjacency [][]int, from, depth int) []int {
	seen := map[int]bool{from: true}
	reached := []int{from}
	for begin := 0; depth > 0; depth-- {
		end := len(reached)
		for _, i := range reached[begin:end] {
			for _, n := range adjacency[i] {
				if !seen[n] {
					seen[n] = true
					reached = append(reached, n)
				}
			}
		}
		begin = end
	}
	return reached[1:]
}

func distancesTo(adjacency [][]int, target, depth int) map[int]int {
	distance := map[int]int{target: 0}
	queue := []int{target}
	for head := 0; head < len(queue); head++ {
		i := queue[head]
		if distance[i] > depth {
			break
		}
		for _, n := range adjacency[i] {
			if _, known := distance[n]; !known {
				distance[n] = distance[i] + 1
				queue = append(queue, n)
			}
		}
	}
	return distance
}

// bridgeSearch looks for three bridges between two atoms with the fewest atoms in all.
type bridgeSearch struct {
	ring        [][]int
	head, other int
	distance    map[int]int // to other
	used        map[int]bool
	present     [2][3]int
	direct      bool // one of the present bridges is a bond

	best   int
	bridge [2][3]int
	fused  bool
}

// start begins bridge number k at the neighbours of head from the given one on.
func (s *bridgeSearch) start(k, from, total int) {
	if k == 3 {
		if total < s.best {
			s.best, s.bridge, s.fused = total, s.present, s.direct
		}
		return
	}
	for i := from; i < len(s.ring[s.head]); i++ {
		first := s.ring[s.head][i]
		if s.used[first] {
			continue
		}
		s.present[0][k] = first
		if first == s.other {
			s.present[1][k] = s.head
			s.direct = true
			s.start(k+1, i+1, total)
			s.direct = false
			continue
		}
		s.grow(k, i, first, total+1)
	}
}

// grow extends a bridge by an atom; total counts the atoms of all bridges including it.
func (s *bridgeSearch) grow(k, from, atom, total int) {
	d, near := s.distance[atom]
	if !near || total+d-1 >= s.best {
		return
	}
	s.used[atom] = true
	for _, n := range s.ring[atom] {
		switch {
		case n == s.other:
			s.present[1][k] = atom
			s.start(k+1, from+1, total)
		case n != s.head && !s.used[n]:
			s.grow(k, from, n, total+1)
		}
	}
	s.used[atom] = false
}

// coupleCages joins candidates at the heads of a cage into units. It returns for each candidate whether its configuration
// is the opposite of that of the unit's first member, in the order of neighbours that each candidate has.
func (m *Molecule) coupleCages(candidates []candidate) (opposite []bool) {
	opposite = make([]bool, len(candidates))
	at := map[int]int{}
	for i, c := range candidates {
		if c.center != nil && !c.element.axial {
			at[c.center.Atom] = i
		}
	}
	for _, cage := range m.cages() {
		a, okA := at[cage.heads[0]]
		b, okB := at[cage.heads[1]]
		if !okA || !okB || candidates[a].unit == candidates[b].unit {
			continue
		}
		// Seen from outside, the bridges run clockwise at one head and counter-clockwise at the other.
		differ := true
		for side, i := range [2]int{a, b} {
			around := candidates[i].center.Neighbors
			outside := around[0] ^ around[1] ^ around[2] ^ around[3]
			for _, n := range cage.bridge[side] {
				outside ^= n
			}
			odd, _ := permutationOdd(around, [4]int{outside, cage.bridge[side][0], cage.bridge[side][1], cage.bridge[side][2]})
			differ = differ != odd
		}
		turn := differ != (opposite[a] != opposite[b])
		joined, into := candidates[b].unit, candidates[a].unit
		for i := range candidates {
			if candidates[i].unit == joined {
				candidates[i].unit = into
				opposite[i] = opposite[i] != turn
			}
		}
	}
	return opposite
}
