package schedule_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/search/schedule"
)

func TestStart(t *testing.T) {
	require.InDelta(t, 2/-math.Log(0.8), schedule.Start([]float64{2, -5, 2, 0}, 0.8), 1e-9)
	uphill := []float64{0.1, 1, 3, 40}
	kT := schedule.Start(uphill, 0.8)
	mean := 0.0
	for _, u := range uphill {
		mean += math.Exp(-u/kT) / 4
	}
	require.InDelta(t, 0.8, mean, 1e-9)
	require.Zero(t, schedule.Start([]float64{-1, 0}, 0.8))
	require.Positive(t, schedule.Start([]float64{1, math.Inf(1)}, 0.8))
}

// For a system of f harmonic degrees of freedom the mean energy is f kT/2 and its deviation kT sqrt(f/2). The rule of Huang et al. then
// lets the mean fall by λ deviations from stage to stage, to first order.
func TestCoolKeepsQuasiEquilibrium(t *testing.T) {
	const freedom = 200
	kT := 3.0
	for range 20 {
		deviation := kT * math.Sqrt(freedom/2.0)
		next := schedule.Cool(kT, deviation, 1)
		fall := freedom / 2.0 * (kT - next) / deviation
		require.InDelta(t, 0.7, fall, 0.03)
		kT = next
	}
}

func TestCoolIsBounded(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	for range 1000 {
		kT, deviation := rng.Float64()*10, rng.Float64()*10
		next := schedule.Cool(kT, deviation, 1)
		require.True(t, next < kT && next >= kT/2)
		require.Greater(t, schedule.Cool(kT, deviation, 2), next)
	}
	require.InDelta(t, 1, schedule.Cool(2, 0, 1), 1e-12)
}

func TestReheatGetsLowerAndSlower(t *testing.T) {
	before, slowBefore := schedule.Reheat(0)
	require.InDelta(t, 1, before, 0)
	require.InDelta(t, 1, slowBefore, 0)
	for k := 1; k < 30; k++ {
		factor, slowness := schedule.Reheat(k)
		require.LessOrEqual(t, factor, before)
		require.GreaterOrEqual(t, slowness, slowBefore)
		require.True(t, factor >= 0.5 && slowness <= 2)
		before, slowBefore = factor, slowness
	}
	require.InDelta(t, 0.5, before, 0)
}
