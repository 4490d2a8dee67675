package embed

import "math/rand/v2"

// choice is a bond of an amide or ester that is planar and may lie either way; most draws take the usual one.
type choice struct {
	pairs []choicePair
	usual float64 // probability of the usual side
}

// choicePair is a pair of substituents with its range of distances in Å in the usual and in the other geometry.
type choicePair struct {
	i, l         int
	usual, other [2]float64
}

// usualSide is the share of draws in which a secondary amide or an ester has its alkyl group on the side of the carbonyl
// oxygen (Z). The other geometry lies 2 to 9 kcal/mol higher (common practice, no source), but a search needs it now and then.
const usualSide = 0.9

// boundConjugation keeps the bond between a carbonyl carbon and a planar nitrogen or an ester oxygen flat outside small
// rings, and records the choice between its two sides.
func (c *constraints) boundConjugation(b int, slack float64, angle func(i, j, k int) [2]float64) {
	if c.Bonds[b].Order != 1 || c.aromaticBond[b] || c.bondRing[b] > 0 {
		return
	}
	j, k := c.Bonds[b].A, c.Bonds[b].B
	if !c.isCarbonyl(j, k) {
		j, k = k, j
	}
	if !c.isCarbonyl(j, k) || c.isCarbonyl(k, j) {
		return
	}
	amide := c.planar[k] && c.Atoms[k].Element == nitrogen
	ester := c.Atoms[k].Element == oxygen && len(c.Neighbors(k)) == 2
	if !amide && !ester {
		return
	}
	c.flatten(j, k, planarSlack*slack*slack)
	oxo, alkyl := c.doublyBonded(j), c.substituent(k, j)
	if alkyl < 0 || c.Atoms[oxo].Element == nitrogen {
		return
	}
	ch := choice{usual: usualSide}
	for _, i := range c.others(j, k) {
		for _, l := range c.others(k, j) {
			if c.hops[i][l] != 3 {
				continue
			}
			q := quad{c.bondLength(i, j), c.length[b], c.bondLength(k, l), angle(i, j, k), angle(j, k, l)}
			pair := choicePair{i: i, l: l}
			pair.usual[0], pair.usual[1] = q.range14(0, flat*degree)
			pair.other[0], pair.other[1] = q.range14((180-flat)*degree, 180*degree)
			if (i == oxo) != (l == alkyl) {
				pair.usual, pair.other = pair.other, pair.usual
			}
			ch.pairs = append(ch.pairs, pair)
		}
	}
	c.choices = append(c.choices, ch)
}

func (c *constraints) doublyBonded(i int) int {
	for _, n := range c.Neighbors(i) {
		if c.Bonds[n.Bond].Order == 2 {
			return n.Atom
		}
	}
	return -1
}

// substituent returns the only group on atom i besides except that is not hydrogen, or the only hydrogen of a hydroxyl group;
// -1 if there is no such choice.
func (c *constraints) substituent(i, except int) int {
	others := c.others(i, except)
	if len(others) == 1 {
		return others[0]
	}
	found := -1
	for _, o := range others {
		if c.Atoms[o].Element == hydrogen {
			continue
		}
		if found >= 0 {
			return -1
		}
		found = o
	}
	return found
}

// choose returns the bounds of one draw, in which every choice has been made.
func (c *constraints) choose(rng *rand.Rand) *draw {
	d := &draw{constraints: c, lower: append([]float64(nil), c.lower...), upper: append([]float64(nil), c.upper...)}
	for _, ch := range c.choices {
		usual := rng.Float64() < ch.usual
		for _, p := range ch.pairs {
			r := p.other
			if usual {
				r = p.usual
			}
			for _, at := range [2]int{p.i*c.n + p.l, p.l*c.n + p.i} {
				d.lower[at], d.upper[at] = r[0], r[1]
			}
		}
	}
	d.lower2, d.upper2 = squares(d.lower), squares(d.upper)
	return d
}

func squares(values []float64) []float64 {
	list := make([]float64, len(values))
	for i, v := range values {
		list[i] = v * v
	}
	return list
}
