package embed

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/require"
	"pgregory.net/rapid"
)

// After smoothing every bound obeys the triangle inequality, and bounds that hold a real set of points still hold it.
func TestSmoothing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(3, 12).Draw(t, "n")
		rng := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 0))
		points := make([][3]float64, n)
		for i := range points {
			points[i] = [3]float64{5 * rng.Float64(), 5 * rng.Float64(), 5 * rng.Float64()}
		}
		distance := func(i, j int) float64 {
			d := minus(points[i], points[j])
			return math.Sqrt(dotted(d, d))
		}
		c := &constraints{n: n, lower: make([]float64, n*n), upper: make([]float64, n*n)}
		for i := range n {
			for j := range i {
				d := distance(i, j)
				upper := unbounded
				if rng.IntN(2) == 0 {
					upper = d * (1 + rng.Float64())
				}
				c.set(i, j, d*rng.Float64(), upper)
			}
		}
		c.smooth()
		const eps = 1e-9
		for i := range n {
			for j := range n {
				if i == j {
					continue
				}
				require.LessOrEqual(t, c.lower[i*n+j], distance(i, j)+eps)
				require.GreaterOrEqual(t, c.upper[i*n+j], distance(i, j)-eps)
				for k := range n {
					require.LessOrEqual(t, c.upper[i*n+j], c.upper[i*n+k]+c.upper[k*n+j]+eps)
					if k != i && k != j {
						require.GreaterOrEqual(t, c.lower[i*n+j], c.lower[i*n+k]-c.upper[k*n+j]-eps)
					}
				}
			}
		}
	})
}

// Sides of 1 and 3 leave between 2 and 4 for the third side of a triangle.
func TestSmoothingRaisesLowerBounds(t *testing.T) {
	c := &constraints{n: 3, lower: make([]float64, 9), upper: make([]float64, 9)}
	c.set(0, 1, 1, 1)
	c.set(1, 2, 3, 3)
	c.set(0, 2, 0, unbounded)
	c.smooth()
	require.InDelta(t, 2, c.lower[2], 1e-12)
	require.InDelta(t, 4, c.upper[2], 1e-12)
}
