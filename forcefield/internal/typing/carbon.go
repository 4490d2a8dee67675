package typing

// carbon returns the symbol of a carbon atom; inside an aromatic ring it is provisional.
func (t *typer) carbon(i int) string {
	switch t.degree(i) {
	case 4:
		switch {
		case t.inThreeRing(i):
			return "CR3R"
		case t.inFourRing(i):
			return "CR4R"
		}
		return "CR"
	case 3:
		return t.planarCarbon(i)
	case 2:
		for _, n := range t.neighbors(i) {
			if t.order[n.Bond] == 3 {
				return "CSP"
			}
		}
		return "=C="
	case 1:
		if n := t.bonded(i, 3, 7); n >= 0 && t.degree(n) == 2 {
			return "C%"
		}
	}
	return ""
}

func (t *typer) planarCarbon(i int) string {
	sulfur := t.bonded(i, 2, 16)
	switch {
	case t.terminals(i, 8) == 2:
		return "CO2M"
	case t.terminals(i, 16) == 2:
		return "CS2M"
	case len(t.cationDonors(i)) > 1:
		return "CGD+"
	case len(t.cationDonors(i)) == 1:
		return "CNN+"
	case t.has(i, 2, 7) && t.count(i, 7) == 3:
		return "CGD"
	case t.has(i, 2, 7):
		return "C=N"
	case t.has(i, 2, 8):
		return t.carbonylCarbon(i)
	case sulfur >= 0 && t.degree(sulfur) == 2 && t.terminals(sulfur, 8) > 0:
		return "CS=O"
	case sulfur >= 0 && t.degree(sulfur) == 3:
		return "CSO2"
	case sulfur >= 0 && t.count(i, 7) > 0:
		return "C=SN"
	case sulfur >= 0 && t.count(i, 16) > 1:
		return "CSS"
	case sulfur >= 0:
		return "C=S"
	case t.has(i, 2, 15):
		return "C=P"
	case t.has(i, 2, 6) && t.inFourRing(i):
		return "CE4R"
	case t.has(i, 2, 6):
		return "C=C"
	}
	return "CSP2"
}

func (t *typer) carbonylCarbon(i int) string {
	nitrogens, oxygens := t.count(i, 7), t.count(i, 8)-1
	switch {
	case nitrogens == 2:
		return "CONN"
	case nitrogens == 1 && oxygens == 1:
		return "COON"
	case nitrogens == 1:
		return "C=ON"
	case oxygens == 2:
		return "COOO"
	case oxygens == 1:
		return "COO"
	case t.count(i, 16) > 0:
		return "C=OS"
	}
	return "C=OR"
}

// cationDonors returns the nitrogens that share the charge of an amidinium or guanidinium carbon with the doubly bonded
// N⁺: three-coordinate neutral ones that no aromatic ring without the carbon claims. It is empty for other carbons.
func (t *typer) cationDonors(i int) []int {
	cation := t.bonded(i, 2, 7)
	if t.degree(i) != 3 || cation < 0 || t.degree(cation) != 3 || t.valence(cation) != 4 || t.terminals(cation, 8) > 0 ||
		t.rings.inSixRing(i) {
		return nil
	}
	var donors []int
neighbors:
	for _, n := range t.neighbors(i) {
		if t.element[n.Atom] != 7 || t.degree(n.Atom) != 3 || t.valence(n.Atom) != 3 {
			continue
		}
		for _, r := range t.rings.ofAtom[n.Atom] {
			if !t.rings.rings[r].contains(i) {
				continue neighbors
			}
		}
		donors = append(donors, n.Atom)
	}
	return donors
}

// isCationCarbon says whether the symbol is that of an amidinium or guanidinium carbon.
func isCationCarbon(symbol string) bool { return symbol == "CGD+" || symbol == "CNN+" }
