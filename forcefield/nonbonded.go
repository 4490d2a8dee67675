package forcefield

import "math"

const (
	coulomb      = 332.0716 // kcal/mol·Å/e²
	chargeBuffer = 0.05     // Å
	oneFour      = 0.75     // electrostatic scale of pairs three bonds apart

	// The buffered 14-7 potential: ε·((1+δ)/(ρ+δ))⁷·((1+γ)/(ρ⁷+γ) − 2) with ρ = R/R*.
	delta, gamma = 0.07, 0.12

	// noOverlap is added to a distance before the division by it, so that coincident atoms have a finite gradient; it
	// changes no other distance.
	noOverlap = 1e-200
)

// pair is the van der Waals and electrostatic interaction of an atom with the atom at offset j.
type pair struct {
	inverse float64 // 1/R*, Å⁻¹
	depth   float64 // ε, kcal/mol
	charge  float64 // scaled product of the charges, kcal/mol·Å (·Å² where the dielectric grows with distance)
	j       int32
}

// nonbonded lists the pairs, grouped by their first atom.
type nonbonded struct {
	pairs             []pair
	end               []int32 // end of the pairs of each atom
	distanceDependent bool
}

// energy returns the sums over all pairs. Source: J. Comput. Chem. 17, 520 (1996), eqs. 8 and 14.
func (b *nonbonded) energy(x []float64) (vdw, electrostatic float64) {
	start := int32(0)
	for i, end := range b.end {
		at := place(x, int32(3*i))
		row := b.pairs[start:end]
		for n := range row {
			p := &row[n]
			q := (*[3]float64)(x[p.j:])
			dx, dy, dz := at.x-q[0], at.y-q[1], at.z-q[2]
			r := math.Sqrt(dx*dx + dy*dy + dz*dz)
			rho := r * p.inverse
			rho2 := rho * rho
			rho6 := rho2 * rho2 * rho2
			u, v, w := rho+delta, rho6*rho+gamma, r+chargeBuffer
			inverse := 1 / (u * v * w)
			f := (1 + delta) * inverse * v * w
			f2 := f * f
			iw := inverse * u * v
			eq := p.charge * iw
			if b.distanceDependent {
				eq *= iw
			}
			vdw += p.depth * (f2 * f2 * f2 * f) * ((1+gamma)*inverse*u*w - 2)
			electrostatic += eq
		}
		start = end
	}
	return vdw, electrostatic
}

// energyGradient returns the sum over all pairs and adds the gradient to grad.
func (b *nonbonded) energyGradient(x, grad []float64) float64 {
	total := 0.0
	start := int32(0)
	for i, end := range b.end {
		at := place(x, int32(3*i))
		var gx, gy, gz float64
		row := b.pairs[start:end]
		for n := range row {
			p := &row[n]
			q := (*[3]float64)(x[p.j:])
			dx, dy, dz := at.x-q[0], at.y-q[1], at.z-q[2]
			r := math.Sqrt(dx*dx + dy*dy + dz*dz)
			rho := r * p.inverse
			rho2 := rho * rho
			rho6 := rho2 * rho2 * rho2
			u, v, w, s := rho+delta, rho6*rho+gamma, r+chargeBuffer, r+noOverlap
			uv, ws := u*v, w*s
			inverse := 1 / (uv * ws)
			iuv, iws := inverse*ws, inverse*uv
			iu, iv, iw := iuv*v, iuv*u, iws*s
			f := (1 + delta) * iu
			f2 := f * f
			f7 := p.depth * (f2 * f2 * f2 * f)
			g := (1+gamma)*iv - 2
			eq := p.charge * iw
			slope := eq * iw
			if b.distanceDependent {
				eq = slope
				slope *= 2 * iw
			}
			total += f7*g + eq
			slope = -(7*p.inverse*f7*(g*iu+(1+gamma)*rho6*iv*iv) + slope) * iws * w
			dx, dy, dz = dx*slope, dy*slope, dz*slope
			gx, gy, gz = gx+dx, gy+dy, gz+dz
			gj := (*[3]float64)(grad[p.j:])
			gj[0] -= dx
			gj[1] -= dy
			gj[2] -= dz
		}
		add(grad, int32(3*i), vector{gx, gy, gz})
		start = end
	}
	return total
}

// hessian adds the second derivatives to h. Coincident atoms have none and are left out.
func (b *nonbonded) hessian(x, h []float64) {
	start := int32(0)
	for i, end := range b.end {
		at := place(x, int32(3*i))
		for n := start; n < end; n++ {
			p := &b.pairs[n]
			d := at.minus(place(x, p.j))
			r2 := d.dot(d)
			if r2 == 0 {
				continue
			}
			r := math.Sqrt(r2)
			e1, e2 := b.derivatives(p, r)
			addPairBlocks(h, len(x), int32(3*i), p.j, d, e1/r, (e2-e1/r)/r2)
		}
		start = end
	}
}

// derivatives returns the first two derivatives of a pair energy with respect to the distance.
func (b *nonbonded) derivatives(p *pair, r float64) (e1, e2 float64) {
	rho := r * p.inverse
	rho5 := rho * rho * rho * rho * rho
	rho6 := rho5 * rho
	u, v := 1/(rho+delta), 1/(rho6*rho+gamma)
	f := math.Pow((1+delta)*u, 7)
	f1, f2 := -7*f*u, 56*f*u*u
	g := (1+gamma)*v - 2
	g1 := -7 * (1 + gamma) * rho6 * v * v
	g2 := (1 + gamma) * v * v * (98*rho6*rho6*v - 42*rho5)
	e1 = p.depth * p.inverse * (f1*g + f*g1)
	e2 = p.depth * p.inverse * p.inverse * (f2*g + 2*f1*g1 + f*g2)
	w := 1 / (r + chargeBuffer)
	if b.distanceDependent {
		return e1 - 2*p.charge*w*w*w, e2 + 6*p.charge*w*w*w*w
	}
	return e1 - p.charge*w*w, e2 + 2*p.charge*w*w*w
}
