package moves

// Torsion is a rotatable bond: Atoms, the smaller side, turn about the axis from A to B.
type Torsion struct {
	A, B  int
	Atoms []int
	Ends  [2]int // neighbours of A and B that measure the angle Ends[0]–A–B–Ends[1]
	// Stiff says that the bond is partly double (amides, esters, amidines): two states, planar, with a high barrier between them.
	Stiff bool
}

// Rotate turns the side by an angle in radians.
func (t *Torsion) Rotate(x []float64, angle float64) {
	axis, ok := at(x, t.B).minus(at(x, t.A)).unit()
	if !ok {
		return
	}
	r := aboutAxis(axis, angle)
	r.turn(x, t.Atoms, at(x, t.A))
}
