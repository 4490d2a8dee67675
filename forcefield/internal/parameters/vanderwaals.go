package parameters

import "math"

// VanDerWaals returns the distance R* in Å and the well depth ε in kcal/mol of a pair of types.
// Source: T. A. Halgren, J. Am. Chem. Soc. 114, 7827 (1992); J. Comput. Chem. 17, 520 (1996).
func (t *Tables) VanDerWaals(i, j int) (distance, depth float64) {
	const (
		spread, steepness           = 0.2, 12.0 // B and β of the combination rule
		bridgeDistance, bridgeDepth = 0.8, 0.5  // hydrogen bonds: shorter and flatter
		slaterKirkwood              = 181.16    // kcal/mol·Å⁶ from α in Å³
	)
	a, b := t.atoms[i], t.atoms[j]
	ra, rb := a.A*math.Sqrt(math.Sqrt(a.Polarizability)), b.A*math.Sqrt(math.Sqrt(b.Polarizability))
	distance = (ra + rb) / 2
	if !a.Donor && !b.Donor {
		gamma := (ra - rb) / (ra + rb)
		distance *= 1 + spread*(1-math.Exp(-steepness*gamma*gamma))
	}
	cube := distance * distance * distance
	depth = slaterKirkwood * a.G * b.G * a.Polarizability * b.Polarizability /
		(math.Sqrt(a.Polarizability/a.EffectiveElectrons) + math.Sqrt(b.Polarizability/b.EffectiveElectrons)) / (cube * cube)
	if a.Donor && b.Acceptor || a.Acceptor && b.Donor {
		distance *= bridgeDistance
		depth *= bridgeDepth
	}
	return distance, depth
}
