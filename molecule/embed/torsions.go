package embed

import "math"

// ringTorsion is the largest torsion angle in degrees along a ring of 4, 5, … atoms that the bounds allow (common practice;
// no source); larger rings turn freely.
var ringTorsion = map[int]float64{4: 40, 5: 58, 6: 80, 7: 105, 8: 135, 9: 160}

const (
	flat     = 12.0 // degrees by which a double bond or aromatic bond may be twisted
	bentFlat = 50.0 // the same in rings of 8 to smallRing: trans-cyclooctene is twisted by 44° (Traetteberg,
	// Acta Chem. Scand. B 29, 29 (1975), from memory)
	opened    = 4.0  // degrees by which angles on the same side of a double bond exceed the middle of their range
	staggered = 40.0 // degrees: smallest torsion at a single bond between four-coordinate atoms outside rings
)

// side tells how the substituents at the two ends of a planar bond lie: near and far are on the same side.
type side struct {
	near, far int
	cis       bool
	known     bool
}

// same says whether two substituents lie on the same side.
func (s side) same(i, l int) bool { return s.cis == ((i == s.near) == (l == s.far)) }

func (c *constraints) boundTorsions(ref Field, slack float64) {
	angles := make(map[[3]int][2]float64)
	angle := func(i, j, k int) [2]float64 {
		key := [3]int{i, j, k}
		r, ok := angles[key]
		if !ok {
			r[0], r[1] = c.angleRange(ref, i, j, k, slack)
			angles[key] = r
		}
		return r
	}
	done := make(map[[2]int]bool)
	for b, bond := range c.Bonds {
		j, k := bond.A, bond.B
		s := c.sideOf(b)
		if c.isFlat(b) {
			c.flatten(j, k, c.flatSlack(b, slack))
		}
		for _, i := range c.others(j, k) {
			for _, l := range c.others(k, j) {
				if c.hops[i][l] != 3 {
					continue
				}
				low, high := c.torsionRange(b, i, l, s, slack)
				q := quad{c.bondLength(i, j), c.length[b], c.bondLength(k, l), angle(i, j, k), angle(j, k, l)}
				near, distant := q.range14(low, high)
				if s.known && (c.bondRing[b] == 0 || c.bondRing[b] > 7) {
					near, distant = keepSide(q, low, high)
				}
				if pair := [2]int{min(i, l), max(i, l)}; done[pair] {
					c.narrow(i, l, near, distant)
				} else {
					c.set(i, l, near, distant)
					done[pair] = true
				}
			}
		}
		c.boundConjugation(b, slack, angle)
	}
	for _, chain := range c.cumulenes() {
		c.boundCumulene(chain, angle)
	}
	for j := range c.n {
		if c.planar[j] {
			n := c.Neighbors(j)
			c.volumes = append(c.volumes, planarVolume(j, n[0].Atom, n[1].Atom, n[2].Atom, planarSlack*slack*slack))
		}
	}
}

func (c *constraints) bondLength(i, j int) float64 { return c.length[c.BondBetween(i, j)] }

// keepSide returns the range of i–l at a double bond with a descriptor. The slack of the angles must not let one side pass for
// the other, so the end that faces the other side is taken at the middle of the angles, a little opened.
func keepSide(q quad, low, high float64) (near, distant float64) {
	near, distant = q.range14(low, high)
	if low > 0 {
		near = math.Max(near, q.middle(opened*degree).distance(low))
	} else {
		distant = math.Min(distant, q.middle(opened*degree).distance(high))
	}
	return near, distant
}

// torsionRange returns the range in radians of the magnitude of the torsion angle i–j–k–l about bond b.
func (c *constraints) torsionRange(b, i, l int, s side, slack float64) (low, high float64) {
	j, k := c.Bonds[b].A, c.Bonds[b].B
	twist := flat * slack
	if ring := c.bondRing[b]; ring > 7 {
		twist = bentFlat
	}
	switch ring := c.ringThrough(i, j, k, l); {
	case s.known && s.same(i, l):
		return 0, twist * degree
	case s.known:
		return (180 - twist) * degree, math.Pi
	case ring > 0 && ringTorsion[ring] > 0:
		return 0, math.Min(180, ringTorsion[ring]+15*(slack-1)) * degree
	case c.bondRing[b] == 0 && len(c.Neighbors(j)) == 4 && len(c.Neighbors(k)) == 4:
		return staggered * degree, math.Pi
	}
	return 0, math.Pi
}

// isFlat says whether bond b keeps its substituents in one plane.
func (c *constraints) isFlat(b int) bool {
	bond := c.Bonds[b]
	return (bond.Order == 2 || c.aromaticBond[b]) && c.flatEnd(bond.A) && c.flatEnd(bond.B)
}

// sideOf finds how the substituents of a flat bond lie: as specified, or as a small ring through the bond demands.
func (c *constraints) sideOf(b int) side {
	if !c.isFlat(b) {
		return side{}
	}
	j, k := c.Bonds[b].A, c.Bonds[b].B
	if s := c.specified(j, k); s.known {
		return s
	}
	for _, i := range c.others(j, k) {
		for _, l := range c.others(k, j) {
			if ring := c.ringThrough(i, j, k, l); ring > 0 && ring <= 7 {
				return side{i, l, true, true}
			}
		}
	}
	return side{}
}

