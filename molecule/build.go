package molecule

import (
	"fmt"
	"slices"
)

// Build completes a draft: it places the double bonds of aromatic rings, fills valences, appends the implied hydrogens
// (grouped by parent atom, in order) and checks valences. Nothing that the draft states is changed: charges, isotopes and
// descriptors come out as they went in. Errors are *ValenceError, *KekuleError or *BuildError.
func (d *Draft) Build() (*Molecule, error) {
	if len(d.Atoms) == 0 {
		return nil, &BuildError{Atom: -1, Reason: "there are no atoms"}
	}
	sums, err := d.bondSums()
	if err != nil {
		return nil, err
	}
	orders, err := d.kekulize(sums)
	if err != nil {
		return nil, err
	}
	atoms := make([]Atom, len(d.Atoms))
	bonds := make([]Bond, len(d.Bonds))
	for i, a := range d.Atoms {
		atoms[i] = a.Atom
	}
	for i, b := range d.Bonds {
		bonds[i] = Bond{A: b.A, B: b.B, Order: orders[i]}
		if b.Order == 0 && orders[i] == 2 {
			sums[b.A]++
			sums[b.B]++
		}
	}
	hydrogenOf := make([]int, len(d.Atoms))
	for i, a := range d.Atoms {
		count := a.Hydrogens
		if count < 0 {
			count = impliedHydrogens(a.Atom, sums[i]+a.Radical)
		}
		hydrogenOf[i] = noHydrogen
		for k := range count {
			hydrogenOf[i] = len(atoms)
			if k > 0 {
				hydrogenOf[i] = severalHydrogens
			}
			atoms = append(atoms, Atom{Element: 1})
			bonds = append(bonds, Bond{A: i, B: len(atoms) - 1, Order: 1})
		}
		if a.Radical == 0 {
			atoms[i].Radical = missingElectrons(a.Atom, sums[i]+count)
		}
	}
	m, err := New(d.Name, atoms, bonds, slices.Clone(d.Centers), slices.Clone(d.DoubleBonds))
	if err != nil {
		return nil, &BuildError{Atom: -1, Reason: err.Error()}
	}
	if err := d.checkValences(m); err != nil {
		return nil, err
	}
	if err := d.resolveStereo(m, hydrogenOf); err != nil {
		return nil, err
	}
	return m, nil
}

// bondSums returns the sum of the bond orders of each atom, aromatic bonds counted as single.
func (d *Draft) bondSums() ([]int, error) {
	sums := make([]int, len(d.Atoms))
	for i, b := range d.Bonds {
		if b.A < 0 || b.A >= len(d.Atoms) || b.B < 0 || b.B >= len(d.Atoms) {
			return nil, &BuildError{Atom: -1, Reason: fmt.Sprintf(
				"bond %d joins atoms %d and %d, but there are %d atoms", i+1, b.A+1, b.B+1, len(d.Atoms))}
		}
		if b.Order < 0 || b.Order > 4 {
			return nil, &BuildError{Atom: b.A, Place: d.Atoms[b.A].Place, Reason: fmt.Sprintf("a bond of order %d", b.Order)}
		}
		sums[b.A] += max(1, b.Order)
		sums[b.B] += max(1, b.Order)
	}
	for i, a := range d.Atoms {
		if a.Element == 0 || int(a.Element) >= len(symbols) {
			return nil, &BuildError{Atom: i, Place: a.Place, Reason: "it has no element"}
		}
	}
	return sums, nil
}

func (d *Draft) checkValences(m *Molecule) error {
	for i, a := range m.Atoms {
		var b bonding
		for _, n := range m.neighbors[i] {
			order := m.Bonds[n.Bond].Order
			b.sum += order
			b.neighbors++
			if order == 3 {
				b.triple = true
				b.carbyne = b.carbyne || m.Atoms[n.Atom].Element == 6 && len(m.neighbors[n.Atom]) == 1
			}
		}
		if reason, remedy := valenceFault(a, b); reason != "" {
			e := &ValenceError{Atom: i, Element: a.Element, Reason: reason, Remedy: remedy}
			if i < len(d.Atoms) {
				e.Place = d.Atoms[i].Place
			}
			return e
		}
	}
	return nil
}
