package forcefield

import "math"

// collinear is the square of |b×b'| in Å⁴ below which three atoms count as collinear and a torsion about them is left out.
const collinear = 1e-14

// torsion is one term i–j–k–l with its barriers in kcal/mol.
type torsion struct {
	i, j, k, l int32
	v1, v2, v3 float64
}

// torsionEnergy returns the sum of the threefold cosine series and adds their gradient to grad if that is not nil.
// Source: J. Comput. Chem. 17, 490 (1996), eq. 7; gradient after A. Blondel and M. Karplus, J. Comput. Chem. 17, 1132
// (1996), which has no singularity where the torsion is 0 or 180°.
func torsionEnergy(torsions []torsion, x, grad []float64) float64 {
	total := 0.0
	for n := range torsions {
		t := &torsions[n]
		pj, pk := place(x, t.j), place(x, t.k)
		b1, b2, b3 := pj.minus(place(x, t.i)), pk.minus(pj), place(x, t.l).minus(pk)
		p, q := b1.cross(b2), b2.cross(b3)
		pp, qq := p.dot(p), q.dot(q)
		if pp < collinear || qq < collinear {
			continue
		}
		ipp, iqq := 1/pp, 1/qq
		inverse := math.Sqrt(ipp * iqq)
		cos := p.dot(q) * inverse
		e, slope, _ := t.series(cos)
		total += e
		if grad == nil {
			continue
		}
		bb := b2.dot(b2)
		// slope is dE/dcos φ; dE/dφ = −sin φ·slope with sin φ = |b2|·b1·(b2×b3)/(|p||q|)
		turn := -slope * bb * b1.dot(q) * inverse
		gi := p.times(-turn * ipp)
		gl := q.times(turn * iqq)
		ibb := 1 / bb
		s, r := b1.dot(b2)*ibb, b3.dot(b2)*ibb
		add(grad, t.i, gi)
		add(grad, t.l, gl)
		add(grad, t.j, gi.combine(-1-s, gl, r))
		add(grad, t.k, gl.combine(-1-r, gi, s))
	}
	return total
}

// series returns the energy at a cosine and its first two derivatives with respect to the cosine.
func (t *torsion) series(c float64) (e, e1, e2 float64) {
	return (t.v1*(1+c) + 2*t.v2*(1-c*c) + t.v3*(1+c*(4*c*c-3))) / 2, t.v1/2 - 2*t.v2*c + t.v3*(6*c*c-1.5), 12*t.v3*c - 2*t.v2
}

// torsionHessian adds the second derivatives to h. The variables are the vectors from j to the other atoms.
func torsionHessian(torsions []torsion, x, h []float64) {
	for n := range torsions {
		t := &torsions[n]
		base := place(x, t.j)
		toI, toK, toL := armOf(place(x, t.i).minus(base), 0), armOf(place(x, t.k).minus(base), 1), armOf(place(x, t.l).minus(base), 2)
		p, q := toK.cross(&toI), toK.cross(&toL)
		pp, qq := p.dot(&p), q.dot(&q)
		if pp.value < collinear || qq.value < collinear {
			continue
		}
		squares := pp.times(&qq)
		scale, pq := squares.power(-0.5), p.dot(&q)
		cos := pq.times(&scale)
		energy := cos.compose(t.series(cos.value))
		energy.addTo(h, len(x), t.j, t.i, t.k, t.l)
	}
}
