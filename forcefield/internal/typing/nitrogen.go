package typing

import (
	"slices"

	"tarn/molecule"
)

// nitrogen returns the symbol of a bonded nitrogen atom; inside an aromatic ring it is provisional. The carbons are typed.
func (t *typer) nitrogen(i int) string {
	valence := t.valence(i)
	switch bonds := t.degree(i); {
	case bonds == 4 && t.terminals(i, 8) > 0:
		return "N3OX"
	case bonds == 4:
		return "NR+"
	case bonds == 3 && t.terminals(i, 8) > 1 && t.count(i, 8) == 3:
		return "NO3"
	case bonds == 3 && t.terminals(i, 8) > 1:
		return "NO2"
	case bonds == 3 && valence == 4:
		return t.cationNitrogen(i)
	case bonds == 3:
		return t.aminoNitrogen(i)
	case bonds == 2 && valence == 4:
		if t.has(i, 3, 6) || t.has(i, 3, 7) {
			return "NR%"
		}
		return "=N="
	case bonds == 2 && valence == 3:
		return t.imineNitrogen(i)
	case bonds == 2:
		for _, n := range t.neighbors(i) {
			if t.element[n.Atom] == 16 && t.degree(n.Atom) == 4 && t.terminals(n.Atom, 8) < 2 {
				return "NSO"
			}
		}
		return "NM"
	case valence == 3:
		return "NSP"
	case valence == 2:
		return "NAZT"
	}
	return ""
}

// cationNitrogen types three-coordinate N⁺ with a double bond.
func (t *typer) cationNitrogen(i int) string {
	switch carbon := t.bonded(i, 2, 6); {
	case t.terminals(i, 8) == 1:
		return "N2OX"
	case t.has(i, 2, 7):
		return "N+=N"
	case carbon >= 0 && t.symbols[carbon] == "CGD+":
		return "NGD+"
	case carbon >= 0 && t.symbols[carbon] == "CNN+":
		return "NCN+"
	case carbon >= 0:
		return "N+=C"
	}
	return ""
}

// imineNitrogen types two-coordinate N with a double bond.
func (t *typer) imineNitrogen(i int) string {
	switch {
	case t.has(i, 2, 7):
		return "N=N"
	case t.has(i, 2, 8):
		return "N=O"
	case t.has(i, 2, 16):
		return "NSO2"
	case t.has(i, 2, 6), t.has(i, 2, 15):
		return "N=C"
	}
	return ""
}

// aminoNitrogen types three-coordinate neutral N.
func (t *typer) aminoNitrogen(i int) string {
	for _, cation := range [...]struct{ carbon, nitrogen string }{{"CGD+", "NGD+"}, {"CNN+", "NCN+"}} {
		for _, n := range t.neighbors(i) {
			if t.symbols[n.Atom] == cation.carbon && slices.Contains(t.cationDonors(n.Atom), i) {
				return cation.nitrogen
			}
		}
	}
	for _, n := range t.neighbors(i) {
		if t.terminals(n.Atom, 8) < 2 {
			continue
		}
		switch e := t.element[n.Atom]; {
		case e == 16 && t.degree(n.Atom) == 4 && t.count(n.Atom, 8) > 2:
			return "NSO3"
		case e == 16 && t.degree(n.Atom) == 4:
			return "NSO2"
		case e == 15 && t.count(n.Atom, 8) > 2:
			return "NPO3"
		case e == 15:
			return "NPO2"
		}
	}
	for _, rule := range [...]struct {
		order  int
		to     molecule.Element
		symbol string
	}{
		{3, 7, "NC%N"}, {2, 8, "NC=O"}, {2, 16, "NC=S"}, {2, 7, "NC=N"}, {2, 6, "NC=C"}, {2, 15, "NC=P"}, {3, 6, "NC%C"},
	} {
		for _, n := range t.neighbors(i) {
			if t.element[n.Atom] == 6 && t.has(n.Atom, rule.order, rule.to) {
				return rule.symbol
			}
		}
	}
	for _, n := range t.neighbors(i) {
		if t.element[n.Atom] == 7 && t.has(n.Atom, 2, 7) {
			return "NN=N"
		}
	}
	for _, n := range t.neighbors(i) {
		if t.element[n.Atom] == 7 && t.isPlainHydrazone(n.Atom) {
			return "NN=C"
		}
	}
	return "NR"
}

// isPlainHydrazone says whether N is doubly bonded to a carbon that has no further N, O or S.
func (t *typer) isPlainHydrazone(i int) bool {
	c := t.bonded(i, 2, 6)
	return c >= 0 && t.count(c, 7) == 1 && t.count(c, 8) == 0 && t.count(c, 16) == 0
}
