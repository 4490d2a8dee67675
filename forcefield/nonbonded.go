package forcefield

import "math"

const (
	coulomb      = 332.0716 // kcal/mol·Å/e²
	chargeBuffer = 0.05     // Å
	oneFour      = 0.75     // electrostatic scale of pairs three bonds apart

	// The buffered 14-7 potential: ε·((1+δ)/(ρ+δ))⁷·((1+γ)/(ρ⁷+γ) − 2) with ρ = R/R*.
	delta, gamma = 0.07, 0.12

	// noOverlap is added to a distance before the division by it, so that coincident atoms have a finite gradient; it
	// is too small to change any other distance.
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

// block is the number of pairs whose distances are held at a time. Three short loops over a block are faster than one long
// loop over the pairs, whose many values do not fit the registers.
const block = 64

// energy returns the sums over all pairs. Source: J. Comput. Chem. 17, 520 (1996), eqs. 8 and 14.
func (b *nonbonded) energy(x []float64) (vdw, electrostatic float64) {
	var buffer [block]float64
	start := int32(0)
	for i, end := range b.end {
		at := place(x, int32(3*i))
		for start < end {
			stop := min(end, start+block)
			pairs := b.pairs[start:stop]
			distances := buffer[:len(pairs)]
			measure(pairs, at, x, distances)
			v, e := b.sum(pairs, distances)
			vdw, electrostatic = vdw+v, electrostatic+e
			start = stop
		}
	}
	return vdw, electrostatic
}

// energyGradient returns the sum over all pairs and adds the gradient to grad.
func (b *nonbonded) energyGradient(x, grad []float64) float64 {
	var buffer [block]float64
	total := 0.0
	start := int32(0)
	for i, end := range b.end {
		at := place(x, int32(3*i))
		for start < end {
			stop := min(end, start+block)
			pairs := b.pairs[start:stop]
			values := buffer[:len(pairs)]
			measure(pairs, at, x, values)
			total += b.slopes(pairs, values)
			add(grad, int32(3*i), push(pairs, at, x, values, grad))
			start = stop
		}
	}
	return total
}

// measure writes the distances of the pairs of the atom at a place.
func measure(pairs []pair, at vector, x, distances []float64) {
	distances = distances[:len(pairs)]
	for n := range pairs {
		q := (*[3]float64)(x[pairs[n].j:])
		dx, dy, dz := at.x-q[0], at.y-q[1], at.z-q[2]
		distances[n] = math.Sqrt(dx*dx + dy*dy + dz*dz)
	}
}

// sum returns the energies of pairs at their distances.
func (b *nonbonded) sum(pairs []pair, distances []float64) (vdw, electrostatic float64) {
	distances = distances[:len(pairs)]
	for n := range pairs {
		p := &pairs[n]
		r := distances[n]
		rho := r * p.inverse
		rho2 := rho * rho
		f := (1 + delta) / (rho + delta)
		f2 := f * f
		w := 1 / (r + chargeBuffer)
		eq := p.charge * w
		if b.distanceDependent {
			eq *= w
		}
		vdw += p.depth * (f2 * f2 * f2 * f) * ((1+gamma)/(rho2*rho2*rho2*rho+gamma) - 2)
		electrostatic += eq
	}
	return vdw, electrostatic
}

// slopes returns the energy of pairs and replaces each distance r by (dE/dr)/r.
func (b *nonbonded) slopes(pairs []pair, values []float64) float64 {
	total := 0.0
	values = values[:len(pairs)]
	for n := range pairs {
		p := &pairs[n]
		r := values[n]
		rho := r * p.inverse
		rho2 := rho * rho
		rho6 := rho2 * rho2 * rho2
		u, v, w := 1/(rho+delta), (1+gamma)/(rho6*rho+gamma), 1/(r+chargeBuffer)
		f := (1 + delta) * u
		f2 := f * f
		f7 := p.depth * (f2 * f2 * f2 * f)
		g := v - 2
		eq := p.charge * w
		slope := eq * w
		if b.distanceDependent {
			eq = slope
			slope *= 2 * w
		}
		total += f7*g + eq
		values[n] = (-7*p.inverse*f7*(g*u+1/(1+gamma)*rho6*v*v) - slope) / (r + noOverlap)
	}
	return total
}

// push subtracts the gradient of pairs at their second atoms and returns it at the first.
func push(pairs []pair, at vector, x, slopes, grad []float64) vector {
	var gx, gy, gz float64
	slopes = slopes[:len(pairs)]
	for n := range pairs {
		j, slope := pairs[n].j, slopes[n]
		q, g := (*[3]float64)(x[j:]), (*[3]float64)(grad[j:])
		dx, dy, dz := slope*(at.x-q[0]), slope*(at.y-q[1]), slope*(at.z-q[2])
		gx, gy, gz = gx+dx, gy+dy, gz+dz
		g[0] -= dx
		g[1] -= dy
		g[2] -= dz
	}
	return vector{gx, gy, gz}
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
