package forcefield

import "math"

// millidyne converts md/Å to kcal/mol/Å² (and md·Å to kcal/mol).
const millidyne = 143.9325

// bond is one stretching term. Atoms are given by the offsets of their coordinates.
type bond struct {
	i, j      int32
	length    float64 // Å
	stiffness float64 // kcal/mol/Å²
}

// bondEnergy returns the sum of the quartic stretching terms and adds their gradient to grad if that is not nil.
// Source: J. Comput. Chem. 17, 490 (1996), eq. 2.
func bondEnergy(bonds []bond, x, grad []float64) float64 {
	total := 0.0
	for n := range bonds {
		b := &bonds[n]
		d, r, _ := place(x, b.i).minus(place(x, b.j)).direction()
		e, slope, _ := b.stretch(r)
		total += e
		if grad != nil {
			d = d.times(slope)
			add(grad, b.i, d)
			add(grad, b.j, d.times(-1))
		}
	}
	return total
}

// stretch returns the energy at a length and its first two derivatives.
func (b *bond) stretch(r float64) (e, e1, e2 float64) {
	d := r - b.length
	return b.stiffness / 2 * d * d * (1 - 2*d + 7.0/3*d*d), b.stiffness * d * (1 - 3*d + 14.0/3*d*d), b.stiffness * (1 - 6*d + 14*d*d)
}

// bondHessian adds the second derivatives to h. A bond of length 0 has no direction and is left out.
func bondHessian(bonds []bond, x, h []float64) {
	for n := range bonds {
		b := &bonds[n]
		d := place(x, b.i).minus(place(x, b.j))
		r2 := d.dot(d)
		if r2 == 0 {
			continue
		}
		r := math.Sqrt(r2)
		_, e1, e2 := b.stretch(r)
		addPairBlocks(h, len(x), b.i, b.j, d, e1/r, (e2-e1/r)/r2)
	}
}
