package ensemble

import (
	"cmp"
	"math"
	"slices"

	"gonum.org/v1/gonum/floats"
)

// State is a minimum as statistics sees it.
type State struct {
	Energy     float64 // kcal/mol
	Degeneracy int     // number of its distinct versions; 0 stands for 1
	// RotationalConstantsMHz and WavenumbersCM1 are needed for free energies only.
	RotationalConstantsMHz []float64
	WavenumbersCM1         []float64
}

func (s State) degeneracy() float64 {
	if s.Degeneracy == 0 {
		return 1
	}
	return float64(s.Degeneracy)
}

// Populations returns the Boltzmann weights of the states at a temperature in kelvin, from their energies and degeneracies. They
// sum to one. The temperature must be positive, energies finite and degeneracies not negative; otherwise all weights are NaN, so
// that the mistake is seen.
func Populations(states []State, temperatureK float64) []float64 {
	degeneracies := make([]float64, len(states))
	for i, s := range states {
		degeneracies[i] = s.degeneracy()
	}
	return weigh(Relative(states), degeneracies, temperatureK)
}

// FreeEnergyPopulations returns the weights that belong to free energies in kcal/mol as [FreeEnergies] returns them. They sum to
// one, or are NaN as those of [Populations].
func FreeEnergyPopulations(freeEnergies []float64, temperatureK float64) []float64 {
	return weigh(aboveLowest(slices.Clone(freeEnergies)), nil, temperatureK)
}

// weigh turns energies above the lowest, with degeneracies unless these are nil, into weights that sum to one. The sum is taken over
// logarithms, so that nothing overflows however low the temperature.
func weigh(energies, degeneracies []float64, temperatureK float64) []float64 {
	if len(energies) == 0 {
		return energies
	}
	valid := temperatureK > 0 && !math.IsInf(floats.Norm(energies, 1), 0)
	weights := make([]float64, len(energies))
	for i, e := range energies {
		weights[i] = -e / (GasConstant * temperatureK)
		if degeneracies != nil {
			weights[i] += math.Log(degeneracies[i])
		}
	}
	total := floats.LogSumExp(weights)
	for i := range weights {
		weights[i] = math.Exp(weights[i] - total)
	}
	if !valid || floats.HasNaN(weights) {
		floats.AddConst(math.NaN(), weights)
	}
	return weights
}

// Relative returns the energies of the states in kcal/mol above the lowest.
func Relative(states []State) []float64 {
	relative := make([]float64, len(states))
	for i, s := range states {
		relative[i] = s.Energy
	}
	return aboveLowest(relative)
}

func aboveLowest(energies []float64) []float64 {
	if len(energies) > 0 {
		floats.AddConst(-floats.Min(energies), energies)
	}
	return energies
}

// Rank returns the indices of the states by ascending energy; states of equal energy keep their order.
func Rank(states []State) []int {
	order := make([]int, len(states))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int { return cmp.Compare(states[a].Energy, states[b].Energy) })
	return order
}
