package xyz

import "tarn/molecule"

// state is one way for an atom with a number of neighbours to satisfy its valence.
type state struct {
	extra  int // bonds beyond one for each neighbour: 1 for a double bond, 2 for a triple or two double bonds
	charge int
	cost   int // how much a drawing without this state is preferred
	rank   rank
}

// rank sorts states into those of everyday molecules, those tried if nothing else fits, and those that only explain why
// nothing fits: an open shell or a carbene is never read from a geometry.
type rank int

const (
	usual rank = iota
	unusual
	open
)

// valenceState is a state before the neighbours are known: a sum of bond orders.
type valenceState struct {
	sum, charge, cost int
}

// A cost of 30 and more makes a state unusual. Costs order the drawings: usual valences first, then few charges where they are at home (O⁻, N⁺), then hypervalent atoms as
// chemists draw them (S and P), last carbon ions. The scale is arbitrary; only its order matters. Common practice, no source.
var valenceStates = map[molecule.Element][]valenceState{
	1:  {{1, 0, 0}, {0, 1, 60}, {0, -1, 60}},
	5:  {{3, 0, 0}, {4, -1, 8}},
	6:  {{4, 0, 0}, {3, 1, 60}, {3, -1, 60}},
	7:  {{3, 0, 0}, {4, 1, 10}, {2, -1, 8}},
	8:  {{2, 0, 0}, {1, -1, 8}, {3, 1, 20}, {0, -2, 30}},
	9:  {{1, 0, 0}, {0, -1, 4}},
	13: {{3, 0, 0}, {4, -1, 8}},
	14: {{4, 0, 0}, {5, -1, 20}, {6, -2, 25}},
	15: {{3, 0, 0}, {5, 0, 2}, {4, 1, 9}, {2, -1, 20}, {6, -1, 20}},
	16: {{2, 0, 0}, {4, 0, 2}, {6, 0, 3}, {1, -1, 8}, {3, 1, 15}, {5, 1, 25}, {0, -2, 30}},
	17: {{1, 0, 0}, {0, -1, 4}, {3, 0, 6}, {5, 0, 6}, {7, 0, 6}, {2, 1, 20}},
}

// lighter names the element whose states a heavier one of its group shares.
var lighter = map[molecule.Element]molecule.Element{
	31: 13, 32: 14, 50: 14, 33: 15, 51: 15, 34: 16, 52: 16, 35: 17, 53: 17, 85: 17,
}

// ions are the charges of bare metal ions, the usual one first.
var ions = map[molecule.Element][]int{
	3: {1}, 11: {1}, 19: {1}, 37: {1}, 55: {1}, 4: {2}, 12: {2}, 20: {2}, 38: {2}, 56: {2}, 30: {2}, 48: {2}, 21: {3},
	24: {3, 2}, 25: {2, 3}, 26: {2, 3}, 27: {2, 3}, 28: {2}, 29: {2, 1}, 47: {1}, 80: {2}, 81: {1, 3}, 82: {2}, 78: {2}, 46: {2},
}

// states lists what an atom with a number of neighbours may be, the open ones last.
func states(e molecule.Element, neighbors int) []state {
	if isMetal(e) {
		var list []state
		for k, charge := range ions[e] {
			list = append(list, state{charge: charge, cost: 3 * k})
		}
		return append(list, state{rank: open, cost: 100})
	}
	group := e
	if same, ok := lighter[e]; ok {
		group = same
	}
	var list []state
	for _, v := range valenceStates[group] {
		extra := v.sum - neighbors
		if extra < 0 || extra > 0 && neighbors == 0 || extra > 2*neighbors {
			continue
		}
		s := state{extra: extra, charge: v.charge, cost: v.cost}
		if e == 6 && v.charge == -1 && neighbors == 1 {
			s.cost = 10 // the carbon of an isocyanide, of carbon monoxide, of an acetylide
		}
		if s.cost >= 30 {
			s.rank = unusual
		}
		list = append(list, s)
	}
	if len(valenceStates[group]) == 0 {
		return append(list, state{}) // noble gases
	}
	for missing := 1; missing <= 2; missing++ {
		extra := valenceStates[group][0].sum - missing - neighbors
		if extra >= 0 && (neighbors > 0 || extra == 0) {
			list = append(list, state{extra: extra, cost: 200 * missing, rank: open})
		}
	}
	return list
}

// settleNeighbors changes the costs of states that depend on what an atom is bonded to.
func (s *structure) settleNeighbors() {
	for i, e := range s.elements {
		if e == 7 && len(s.around[i]) == 1 {
			s.settleTerminalNitrogen(i)
		}
	}
	s.pairOxides()
}

// settleTerminalNitrogen keeps nitriles as they are (no C=C=N⁻ for the sake of another anion) and draws azides and diazo
// compounds with the charge on the last nitrogen.
func (s *structure) settleTerminalNitrogen(atom int) {
	price := 12
	if s.elements[s.around[atom][0].Atom] == 7 {
		price = 7
	}
	for k, c := range s.choices[atom] {
		if c.charge == -1 && c.extra == 1 {
			s.choices[atom][k].cost = price
		}
	}
}

// pairOxides draws the oxides of three-coordinate nitrogen as N⁺–O⁻ at the price of one hypervalent atom: N-oxides, nitrones
// and azoxy compounds (one terminal oxygen), nitro groups and nitrate (two, three). Counted as two charges, the pair would
// lose against drawings that break an aromatic ring to be rid of it.
func (s *structure) pairOxides() {
	for i, e := range s.elements {
		if e != 7 || len(s.around[i]) != 3 {
			continue
		}
		oxygen, terminal := 0, 0
		for _, n := range s.around[i] {
			if s.elements[n.Atom] == 8 && len(s.around[n.Atom]) == 1 {
				oxygen = n.Atom
				terminal++
			}
		}
		switch terminal {
		case 0:
		case 1:
			s.choices[i] = []state{{extra: 1, charge: 1, cost: 2}, {cost: 8}}
			s.choices[oxygen] = []state{{charge: -1}, {extra: 1, cost: 40, rank: unusual}, {cost: 200, rank: open}}
		default:
			s.choices[i] = []state{{extra: 1, charge: 1, cost: 2}, {cost: 20}}
		}
	}
}
