package dedupe

import (
	"fmt"
	"math/big"
)

// Versions says in how many ways a minimum occurs.
type Versions struct {
	// Degeneracy is the number of distinct versions of the geometry when every heavy atom carries a label and like hydrogens on one
	// atom are interchangeable, mirror images included where they are the same molecule.
	Degeneracy int
	// SymmetryNumber is the number of proper rotations that carry the geometry onto itself, all atoms of an element being alike:
	// that of the rigid rotor.
	SymmetryNumber int
	// Chiral says that the geometry cannot be superposed on its mirror image.
	Chiral bool
}

// Versions counts the versions of a geometry (3N coordinates in Å): the stereochemistry-preserving permutations of the labelled
// atoms, divided by those that proper rotations bring about, times two if the geometry is chiral and its mirror image is the same
// molecule. For a cluster, whose atoms are all alike, permutations make no versions: the degeneracy is 2 if the geometry is chiral
// and 1 if not.
func (s *Symmetry) Versions(x []float64, tolerance Tolerance) (Versions, error) {
	tolerance = tolerance.withDefaults()
	if len(x) != 3*s.atoms {
		return Versions{}, ErrLength
	}
	v := Versions{Chiral: true}
	rotated := map[string]bool{} // permutations of the skeleton that rotations bring about
	s.isometries(x, x, tolerance.Distance, func(image []int) bool {
		proper, improper := s.deviations(x, x, image)
		if proper <= tolerance.Distance {
			v.SymmetryNumber++
			rotated[s.skeletonKey(image)] = true
		}
		if improper <= tolerance.Distance {
			v.Chiral = false
		}
		return true
	})
	v.Degeneracy = 1
	if !s.cluster {
		order, err := newMapper(s.graph, s.skeleton, s.labelled(x)).groupOrder()
		if err != nil {
			return v, fmt.Errorf("counting the versions of a minimum: %w", err)
		}
		order.Div(order, big.NewInt(int64(len(rotated))))
		v.Degeneracy = int(order.Int64())
	}
	if v.Chiral && s.mirror {
		v.Degeneracy *= 2
	}
	return v, nil
}

// deviations returns the RMSD of a and the mapped b after the best proper and the best improper rotation.
func (s *Symmetry) deviations(a, b []float64, image []int) (proper, improper float64) {
	moved := renumbered(b, image)
	_, proper, _ = Superpose(a, moved, false)
	_, improper, _ = Superpose(a, inverted(moved), false)
	return proper, improper
}

func (s *Symmetry) skeletonKey(image []int) string {
	key := make([]byte, 0, 2*len(image))
	for i, j := range image {
		if !s.cluster && s.skeleton[i] {
			key = append(key, byte(j), byte(j>>8))
		}
	}
	return string(key)
}
