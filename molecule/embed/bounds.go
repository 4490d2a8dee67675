package embed

import "math"

// constraints are what a geometry has to obey: a lower and an upper bound in Å on every distance (n×n, symmetric) and signed
// volumes.
type constraints struct {
	*graph
	n            int
	lower, upper []float64
	length       []float64 // reference length of each bond in Å
	volumes      []volume
	choices      []choice
}

const (
	unbounded   = 1000.0 // Å, before smoothing
	bondSlack   = 0.01   // Å
	nearContact = 0.7    // lower bound over sum of van der Waals radii, atoms four bonds apart
	farContact  = 0.8    // the same, further apart
	// hydrogenBond is the lower bound in Å between an acidic hydrogen and an acceptor; shorter ones are rare (common
	// practice, no source).
	hydrogenBond = 1.6
)

func newConstraints(g *graph, ref Field, slack float64) *constraints {
	n := len(g.Atoms)
	c := &constraints{graph: g, n: n, lower: make([]float64, n*n), upper: make([]float64, n*n)}
	for i := range n {
		for j := range i {
			c.set(i, j, c.contact(i, j), unbounded)
		}
	}
	c.length = make([]float64, len(g.Bonds))
	for b, bond := range g.Bonds {
		c.length[b] = ref.ReferenceBond(bond.A, bond.B)
		c.set(bond.A, bond.B, c.length[b]-bondSlack, c.length[b]+bondSlack)
	}
	c.boundAngles(ref, slack)
	c.boundTorsions(ref, slack)
	c.smooth()
	c.fixCenters()
	return c
}

func (c *constraints) set(i, j int, lower, upper float64) {
	c.lower[i*c.n+j], c.lower[j*c.n+i] = lower, lower
	c.upper[i*c.n+j], c.upper[j*c.n+i] = upper, upper
}

// narrow intersects the bounds of a pair with a range; where they do not meet it takes the gap between them.
func (c *constraints) narrow(i, j int, lower, upper float64) {
	low, high := math.Max(lower, c.lower[i*c.n+j]), math.Min(upper, c.upper[i*c.n+j])
	c.set(i, j, math.Min(low, high), math.Max(low, high))
}

func (c *constraints) boundAngles(ref Field, slack float64) {
	done := make(map[[2]int]bool)
	for j := range c.n {
		neighbors := c.Neighbors(j)
		for a := range neighbors {
			for b := range a {
				i, k := neighbors[a].Atom, neighbors[b].Atom
				if c.hops[i][k] != 2 {
					continue
				}
				low, high := c.angleRange(ref, i, j, k, slack)
				ij, jk := c.length[neighbors[a].Bond], c.length[neighbors[b].Bond]
				pair := [2]int{min(i, k), max(i, k)}
				if done[pair] {
					c.narrow(i, k, opposite(ij, jk, low), opposite(ij, jk, high))
				} else {
					c.set(i, k, opposite(ij, jk, low), opposite(ij, jk, high))
				}
				done[pair] = true
			}
		}
	}
}

// contact returns the lower bound of two atoms that no bond, angle or torsion ties. The shares of the van der Waals radii are
// common practice (no source).
func (c *constraints) contact(i, j int) float64 {
	if c.acidic(i) && c.acceptor(j) || c.acidic(j) && c.acceptor(i) {
		return hydrogenBond
	}
	sum := vanDerWaalsRadius(c.Atoms[i].Element) + vanDerWaalsRadius(c.Atoms[j].Element)
	if c.hops[i][j] < far {
		return nearContact * sum
	}
	return farContact * sum
}

func (c *constraints) acidic(i int) bool {
	if c.Atoms[i].Element != hydrogen {
		return false
	}
	for _, n := range c.Neighbors(i) {
		if c.acceptor(n.Atom) {
			return true
		}
	}
	return false
}

func (c *constraints) acceptor(i int) bool {
	switch c.Atoms[i].Element {
	case nitrogen, oxygen, sulfur, fluorine, chlorine, bromine, iodine:
		return true
	}
	return false
}
