package forcefield

import "math"

// outOfPlane is the three Wilson terms at a centre with three neighbours; the stiffness (kcal/mol/rad²) is common.
type outOfPlane struct {
	center    int32
	outer     [3]int32
	stiffness float64
}

// outOfPlaneEnergy returns the sum of the harmonic terms in the Wilson angles and adds their gradient to grad if that is
// not nil. Source: J. Comput. Chem. 17, 490 (1996), eq. 6.
func outOfPlaneEnergy(centers []outOfPlane, x, grad []float64) float64 {
	total := 0.0
	for n := range centers {
		c := &centers[n]
		center := place(x, c.center)
		a, _, ia := place(x, c.outer[0]).minus(center).direction()
		b, _, ib := place(x, c.outer[1]).minus(center).direction()
		d, _, id := place(x, c.outer[2]).minus(center).direction()
		triple := a.cross(b).dot(d)
		ga, gb, gd := vector{}, vector{}, vector{}
		total += wilson(c.stiffness, triple, a, b, d, ia, ib, id, &ga, &gb, &gd)
		total += wilson(c.stiffness, triple, b, d, a, ib, id, ia, &gb, &gd, &ga)
		total += wilson(c.stiffness, triple, d, a, b, id, ia, ib, &gd, &ga, &gb)
		if grad == nil {
			continue
		}
		add(grad, c.outer[0], ga)
		add(grad, c.outer[1], gb)
		add(grad, c.outer[2], gd)
		add(grad, c.center, ga.plus(gb).plus(gd).times(-1))
	}
	return total
}

// wilson returns the energy of the angle between w and the plane of u and v, all unit vectors from the centre with inverse
// lengths iu, iv and iw, and adds the gradient at their ends. triple is (u×v)·w. The angle does not exist, and is left
// out, where u and v are collinear.
func wilson(stiffness, triple float64, u, v, w vector, iu, iv, iw float64, gu, gv, gw *vector) float64 {
	normal := u.cross(v)
	square, cosUV := normal.dot(normal), u.dot(v)
	if square < smallestSin*smallestSin {
		return 0
	}
	inverse := 1 / math.Sqrt(square)
	sin := max(-1, min(1, triple*inverse))
	secant := 1 / max(math.Sqrt(1-sin*sin), smallestSin)
	chi := math.Atan(sin * secant)
	slope := stiffness * chi * secant
	toPlane, along := slope*inverse, slope*sin
	*gw = gw.plus(normal.combine(toPlane*iw, w, -along*iw))
	along *= inverse * inverse
	*gu = gu.plus(v.cross(w).times(toPlane * iu)).plus(u.combine(-along*iu, v, along*cosUV*iu))
	*gv = gv.plus(w.cross(u).times(toPlane * iv)).plus(v.combine(-along*iv, u, along*cosUV*iv))
	return stiffness / 2 * chi * chi
}

// outOfPlaneHessian adds the second derivatives to h.
func outOfPlaneHessian(centers []outOfPlane, x, h []float64) {
	for n := range centers {
		c := &centers[n]
		center := place(x, c.center)
		var arms [3]arm
		for m, o := range c.outer {
			arms[m] = armOf(place(x, o).minus(center), m)
		}
		for m := range arms {
			u, v, w := &arms[m], &arms[(m+1)%3], &arms[(m+2)%3]
			normal := u.cross(v)
			square, ww := normal.dot(&normal), w.dot(w)
			if square.value*ww.value == 0 {
				continue
			}
			scale := square.times(&ww)
			scale = scale.power(-0.5)
			along := w.jets()
			triple := normal.dot(&along)
			sin := triple.times(&scale)
			s := max(-1, min(1, sin.value))
			cos := max(math.Sqrt(1-s*s), smallestSin)
			chi := math.Atan(s / cos)
			energy := sin.compose(c.stiffness/2*chi*chi, c.stiffness*chi/cos, c.stiffness*(1+chi*s/cos)/(cos*cos))
			energy.addTo(h, len(x), c.center, c.outer[0], c.outer[1], c.outer[2])
		}
	}
}
