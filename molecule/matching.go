package molecule

// matching is a matching in a general graph: mate[i] is the partner of vertex i, or -1.
type matching struct {
	mate []int
}

func newMatching(n int) *matching {
	m := &matching{mate: make([]int, n)}
	for i := range m.mate {
		m.mate[i] = -1
	}
	return m
}

// extend makes the matching maximum in a graph that contains its present edges. Every vertex matched before stays matched.
func (m *matching) extend(adjacency [][]int) {
	for i := range adjacency { // a greedy start leaves little to the search
		if m.mate[i] >= 0 {
			continue
		}
		for _, j := range adjacency[i] {
			if m.mate[j] < 0 {
				m.mate[i], m.mate[j] = j, i
				break
			}
		}
	}
	search := newBlossomSearch(m.mate, adjacency)
	for i := range adjacency {
		if m.mate[i] < 0 && len(adjacency[i]) > 0 {
			search.augment(i)
		}
	}
}

// exposable returns, for a vertex that a maximum matching leaves unmatched, all vertices that could be left in its place.
func (m *matching) exposable(root int, adjacency [][]int) []int {
	search := newBlossomSearch(m.mate, adjacency)
	search.augment(root)
	var out []int
	for i, even := range search.even {
		if even {
			out = append(out, i)
		}
	}
	return out
}

// blossomSearch grows an alternating tree from one unmatched vertex; odd cycles are shrunk to their base.
type blossomSearch struct {
	mate      []int
	adjacency [][]int
	parent    []int // the vertex before, on the alternating path, of an odd vertex
	base      []int // base of the blossom that a vertex belongs to
	even      []bool
	queue     []int
}

func newBlossomSearch(mate []int, adjacency [][]int) *blossomSearch {
	n := len(mate)
	return &blossomSearch{
		mate: mate, adjacency: adjacency,
		parent: make([]int, n), base: make([]int, n), even: make([]bool, n),
	}
}

func (s *blossomSearch) augment(root int) {
	for i := range s.mate {
		s.parent[i], s.base[i], s.even[i] = -1, i, false
	}
	s.even[root] = true
	s.queue = append(s.queue[:0], root)
	for head := 0; head < len(s.queue); head++ {
		v := s.queue[head]
		for _, w := range s.adjacency[v] {
			if s.base[v] == s.base[w] || s.mate[v] == w {
				continue
			}
			if w == root || s.mate[w] >= 0 && s.parent[s.mate[w]] >= 0 {
				s.shrink(v, w)
				continue
			}
			if s.parent[w] >= 0 {
				continue
			}
			s.parent[w] = v
			if s.mate[w] < 0 {
				s.flip(w)
				return
			}
			s.even[s.mate[w]] = true
			s.queue = append(s.queue, s.mate[w])
		}
	}
}

// flip exchanges matched and unmatched edges on the path that ends in the unmatched vertex w.
func (s *blossomSearch) flip(w int) {
	for w >= 0 {
		v := s.parent[w]
		next := s.mate[v]
		s.mate[w], s.mate[v] = v, w
		w = next
	}
}

// shrink contracts the odd cycle that the edge v–w closes.
func (s *blossomSearch) shrink(v, w int) {
	base := s.commonBase(v, w)
	inBlossom := map[int]bool{}
	s.markPath(v, base, w, inBlossom)
	s.markPath(w, base, v, inBlossom)
	for i := range s.base {
		if inBlossom[s.base[i]] {
			s.base[i] = base
			if !s.even[i] {
				s.even[i] = true
				s.queue = append(s.queue, i)
			}
		}
	}
}

func (s *blossomSearch) commonBase(v, w int) int {
	onPath := map[int]bool{}
	for {
		v = s.base[v]
		onPath[v] = true
		if s.mate[v] < 0 {
			break
		}
		v = s.parent[s.mate[v]]
	}
	for {
		w = s.base[w]
		if onPath[w] {
			return w
		}
		w = s.parent[s.mate[w]]
	}
}

func (s *blossomSearch) markPath(v, base, child int, inBlossom map[int]bool) {
	for s.base[v] != base {
		inBlossom[s.base[v]] = true
		inBlossom[s.base[s.mate[v]]] = true
		s.parent[v] = child
		child = s.mate[v]
		v = s.parent[child]
	}
}
