package minimize

// Modes are the normal modes of a geometry in ascending order: 3N-6 of them, 3N-5 if it is linear.
type Modes struct {
	WavenumbersCM1 []float64   // cm⁻¹, imaginary ones as negative numbers
	Vectors        [][]float64 // Cartesian displacements of 3N components, each of unit length
	ReducedMasses  []float64   // u
}

// NormalModes diagonalises the mass-weighted Hessian with translations and rotations projected out. h is the 3N×3N Hessian in
// kcal/mol/Å², masses are in u, x in Å. It returns [ErrLength], or an error that names the atom without a positive mass.
func NormalModes(h, masses, x []float64) (Modes, error) { return Modes{}, ErrLength }
