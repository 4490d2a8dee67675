package xyz

import (
	"fmt"
	"maps"
	"slices"
	"strings"

	"tarn/molecule"
)

// Perceive returns the molecule with bonds, bond orders, formal charges and stereo that a geometry (Å) shows at a total
// charge, and notes on other readings. The atoms keep their order and every hydrogen must be there. Closed shells only;
// metals are read as bare ions. Errors are *PerceptionError or those of molecule.Draft.
func Perceive(elements []molecule.Element, g molecule.Geometry, charge int) (*molecule.Molecule, []string, error) {
	return perceive(elements, nil, g, charge)
}

func perceive(elements []molecule.Element, isotopes map[int]int, g molecule.Geometry, charge int) (*molecule.Molecule, []string, error) {
	if len(elements) == 0 || len(g) != 3*len(elements) {
		return nil, nil, &PerceptionError{Reason: fmt.Sprintf("%d coordinates for %d atoms; each atom needs three", len(g), len(elements))}
	}
	s := &structure{elements: elements, g: g, around: make([][]molecule.Neighbor, len(elements))}
	var err error
	if s.bonds, err = contacts(elements, g); err != nil {
		return nil, nil, err
	}
	for i, b := range s.bonds {
		s.around[b.a] = append(s.around[b.a], molecule.Neighbor{Atom: b.b, Bond: i})
		s.around[b.b] = append(s.around[b.b], molecule.Neighbor{Atom: b.a, Bond: i})
	}
	for i, e := range elements {
		choices := states(e, len(s.around[i]))
		if len(choices) == 0 {
			return nil, nil, &PerceptionError{Atoms: []int{i}, Reason: fmt.Sprintf(
				"atom %d (%s) has %d neighbours within bonding distance, which fits no valence; are all atoms there, in ångström?",
				i+1, e, len(s.around[i]))}
		}
		s.choices = append(s.choices, choices)
	}
	s.settleNeighbors()
	if err := s.markOutward(); err != nil {
		return nil, nil, err
	}
	parts := s.parts()
	for limit := usual; limit <= unusual; limit++ {
		solutions, err := s.solveAll(parts, limit)
		if err != nil {
			return nil, nil, err
		}
		if best := assemble(solutions)[charge]; best != nil {
			return s.finish(best, isotopes)
		}
	}
	return nil, nil, s.explain(parts, charge)
}

// whole is the best assignment of several parts together.
type whole struct {
	cost   cost
	before *whole
	last   *step
}

func (s *structure) solveAll(parts [][]int, limit rank) ([]map[int]*partial, error) {
	solutions := make([]map[int]*partial, len(parts))
	for i, part := range parts {
		var ok bool
		if solutions[i], ok = s.solve(part, limit); !ok {
			return nil, &PerceptionError{Atoms: part, Reason: fmt.Sprintf("the %d conjugated atoms around atom %s are too entangled "+
				"to find their bond orders; give the molecule as a molfile or SMILES", len(part), s.name(part[0]))}
		}
	}
	return solutions, nil
}

// assemble combines the solutions of the parts to the best assignment for each total charge.
func assemble(solutions []map[int]*partial) map[int]*whole {
	total := map[int]*whole{0: {}}
	for _, part := range solutions {
		next := make(map[int]*whole, len(total)+len(part))
		for _, charge := range slices.Sorted(maps.Keys(total)) {
			for _, own := range slices.Sorted(maps.Keys(part)) {
				w := &whole{cost: total[charge].cost.plus(part[own].cost), before: total[charge], last: part[own].last}
				if old := next[charge+own]; old == nil || w.cost.less(old.cost) {
					next[charge+own] = w
				}
			}
		}
		total = next
	}
	return total
}

// read returns the extra order of each bond and the state of each atom.
func (s *structure) read(w *whole) (extras []int, chosen []state) {
	extras, chosen = make([]int, len(s.bonds)), make([]state, len(s.elements))
	for ; w != nil; w = w.before {
		for step := w.last; step != nil; step = step.before {
			if step.bond >= 0 {
				extras[step.bond] = step.extra
			} else {
				chosen[step.atom] = step.state
			}
		}
	}
	return extras, chosen
}

func (s *structure) finish(w *whole, isotopes map[int]int) (*molecule.Molecule, []string, error) {
	extras, chosen := s.read(w)
	d := &molecule.Draft{}
	var notes []string
	for i, e := range s.elements {
		d.Atoms = append(d.Atoms, molecule.DraftAtom{Atom: molecule.Atom{Element: e, Isotope: isotopes[i], Charge: chosen[i].charge}})
		if chosen[i].rank == unusual {
			notes = append(notes, fmt.Sprintf("atom %s carries the charge %+d, because no usual structure has the total charge given; "+
				"check the charge", s.name(i), chosen[i].charge))
		}
	}
	for i, b := range s.bonds {
		d.Bonds = append(d.Bonds, molecule.DraftBond{A: b.a, B: b.b, Order: 1 + extras[i]})
	}
	m, err := d.Build()
	if err != nil {
		return nil, nil, err
	}
	if m, err = m.StereoFromGeometry(s.g); err != nil {
		return nil, nil, err
	}
	return m, notes, nil
}

func (s *structure) name(atom int) string { return fmt.Sprintf("%d (%s)", atom+1, s.elements[atom]) }

// explain says which atoms keep the structure from having the total charge, and which charge it could have.
func (s *structure) explain(parts [][]int, charge int) error {
	everyday, err := s.solveAll(parts, usual)
	if err != nil {
		return err
	}
	opened, err := s.solveAll(parts, open)
	if err != nil {
		return err
	}
	e := &PerceptionError{Reason: fmt.Sprintf("no bond orders and formal charges give the total charge %d", charge)}
	if w := assemble(opened)[charge]; w != nil {
		_, chosen := s.read(w)
		var free []string
		for i, c := range chosen {
			if c.rank == open {
				e.Atoms = append(e.Atoms, i)
				free = append(free, s.name(i))
			}
		}
		e.Reason = fmt.Sprintf("the total charge %d leaves a free valence at atom %s", charge, strings.Join(free, ", "))
	}
	best := assemble(everyday)
	if len(best) == 0 {
		e.Reason += "; give the right charge, and check that no hydrogen is missing"
		return e
	}
	// A charge must save more than the drawings of one ion cost to be suggested instead of none.
	price := func(q int) int { return best[q].cost.valence + 5*max(q, -q) }
	fitting := slices.MinFunc(slices.Sorted(maps.Keys(best)), func(p, q int) int { return price(p) - price(q) })
	e.Reason += fmt.Sprintf("; all valences fit a total charge of %d, give it if it is meant", fitting)
	return e
}
