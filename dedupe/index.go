package dedupe

import (
	"math"
	"slices"
)

// Tolerance says how far two quenches of one minimum may differ. Quenches to a gradient of 1e-6 kcal/mol/Å agree to about 1e-8
// kcal/mol, and to 1e-3 Å even along the softest modes; different minima with energies this close differ by tenths of an Å.
type Tolerance struct {
	Energy   float64 // kcal/mol; 0 → 1e-3
	Distance float64 // Å, of every interatomic distance and of the RMSD; 0 → 0.05
}

func (t Tolerance) withDefaults() Tolerance {
	if t.Energy == 0 {
		t.Energy = 1e-3
	}
	if t.Distance == 0 {
		t.Distance = 0.05
	}
	return t
}

// Index is the set of known minima of one molecule or cluster. It is not safe for concurrent use.
type Index struct {
	symmetry  *Symmetry
	tolerance Tolerance
	known     []known
	byEnergy  []int // identifiers, by ascending energy
}

type known struct {
	energy      float64
	x           []float64
	fingerprint []float64
}

// NewIndex returns an empty index.
func NewIndex(s *Symmetry, t Tolerance) *Index {
	return &Index{symmetry: s, tolerance: t.withDefaults()}
}

// Len returns the number of known minima.
func (n *Index) Len() int { return len(n.known) }

// Find returns the identifier of the known minimum that a geometry (3N coordinates in Å) with its energy in kcal/mol belongs to:
// the same up to rotation, exchange of equivalent atoms and, where the mirror image is the same molecule, reflection.
func (n *Index) Find(x []float64, energy float64) (id int, ok bool) {
	first := n.rank(energy - n.tolerance.Energy)
	var print []float64
	for _, id := range n.byEnergy[first:] {
		k := &n.known[id]
		if k.energy > energy+n.tolerance.Energy {
			break
		}
		if print == nil {
			print = n.symmetry.fingerprint(x)
		}
		if closePrints(print, k.fingerprint, n.tolerance.Distance) && n.symmetry.Same(k.x, x, n.tolerance) {
			return id, true
		}
	}
	return 0, false
}

// Add takes a geometry as a new minimum and returns its identifier: the number of minima known before. The coordinates are copied.
func (n *Index) Add(x []float64, energy float64) int {
	id := len(n.known)
	n.known = append(n.known, known{energy, slices.Clone(x), n.symmetry.fingerprint(x)})
	n.byEnergy = slices.Insert(n.byEnergy, n.rank(math.Nextafter(energy, math.Inf(1))), id)
	return id
}

// rank returns the number of known minima with an energy below the given one.
func (n *Index) rank(energy float64) int {
	at, _ := slices.BinarySearchFunc(n.byEnergy, energy, func(id int, e float64) int {
		if n.known[id].energy < e {
			return -1
		}
		return 1
	})
	return at
}

// Same reports whether two geometries are one minimum. The zero tolerance stands for its defaults.
func (s *Symmetry) Same(a, b []float64, t Tolerance) bool {
	t = t.withDefaults()
	same := false
	s.isometries(a, b, t.Distance, func(image []int) bool {
		proper, improper := s.deviations(a, b, image)
		same = proper <= t.Distance || s.mirror && improper <= t.Distance
		return !same
	})
	return same
}

// fingerprint holds, for each colour in turn, the sorted distances of its atoms from the centroid: equal for all versions of a
// minimum, and cheap to compare.
func (s *Symmetry) fingerprint(x []float64) []float64 {
	r := radii(x)
	if s.cluster {
		slices.Sort(r)
		return r
	}
	by := make([]int, len(r))
	for i := range by {
		by[i] = i
	}
	slices.SortFunc(by, func(i, j int) int {
		if c := s.graph.color[i] - s.graph.color[j]; c != 0 {
			return c
		}
		if r[i] < r[j] {
			return -1
		}
		return 1
	})
	print := make([]float64, len(r))
	for k, i := range by {
		print[k] = r[i]
	}
	return print
}

func closePrints(a, b []float64, tolerance float64) bool {
	for i := range a {
		if math.Abs(a[i]-b[i]) > tolerance {
			return false
		}
	}
	return true
}
