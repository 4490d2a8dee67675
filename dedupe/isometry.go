package dedupe

import (
	"math"
	"slices"
)

// isometries calls found with every mapping of the atoms (atom i of a onto image[i] of b) that keeps colours and bonds and changes
// no interatomic distance by more than tolerance, until found returns false. Such a mapping is a rotation, or a rotation with
// reflection, that carries one geometry onto the other. Two quenches of one minimum differ by far less than the tolerance, so nearly
// every wrong branch ends after the third or fourth atom.
func (s *Symmetry) isometries(a, b []float64, tolerance float64, found func(image []int) bool) {
	match := isometry{s: s, a: a, b: b, tolerance: tolerance, image: make([]int, s.atoms), used: make([]bool, s.atoms), found: found}
	for i := range match.image {
		match.image[i] = -1
	}
	match.ra, match.rb = radii(a), radii(b)
	match.order = s.order
	if s.cluster {
		match.order = rarestFirst(match.ra, tolerance)
	}
	match.extend(0)
}

type isometry struct {
	s         *Symmetry
	a, b      []float64
	ra, rb    []float64 // distances from the centroid
	tolerance float64
	order     []int
	image     []int
	used      []bool
	found     func([]int) bool
}

func (t *isometry) extend(at int) bool {
	if at == len(t.order) {
		return t.found(t.image)
	}
	i := t.order[at]
	if !t.s.cluster {
		if p := t.s.parent[i]; p >= 0 {
			for _, e := range t.s.graph.edges[t.image[p]] {
				if !t.try(at, i, e.to) {
					return false
				}
			}
			return true
		}
	}
	for j := range t.image {
		if !t.try(at, i, j) {
			return false
		}
	}
	return true
}

// try maps i to j if that is possible and goes on from there; false ends the search.
func (t *isometry) try(at, i, j int) bool {
	if t.used[j] || math.Abs(t.ra[i]-t.rb[j]) > t.tolerance || !t.bonded(i, j) {
		return true
	}
	for k := at - 1; k >= 0; k-- {
		m := t.order[k]
		if math.Abs(distance(t.a, i, m)-distance(t.b, j, t.image[m])) > t.tolerance {
			return true
		}
	}
	t.image[i], t.used[j] = j, true
	goOn := t.extend(at + 1)
	t.image[i], t.used[j] = -1, false
	return goOn
}

// bonded reports whether i and j have the same colour and the same bonds to the atoms mapped so far.
func (t *isometry) bonded(i, j int) bool {
	if t.s.cluster {
		return true
	}
	g := t.s.graph
	if g.color[i] != g.color[j] {
		return false
	}
	for _, e := range g.edges[i] {
		if to := t.image[e.to]; to >= 0 && g.kind(j, to) != e.kind {
			return false
		}
	}
	return true
}

func radii(x []float64) []float64 {
	c := centroid(x, nil)
	r := make([]float64, len(x)/3)
	for i := range r {
		r[i] = math.Sqrt(square(x[3*i]-c[0]) + square(x[3*i+1]-c[1]) + square(x[3*i+2]-c[2]))
	}
	return r
}

// rarestFirst orders the atoms of a cluster so that those whose distance from the centroid few others share come first.
func rarestFirst(radius []float64, tolerance float64) []int {
	order := make([]int, len(radius))
	rivals := make([]int, len(radius))
	for i := range radius {
		order[i] = i
		for _, r := range radius {
			if math.Abs(r-radius[i]) <= tolerance {
				rivals[i]++
			}
		}
	}
	slices.SortStableFunc(order, func(i, j int) int { return rivals[i] - rivals[j] })
	return order
}

func distance(x []float64, i, j int) float64 {
	return math.Sqrt(square(x[3*i]-x[3*j]) + square(x[3*i+1]-x[3*j+1]) + square(x[3*i+2]-x[3*j+2]))
}

func square(v float64) float64 { return v * v }
