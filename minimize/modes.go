package minimize

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
)

// Constants of the SI (2019, exact) and the atomic mass constant of CODATA 2022.
const (
	avogadro     = 6.02214076e23     // 1/mol
	lightSpeed   = 299792458         // m/s
	atomicMass   = 1.66053906892e-27 // kg
	joulePerKcal = 4184
)

// wavenumberUnit is the wavenumber in cm⁻¹ of a mode with an eigenvalue of 1 kcal/mol/Å²/u: 108.591.
var wavenumberUnit = math.Sqrt(joulePerKcal/avogadro*1e20/atomicMass) / (2 * math.Pi * lightSpeed * 100)

// Modes are the normal modes of a geometry in ascending order: 3N-6 of them, 3N-5 if it is linear.
type Modes struct {
	WavenumbersCM1 []float64   // cm⁻¹, imaginary ones as negative numbers
	Vectors        [][]float64 // Cartesian displacements of 3N components, each of unit length
	ReducedMasses  []float64   // u
}

// NormalModes diagonalises the mass-weighted Hessian with translations and rotations projected out. h is the 3N×3N Hessian in
// kcal/mol/Å², masses are in u, x in Å. It returns [ErrLength], or an error that names the atom without a positive mass.
// Source: E. B. Wilson, J. C. Decius, P. C. Cross, Molecular Vibrations (1955), chapter 2; conditions of C. Eckart, Phys. Rev. 47,
// 552 (1935).
func NormalModes(h, masses, x []float64) (Modes, error) {
	n := len(x)
	if n == 0 || n != 3*len(masses) || len(h) != n*n {
		return Modes{}, fmt.Errorf("%w: %d coordinates, %d masses, %d second derivatives", ErrLength, n, len(masses), len(h))
	}
	roots := make([]float64, len(masses))
	for i, m := range masses {
		if !(m > 0) || !isFinite(m) {
			return Modes{}, fmt.Errorf("the mass of atom %d is %v u; it must be positive", i+1, m)
		}
		roots[i] = math.Sqrt(m)
	}
	weighted := make([]float64, n*n)
	bound := 1.0
	for i := range n {
		for j := range n {
			weighted[i*n+j] = h[i*n+j] / (roots[i/3] * roots[j/3])
		}
		bound = max(bound, floats.Norm(weighted[i*n:(i+1)*n], 1))
	}
	if !isFinite(bound) {
		return Modes{}, fmt.Errorf("%w: the Hessian is not finite", ErrDiverged)
	}
	var motions, work [6][]float64
	for k := range motions {
		motions[k], work[k] = make([]float64, n), make([]float64, n)
	}
	rigid := rigidMotions(x, roots, &motions)
	projectOut(weighted, motions[:rigid], 2*bound, &work)
	var eigen mat.EigenSym
	if !eigen.Factorize(mat.NewSymDense(n, weighted), true) {
		return Modes{}, fmt.Errorf("%w: the Hessian could not be diagonalised", ErrNotConverged)
	}
	var modes Modes
	for k, value := range eigen.RawValues()[:n-rigid] {
		vector := mat.Col(nil, k, eigen.RawQ())
		for i := range vector {
			vector[i] /= roots[i/3]
		}
		length := floats.Norm(vector, 2)
		floats.Scale(1/length, vector)
		modes.WavenumbersCM1 = append(modes.WavenumbersCM1, math.Copysign(math.Sqrt(math.Abs(value)), value)*wavenumberUnit)
		modes.Vectors = append(modes.Vectors, vector)
		modes.ReducedMasses = append(modes.ReducedMasses, 1/(length*length))
	}
	return modes, nil
}
