package minimize

import (
	"math"

	"gonum.org/v1/gonum/floats"
)

// linearTolerance is the ratio of squared lengths below which the rotation about the axis of a geometry moves nothing: a geometry
// is linear if its atoms are off the axis by less than about 1e-4 of its length.
const linearTolerance = 1e-8

// rigidMotions fills the first rows of basis with orthonormal vectors of 3N components that span the translations and
// infinitesimal rotations of x, and returns how many there are: 6, 5 for a linear geometry, 3 for an atom. With weights, the square
// roots of the masses, they are those in mass-weighted coordinates.
func rigidMotions(x, weights []float64, basis *[6][]float64) int {
	weight := func(i int) float64 {
		if weights == nil {
			return 1
		}
		return weights[i]
	}
	var center [3]float64
	total := 0.0
	for i := range len(x) / 3 {
		m := weight(i) * weight(i)
		total += m
		for k := range center {
			center[k] += m * x[3*i+k]
		}
	}
	for k := range center {
		center[k] /= total
	}
	for k := range basis {
		clear(basis[k])
	}
	for i := range len(x) / 3 {
		w := weight(i)
		rx, ry, rz := x[3*i]-center[0], x[3*i+1]-center[1], x[3*i+2]-center[2]
		for k := range 3 {
			basis[k][3*i+k] = w / math.Sqrt(total)
		}
		basis[3][3*i+1], basis[3][3*i+2] = -w*rz, w*ry
		basis[4][3*i], basis[4][3*i+2] = w*rz, -w*rx
		basis[5][3*i], basis[5][3*i+1] = -w*ry, w*rx
	}
	// Gram-Schmidt, the longest rotation first, so that what is dropped at the end is the rotation about the axis.
	count := 3
	var longest float64
	for count < 6 {
		best := count
		for k := count; k < 6; k++ {
			if floats.Norm(basis[k], 2) > floats.Norm(basis[best], 2) {
				best = k
			}
		}
		basis[count], basis[best] = basis[best], basis[count]
		length := floats.Norm(basis[count], 2)
		if count == 3 {
			longest = length
		}
		if length*length <= linearTolerance*longest*longest {
			break
		}
		floats.Scale(1/length, basis[count])
		for k := count + 1; k < 6; k++ {
			for range 2 { // twice is enough against rounding
				floats.AddScaled(basis[k], -floats.Dot(basis[k], basis[count]), basis[count])
			}
		}
		count++
	}
	return count
}

// projectOut replaces the symmetric n×n matrix h by PhP + shift·TTᵀ, where the rows of motions are T and P = 1 - TTᵀ: the motions
// become eigenvectors with the eigenvalue shift. work holds len(motions) rows of n.
func projectOut(h []float64, motions [][]float64, shift float64, work *[6][]float64) {
	if len(motions) == 0 {
		return
	}
	n := len(motions[0])
	// With W = hT, M = TᵀW and U = W - T(M + shift)/2 the result is h - UTᵀ - TUᵀ.
	for k, t := range motions {
		for i := range n {
			work[k][i] = floats.Dot(h[i*n:(i+1)*n], t)
		}
	}
	var m [6][6]float64
	for k := range motions {
		for l := range motions {
			m[k][l] = floats.Dot(motions[k], work[l])
		}
		m[k][k] += shift
	}
	for l := range motions {
		for k := range motions {
			floats.AddScaled(work[l], -m[k][l]/2, motions[k])
		}
	}
	for i := range n {
		row := h[i*n : (i+1)*n]
		for k, t := range motions {
			floats.AddScaled(row, -work[k][i], t)
			floats.AddScaled(row, -t[i], work[k])
		}
	}
}
