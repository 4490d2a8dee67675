package ensemble

import (
	"gonum.org/v1/gonum/mat"
)

// linearTolerance is the ratio of the smallest to the largest moment of inertia below which a geometry is linear: its atoms are then
// off the axis by less than about 1e-4 of its length.
const linearTolerance = 1e-8

// PrincipalMoments returns the principal moments of inertia in u Å², ascending. x holds 3N coordinates in Å, masses are in u.
func PrincipalMoments(x, masses []float64) [3]float64 {
	center := centerOfMass(x, masses)
	tensor := mat.NewSymDense(3, nil)
	for i, m := range masses {
		r := [3]float64{x[3*i] - center[0], x[3*i+1] - center[1], x[3*i+2] - center[2]}
		square := r[0]*r[0] + r[1]*r[1] + r[2]*r[2]
		for a := range 3 {
			for b := a; b < 3; b++ {
				v := -m * r[a] * r[b]
				if a == b {
					v += m * square
				}
				tensor.SetSym(a, b, tensor.At(a, b)+v)
			}
		}
	}
	var eigen mat.EigenSym
	eigen.Factorize(tensor, false)
	var moments [3]float64
	copy(moments[:], eigen.RawValues())
	return moments
}

// RotationalConstants returns the rotational constants h/(8π²I) in MHz, descending: three, two equal ones for a linear geometry, none
// for an atom. x holds 3N coordinates in Å, masses are in u.
func RotationalConstants(x, masses []float64) []float64 {
	constants := []float64{}
	moments := PrincipalMoments(x, masses)
	for _, moment := range moments {
		if moment > linearTolerance*moments[2] {
			constants = append(constants, megahertzTimesMoment/moment)
		}
	}
	return constants
}

func centerOfMass(x, masses []float64) (center [3]float64) {
	total := 0.0
	for i, m := range masses {
		total += m
		for k := range center {
			center[k] += m * x[3*i+k]
		}
	}
	for k := range center {
		center[k] /= total
	}
	return center
}
