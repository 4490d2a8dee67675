package parameters

import "math"

// maxType is above every numeric type.
const maxType = 100

// contact is the distance R* in Å and the well depth ε in kcal/mol of a pair of types.
type contact struct{ distance, depth float64 }

// VanDerWaals returns the distance R* in Å and the well depth ε in kcal/mol of a pair of types.
func (t *Tables) VanDerWaals(i, j int) (distance, depth float64) {
	c := t.contacts[i*maxType+j]
	return c.distance, c.depth
}

// tabulateContacts fills the table of all pairs of types.
func (t *Tables) tabulateContacts() {
	t.contacts = make([]contact, maxType*maxType)
	for i, a := range t.atoms {
		for j, b := range t.atoms {
			t.contacts[i*maxType+j] = combine(a, b)
		}
	}
}

// combine applies the combination rules to two types.
// Source: T. A. Halgren, J. Am. Chem. Soc. 114, 7827 (1992); J. Comput. Chem. 17, 520 (1996).
func combine(a, b Atom) contact {
	const (
		spread, steepness           = 0.2, 12.0 // B and β of the combination rule
		bridgeDistance, bridgeDepth = 0.8, 0.5  // hydrogen bonds: shorter and flatter
		slaterKirkwood              = 181.16    // kcal/mol·Å⁶ from α in Å³
	)
	ra, rb := a.A*math.Sqrt(math.Sqrt(a.Polarizability)), b.A*math.Sqrt(math.Sqrt(b.Polarizability))
	distance := (ra + rb) / 2
	if !a.Donor && !b.Donor {
		gamma := (ra - rb) / (ra + rb)
		distance *= 1 + spread*(1-math.Exp(-steepness*gamma*gamma))
	}
	cube := distance * distance * distance
	depth := slaterKirkwood * a.G * b.G * a.Polarizability * b.Polarizability /
		(math.Sqrt(a.Polarizability/a.EffectiveElectrons) + math.Sqrt(b.Polarizability/b.EffectiveElectrons)) / (cube * cube)
	if a.Donor && b.Acceptor || a.Acceptor && b.Donor {
		distance *= bridgeDistance
		depth *= bridgeDepth
	}
	return contact{distance, depth}
}
