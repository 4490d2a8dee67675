package minimize

import (
	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/blas64"
	"gonum.org/v1/gonum/floats"
	"gonum.org/v1/gonum/mat"
)

// metric is a change of coordinates that takes the stiffness out of a field. With a positive definite matrix A = LLᵀ near the Hessian,
// it puts x = origin + L⁻ᵀy; where A is the Hessian itself, that with respect to y is the unit matrix, and L-BFGS takes few steps.
type metric struct {
	origin  []float64
	lower   mat.TriDense
	inverse mat.TriDense // L⁻¹, dense with zeros above
	y, grad []float64
}

func newMetric(n int) metric {
	return metric{origin: make([]float64, n), y: make([]float64, n), grad: make([]float64, n)}
}

// set takes A from its Cholesky factors.
func (m *metric) set(factors *mat.Cholesky) error {
	factors.LTo(&m.lower)
	return m.inverse.InverseTri(&m.lower)
}

// moveOrigin lets y = 0 stand for x.
func (m *metric) moveOrigin(x []float64) {
	copy(m.origin, x)
	clear(m.y)
}

// displacement sets dx to the change of x that belongs to a change of y.
func (m *metric) displacement(dx, dy []float64) { m.multiply(blas.Trans, dx, dy) }

// position sets x to the point at y.
func (m *metric) position(x, y []float64) {
	m.displacement(x, y)
	floats.Add(x, m.origin)
}

// gradient turns derivatives with respect to x into those with respect to y.
func (m *metric) gradient(dst, grad []float64) { m.multiply(blas.NoTrans, dst, grad) }

func (m *metric) multiply(t blas.Transpose, dst, v []float64) {
	tri := m.inverse.RawTriangular()
	blas64.Gemv(t, 1, blas64.General{Rows: tri.N, Cols: tri.N, Stride: tri.Stride, Data: tri.Data},
		blas64.Vector{N: tri.N, Inc: 1, Data: v}, 0, blas64.Vector{N: tri.N, Inc: 1, Data: dst})
}
