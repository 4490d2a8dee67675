package smiles

import (
	"slices"

	"tarn/molecule"
)

// placeCenters turns @ and @@ into the stereocentres of the draft (OpenSMILES 3.9).
func (p *parser) placeCenters() error {
	for i, w := range p.written {
		if !w.chirality.written {
			continue
		}
		c := molecule.Center{Atom: i, Clockwise: w.chirality.clockwise}
		if len(w.neighbors) == 2 {
			around, err := p.alleneNeighbors(i)
			if err != nil {
				return err
			}
			c.Neighbors = around
		} else {
			if w.chirality.allene {
				return p.faultColumn(w.column, "@AL needs the middle carbon of an allene: two double bonds, nothing else")
			}
			around := w.neighbors
			if len(around) == 3 { // the lone pair of S, P, N takes the place that an implied hydrogen would have
				place := 0
				if w.preceded {
					place = 1
				}
				if p.draft.Atoms[i].Hydrogens > 0 {
					place++
				}
				around = slices.Insert(slices.Clone(around), place, molecule.LonePair)
			}
			if len(around) != 4 || p.draft.Atoms[i].Element == 6 && slices.Contains(around, molecule.LonePair) {
				return p.faultColumn(w.column, "a stereocentre needs four neighbours; this atom has %d", len(w.neighbors))
			}
			if p.draft.Atoms[i].Hydrogens > 1 {
				return p.faultColumn(w.column, "an atom with %d hydrogens is no stereocentre", p.draft.Atoms[i].Hydrogens)
			}
			c.Neighbors = [4]int(around)
		}
		p.draft.Centers = append(p.draft.Centers, c)
	}
	return nil
}

// alleneNeighbors returns the substituents at the ends of the cumulene around a middle atom, those of the first end first.
func (p *parser) alleneNeighbors(middle int) ([4]int, error) {
	var around [4]int
	for side, next := range p.written[middle].neighbors {
		if next < 0 || p.orderBetween(middle, next) != 2 {
			return around, p.faultColumn(p.written[middle].column, "a centre with two neighbours must be the middle of an allene")
		}
		end, before, _ := p.cumuleneEnd(middle, next)
		w := p.written[end]
		substituents := slices.Clone(w.neighbors)
		if len(substituents) == 2 && p.draft.Atoms[end].Hydrogens == molecule.FillValence {
			place := 0
			if w.preceded {
				place = 1
			}
			substituents = slices.Insert(substituents, place, molecule.ImplicitHydrogen)
		}
		substituents = slices.DeleteFunc(substituents, func(n int) bool { return n == before })
		if len(substituents) != 2 {
			return around, p.faultColumn(p.written[middle].column, "each end of a stereogenic allene needs two substituents")
		}
		copy(around[2*side:], substituents)
	}
	return around, nil
}

// placeDoubleBonds turns / and \ into the double bonds of the draft (OpenSMILES 3.8).
func (p *parser) placeDoubleBonds() error {
	up := map[[2]int]bool{} // atom, neighbour: the neighbour lies above the atom
	marked := make([][]int, len(p.written))
	for i, b := range p.bonds {
		if b.direction == 0 {
			continue
		}
		first, second := p.draft.Bonds[i].A, p.draft.Bonds[i].B
		up[[2]int{first, second}] = b.direction == '/'
		up[[2]int{second, first}] = b.direction != '/'
		marked[first] = append(marked[first], second)
		marked[second] = append(marked[second], first)
	}
	if len(up) == 0 {
		return nil
	}
	for i, b := range p.draft.Bonds {
		if b.Order != 2 {
			continue
		}
		for _, from := range [2]int{b.A, b.B} {
			next := b.A + b.B - from
			end, _, length := p.cumuleneEnd(from, next)
			if len(marked[from]) == 0 || p.cumulated(from) || from > end {
				continue
			}
			for _, atom := range [2]int{from, end} {
				if around := marked[atom]; len(around) == 2 && up[[2]int{atom, around[0]}] == up[[2]int{atom, around[1]}] {
					return p.faultColumn(p.written[atom].column, "both substituents of the double bond are marked on the same side")
				}
			}
			if len(marked[end]) == 0 {
				continue
			}
			if length%2 == 0 {
				return p.faultColumn(p.bonds[i].column, "/ and \\ have no meaning at a cumulene with an even number of double bonds; use @ or @@ at its middle atom")
			}
			refA, refB := marked[from][0], marked[end][0]
			p.draft.DoubleBonds = append(p.draft.DoubleBonds, molecule.DoubleBond{
				A: from, B: end, RefA: refA, RefB: refB,
				Cis: up[[2]int{from, refA}] == up[[2]int{end, refB}],
			})
		}
	}
	return nil
}

func (p *parser) orderBetween(a, b int) int {
	for _, bond := range p.draft.Bonds {
		if bond.A == a && bond.B == b || bond.A == b && bond.B == a {
			return bond.Order
		}
	}
	return -1
}

// cumulated tells whether an atom is an inner carbon of a cumulene.
func (p *parser) cumulated(atom int) bool {
	around := p.written[atom].neighbors
	return p.draft.Atoms[atom].Element == 6 && len(around) == 2 && around[0] >= 0 && around[1] >= 0 &&
		p.orderBetween(atom, around[0]) == 2 && p.orderBetween(atom, around[1]) == 2
}

// cumuleneEnd follows cumulated double bonds from atom to next and on to the last atom.
func (p *parser) cumuleneEnd(atom, next int) (end, before, length int) {
	start := atom
	for length = 1; p.cumulated(next) && next != start; length++ {
		around := p.written[next].neighbors
		atom, next = next, around[0]+around[1]-atom
	}
	return next, atom, length
}
