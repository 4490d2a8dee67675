package minimize

import (
	"math"
	"testing"

	"github.com/stretchr/testify/require"
	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"
)

func newMotions(n int) *[6][]float64 {
	var m [6][]float64
	for k := range m {
		m[k] = make([]float64, n)
	}
	return &m
}

// However many there are, they are orthonormal, and with masses they hold the six motions of a rigid body.
func TestRigidMotionsAreOrthonormal(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		atoms := rapid.IntRange(3, 8).Draw(t, "atoms")
		x := rapid.SliceOfN(rapid.Float64Range(-3, 3), 3*atoms, 3*atoms).Draw(t, "x")
		weights := rapid.SliceOfN(rapid.Float64Range(1, 11), atoms, atoms).Draw(t, "weights")
		motions := newMotions(len(x))
		count := rigidMotions(x, weights, motions)
		for k := range count {
			for l := range k {
				require.InDelta(t, 0, floats.Dot(motions[k], motions[l]), 1e-12)
			}
			require.InDelta(t, 1, floats.Norm(motions[k], 2), 1e-12)
		}
		// A turn about any axis through any point lies within their span.
		axis := vector(rapid.SliceOfN(rapid.Float64Range(-1, 1), 3, 3).Draw(t, "axis"))
		turn := make([]float64, len(x))
		for i := range atoms {
			d := axis.cross(vector(x[3*i : 3*i+3]))
			for k := range 3 {
				turn[3*i+k] = weights[i] * d[k]
			}
		}
		for k := range count {
			floats.AddScaled(turn, -floats.Dot(turn, motions[k]), motions[k])
		}
		require.InDelta(t, 0, floats.Norm(turn, 2), 1e-2, "what is left is the turn about the axis of a nearly linear geometry")
		if count == 6 {
			require.InDelta(t, 0, floats.Norm(turn, 2), 1e-9)
		}
	})
}

func TestRigidMotionsAreCounted(t *testing.T) {
	for _, shape := range []struct {
		name  string
		x     []float64
		count int
	}{
		{"atom", []float64{3, 4, 5}, 3},
		{"coincident atoms", []float64{3, 4, 5, 3, 4, 5}, 3},
		{"diatomic", []float64{0, 0, 0, 1, 2, 3}, 5},
		{"line", []float64{1, 1, 1, 2, 3, 4, -1, -3, -5, 0, -1, -2}, 5},
		{"line bent by less than converged coordinates tell", []float64{0, 0, 0, 1, 1e-6, 0, 2, 0, 0}, 5},
		{"bent", []float64{0, 0, 0, 1, 0.01, 0, 2, 0, 0}, 6},
		{"plane", []float64{0, 0, 0, 1, 0, 0, 0, 1, 0, 1, 1, 0}, 6},
	} {
		require.Equal(t, shape.count, rigidMotions(shape.x, nil, newMotions(len(shape.x))), shape.name)
	}
}

// Projection makes the motions eigenvectors with the eigenvalue asked for and leaves a vector orthogonal to them its image, less what
// of that lies along the motions.
func TestProjectOut(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		const n = 12
		x := rapid.SliceOfN(rapid.Float64Range(-3, 3), n, n).Draw(t, "x")
		entries := rapid.SliceOfN(rapid.Float64Range(-9, 9), n*n, n*n).Draw(t, "h")
		h := make([]float64, n*n)
		for i := range n {
			for j := range n {
				h[i*n+j] = entries[i*n+j] + entries[j*n+i]
			}
		}
		motions := newMotions(n)
		count := rigidMotions(x, nil, motions)
		p := mat.NewDense(n, n, nil)
		p.Apply(func(i, j int, _ float64) float64 {
			v := 0.0
			if i == j {
				v = 1
			}
			for _, m := range motions[:count] {
				v -= m[i] * m[j]
			}
			return v
		}, p)
		var want mat.Dense
		want.Mul(p, mat.NewDense(n, n, h))
		want.Mul(&want, p)
		for _, m := range motions[:count] {
			var outer mat.Dense
			outer.Outer(70, mat.NewVecDense(n, m), mat.NewVecDense(n, m))
			want.Add(&want, &outer)
		}
		projectOut(h, motions[:count], 70, newMotions(n))
		require.InDeltaSlice(t, want.RawMatrix().Data, h, 1e-10)
		require.False(t, math.IsNaN(floats.Sum(h)))
	})
}
