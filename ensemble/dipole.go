package ensemble

import "math"

// Dipole returns the dipole moment in debye of point charges in elementary charges at x, 3N coordinates in Å. That of an ion depends
// on the origin and is taken about the centre of mass; masses are in u.
func Dipole(x, charges, masses []float64) float64 {
	center := centerOfMass(x, masses)
	var sum [3]float64
	for i, c := range charges {
		for k := range sum {
			sum[k] += c * (x[3*i+k] - center[k])
		}
	}
	return debyePerElectronAngstrom * math.Sqrt(sum[0]*sum[0]+sum[1]*sum[1]+sum[2]*sum[2])
}
