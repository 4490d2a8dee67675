package coverage_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"

	"tarn/search/coverage"
)

// The abundances are a classic pair of plant plots used throughout the literature on species richness (figures from memory); the
// results were computed from the published formulas by hand.
func sample(common []int, twice, once int) coverage.Counts {
	for range twice {
		common = append(common, 2)
	}
	for range once {
		common = append(common, 1)
	}
	return coverage.Count(common)
}

var (
	first  = sample([]int{46, 22, 17, 15, 15, 9, 8, 6, 6, 4}, 4, 12)
	second = sample([]int{88, 22, 16, 15, 13, 10, 8, 8, 7, 7, 7, 5, 4, 4, 4, 3, 3, 3, 3}, 4, 14)
)

func TestWorkedExamples(t *testing.T) {
	for _, row := range []struct {
		name                 string
		counts               coverage.Counts
		draws, observed      int
		sample, half         float64
		classic, low, high   float64
		corrected, clow, chi float64
	}{
		{"first plot", first, 168, 26, 0.92857, 0.05104, 43.893, 30.511, 96.971, 39.121, 29.421, 76.321},
		{"second plot", second, 252, 37, 0.94444, 0.03583, 61.403, 43.502, 128.583, 55.128, 42.083, 101.648},
	} {
		t.Run(row.name, func(t *testing.T) {
			require.Equal(t, row.draws, row.counts.Draws)
			require.Equal(t, row.observed, row.counts.Observed)
			c := row.counts.Sample()
			require.InDelta(t, row.sample, c.Estimate, 5e-6)
			require.InDelta(t, row.sample-row.half, c.Low, 1e-5)
			require.InDelta(t, row.sample+row.half, c.High, 1e-5)
			require.InDeltaSlice(t, []float64{row.classic, row.low, row.high}, values(row.counts.ChaoClassic()), 1e-3)
			require.InDeltaSlice(t, []float64{row.corrected, row.clow, row.chi}, values(row.counts.Chao()), 1e-3)
		})
	}
}

func values(i coverage.Interval) []float64 { return []float64{i.Estimate, i.Low, i.High} }

func TestExtrapolate(t *testing.T) {
	require.InDelta(t, 28.757, first.Extrapolate(42), 1e-3)
	require.InDelta(t, 31.089, first.Extrapolate(84), 1e-3)
	require.InDelta(t, 34.731, first.Extrapolate(168), 1e-3)
	require.InDelta(t, 26, first.Extrapolate(0), 0)
	require.InDelta(t, first.ChaoClassic().Estimate, first.Extrapolate(1e9), 1e-6)
}

// Few draws must never look like certainty, and no draws say nothing.
func TestLittleEvidence(t *testing.T) {
	require.Equal(t, coverage.Interval{Estimate: 0, Low: 0, High: 1}, coverage.Count(nil).Sample())
	require.True(t, math.IsInf(coverage.Count([]int{0}).Chao().High, 1))
	require.InDelta(t, 0.7, coverage.Count([]int{6, 4}).Sample().Low, 1e-12) // rule of three: 1 - 3/10
	require.InDelta(t, 0, coverage.Count([]int{2}).Sample().Low, 0)
}

// Draws from a known distribution: the probability of what has not been drawn is known, and the interval should hold it in 95 % of
// the samples; normal intervals at this size hold it a little less often.
func TestIntervalHoldsTheTruth(t *testing.T) {
	const classes, draws, samples = 60, 250, 400
	rng := rand.New(rand.NewPCG(1, 2))
	var cumulative [classes]float64
	total := 0.0
	for i := range classes {
		total += math.Exp(-float64(i) / 15)
		cumulative[i] = total
	}
	held := 0
	for range samples {
		hits := make([]int, classes)
		for range draws {
			u := rng.Float64() * total
			i := 0
			for cumulative[i] < u {
				i++
			}
			hits[i]++
		}
		truth, before := 0.0, 0.0
		for i, k := range hits {
			if k > 0 {
				truth += (cumulative[i] - before) / total
			}
			before = cumulative[i]
		}
		if c := coverage.Count(hits).Sample(); c.Low <= truth && truth <= c.High {
			held++
		}
	}
	require.GreaterOrEqual(t, float64(held)/samples, 0.90)
}

func TestEstimatesStayInBounds(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := coverage.Count(rapid.SliceOf(rapid.IntRange(0, 50)).Draw(t, "hits"))
		s := c.Sample()
		require.True(t, 0 <= s.Low && s.Low <= s.Estimate && s.Estimate <= s.High && s.High <= 1 || c.Draws == 0, "%+v", s)
		chao := c.Chao()
		require.LessOrEqual(t, float64(c.Observed), chao.Estimate)
		if c.Draws > 0 {
			require.True(t, chao.Low <= chao.Estimate && chao.Estimate <= chao.High, "%+v", chao)
		}
	})
}
