package ensemble

import (
	"math"
	"testing"

	"github.com/stretchr/testify/require"
	"gonum.org/v1/gonum/floats"
	"pgregory.net/rapid"
)

// The gauche conformer of butane lies 0.78 kcal/mol above anti in MMFF94 (Halgren and Nachbar, J. Comput. Chem. 17, 587 (1996),
// Table II) and has two mirror-image versions; the weights follow by hand.
func TestPopulationsOfButane(t *testing.T) {
	states := []State{{Energy: -5.0}, {Energy: -4.22, Degeneracy: 2}}
	gauche := 2 * math.Exp(-0.78/0.59248495)
	populations := Populations(states, 298.15)
	require.InDelta(t, 1/(1+gauche), populations[0], 1e-7)
	require.InDelta(t, gauche/(1+gauche), populations[1], 1e-7)
	require.InDelta(t, 0.65, populations[0], 0.005)
}

// Cyclononane in MMFF94: free energies at 298 K and the percentages that the paper prints for them. Source: Halgren and Nachbar,
// J. Comput. Chem. 17, 587 (1996), Table IV.
func TestFreeEnergyPopulationsOfCyclononane(t *testing.T) {
	conformers := []struct {
		name                   string
		freeEnergy, percentage float64
	}{
		{"[333]", 138.07, 49}, {"[144]", 138.37, 30}, {"[225]", 138.69, 17}, {"[9a]", 139.68, 3}, {"[234]", 140.58, 0.7},
	}
	var energies []float64
	for _, c := range conformers {
		energies = append(energies, c.freeEnergy)
	}
	for i, p := range FreeEnergyPopulations(energies, 298.15) {
		require.InDelta(t, conformers[i].percentage, 100*p, 0.5, conformers[i].name)
	}
}

func TestPopulationsAtExtremes(t *testing.T) {
	states := []State{{Energy: 1e4}, {Energy: 1e4 + 1}, {Energy: 1e4, Degeneracy: 3}}
	require.InDeltaSlice(t, []float64{0.25, 0, 0.75}, Populations(states, 1e-3), 1e-12, "near 0 K the lowest states share")
	require.InDeltaSlice(t, []float64{0.2, 0.2, 0.6}, Populations(states, 1e12), 1e-9, "without end only the degeneracy counts")
	require.Empty(t, Populations(nil, 300))
	for _, temperature := range []float64{0, -1, math.NaN()} {
		require.True(t, floats.HasNaN(Populations(states, temperature)), "at %v K", temperature)
	}
	for _, bad := range []State{{Energy: math.NaN()}, {Energy: math.Inf(-1)}, {Energy: math.Inf(1)}, {Degeneracy: -1}} {
		for _, p := range Populations([]State{{}, bad}, 300) {
			require.True(t, math.IsNaN(p), "%+v", bad)
		}
	}
}

func TestPopulationProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		temperature := rapid.Float64Range(1, 3000).Draw(t, "temperature")
		shift := rapid.Float64Range(-1e3, 1e3).Draw(t, "shift")
		energies := rapid.SliceOfN(rapid.Float64Range(-50, 50), 1, 30).Draw(t, "energies")
		var states, shifted []State
		for _, e := range energies {
			degeneracy := rapid.IntRange(1, 12).Draw(t, "degeneracy")
			states = append(states, State{Energy: e, Degeneracy: degeneracy})
			shifted = append(shifted, State{Energy: e + shift, Degeneracy: degeneracy})
		}
		populations := Populations(states, temperature)
		require.InDelta(t, 1, floats.Sum(populations), 1e-12)
		require.InDeltaSlice(t, populations, Populations(shifted, temperature), 1e-7)

		// A state of degeneracy g weighs as much as g states of the same energy.
		single := []State{{Energy: states[0].Energy}}
		for range states[0].Degeneracy - 1 {
			single = append(single, single[0])
		}
		split := Populations(append(single, states[1:]...), temperature)
		require.InDelta(t, populations[0], floats.Sum(split[:len(single)]), 1e-12)

		order := Rank(states)
		relative := Relative(states)
		require.Zero(t, relative[order[0]])
		for k := 1; k < len(order); k++ {
			require.GreaterOrEqual(t, relative[order[k]], relative[order[k-1]])
		}
	})
}

func TestRankKeepsOrderOfEquals(t *testing.T) {
	require.Equal(t, []int{1, 3, 0, 2}, Rank([]State{{Energy: 2}, {Energy: 1}, {Energy: 2}, {Energy: 1}}))
}
