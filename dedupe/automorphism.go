package dedupe

import (
	"errors"
	"math/big"
	"slices"
)

// ErrTooSymmetric says that a graph has so much symmetry that its group could not be searched in a bounded number of steps.
var ErrTooSymmetric = errors.New("the symmetry of the molecule is too large to be searched")

const maxSteps = 2_000_000

// constraint is a condition on a mapping that can be checked as soon as its atoms are mapped.
type constraint struct {
	atoms []int
	holds func(image []int) bool
}

// mapper searches the automorphisms of a graph restricted to some of its atoms.
type mapper struct {
	g      *graph
	order  []int // the atoms, neighbours after each other
	parent []int // by atom: an earlier neighbour, or −1
	due    [][]constraint
	image  []int // −1: not mapped
	used   []bool
	steps  int
}

// newMapper prepares a search over the kept atoms. Each constraint is checked when the last of its atoms has been mapped.
func newMapper(g *graph, kept []bool, constraints []constraint) *mapper {
	n := len(g.color)
	s := &mapper{g: g, parent: make([]int, n), due: make([][]constraint, n), image: make([]int, n), used: make([]bool, n)}
	s.order = searchOrder(g, kept, s.parent)
	rank := make([]int, n)
	for r, i := range s.order {
		rank[i] = r
	}
	for _, c := range constraints {
		last := slices.MaxFunc(c.atoms, func(i, j int) int { return rank[i] - rank[j] })
		s.due[last] = append(s.due[last], c)
	}
	for i := range s.image {
		s.image[i] = -1
	}
	return s
}

// searchOrder lists the kept atoms breadth first, each part from an atom of its rarest colour, and notes their parents.
func searchOrder(g *graph, kept []bool, parent []int) (order []int) {
	members := map[int]int{}
	for i, c := range g.color {
		if kept[i] {
			members[c]++
		}
	}
	seen := make([]bool, len(kept))
	for {
		root := -1
		for i, c := range g.color {
			if kept[i] && !seen[i] && (root < 0 || members[c] < members[g.color[root]]) {
				root = i
			}
		}
		if root < 0 {
			return order
		}
		seen[root], parent[root] = true, -1
		order = append(order, root)
		for at := len(order) - 1; at < len(order); at++ {
			for _, e := range g.edges[order[at]] {
				if kept[e.to] && !seen[e.to] {
					seen[e.to], parent[e.to] = true, order[at]
					order = append(order, e.to)
				}
			}
		}
	}
}

// candidates calls try for every atom that atom i may go to, until try returns false.
func (s *mapper) candidates(i int, try func(j int) bool) {
	if p := s.parent[i]; p >= 0 {
		for _, e := range s.g.edges[s.image[p]] {
			if s.fits(i, e.to) && !try(e.to) {
				return
			}
		}
		return
	}
	for j := range s.image {
		if s.fits(i, j) && !try(j) {
			return
		}
	}
}

func (s *mapper) fits(i, j int) bool {
	if s.used[j] || s.g.color[i] != s.g.color[j] {
		return false
	}
	for _, e := range s.g.edges[i] {
		if to := s.image[e.to]; to >= 0 && s.g.kind(j, to) != e.kind {
			return false
		}
	}
	return true
}

// assign maps i to j and reports whether the constraints that fall due hold.
func (s *mapper) assign(i, j int) bool {
	s.image[i], s.used[j] = j, true
	for _, c := range s.due[i] {
		if !c.holds(s.image) {
			return false
		}
	}
	return true
}

func (s *mapper) release(i int) {
	s.used[s.image[i]] = false
	s.image[i] = -1
}

// extend maps the atoms from position at on in all ways, calling found for each complete mapping until it returns false.
func (s *mapper) extend(at int, found func(image []int) bool) (goOn bool, err error) {
	if at == len(s.order) {
		return found(s.image), nil
	}
	if s.steps++; s.steps > maxSteps {
		return false, ErrTooSymmetric
	}
	i := s.order[at]
	goOn = true
	s.candidates(i, func(j int) bool {
		if s.assign(i, j) {
			goOn, err = s.extend(at+1, found)
		}
		s.release(i)
		return goOn && err == nil
	})
	return goOn, err
}

// exists reports whether there is a mapping at all, and returns it.
func (s *mapper) exists() (image []int, err error) {
	_, err = s.extend(0, func(p []int) bool {
		image = slices.Clone(p)
		return false
	})
	return image, err
}

// groupOrder returns the number of mappings without enumerating them: the product of the orbit lengths along the chain of
// stabilisers of the atoms in search order.
func (s *mapper) groupOrder() (*big.Int, error) {
	total := big.NewInt(1)
	for at, i := range s.order {
		orbit := int64(0)
		var err error
		s.candidates(i, func(j int) bool {
			s.steps = 0
			complete := false
			if s.assign(i, j) {
				_, err = s.extend(at+1, func([]int) bool { complete = true; return false })
			}
			s.release(i)
			if complete {
				orbit++
			}
			return err == nil
		})
		if err != nil {
			return nil, err
		}
		total.Mul(total, big.NewInt(orbit))
		s.assign(i, i)
	}
	for _, i := range s.order {
		s.release(i)
	}
	return total, nil
}
