package molecule

import "sync"

// perception holds what is read off the graph on first demand; each function computes once and may be called by any
// number of goroutines.
type perception struct {
	rings       func() [][]int
	standard    func() *Molecule // the standard drawing
	aromaticity func() aromaticity
	skeleton    func() *skeleton
	classes     func() []int
	stereo      func() *stereoPerception
	canonical   func() *canonicalOrder
	cages       func() []cageBond
}

func perceptionOf(m *Molecule) perception {
	return perception{
		rings:       sync.OnceValue(func() [][]int { return smallestRings(m.neighbors, len(m.Bonds)) }),
		standard:    sync.OnceValue(m.standardDrawing),
		aromaticity: sync.OnceValue(m.findAromaticity),
		skeleton:    sync.OnceValue(m.findSkeleton),
		classes:     sync.OnceValue(m.findSymmetryClasses),
		stereo:      sync.OnceValue(m.perceiveStereo),
		canonical:   sync.OnceValue(m.findCanonicalOrder),
		cages:       sync.OnceValue(m.findCageBonds),
	}
}
