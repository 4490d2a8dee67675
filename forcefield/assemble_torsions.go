package forcefield

import (
	"fmt"

	"tarn/forcefield/internal/parameters"
)

func (a *assembly) addTorsions() error {
	for n, b := range a.molecule.Bonds {
		if a.tables.Atom(a.types[b.A]).Linear || a.tables.Atom(a.types[b.B]).Linear {
			continue
		}
		for _, first := range a.molecule.Neighbors(b.A) {
			for _, last := range a.molecule.Neighbors(b.B) {
				if first.Atom == b.B || last.Atom == b.A || first.Atom == last.Atom {
					continue
				}
				class := a.torsionClass(first.Atom, b.A, b.B, last.Atom, first.Bond, n, last.Bond)
				if err := a.addTorsion(class, first.Atom, b.A, b.B, last.Atom, n); err != nil {
					return err
				}
			}
		}
	}
	return nil
}

// torsionClass numbers the torsions by small rings and by the classes of their bonds.
func (a *assembly) torsionClass(i, j, k, l, ij, jk, kl int) int {
	switch {
	case a.molecule.BondBetween(i, l) >= 0:
		return 4
	case a.classes[jk] == 1:
		return 1
	case a.typed.Orders[jk] == 1 && !a.typed.AromaticBonds[jk] && (a.classes[ij] == 1 || a.classes[kl] == 1):
		return 2
	case (a.types[i] == 1 || a.types[j] == 1 || a.types[k] == 1 || a.types[l] == 1) && a.shareNeighbor(i, l, j, k):
		return 5
	}
	return 0
}

func (a *assembly) addTorsion(class, i, j, k, l, jk int) error {
	p, ok := a.tables.Torsion(class, a.types[i], a.types[j], a.types[k], a.types[l])
	if !ok {
		var err error
		if p, err = a.tables.RuleTorsion(a.types[j], a.types[k], a.typed.Orders[jk], a.typed.AromaticBonds[jk]); err != nil {
			return a.missing("torsion", err, i, j, k, l)
		}
		a.report("torsion", fmt.Sprintf("barriers %.4f, %.4f, %.4f kcal/mol", p.V1, p.V2, p.V3), i, j, k, l)
	}
	if p == (parameters.Torsion{}) {
		return nil
	}
	a.torsions = append(a.torsions, torsion{offset(i), offset(j), offset(k), offset(l), p.V1, p.V2, p.V3})
	return nil
}
