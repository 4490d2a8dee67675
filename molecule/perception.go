package molecule

import "sync"

// perception holds what is read off the graph on first demand; each function computes once and may be called by any
// number of goroutines.
type perception struct {
	rings func() [][]int
}

func perceptionOf(m *Molecule) perception {
	return perception{
		rings: sync.OnceValue(func() [][]int { return smallestRings(m.neighbors, len(m.Bonds)) }),
	}
}
