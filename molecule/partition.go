package molecule

import (
	"cmp"
	"slices"
)

// colorGraph is a graph with coloured vertices and edges and binary stereo elements, ready for canonical labelling.
type colorGraph struct {
	colors   []uint64 // any invariant of the vertex
	edges    [][]colorEdge
	elements []stereoElement
	twins    []int // vertices that hang alone on one vertex by one kind of edge, in one colour, share a number; 0: no twin
}

type colorEdge struct {
	to   int
	kind uint64
}

// partition is an ordered partition of the vertices into cells. order lists them cell by cell, cellOf is the place in
// order where the cell of a vertex starts, size is kept at these places.
type partition struct {
	order  []int
	place  []int
	cellOf []int
	size   []int
	trace  uint64 // hash of all splits so far, independent of the numbering of the vertices
}

func (p *partition) clone() *partition {
	return &partition{
		slices.Clone(p.order), slices.Clone(p.place), slices.Clone(p.cellOf), slices.Clone(p.size), p.trace,
	}
}

func mix(a, b uint64) uint64 { // finalizer of SplitMix64 (Steele et al., OOPSLA 2014)
	z := a*0x9e3779b97f4a7c15 + b + 0x632be59bd9b4e019
	z = (z ^ z>>30) * 0xbf58476d1ce4e5b9
	z = (z ^ z>>27) * 0x94d049bb133111eb
	return z ^ z>>31
}

// refiner splits cells until all vertices of a cell look alike: as many edges of each kind to each cell, same stereo
// parities as far as these are decided by the cells.
type refiner struct {
	graph   *colorGraph
	keys    []uint64
	touched []int
	waiting []int // cells still to be used as splitters
	inQueue []bool
}

func newRefiner(g *colorGraph) *refiner {
	n := len(g.colors)
	return &refiner{graph: g, keys: make([]uint64, n), inQueue: make([]bool, n)}
}

// start returns the equitable partition that follows from the colours.
func (r *refiner) start() *partition {
	n := len(r.graph.colors)
	p := &partition{order: make([]int, n), place: make([]int, n), cellOf: make([]int, n), size: make([]int, n)}
	for i := range n {
		p.order[i], p.place[i] = i, i
	}
	if n == 0 {
		return p
	}
	p.size[0] = n
	copy(r.keys, r.graph.colors)
	r.touched = append(r.touched[:0], p.order...)
	r.splitTouched(p)
	r.push(0)
	r.refine(p)
	return p
}

// individualize puts a vertex in a cell of its own before the rest of its cell, and refines.
func (r *refiner) individualize(p *partition, v int) {
	start := p.cellOf[v]
	p.swap(p.place[v], start)
	p.cut(start, 1)
	p.trace = mix(p.trace, uint64(start))
	r.push(start)
	r.refine(p)
}

func (p *partition) swap(i, j int) {
	p.order[i], p.order[j] = p.order[j], p.order[i]
	p.place[p.order[i]], p.place[p.order[j]] = i, j
}

// cut makes the first count vertices of a cell a cell of their own.
func (p *partition) cut(start, count int) {
	rest := start + count
	p.size[rest] = p.size[start] - count
	p.size[start] = count
	for _, v := range p.order[rest : rest+p.size[rest]] {
		p.cellOf[v] = rest
	}
}

func (r *refiner) push(cell int) {
	if !r.inQueue[cell] {
		r.inQueue[cell] = true
		r.waiting = append(r.waiting, cell)
	}
}

func (r *refiner) refine(p *partition) {
	for {
		for head := 0; head < len(r.waiting); head++ {
			cell := r.waiting[head]
			r.inQueue[cell] = false
			r.touched = r.touched[:0]
			for _, v := range p.order[cell : cell+p.size[cell]] {
				for _, e := range r.graph.edges[v] {
					if r.keys[e.to] == 0 {
						r.touched = append(r.touched, e.to)
					}
					r.keys[e.to] += mix(e.kind, 1) | 1
				}
			}
			r.splitTouched(p)
		}
		r.waiting = r.waiting[:0]
		r.touched = r.touched[:0]
		for i := range r.graph.elements {
			r.markElement(p, &r.graph.elements[i])
		}
		r.splitTouched(p)
		if len(r.waiting) == 0 {
			return
		}
	}
}

// markElement adds the parity of a stereo element to the keys of its vertices, if the cells decide it.
func (r *refiner) markElement(p *partition, e *stereoElement) {
	if e.value == unspecified {
		return
	}
	parity, decided := e.parity(p.cellOf)
	if !decided {
		return
	}
	for k, v := range e.at {
		if k > 0 && v == e.at[0] {
			break
		}
		if r.keys[v] == 0 {
			r.touched = append(r.touched, v)
		}
		r.keys[v] += mix(uint64(parity), uint64(p.cellOf[e.at[1-k]])) | 1
	}
}

// splitTouched sorts the touched vertices out of their cells by key and clears the keys. The order of the new cells and
// the trace depend on keys and cell places only.
func (r *refiner) splitTouched(p *partition) {
	slices.SortFunc(r.touched, func(a, b int) int {
		return cmp.Or(cmp.Compare(p.cellOf[a], p.cellOf[b]), cmp.Compare(r.keys[a], r.keys[b]))
	})
	for from := 0; from < len(r.touched); {
		cell := p.cellOf[r.touched[from]]
		to := from
		for to < len(r.touched) && p.cellOf[r.touched[to]] == cell {
			to++
		}
		r.splitCell(p, cell, r.touched[from:to])
		from = to
	}
	for _, v := range r.touched {
		r.keys[v] = 0
	}
	r.touched = r.touched[:0]
}

// splitCell moves the touched vertices, sorted by key, to the end of their cell and cuts it where the key changes.
func (r *refiner) splitCell(p *partition, cell int, touched []int) {
	total := p.size[cell]
	end := cell + total
	for i := len(touched) - 1; i >= 0; i-- {
		end--
		p.swap(p.place[touched[i]], end)
	}
	pieces := []int{cell}
	cut := func(at int) {
		if at > pieces[len(pieces)-1] {
			p.cut(pieces[len(pieces)-1], at-pieces[len(pieces)-1])
			pieces = append(pieces, at)
		}
	}
	cut(end)
	p.trace = mix(p.trace, uint64(cell)<<32|uint64(len(touched)))
	for i, v := range touched {
		if i > 0 && r.keys[v] != r.keys[touched[i-1]] {
			cut(end + i)
		}
		if i == 0 || r.keys[v] != r.keys[touched[i-1]] {
			p.trace = mix(p.trace, r.keys[v]+uint64(i))
		}
	}
	if len(pieces) == 1 {
		return
	}
	if r.inQueue[cell] {
		for _, piece := range pieces {
			r.push(piece)
		}
		return
	}
	largest := pieces[0]
	for _, piece := range pieces {
		if p.size[piece] > p.size[largest] {
			largest = piece
		}
	}
	for _, piece := range pieces {
		if piece != largest {
			r.push(piece)
		}
	}
}
