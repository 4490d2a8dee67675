package search_test

import (
	"fmt"
	"slices"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/search"
)

func cluster(t *testing.T, n int) *search.Problem {
	t.Helper()
	p, err := search.NewClusterProblem(n)
	require.NoError(t, err)
	return p
}

// Numbers of minima: C. J. Tsai, K. D. Jordan, J. Phys. Chem. 97, 11227 (1993) (from memory). Energies: D. J. Wales, J. P. K. Doye,
// J. Phys. Chem. A 101, 5111 (1997) (from memory).
func TestClusterMinima(t *testing.T) {
	for _, row := range []struct {
		atoms, minima  int
		lowest, second float64
	}{
		{7, 4, -16.505384, -15.935043},
		{8, 8, -19.821489, -19.765298},
		{9, 21, -24.113360, -23.269812},
	} {
		r := run(t, cluster(t, row.atoms), search.Settings{Seed: 1})
		require.Equal(t, search.StopCoverage, r.StopReason)
		require.Len(t, r.Minima, row.minima, "%d atoms", row.atoms)
		require.InDelta(t, row.lowest, r.Minima[0].Energy, 1e-6)
		require.InDelta(t, row.second, r.Minima[1].Energy, 1e-6)
	}
}

// The pentagonal bipyramid of seven atoms has ten proper rotations and no handedness.
func TestClusterSymmetry(t *testing.T) {
	r := run(t, cluster(t, 7), search.Settings{Seed: 1, MaxQuenches: 200})
	require.Equal(t, 10, r.Minima[0].SymmetryNumber)
	require.Equal(t, 1, r.Minima[0].Degeneracy)
	require.False(t, r.Minima[0].Chiral)
}

func TestVerifyClusterOfTen(t *testing.T) {
	verifyOnly(t)
	for seed := range uint64(3) {
		r := run(t, cluster(t, 10), search.Settings{Seed: seed + 1})
		fmt.Printf("| lj:10, seed %d | 64 minima published | %d found | %d quenches |\n", seed+1, len(r.Minima), r.Quenches)
		require.Len(t, r.Minima, 64)
	}
}

// The lowest of every size up to 30. Energies as in TestClusterMinima.
func TestVerifyLowestClusters(t *testing.T) {
	verifyOnly(t)
	for i, lowest := range []float64{
		-1, -3, -6, -9.103852, -12.712062, -16.505384, -19.821489, -24.113360, -28.422532, -32.765970, -37.967600, -44.326801, -47.845157,
		-52.322627, -56.815742, -61.317995, -66.530949, -72.659782, -77.177043, -81.684571, -86.809782, -92.844472, -97.348815,
		-102.372663, -108.315616, -112.873584, -117.822402, -123.587371, -128.286571,
	} {
		n := i + 2
		t.Run(fmt.Sprint(n), func(t *testing.T) {
			r := run(t, cluster(t, n), search.Settings{Seed: 1, MaxQuenches: 6000})
			fmt.Printf("| lj:%d | %.6f published | %.6f found | %d quenches |\n", n, lowest, r.Minima[0].Energy, r.Quenches)
			require.InDelta(t, lowest, r.Minima[0].Energy, 1e-6)
		})
	}
}

// The double funnel: the truncated octahedron of 38 atoms, -173.928427, is found within 20,000 quenches in the median of five seeds.
func TestVerifyDoubleFunnel(t *testing.T) {
	verifyOnly(t)
	const lowest, budget = -173.928427, 20_000
	var needed []int
	for seed := range uint64(5) {
		at := 1 << 30
		_, err := search.Run(t.Context(), cluster(t, 38), search.Settings{Seed: seed + 1, MaxQuenches: budget}, nil,
			search.Hooks{Checkpoint: func(c search.Checkpoint) error {
				for i := range c.Minima {
					if c.Minima[i].Energy < lowest+1e-5 {
						at = c.Quenches
						return errSpent
					}
				}
				return nil
			}})
		if err != nil {
			require.ErrorIs(t, err, errSpent)
		}
		needed = append(needed, at)
		fmt.Printf("| lj:38, seed %d | -173.928427 published | found after %d quenches |\n", seed+1, at)
	}
	slices.Sort(needed)
	require.LessOrEqual(t, needed[2], budget)
}

// Thirteen atoms have about 1,510 minima; at least 1,490 are to be found within twenty minutes on two processors.
func TestVerifyClusterOfThirteen(t *testing.T) {
	verifyOnly(t)
	r := run(t, cluster(t, 13), search.Settings{Seed: 1, MaxSeconds: 1200, MaxQuenches: 5_000_000})
	fmt.Printf("| lj:13 | about 1510 minima published | %d found | %d quenches, %.0f s |\n", len(r.Minima), r.Quenches, r.ElapsedSeconds)
	require.GreaterOrEqual(t, len(r.Minima), 1490)
	require.LessOrEqual(t, len(r.Minima), 1520, "false minima")
	require.InDelta(t, -44.326801, r.Minima[0].Energy, 1e-6)
}
