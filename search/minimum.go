package search

// Minimum is one symmetry-distinct minimum of the potential energy surface.
type Minimum struct {
	Energy float64   `json:"energy_kcal_mol"` // reduced units for a cluster
	X      []float64 `json:"x"`               // 3N coordinates in Å, atom-major
	// Hits counts the quenches that ended here. Draws counts those of them that are evidence for the coverage: at most one a walk,
	// and none for the minimum that the walk started from.
	Hits  int `json:"hits"`
	Draws int `json:"draws"`

	Degeneracy     int  `json:"degeneracy"`      // number of distinct versions, mirror images included where they are the same molecule
	SymmetryNumber int  `json:"symmetry_number"` // of proper rotations
	Chiral         bool `json:"chiral"`

	LowestModeCM1          float64   `json:"lowest_mode_cm1"`
	WavenumbersCM1         []float64 `json:"wavenumbers_cm1,omitempty"` // all modes, ascending; none for a cluster
	RotationalConstantsMHz []float64 `json:"rotational_constants_mhz,omitempty"`
	DipoleDebye            float64   `json:"dipole_debye"`
	GradientRMS            float64   `json:"gradient_rms"`      // kcal/mol/Å
	LowestEigenvalue       float64   `json:"lowest_eigenvalue"` // of the Hessian, kcal/mol/Å²

	FoundInRound   int `json:"found_in_round"`
	LastHitInRound int `json:"last_hit_in_round"` // a store needs to write only what the last round touched
}
