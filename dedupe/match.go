package dedupe

import (
	"math"
	"slices"
)

// Match is the best superposition of two geometries over all equivalent numberings.
type Match struct {
	RMSD     float64 // Å, over all atoms
	Mirrored bool    // the mirror image of the second geometry fits better, and is the same molecule
	Mapping  []int   // atom i of the first geometry lies on atom Mapping[i] of the second
}

// mostNumberings bounds the numberings of the heavy atoms that Match compares.
const mostNumberings = 20_000

// Match returns the lowest RMSD of two geometries of a molecule (3N coordinates in Å) over its automorphisms, and over the mirror
// image where that is the same molecule. Like hydrogens on one atom are assigned by the Hungarian method. It answers how different
// two geometries are; whether they are the same minimum is decided, faster and exactly, by [Symmetry.Same]. For clusters it
// compares only numberings reached from the given one by repeated assignment, an upper bound.
func (s *Symmetry) Match(a, b []float64) Match {
	best := Match{RMSD: math.Inf(1)}
	consider := func(image []int) {
		for _, mirrored := range []bool{false, true} {
			if mirrored && !s.mirror {
				continue
			}
			if m := s.settle(a, b, image, mirrored); m.RMSD < best.RMSD {
				best = m
			}
		}
	}
	if s.cluster {
		identity := make([]int, s.atoms)
		for i := range identity {
			identity[i] = i
		}
		consider(identity)
		return best
	}
	numberings := 0
	mapper := newMapper(s.graph, s.skeleton, nil)
	_, _ = mapper.extend(0, func(image []int) bool { // an unfinished search still leaves the best numbering so far
		consider(image)
		numberings++
		return numberings < mostNumberings
	})
	return best
}

// settle completes a numbering of the skeleton: superpose, assign what is interchangeable, and again until nothing changes.
func (s *Symmetry) settle(a, b []float64, skeleton []int, mirrored bool) Match {
	if mirrored {
		b = inverted(b)
	}
	image := slices.Clone(skeleton)
	groups := s.interchangeable(image)
	for _, g := range groups { // any assignment will do to start
		for k, i := range g.from {
			image[i] = g.to[k]
		}
	}
	for {
		moved := renumbered(b, image)
		r, rmsd, _ := Superpose(a, moved, false)
		m := Match{RMSD: rmsd, Mirrored: mirrored, Mapping: slices.Clone(image)}
		ca, cb := centroid(a, nil), centroid(moved, nil)
		for _, g := range groups {
			g.assign(a, b, ca, cb, r, image)
		}
		if _, next, _ := Superpose(a, renumbered(b, image), false); next >= rmsd-1e-12 {
			return m
		}
	}
}

// group is a set of atoms that may be exchanged freely, and the set that it goes to.
type group struct{ from, to []int }

// interchangeable lists the sets of atoms that a numbering of the skeleton leaves open.
func (s *Symmetry) interchangeable(image []int) (groups []group) {
	if s.cluster {
		return []group{{slices.Clone(image), slices.Clone(image)}}
	}
	for i, j := range image {
		if !s.skeleton[i] || j < 0 {
			continue
		}
		byColor := map[int]*group{}
		var colors []int
		for _, e := range s.graph.edges[i] {
			if c := s.graph.color[e.to]; !s.skeleton[e.to] {
				if byColor[c] == nil {
					byColor[c] = &group{}
					colors = append(colors, c)
				}
				byColor[c].from = append(byColor[c].from, e.to)
			}
		}
		for _, e := range s.graph.edges[j] {
			if g := byColor[s.graph.color[e.to]]; g != nil && !s.skeleton[e.to] {
				g.to = append(g.to, e.to)
			}
		}
		for _, c := range colors {
			groups = append(groups, *byColor[c])
		}
	}
	return groups
}

func (g group) assign(a, b []float64, ca, cb [3]float64, r Rotation, image []int) {
	cost := make([][]float64, len(g.from))
	for p, i := range g.from {
		cost[p] = make([]float64, len(g.to))
		for q, j := range g.to {
			u, v, w := b[3*j]-cb[0], b[3*j+1]-cb[1], b[3*j+2]-cb[2]
			for k := range 3 {
				cost[p][q] += square(a[3*i+k] - ca[k] - (r[3*k]*u + r[3*k+1]*v + r[3*k+2]*w))
			}
		}
	}
	for p, q := range assign(cost) {
		image[g.from[p]] = g.to[q]
	}
}

func renumbered(x []float64, image []int) []float64 {
	moved := make([]float64, len(x))
	for i, j := range image {
		copy(moved[3*i:3*i+3], x[3*j:3*j+3])
	}
	return moved
}

func inverted(x []float64) []float64 {
	y := make([]float64, len(x))
	for k, v := range x {
		y[k] = -v
	}
	return y
}
