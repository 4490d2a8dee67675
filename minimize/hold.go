package minimize

import "context"

// Torsion is the torsion angle of four atoms, by index, held at an angle in radians.
type Torsion struct {
	Atoms [4]int
	Angle float64
}

// Hold brings x to a minimum of f under the condition that a torsion has the given angle: it is turned there in small steps and
// everything else relaxes. Energy is that of f alone; GradientRMS and LowestEigenvalue are those along the condition.
func Hold(ctx context.Context, f Field, x []float64, t Torsion, s Settings) (Result, error) {
	return Result{}, ErrNotConverged
}

// Drive holds a torsion at each of the angles in turn, each started from the one before.
func Drive(ctx context.Context, f Field, x []float64, atoms [4]int, angles []float64, s Settings) ([]Result, error) {
	return nil, ErrNotConverged
}
