package embed

import (
	"fmt"
	"math"

	"tarn/molecule"
)

// What a geometry may still violate when it is handed to the quench, which heals it (chosen on the test set).
const (
	bondTolerance    = 0.25 // Å
	angleTolerance   = 0.15 // of the distance of two atoms that share a neighbour
	contactTolerance = 0.25 // of any other distance
	volumeTolerance  = 0.5  // of the volume asked for at a stereocentre
)

// check returns an error that names the first violation that a quench could not be trusted to heal.
func (d *draw) check(g molecule.Geometry) error {
	for i := range d.n {
		for j := range i {
			r, l, u := g.Distance(i, j), d.lower[i*d.n+j], d.upper[i*d.n+j]
			shorter, longer := contactTolerance*l, contactTolerance*u
			switch d.hops[i][j] {
			case 1:
				shorter, longer = bondTolerance, bondTolerance
			case 2:
				shorter, longer = angleTolerance*l, angleTolerance*u
			}
			if r < l-shorter || r > u+longer || math.IsNaN(r) {
				return fmt.Errorf("atoms %d and %d are %.2f Å apart, not %.2f to %.2f", i+1, j+1, r, l, u)
			}
		}
	}
	return d.stereo(g)
}

// stereo returns an error that names the first specified stereocentre or double bond that has come out wrong.
func (d *draw) stereo(g molecule.Geometry) error {
	for _, v := range d.volumes {
		size := signedVolume(g, v.atoms)
		if !v.plane && (size < volumeTolerance*v.low || size > volumeTolerance*v.high) {
			return fmt.Errorf("the stereocentre with neighbours %d, %d, %d and %d is inverted or flat",
				v.atoms[0]+1, v.atoms[1]+1, v.atoms[2]+1, v.atoms[3]+1)
		}
	}
	for _, db := range d.DoubleBonds {
		if torsion := math.Abs(g.Torsion(db.RefA, db.A, db.B, db.RefB)); (torsion < math.Pi/2) != db.Cis {
			return fmt.Errorf("the double bond of atoms %d and %d has the wrong geometry", db.A+1, db.B+1)
		}
	}
	if err := d.CheckStereo(g); err != nil {
		return fmt.Errorf("stereo of the first geometry: %w", err)
	}
	return nil
}
