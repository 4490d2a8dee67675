package embed

import (
	"math"
	"math/rand/v2"
	"testing"

	"github.com/stretchr/testify/require"
)

// The gradient of the error function agrees with central differences in three and four dimensions.
func TestErrorFunctionGradient(t *testing.T) {
	m := hydrocarbon(t, [][2]int{{0, 1}, {1, 2}, {2, 3}, {1, 4}, {4, 5}, {5, 1}}, 2)
	e, err := New(m, covalent{})
	require.NoError(t, err)
	rng := rand.New(rand.NewPCG(1, 1))
	d := e.strict.choose(rng)
	d.volumes = append(d.volumes, volume{atoms: [4]int{0, 2, 4, 5}, low: 3, high: math.Inf(1), scale: 6})
	for _, dim := range []int{3, 4} {
		f := errorFunction{draw: d, stage: stage{dimensions: dim, centers: 0.7, planes: 0.4, fourth: 0.3}}
		x := d.randomStart(rng)[:dim*d.n]
		grad, scratch := make([]float64, len(x)), make([]float64, len(x))
		f.evaluate(x, grad)
		for i := range x {
			const h = 1e-5
			x0 := x[i]
			x[i] = x0 + h
			up := f.evaluate(x, scratch)
			x[i] = x0 - h
			down := f.evaluate(x, scratch)
			x[i] = x0
			require.InDelta(t, (up-down)/(2*h), grad[i], 1e-6*(1+math.Abs(grad[i])), "dimension %d, coordinate %d", dim, i)
		}
	}
}