// specified returns the double-bond descriptor with ends j and k, if there is one.
func (c *constraints) specified(j, k int) side {
	for _, d := range c.DoubleBonds {
		if d.A == j && d.B == k {
			return side{d.RefA, d.RefB, d.Cis, true}
		}
		if d.A == k && d.B == j {
			return side{d.RefB, d.RefA, d.Cis, true}
		}
	}
	return side{}
}

// flatten asks for one plane at the ends of a bond, whichever way they lie; slack is the volume in Å³ that is left to them.
func (c *constraints) flatten(j, k int, slack float64) {
	for _, i := range c.others(j, k) {
		for _, l := range c.others(k, j) {
			c.volumes = append(c.volumes, planarVolume(i, j, k, l, slack))
		}
	}
}

// flatSlack returns the slack in Å³ of a flat bond; bonds in medium rings are twisted.
func (c *constraints) flatSlack(b int, slack float64) float64 {
	if c.bondRing[b] > 7 {
		return twistedSlack
	}
	return planarSlack * slack * slack
}

// cumulenes returns the chains of two or more cumulated double bonds, from end to end.
func (c *constraints) cumulenes() [][]int {
	var chains [][]int
	for j := range c.n {
		if !c.flatEnd(j) {
			continue
		}
		for _, n := range c.Neighbors(j) {
			if c.Bonds[n.Bond].Order != 2 || !c.linear[n.Atom] {
				continue
			}
			chain := []int{j, n.Atom}
			for last := n.Atom; c.linear[last]; last = chain[len(chain)-1] {
				next := c.others(last, chain[len(chain)-2])[0]
				if c.Bonds[c.BondBetween(last, next)].Order != 2 {
					break
				}
				chain = append(chain, next)
			}
			if end := chain[len(chain)-1]; j < end && c.flatEnd(end) {
				chains = append(chains, chain)
			}
		}
	}
	return chains
}

// boundCumulene sets the distances between the substituents of the two ends: crossed planes when the number of double bonds
// is even, one plane when it is odd.
func (c *constraints) boundCumulene(chain []int, angle func(i, j, k int) [2]float64) {
	last := len(chain) - 1
	j, k := chain[0], chain[last]
	axis := 0.0
	for a := range last {
		axis += c.bondLength(chain[a], chain[a+1])
	}
	s := c.specified(j, k)
	ring := c.bondRing[c.BondBetween(j, chain[1])]
	for _, i := range c.others(j, chain[1]) {
		for _, l := range c.others(k, chain[last-1]) {
			low, high := 0.0, math.Pi
			switch {
			case last%2 == 0 && ring > 0:
				low, high = 30*degree, 150*degree
			case last%2 == 0:
				low, high = 84*degree, 96*degree
			case s.known && s.same(i, l):
				high = flat * degree
			case s.known:
				low = (180 - flat) * degree
			default:
				c.volumes = append(c.volumes, planarVolume(i, j, k, l, planarSlack))
			}
			if c.hops[i][l] > 3 {
				// over a long axis the sides differ less than the slack of the angles, so these are held at their middle
				q := quad{c.bondLength(i, j), axis, c.bondLength(k, l), angle(i, j, chain[1]), angle(chain[last-1], k, l)}.middle(0)
				c.set(i, l, q.distance(low), q.distance(high))
			}
		}
	}
}

// quad is a chain i–j–k–l: its three lengths in Å and the ranges of its two angles in radians.
type quad struct {
	ij, jk, kl float64
	j, k       [2]float64
}

// range14 returns the smallest and the largest distance i–l when the magnitude of the torsion lies between low and high.
func (q quad) range14(low, high float64) (near, distant float64) {
	near = math.Inf(1)
	for _, j := range q.j {
		for _, k := range q.k {
			corner := quad{q.ij, q.jk, q.kl, [2]float64{j, j}, [2]float64{k, k}}
			near, distant = math.Min(near, corner.distance(low)), math.Max(distant, corner.distance(high))
		}
	}
	return near, distant
}

// middle returns the same chain with its angles fixed in the middle of their ranges, plus an angle in radians.
func (q quad) middle(plus float64) quad {
	j, k := (q.j[0]+q.j[1])/2+plus, (q.k[0]+q.k[1])/2+plus
	q.j, q.k = [2]float64{j, j}, [2]float64{k, k}
	return q
}

// distance returns i–l at a torsion, with the lower ends of the ranges of the angles.
func (q quad) distance(torsion float64) float64 {
	j, k := q.j[0], q.k[0]
	along := q.jk - q.ij*math.Cos(j) - q.kl*math.Cos(k)
	p, r := q.ij*math.Sin(j), q.kl*math.Sin(k)
	return math.Sqrt(along*along + p*p + r*r - 2*p*r*math.Cos(torsion))
}
