package embed

import "slices"

// errorFunction is what refinement minimises: for every distance the squared relative violation of its bounds,
// (d²/u² − 1)² above and (2l²/(l² + d²) − 1)² below, for every volume the squared violation, and the fourth coordinates.
// Source of the distance terms: T. F. Havel, Prog. Biophys. Mol. Biol. 56, 43 (1991).
type errorFunction struct {
	*draw
	stage
	last, grad []float64 // the gradient at the coordinates evaluated last
}

func (e *errorFunction) value(x []float64) float64 {
	copy(e.last, x)
	return e.evaluate(x, e.grad)
}

func (e *errorFunction) gradient(grad, x []float64) {
	if !slices.Equal(x, e.last) {
		e.value(x)
	}
	copy(grad, e.grad)
}

// evaluate returns the error at x and writes its gradient.
func (e *errorFunction) evaluate(x, grad []float64) float64 {
	clear(grad)
	total := 0.0
	if e.dimensions == 4 {
		total = e.distances4(x, grad)
		for i := 3; i < len(x); i += 4 {
			total += e.fourth * x[i] * x[i]
			grad[i] += 2 * e.fourth * x[i]
		}
	} else {
		total = e.distances3(x, grad)
	}
	for i := range e.volumes {
		total += e.volumeTerm(&e.volumes[i], x, grad)
	}
	return total
}

func (e *errorFunction) distances4(x, grad []float64) float64 {
	n, total := e.n, 0.0
	for i := range n {
		p, gp := x[4*i:4*i+4:4*i+4], grad[4*i:4*i+4:4*i+4]
		lower, upper := e.lower2[i*n:i*n+i], e.upper2[i*n:i*n+i]
		for j := range lower {
			q := x[4*j : 4*j+4 : 4*j+4]
			dx, dy, dz, dw := p[0]-q[0], p[1]-q[1], p[2]-q[2], p[3]-q[3]
			d2 := dx*dx + dy*dy + dz*dz + dw*dw
			if d2 >= lower[j] && d2 <= upper[j] {
				continue
			}
			value, slope := violation(d2, lower[j], upper[j])
			total += value
			gq := grad[4*j : 4*j+4 : 4*j+4]
			gp[0] += slope * dx
			gp[1] += slope * dy
			gp[2] += slope * dz
			gp[3] += slope * dw
			gq[0] -= slope * dx
			gq[1] -= slope * dy
			gq[2] -= slope * dz
			gq[3] -= slope * dw
		}
	}
	return total
}

func (e *errorFunction) distances3(x, grad []float64) float64 {
	n, total := e.n, 0.0
	for i := range n {
		p, gp := x[3*i:3*i+3:3*i+3], grad[3*i:3*i+3:3*i+3]
		lower, upper := e.lower2[i*n:i*n+i], e.upper2[i*n:i*n+i]
		for j := range lower {
			q := x[3*j : 3*j+3 : 3*j+3]
			dx, dy, dz := p[0]-q[0], p[1]-q[1], p[2]-q[2]
			d2 := dx*dx + dy*dy + dz*dz
			if d2 >= lower[j] && d2 <= upper[j] {
				continue
			}
			value, slope := violation(d2, lower[j], upper[j])
			total += value
			gq := grad[3*j : 3*j+3 : 3*j+3]
			gp[0] += slope * dx
			gp[1] += slope * dy
			gp[2] += slope * dz
			gq[0] -= slope * dx
			gq[1] -= slope * dy
			gq[2] -= slope * dz
		}
	}
	return total
}

// violation returns the error of a squared distance outside its squared bounds, and the factor that turns the vector between
// the atoms into the gradient.
func violation(d2, lower2, upper2 float64) (value, slope float64) {
	if d2 > upper2 {
		v := d2/upper2 - 1
		return v * v, 4 * v / upper2
	}
	sum := lower2 + d2
	v := 2*lower2/sum - 1
	return v * v, -8 * v * lower2 / (sum * sum)
}

func (e *errorFunction) volumeTerm(v *volume, x, grad []float64) float64 {
	dim := e.dimensions
	o := x[dim*v.atoms[0]:]
	p, q, r := x[dim*v.atoms[1]:], x[dim*v.atoms[2]:], x[dim*v.atoms[3]:]
	ax, ay, az := p[0]-o[0], p[1]-o[1], p[2]-o[2]
	bx, by, bz := q[0]-o[0], q[1]-o[1], q[2]-o[2]
	cx, cy, cz := r[0]-o[0], r[1]-o[1], r[2]-o[2]
	ux, uy, uz := by*cz-bz*cy, bz*cx-bx*cz, bx*cy-by*cx // b × c
	size := ax*ux + ay*uy + az*uz
	excess := 0.0
	switch {
	case size < v.low:
		excess = size - v.low
	case size > v.high:
		excess = size - v.high
	default:
		return 0
	}
	weight := e.centers / (v.scale * v.scale)
	if v.plane {
		weight = e.planes / (v.scale * v.scale)
	}
	slope := 2 * weight * excess
	vx, vy, vz := cy*az-cz*ay, cz*ax-cx*az, cx*ay-cy*ax // c × a
	wx, wy, wz := ay*bz-az*by, az*bx-ax*bz, ax*by-ay*bx // a × b
	ga, gb, gc, g0 := grad[dim*v.atoms[1]:], grad[dim*v.atoms[2]:], grad[dim*v.atoms[3]:], grad[dim*v.atoms[0]:]
	for k, t := range [3][3]float64{{ux, vx, wx}, {uy, vy, wy}, {uz, vz, wz}} {
		ga[k] += slope * t[0]
		gb[k] += slope * t[1]
		gc[k] += slope * t[2]
		g0[k] -= slope * (t[0] + t[1] + t[2])
	}
	return weight * excess * excess
}
