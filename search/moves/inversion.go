package moves

import "math"

// Inversion is a pyramidal nitrogen whose smallest substituent, Atoms with the bonded atom first, can swing to the other side of the plane
// through the nitrogen and its two other neighbours.
type Inversion struct {
	Center int
	Others [2]int
	Atoms  []int
}

// Apply swings the substituent over: done twice, it does nothing.
func (v *Inversion) Apply(x []float64) {
	center := at(x, v.Center)
	normal, ok := at(x, v.Others[0]).minus(center).cross(at(x, v.Others[1]).minus(center)).unit()
	bond, okBond := at(x, v.Atoms[0]).minus(center).unit()
	if !ok || !okBond {
		return
	}
	sine := normal.dot(bond)
	axis, ok := bond.cross(normal).unit()
	if !ok {
		return
	}
	r := aboutAxis(axis, -2*math.Asin(max(-1, min(1, sine))))
	r.turn(x, v.Atoms, center)
}
