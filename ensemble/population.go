package ensemble

// State is a minimum as statistics sees it.
type State struct {
	Energy     float64 // kcal/mol
	Degeneracy int     // number of its distinct versions, at least 1
	// RotationalConstantsMHz and WavenumbersCM1 are needed for free energies only.
	RotationalConstantsMHz []float64
	WavenumbersCM1         []float64
}

// Populations returns the Boltzmann weights of the states at a temperature in kelvin, from their energies and degeneracies. They
// sum to one. The temperature must be positive and the energies finite; otherwise all weights are NaN.
func Populations(states []State, temperatureK float64) []float64 { return nil }

// FreeEnergies returns the free energies of the states in kcal/mol relative to the lowest, degeneracies included: a state's
// population is proportional to exp(-G/RT). It returns an error if a state has an imaginary wavenumber.
func FreeEnergies(states []State, temperatureK float64) ([]float64, error) { return nil, nil }

// FreeEnergyPopulations returns the weights that belong to relative free energies as returned by [FreeEnergies].
func FreeEnergyPopulations(freeEnergies []float64, temperatureK float64) []float64 { return nil }

// Relative returns the energies of the states in kcal/mol above the lowest.
func Relative(states []State) []float64 { return nil }

// Rank returns the indices of the states by ascending energy; equal energies keep their order.
func Rank(states []State) []int { return nil }
