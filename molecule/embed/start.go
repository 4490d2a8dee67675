package embed

import (
	"math"
	"math/rand/v2"

	"gonum.org/v1/gonum/mat"
)

// draw is one attempt: the bounds with the choices made. Coordinates are 4N numbers, atom-major.
type draw struct {
	*constraints
	lower, upper   []float64 // Å
	lower2, upper2 []float64 // the squares
}

// metricStart picks every distance at random within its bounds and returns the coordinates that the four largest eigenvalues
// of the metric matrix give; the fourth lets groups pass each other and centres invert during refinement.
// Source: Crippen & Havel (1988), chapter 6.
func (d *draw) metricStart(rng *rand.Rand) []float64 {
	n := d.n
	if n < 5 || n > largestMetric {
		return d.randomStart(rng)
	}
	squared := make([]float64, n*n)
	for i := range n {
		for j := range i {
			l, u := d.lower[i*n+j], d.upper[i*n+j]
			r := l + rng.Float64()*(u-l)
			squared[i*n+j], squared[j*n+i] = r*r, r*r
		}
	}
	rows, total := make([]float64, n), 0.0
	for i := range n {
		for _, s := range squared[i*n : i*n+n] {
			rows[i] += s
		}
		rows[i] /= float64(n)
		total += rows[i] / float64(n)
	}
	metric := mat.NewSymDense(n, nil)
	for i := range n {
		for j := range i + 1 {
			metric.SetSym(i, j, (rows[i]+rows[j]-total-squared[i*n+j])/2)
		}
	}
	var eigen mat.EigenSym
	if !eigen.Factorize(metric, true) {
		return d.randomStart(rng)
	}
	values := eigen.Values(nil) // ascending
	var vectors mat.Dense
	eigen.VectorsTo(&vectors)
	x := make([]float64, 4*n)
	for axis := range 4 {
		root := math.Sqrt(math.Max(values[n-1-axis], 0))
		for i := range n {
			x[4*i+axis] = root * vectors.At(i, n-1-axis)
		}
	}
	return x
}

// largestMetric is the number of atoms above which the eigenvalues cost more than they help.
const largestMetric = 300

// randomStart spreads the atoms over a four-dimensional box as wide as the molecule is thick when it is folded.
func (d *draw) randomStart(rng *rand.Rand) []float64 {
	width := 2.5 * math.Cbrt(float64(d.n)+4)
	x := make([]float64, 4*d.n)
	for i := range x {
		x[i] = width * (rng.Float64() - 0.5)
	}
	return x
}
