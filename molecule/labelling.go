package molecule

import "slices"

// labelling is the outcome of the canonical search over one connected colorGraph.
type labelling struct {
	order       []int    // vertices in canonical order
	certificate []uint64 // the graph in this order; equal exactly for isomorphic graphs
	orbits      *unionFind
}

// searchBudget bounds the work of one search, in nodes times vertices. No molecule that anyone draws comes near it; beyond
// it the best order found so far is taken, which may then depend on the numbering of the input.
const searchBudget = 5_000_000

// label finds the canonical order by individualisation and refinement: where refinement leaves ties, each vertex of a
// tied cell is tried and the order with the smallest certificate wins. Branches that automorphisms found on the way show
// to be equivalent are skipped. Source: McKay, Congr. Numer. 30, 45 (1981).
func (g *colorGraph) label() *labelling {
	s := &labelSearch{graph: g, refiner: newRefiner(g), orbits: newUnionFind(len(g.colors)), onPath: make([]bool, len(g.colors))}
	s.findTwins()
	root := s.refiner.start()
	s.explore(root, 0, 0, true)
	return &labelling{order: s.best.order, certificate: s.best.certificate, orbits: s.orbits}
}

type labelSearch struct {
	graph      *colorGraph
	refiner    *refiner
	path       []int    // vertices individualised on the way to the present node
	traces     []uint64 // trace at each level of the present path
	first      *leaf
	best       *leaf
	generators []generator // automorphisms found
	onPath     []bool
	orbits     *unionFind
	work       int
}

// generator is an automorphism: the vertices that it moves with their images.
type generator [][2]int

// leaf is a complete order with the way that led to it.
type leaf struct {
	path        []int
	traces      []uint64
	order       []int
	certificate []uint64
}

// explore searches the tree below a node and returns the level at which the search goes on: that of the parent or, when an
// automorphism showed the rest of a branch to be a copy, one further up. relation compares the traces on the way here with
// those of the best leaf (-1 better, 0 equal, 1 worse); likeFirst tells that they equal those of the first leaf, so that
// an automorphism may still be found although the branch is worse.
func (s *labelSearch) explore(p *partition, level, relation int, likeFirst bool) int {
	s.traces = append(s.traces[:level], p.trace)
	if s.first != nil {
		likeFirst = likeFirst && compareTrace(s.first.traces, level, p.trace) == 0
		if relation == 0 {
			relation = compareTrace(s.best.traces, level, p.trace)
		}
		if relation > 0 && !likeFirst {
			return level - 1
		}
	}
	cell := targetCell(p)
	if cell < 0 {
		return s.reach(p, level, relation)
	}
	members := slices.Clone(p.order[cell : cell+p.size[cell]])
	slices.Sort(members)
	local := s.stabilizer(members)
	var tried []int
	for _, v := range members {
		if len(tried) > 0 && (s.work > searchBudget || local.redundant(v, tried)) {
			continue
		}
		s.work += len(p.order)
		child := p.clone()
		s.refiner.individualize(child, v)
		s.path = append(s.path[:level], v)
		s.onPath[v] = true
		back := s.explore(child, level+1, relation, likeFirst)
		s.onPath[v] = false
		if back < level {
			return back
		}
		relation = max(relation, 0) // a better branch has just put the best leaf below this node
		tried = append(tried, v)
	}
	return level - 1
}

func compareTrace(traces []uint64, level int, trace uint64) int {
	switch {
	case level >= len(traces) || trace > traces[level]:
		return 1
	case trace < traces[level]:
		return -1
	}
	return 0
}

// targetCell returns the first of the smallest cells with more than one vertex, or -1.
func targetCell(p *partition) int {
	cell := -1
	for start := 0; start < len(p.order); start += p.size[start] {
		if p.size[start] > 1 && (cell < 0 || p.size[start] < p.size[cell]) {
			cell = start
			if p.size[start] == 2 {
				break
			}
		}
	}
	return cell
}

// stabilizer collects the orbits of the automorphisms found so far that leave the path to a node untouched.
type stabilizer struct {
	search *labelSearch
	orbits *unionFind
	taken  int // generators already looked at
}

