package dedupe_test

import (
	"math"
	"testing"

	"github.com/stretchr/testify/require"

	"tarn/dedupe"
)

// Two fragments of seven atoms, Å. Source: D. L. Theobald, Acta Cryst. A61, 478 (2005).
var (
	fragmentA = []float64{
		-2.803, -15.373, 24.556, 0.893, -16.062, 25.147, 1.368, -12.371, 25.885, -1.651, -12.153, 28.177,
		-0.440, -15.218, 30.068, 2.551, -13.273, 31.372, 0.105, -11.330, 33.567,
	}
	fragmentB = []float64{
		-14.739, -18.673, 15.040, -12.473, -15.810, 16.074, -14.802, -13.307, 14.408, -17.782, -14.852, 16.171,
		-16.124, -14.617, 19.584, -15.029, -11.037, 18.902, -18.577, -10.001, 17.996,
	}
)

func determinant(r dedupe.Rotation) float64 {
	return r[0]*(r[4]*r[8]-r[5]*r[7]) - r[1]*(r[3]*r[8]-r[5]*r[6]) + r[2]*(r[3]*r[7]-r[4]*r[6])
}

func TestSuperposePublishedExample(t *testing.T) {
	r, rmsd, err := dedupe.Superpose(fragmentA, fragmentB, false)
	require.NoError(t, err)
	require.InDelta(t, 0.719106, rmsd, 5e-7) // Theobald 2005
	require.InDelta(t, 1, determinant(r), 1e-12)

	_, rmsd, err = dedupe.Superpose(fragmentA, fragmentB, true)
	require.NoError(t, err)
	require.InDelta(t, 0.719106, rmsd, 5e-7, "the proper rotation is the better one here")
}

func TestSuperposeInvertedAxes(t *testing.T) {
	// Analytic: of the inverted set only the shortest axis stays inverted, √(4·(1²+1²)/6).
	a := []float64{1, 0, 0, -1, 0, 0, 0, 2, 0, 0, -2, 0, 0, 0, 3, 0, 0, -3}
	b := make([]float64, len(a))
	for i, v := range a {
		b[i] = -v
	}
	r, rmsd, err := dedupe.Superpose(a, b, false)
	require.NoError(t, err)
	require.InDelta(t, math.Sqrt(8.0/6), rmsd, 1e-12)
	require.InDelta(t, 1, determinant(r), 1e-12)
	r, rmsd, err = dedupe.Superpose(a, b, true)
	require.NoError(t, err)
	require.InDelta(t, 0, rmsd, 1e-12)
	require.InDelta(t, -1, determinant(r), 1e-12)
}

func TestSuperposeDegenerateSets(t *testing.T) {
	for name, x := range map[string][]float64{
		"one atom":   {1, 2, 3},
		"two atoms":  {0, 0, 0, 0, 0, 1.5},
		"collinear":  {0, 0, 0, 1, 1, 1, 2, 2, 2, 3, 3, 3},
		"planar":     {0, 0, 0, 1, 0, 0, 1, 1, 0, 0, 2, 0},
		"coincident": {1, 1, 1, 1, 1, 1, 1, 1, 1},
	} {
		t.Run(name, func(t *testing.T) {
			turned := make([]float64, len(x)) // a third of a turn about the diagonal, and a shift
			for i := 0; i < len(x); i += 3 {
				turned[i], turned[i+1], turned[i+2] = x[i+2]+4, x[i]-1, x[i+1]+2
			}
			r, rmsd, err := dedupe.Superpose(x, turned, false)
			require.NoError(t, err)
			require.InDelta(t, 0, rmsd, 1e-9)
			require.InDelta(t, 1, determinant(r), 1e-12)
		})
	}
}

func TestSuperposeRefusesUnequalLengths(t *testing.T) {
	for _, pair := range [][2][]float64{{{1, 2, 3}, {1, 2, 3, 4, 5, 6}}, {{1, 2}, {1, 2}}, {nil, nil}} {
		_, _, err := dedupe.Superpose(pair[0], pair[1], false)
		require.ErrorIs(t, err, dedupe.ErrLength)
	}
}

func BenchmarkSuperpose(b *testing.B) {
	for b.Loop() {
		_, _, _ = dedupe.Superpose(fragmentA, fragmentB, true)
	}
}