func (s *labelSearch) stabilizer(members []int) *stabilizer {
	local := &stabilizer{search: s, orbits: newUnionFind(len(s.graph.colors))}
	for _, v := range members {
		if twin := s.graph.twins[v]; twin != 0 {
			local.orbits.union(v, twin-1)
		}
	}
	return local
}

// redundant tells whether such an automorphism carries v onto a vertex already tried.
func (l *stabilizer) redundant(v int, tried []int) bool {
	for ; l.taken < len(l.search.generators); l.taken++ {
		g := l.search.generators[l.taken]
		if slices.ContainsFunc(g, func(move [2]int) bool { return l.search.onPath[move[0]] }) {
			continue
		}
		for _, move := range g {
			l.orbits.union(move[0], move[1])
		}
	}
	return slices.ContainsFunc(tried, func(t int) bool { return l.orbits.find(t) == l.orbits.find(v) })
}

// reach handles a discrete partition.
func (s *labelSearch) reach(p *partition, level, relation int) int {
	here := &leaf{
		path: slices.Clone(s.path[:level]), traces: slices.Clone(s.traces[:level+1]),
		order: slices.Clone(p.order), certificate: s.graph.certificate(p),
	}
	if s.first == nil {
		s.first, s.best = here, here
		return level - 1
	}
	for _, known := range [2]*leaf{s.first, s.best} {
		if slices.Equal(known.certificate, here.certificate) {
			s.record(known.order, here.order)
			return commonLevel(known.path, here.path)
		}
	}
	if relation < 0 || relation == 0 && slices.Compare(here.certificate, s.best.certificate) < 0 {
		s.best = here
	}
	return level - 1
}

// record notes the automorphism that carries one order onto another.
func (s *labelSearch) record(from, to []int) {
	var g generator
	for i := range from {
		if from[i] != to[i] {
			g = append(g, [2]int{from[i], to[i]})
			s.orbits.union(from[i], to[i])
		}
	}
	s.generators = append(s.generators, g)
}

func commonLevel(a, b []int) int {
	level := 0
	for level < len(a) && level < len(b) && a[level] == b[level] {
		level++
	}
	return level
}

// certificate writes the graph down in the order of a discrete partition.
func (g *colorGraph) certificate(p *partition) []uint64 {
	out := make([]uint64, 0, 4*len(p.order))
	var row []uint64
	for place, v := range p.order {
		out = append(out, g.colors[v])
		row = row[:0]
		for _, e := range g.edges[v] {
			if p.place[e.to] < place {
				row = append(row, uint64(p.place[e.to])<<16|e.kind)
			}
		}
		slices.Sort(row)
		out = append(append(out, uint64(len(row))), row...)
	}
	row = row[:0]
	for i := range g.elements {
		if e := &g.elements[i]; e.value != unspecified {
			parity, _ := e.parity(p.place)
			a, b := p.place[e.at[0]], p.place[e.at[1]]
			row = append(row, uint64(min(a, b))<<40|uint64(max(a, b))<<16|uint64(parity))
		}
	}
	slices.Sort(row)
	return append(out, row...)
}

func (s *labelSearch) findTwins() {
	g := s.graph
	g.twins = make([]int, len(g.colors))
	for _, around := range g.edges {
		for i, e := range around {
			if len(g.edges[e.to]) != 1 || g.twins[e.to] != 0 {
				continue
			}
			for _, f := range around[i+1:] {
				if len(g.edges[f.to]) == 1 && f.kind == e.kind && g.colors[f.to] == g.colors[e.to] {
					g.twins[e.to], g.twins[f.to] = e.to+1, e.to+1
					s.orbits.union(e.to, f.to)
				}
			}
		}
	}
}

// unionFind keeps disjoint sets of small integers.
type unionFind struct{ parent []int }

func newUnionFind(n int) *unionFind {
	u := &unionFind{make([]int, n)}
	for i := range u.parent {
		u.parent[i] = i
	}
	return u
}

func (u *unionFind) find(i int) int {
	for u.parent[i] != i {
		u.parent[i] = u.parent[u.parent[i]]
		i = u.parent[i]
	}
	return i
}

// union merges two sets; the lower root stays.
func (u *unionFind) union(i, j int) {
	i, j = u.find(i), u.find(j)
	u.parent[max(i, j)] = min(i, j)
}
